// Command run measures the simulated curves of package modem and prints them as rows
// of its curves.csv: metric, Eb/N0, error rate, errors counted. With an argument only
// the codings and modulations whose name holds it are measured. It takes minutes.
package main

import (
	"fmt"
	"os"
	"strings"

	"slantwise/downlink/modem/internal/trial"
)

const (
	seed     = 1
	enough   = 100         // wrong frames to be counted
	fewest   = 25          // fewer end a curve: 25 mean 20 %
	mostBits = 400_000_000 // of a point
)

func main() {
	wanted := strings.Join(os.Args[1:], " ")
	for _, outer := range []struct {
		corrects int
		name     string
	}{{16, "rs-255-223"}, {8, "rs-255-239"}} {
		for _, rate := range []string{"1/2", "2/3", "3/4", "5/6", "7/8"} {
			name := "ccsds-conv-" + strings.ReplaceAll(rate, "/", "-") + "+" + outer.name
			if strings.Contains(name, wanted) {
				concatenated(name, rate, outer.corrects)
			}
		}
	}
}

// concatenated prints the curve from a bit error rate of 1 % downwards, in steps of a
// tenth of a decibel.
func concatenated(name, rate string, corrects int) {
	for tenths := 15; ; tenths++ {
		db := float64(tenths) / 10
		c, err := trial.Concatenated(rate, corrects, db, enough, mostBits, seed)
		if err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
		if c.FrameErrors < fewest {
			return
		}
		if c.FrameErrorRate() > 0.5 {
			continue
		}
		fmt.Printf("%s,bit error rate,%.1f,%.3e,%d\n", name, db, c.BitErrorRate(), c.FrameErrors)
		fmt.Printf("%s,frame error rate,%.1f,%.3e,%d\n", name, db, c.FrameErrorRate(), c.FrameErrors)
	}
}
