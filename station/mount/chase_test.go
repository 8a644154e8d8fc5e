package mount

import (
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
)

// TestChase: outside the keyhole nothing is lost without a plan either; inside it the
// plan loses less.
func TestChase(t *testing.T) {
	d := drive(t, -270, 270, 10)
	const tolerance = 0.05 * unit.Degree
	p := d.Plan(circle(30, 40, 0.9, 140), Options{Tolerance: tolerance})
	if c := p.Chase(tolerance); c.LostSeconds() != 0 {
		t.Errorf("outside the keyhole %g s are lost", c.LostSeconds())
	}
	p = d.Plan(circle(0.5, 40, 0.9, 140), Options{Tolerance: tolerance})
	c := p.Chase(tolerance)
	if !(c.LostSeconds() > 8) || !(c.Largest > unit.Degree) {
		t.Errorf("in the keyhole a chase loses 180 deg at 10 deg/s and more, but %g s, %g deg", c.LostSeconds(), c.Largest.Degrees())
	}
}

// TestPlanLosesNoMoreThanChase draws passes and tolerances.
func TestPlanLosesNoMoreThanChase(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		o := Options{Tolerance: unit.Angle(rapid.SampledFrom([]float64{0.02, 0.1, 1, 3}).Draw(t, "tolerance")) * unit.Degree}
		d := drive(t, -270, 270, rapid.Float64Range(2, 15).Draw(t, "rate"))
		p := d.Plan(drawPass(t), o)
		c := p.Chase(o.Tolerance)
		if p.LostSeconds() > c.LostSeconds()+0.01 {
			t.Fatalf("planned %g s are lost, chasing %g s", p.LostSeconds(), c.LostSeconds())
		}
		checkPlan(t, d, c, o)
	})
}
