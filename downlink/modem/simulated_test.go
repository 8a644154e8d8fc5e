package modem

import (
	"math"
	"testing"

	"slantwise/downlink/modem/internal/trial"
	"slantwise/orbit/unit"
)

// The committed curves of our own simulations, measured again with another seed. They
// hold to four standard deviations of both counts.
func TestMeasuredAgain(t *testing.T) {
	for _, c := range []struct {
		modulation, coding string
		metric             Metric
		db                 float64
		count              func() (rate float64, errors int, err error)
		committed          float64 // errors counted for the committed point
	}{
		{"gfsk", "none", BitErrors, 11, receiver(trial.GFSK, 11, 300), 402},
		{"afsk", "none", BitErrors, 17, receiver(trial.AFSK, 17, 100), 415},
		{"bpsk", "ccsds-conv-1-2+rs-255-223", FrameErrors, 2.1, frames("1/2", 16, 2.1), 100},
		{"bpsk", "ccsds-conv-3-4+rs-255-223", FrameErrors, 3.2, frames("3/4", 16, 3.2), 100},
		{"bpsk", "ccsds-conv-7-8+rs-255-239", FrameErrors, 4.3, frames("7/8", 8, 4.3), 100},
	} {
		r := find(t, c.modulation, c.coding)
		want := -1.0
		for i := range r.Curves {
			if v, err := r.Curves[i].ErrorRate(unit.DB(c.db)); err == nil && r.Curves[i].Metric == c.metric {
				want = v
			}
		}
		got, errors, err := c.count()
		if err != nil || errors < 20 || want < 0 {
			t.Errorf("%s: %d errors counted, committed rate %g, %v", r.Name(), errors, want, err)
			continue
		}
		within(t, r.Name(), got, want, 4*want*math.Sqrt(1/float64(errors)+1/c.committed))
	}
}

func receiver(r trial.Receiver, db float64, enough int) func() (float64, int, error) {
	return func() (float64, int, error) {
		c, err := trial.Received(r, db, enough, 200_000, 9)
		return c.BitErrorRate(), c.BitErrors, err
	}
}

func frames(rate string, corrects int, db float64) func() (float64, int, error) {
	return func() (float64, int, error) {
		c, err := trial.Concatenated(rate, corrects, db, 30, 10_000_000, 9)
		return c.FrameErrorRate(), c.FrameErrors, err
	}
}

// The simulated concatenation against readings of the book's figure at the same error
// rates: 0.05 dB, their own tolerance.
func TestConcatenationAgainstTheFigure(t *testing.T) {
	c, err := trial.Concatenated("1/2", 16, 2.0, 60, 6_000_000, 4)
	if err != nil {
		t.Fatal(err)
	}
	figure, err := find(t, "bpsk", "ccsds-conv-1-2+rs-255-223").At(BitErrors, c.BitErrorRate())
	if err != nil {
		t.Fatal(err)
	}
	within(t, "2.0 dB", float64(figure.EbN0), 2.0, 0.05)
}
