package modem_test

import (
	"fmt"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

// What the catalogue knows of a coding: requirement, net rate and width.
func ExampleCatalogue_Find() {
	row, err := modem.Standard().Find("qpsk", "ccsds-rs-255-223")
	if err != nil {
		fmt.Println(err)
		return
	}
	need, err := row.At(modem.FrameErrors, 1e-4)
	if err != nil {
		fmt.Println(err)
		return
	}
	net, err := row.NetRate(1*unit.Megahertz, false)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%s: Eb/N0 %.1f dB, %.1f dB over Shannon's bound\n", row.Name(), float64(need.EbN0), float64(row.ShannonGap(need.EbN0)))
	fmt.Printf("%.3f Mbit/s net at 1 Mbaud, %.2f MHz wide\n", net.BitsPerSecond()/1e6, row.Modulation.WidthFactor(0.35))
	// Output:
	// qpsk ccsds-rs-255-223: Eb/N0 6.5 dB, 5.2 dB over Shannon's bound
	// 1.734 Mbit/s net at 1 Mbaud, 1.35 MHz wide
}

// An error rate that nobody has measured is an error, not a guess.
func ExampleRow_At() {
	row, err := modem.Standard().Find("qpsk", "dvb-s2-1-2")
	if err != nil {
		fmt.Println(err)
		return
	}
	_, err = row.At("", 1e-9)
	fmt.Println(err)
	// Output:
	// qpsk dvb-s2-1-2: the Eb/N0 for a packet error rate of 1e-09 is not known, and curves are not continued beyond their ends; known are 1e-07 packet error rate
}
