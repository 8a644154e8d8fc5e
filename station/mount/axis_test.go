package mount

import (
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// TestSlewTime holds slews between rests to the closed form of the trapezoid: d/v + v/a
// from v²/a on, 2 sqrt(d/a) below; the longer axis counts, and the cable's turn does.
func TestSlewTime(t *testing.T) {
	d := drive(t, -270, 270, 10, func(m *station.Mount) { m.Settle = 1.5 })
	at := func(lower, upper float64) station.AxisAngles {
		return station.AxisAngles{Lower: unit.Angle(lower) * unit.Degree, Upper: unit.Angle(upper) * unit.Degree}
	}
	for _, c := range []struct {
		name     string
		from, to station.AxisAngles
		want     float64
	}{
		{"full rate", at(0, 0), at(100, 0), 100./10 + 10./5 + 1.5},
		{"a whole turn of the cable", at(-10, 20), at(350, 20), 360./10 + 10./5 + 1.5},
		{"just the full rate", at(0, 0), at(20, 0), 4 + 1.5},
		{"short", at(5, 0), at(0, 0), 2 + 1.5},
		{"the elevation takes longer", at(0, 0), at(5, 80), 80./5 + 5./3 + 1.5},
		{"none", at(5, 5), at(5, 5), 0},
	} {
		if got := d.SlewTime(c.from, c.to); math.Abs(got.Seconds()-c.want) > 1e-3 || got != d.SlewTime(c.to, c.from) {
			t.Errorf("%s: got %v, want %g s", c.name, got, c.want)
		}
	}
	if d := drive(t, -270, 270, 10, atOnce); d.SlewTime(at(0, 0), at(50, 0)) != 5*time.Second {
		t.Error("at once: not 5 s")
	}
}

// TestQuickestMoves integrates the move that is called quickest: it ends where it should
// within the limits, and no move in less time does.
func TestQuickestMoves(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := axis(-1000, 1000, rapid.Float64Range(0.5, 20).Draw(t, "rate"), rapid.Float64Range(0.2, 20).Draw(t, "acceleration"))
		v := float64(a.Rate)
		from := motion{0, rapid.Float64Range(-1, 1).Draw(t, "v0") * v}
		to := motion{rapid.Float64Range(-300, 300).Draw(t, "way deg") * degree, rapid.Float64Range(-1, 1).Draw(t, "v1") * v}
		time := quickest(a, from, to)
		if !makes(a, from, to, time) {
			t.Fatalf("%g s does not suffice", time)
		}
		for _, share := range []float64{0.25, 0.5, 0.9, 0.999} {
			if makes(a, from, to, time*share) && time > 1e-2 { // shorter ones are within the slack for rounding
				t.Fatalf("%g s suffices, too, %g s was called quickest", time*share, time)
			}
		}
		s := newSlew(a, from, to, time)
		const n = 4000
		at, before := from.at, from
		for i := 1; i <= n; i++ {
			m := s.at(time * float64(i) / n)
			dt := time / n
			if math.Abs(m.rate) > v*(1+1e-6) || math.Abs(m.rate-before.rate) > float64(a.Acceleration)*dt*(1+1e-6)+1e-9 {
				t.Fatalf("at %g s: rate %g of %g, from %g before", time*float64(i)/n, m.rate, v, before.rate)
			}
			at += (m.rate + before.rate) / 2 * dt
			if math.Abs(at-m.at) > 1e-4*(1+math.Abs(m.at))+v*dt {
				t.Fatalf("at %g s: at %g, by its rate %g", time*float64(i)/n, m.at, at)
			}
			before = m
		}
		if math.Abs(before.at-to.at) > 1e-7 {
			t.Fatalf("ended at %g, not %g", before.at, to.at)
		}
	})
}
