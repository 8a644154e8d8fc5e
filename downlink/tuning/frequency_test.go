package tuning_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/downlink/tuning"
	"slantwise/orbit/unit"
)

// What the station sends arrives as wanted, to the rounding of the numbers.
func TestSendForIsTheInverse(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := unit.Frequency(rapid.Float64Range(1e8, 3e10).Draw(t, "frequency"))
		v := unit.Speed(rapid.Float64Range(-12e3, 12e3).Draw(t, "range rate"))
		if got := tuning.Received(tuning.SendFor(f, v), v); math.Abs((got - f).Hertz()) > 1e-5 {
			t.Fatalf("%v arrives as %v", f, got)
		}
		// Transponded after compensation is one way down of the ratio.
		got := tuning.Transponded(tuning.SendFor(f, v), 240.0/221, v)
		want := tuning.Received(unit.Frequency(f.Hertz()*240/221), v)
		if math.Abs((got - want).Hertz()) > 2e-5 {
			t.Fatalf("transponded %v, want %v", got, want)
		}
	})
}

// By hand: at 7 km/s of approach 2065 MHz arrive f v/c = 2065e6 * 7e3/299792458 high, and
// the station sends that over 1 + v/c low.
func TestFrequenciesByHand(t *testing.T) {
	const shift = 2065e6 * 7e3 / 299792458
	if got := tuning.Received(2065e6, -7e3).Hertz() - 2065e6; math.Abs(got-shift) > 1e-6 {
		t.Errorf("received %+.4f Hz, want %+.4f", got, shift)
	}
	if got := tuning.SendFor(2065e6, -7e3).Hertz() - 2065e6; math.Abs(got+shift/(1+7e3/299792458)) > 1e-6 {
		t.Errorf("send %+.4f Hz", got)
	}
	// An uplink that is held: both ways, 240/221 of 2065 MHz times (1 + v/c)².
	b := 1 + 7e3/299792458
	if got, want := tuning.Transponded(2065e6, 240.0/221, -7e3).Hertz(), 2065e6*240/221*b*b; math.Abs(got-want) > 1e-5 {
		t.Errorf("transponded %.4f, want %.4f", got, want)
	}
}
