package trial

import (
	"math"
	"testing"
)

// The convolutional code alone against the union bound of its spectrum, which it must
// stay under and, at these rates, come close to: 3.52 dB and 4.00 dB are the bound's at
// 1e-4 (bit-weight spectra of the code, 0.1 dB as their tolerance says; about a factor 2).
func TestViterbiAgainstTheUnionBound(t *testing.T) {
	for rate, db := range map[string]float64{"1/2": 3.52, "2/3": 4.00, "3/4": 4.47} {
		c, err := convolutional(rate, db, 600_000, 3)
		if err != nil {
			t.Fatal(err)
		}
		if got := c.BitErrorRate(); got > 1.6e-4 || got < 3e-5 {
			t.Errorf("rate %s at %.2f dB: bit error rate %.2g of %d errors, want close under 1e-4", rate, db, got, c.BitErrors)
		}
	}
}

// Readings of CCSDS 130.1-G-3 figure 6-7: 2.9e-3 at 2.0 dB with an interleaving depth of
// five, good to 0.05 dB, which is a factor 2 there.
func TestConcatenatedAgainstTheBook(t *testing.T) {
	c, err := Concatenated("1/2", 16, 2.0, 40, 4_000_000, 2)
	if err != nil {
		t.Fatal(err)
	}
	if got := c.BitErrorRate(); math.Abs(math.Log2(got/2.9e-3)) > 1 || c.FrameErrors < 40 {
		t.Errorf("bit error rate %.2g with %d wrong frames, want 2.9e-3 within a factor 2", got, c.FrameErrors)
	}
}

func TestSameSeedSameCount(t *testing.T) {
	a, err := Concatenated("3/4", 8, 3, 5, 1_000_000, 7)
	if err != nil {
		t.Fatal(err)
	}
	b, err := Concatenated("3/4", 8, 3, 5, 1_000_000, 7)
	if err != nil || a != b {
		t.Errorf("%+v and %+v, %v", a, b, err)
	}
}

func TestTrialsRefuse(t *testing.T) {
	for _, c := range []struct {
		rate     string
		corrects int
		db       float64
	}{{"1/3", 16, 2}, {"1/2", -1, 2}, {"1/2", 16, math.NaN()}, {"1/2", 128, 2}} {
		if _, err := Concatenated(c.rate, c.corrects, c.db, 1, 1000, 1); err == nil {
			t.Errorf("%+v is taken", c)
		}
	}
}

// convolutional counts the code without a Reed-Solomon code around it.
func convolutional(rate string, db float64, bits int, seed uint64) (Count, error) {
	return Concatenated(rate, 0, db, math.MaxInt, bits, seed)
}

// A frequency modulation behind a discriminator is worse than coherent minimum-shift
// keying, which has the same signal but for the filter, Q(sqrt(2 Eb/N0)), and, with a
// filter no wider than Carson's rule says, within 4 dB of it at 1e-3 (6.79 dB + 4 dB and
// 2.2 dB more; bounds from experience, not a figure of the simulation).
func TestDiscriminator(t *testing.T) {
	for _, db := range []float64{9, 11} {
		c, err := Received(GFSK, db, 200, 400_000, 5)
		if err != nil {
			t.Fatal(err)
		}
		coherent := math.Erfc(math.Sqrt(math.Pow(10, db/10))) / 2
		if got := c.BitErrorRate(); got < 10*coherent || got > 0.05 || c.BitErrors < 200 {
			t.Errorf("%g dB: bit error rate %.2g of %d errors, coherent detection has %.2g", db, got, c.BitErrors, coherent)
		}
	}
}

// Without noise nothing is wrong, and more noise makes more errors.
func TestReceiversWithoutNoise(t *testing.T) {
	for name, r := range map[string]Receiver{"gfsk": GFSK, "afsk": AFSK} {
		quiet, err := Received(r, 40, 1, 3000, 1)
		if err != nil || quiet.BitErrors != 0 || quiet.Bits != 3000 {
			t.Errorf("%s: %+v, %v", name, quiet, err)
		}
		loud, err := Received(r, 6, 1, 2000, 1)
		if err != nil || loud.BitErrors < 20 {
			t.Errorf("%s at 6 dB: %+v, %v", name, loud, err)
		}
		if _, err := Received(r, math.Inf(1), 1, 1, 1); err == nil {
			t.Errorf("%s: an infinite Eb/N0 is taken", name)
		}
	}
}
