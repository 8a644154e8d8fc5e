package trial

import (
	"flag"
	"fmt"
	"strings"
	"testing"
)

var measure = flag.String("measure", "", "measure the curves whose name holds this text and print them as rows of curves.csv: metric, Eb/N0, error rate, errors counted; it takes minutes")

const (
	seed     = 1
	enough   = 100         // wrong frames to be counted
	fewest   = 25          // fewer end a curve: 25 mean 20 %
	mostBits = 400_000_000 // of a point
)

// TestMeasure prints the curves; with no -measure there is nothing to do.
func TestMeasure(t *testing.T) {
	if *measure == "" {
		t.Skip("no -measure")
	}
	if strings.Contains("gfsk", *measure) {
		received(t, "gfsk", GFSK, 7, 20_000_000)
	}
	if strings.Contains("afsk", *measure) {
		received(t, "afsk", AFSK, 15, 8_000_000)
	}
	for _, outer := range []struct {
		corrects int
		name     string
	}{{16, "rs-255-223"}, {8, "rs-255-239"}} {
		for _, rate := range []string{"1/2", "2/3", "3/4", "5/6", "7/8"} {
			name := "ccsds-conv-" + strings.ReplaceAll(rate, "/", "-") + "+" + outer.name
			if strings.Contains(name, *measure) {
				concatenated(t, name, rate, outer.corrects)
			}
		}
	}
}

// received prints the curve of a receiver in steps of half a decibel.
func received(t *testing.T, name string, r Receiver, from float64, mostBits int) {
	for db := from; ; db += 0.5 {
		c, err := Received(r, db, 4*enough, mostBits, seed)
		if err != nil {
			t.Fatal(err)
		}
		if c.BitErrors < 2*fewest {
			return
		}
		fmt.Printf("%s,bit error rate,%.1f,%.3e,%d\n", name, db, c.BitErrorRate(), c.BitErrors)
	}
}

// concatenated prints the curve from a bit error rate of 1 % downwards, in steps of a
// tenth of a decibel.
func concatenated(t *testing.T, name, rate string, corrects int) {
	for tenths := 15; ; tenths++ {
		db := float64(tenths) / 10
		c, err := Concatenated(rate, corrects, db, enough, mostBits, seed)
		if err != nil {
			t.Fatal(err)
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
