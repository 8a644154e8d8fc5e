package orbit

import (
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

func TestAgeRule(t *testing.T) {
	epoch := time.Date(2026, 9, 10, 0, 0, 0, 0, time.UTC)
	u := AgeUncertainty{Rule: AgeRule{Along: Growth{AtEpoch: 1000, PerDay: 2000, PerDay2: 500}, Radial: Growth{AtEpoch: 100}}, Epoch: epoch}
	for _, c := range []struct{ days, along float64 }{
		{0, 1000}, {2, math.Sqrt(1e6 + 16e6 + 4e6)}, {-2, math.Sqrt(1e6 + 16e6 + 4e6)},
	} {
		s, err := u.At(epoch.Add(time.Duration(c.days * 24 * float64(time.Hour))))
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(s.Along.Metres()-c.along) > 1e-9 || s.Radial != 100 || s.Across != 0 {
			t.Errorf("%g days: got %+v, want %g m along, 100 m radially", c.days, s, c.along)
		}
	}
	if err := DefaultAgeRule().Validate(); err != nil {
		t.Error(err)
	}
}

func TestAgeRuleFaults(t *testing.T) {
	r := AgeRule{Along: Growth{AtEpoch: 1, PerDay: -2 * unit.Kilometre}, Across: Growth{AtEpoch: unit.Length(math.NaN())}}
	err := r.Validate()
	if err == nil {
		t.Fatal("a rule that shrinks was taken")
	}
	for _, want := range []string{"position uncertainty along a day: -2 km is not allowed", "position uncertainty across at the epoch: NaN km", "it does not shrink with age"} {
		if !strings.Contains(err.Error(), want) {
			t.Errorf("got %q, want %q in it", err, want)
		}
	}
}

// The axes at a state over the equator going north-east: radial up, across towards
// the pole's side of the motion, and the along axis with the Earth's turn taken out.
func TestOrbitAxes(t *testing.T) {
	s := State{Position: Vec3{X: 7e6}, Velocity: Vec3{Y: -7e6 * earthRate, Z: 7000}}
	a := s.Axes()
	for _, c := range []struct {
		name      string
		got, want Vec3
	}{{"radial", a.Radial, Vec3{X: 1}}, {"along", a.Along, Vec3{Z: 1}}, {"across", a.Across, Vec3{Y: -1}}} {
		if c.got.Sub(c.want).Norm() > 1e-12 {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
	if got := a.Rate(s.Position); math.Abs(got-1e-3) > 1e-15 {
		t.Errorf("rate: got %v, want 0.001 rad/s", got)
	}
}
