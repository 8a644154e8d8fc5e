package orbit

import (
	"errors"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// The states are those of AIAA 2006-6753 (testdata/SOURCES.md); times between whole
// seconds come from the polynomial of atMinutes.
func TestPropagationAtPublishedStates(t *testing.T) {
	for _, c := range verificationCases(t) {
		number := c.el.CatalogNumber
		if number == 33333 || number == 33334 { // made to fail: TestPropagationFails
			continue
		}
		p, err := NewPropagation(c.el)
		if err != nil {
			t.Fatal(err)
		}
		inner, err := newPropagator(&c.el)
		if err != nil {
			t.Fatal(err)
		}
		for _, s := range c.states {
			for _, part := range []float64{0, 0.3 / 60, 0.5 / 60} {
				at := c.el.Epoch.Add(time.Duration((s.minutes + part) * float64(time.Minute)))
				pos, vel, err := p.At(at)
				if err != nil {
					if part != 0 { // the last published second may be the last there is
						continue
					}
					t.Fatalf("%05d at %g min: %v", number, s.minutes, err)
				}
				wantP, wantV := atMinutes(inner, s.minutes+part)
				const tolerance = 5e-4 // SGP4 solves Kepler to 1e-12 rad, 0.1 mm at the farthest, and each point may be off so
				if d, dv := pos.Sub(wantP).Norm(), vel.Sub(wantV).Norm(); d > tolerance || dv > tolerance {
					t.Errorf("%05d at %g min and %g s: %g m, %g m/s off", number, s.minutes, part*60, d, dv)
				}
			}
		}
	}
}

func TestPropagationFails(t *testing.T) {
	for _, c := range verificationCases(t) {
		p, err := NewPropagation(c.el)
		if err != nil {
			t.Fatal(err)
		}
		if _, _, err := p.At(c.el.Epoch.Add(11 * 366 * 24 * time.Hour)); !errors.As(err, new(*unit.RangeError)) {
			t.Errorf("eleven years on: %v", err)
		}
		if _, _, err := p.At(c.el.Epoch); c.el.CatalogNumber == 33334 && !errors.As(err, new(*PropagationError)) {
			t.Errorf("33334 has no state: %v", err)
		}
	}
	if _, err := NewPropagation(Elements{}); err == nil {
		t.Error("an empty set is propagated")
	}
}
