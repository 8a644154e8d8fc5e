package downlink_test

import (
	"fmt"

	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// The S-band downlink of EURASIP J. Wirel. Commun. Netw. 2020, doi
// 10.1186/s13638-020-01674-9, table 1, which prints C/N0 81.8 dBHz and a margin of
// 3.5 dB. Its free-space loss of 162.2 dB is that of 1397 km.
func ExampleLink_At() {
	eirp := unit.LevelDBm(38.3)
	required := unit.DB(7)
	link, err := downlink.NewLink(downlink.LinkSpec{
		Transmitter: downlink.Transmitter{
			Name: "S-band", Frequency: 2200 * unit.Megahertz, EIRP: &eirp, ImplementationLoss: 6,
			ExtraLosses: []downlink.Loss{{Name: "depointing", Loss: 10}},
		},
		Mode: &modem.Mode{Name: "QPSK", Modulation: "qpsk", Coding: "ccsds-conv-1-2", DataRate: 3.4e6, RequiredEbN0: &required},
		Antenna: &station.Antenna{
			Name: "5 m", Kind: station.Dish, Diameter: 5 * unit.Metre, Efficiency: 0.5,
			Noise: &station.Noise{SystemTemperature: station.Constant(130)},
		},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	geometry, err := link.StatedGeometry(1397*unit.Kilometre, 30*unit.Degree, nil, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	budget, err := link.At(geometry)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, t := range budget.Terms {
		fmt.Printf("%-21s %+8.2f %s\n", t.Name, float64(t.Sign)*t.Value, t.Unit) // -0.00: a loss of nothing
	}
	fmt.Printf("C/N0 %.1f dBHz, margin %.1f dB\n", float64(budget.CN0), float64(budget.Margin))
	// Output:
	// EIRP                    +38.30 dBm
	// depointing              -10.00 dB
	// free-space loss        -162.20 dB
	// station antenna gain    +38.22 dBi
	// pointing loss            -0.00 dB
	// feed loss                -0.00 dB
	// C/N0 81.8 dBHz, margin 3.5 dB
}
