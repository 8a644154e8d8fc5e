package sizing

import (
	"math"
	"testing"

	"slantwise/orbit/unit"
)

// Mounts that slow down with the diameter give the bytes a day a summit that they do
// not have without them, where a fine grid has it, and the answer names it.
func TestSlowMountsEndTheGrowth(t *testing.T) {
	c := mountCase(mountOf(6, 3, 0, 0, [3]float64{2, 10, 4}, [3]float64{8, 0.5, 0.5}))
	c.antenna.PointingRMS, c.antenna.SurfaceRMS, c.power = 0, 0, 3
	s := c.study(t, None(), Family{})
	r := Range{Low: 1, High: 8, Steps: 12}
	a, err := s.Answer(r, nil)
	if err != nil {
		t.Fatal(err)
	}
	best, at := 0.0, 0.0
	for d := 2.0; d <= 8; d += 0.1 {
		o, err := s.outcome(Variant{Diameter: unit.Length(d)}, planned)
		if err != nil {
			t.Fatal(err)
		}
		if o.BytesPerDay > best {
			best, at = o.BytesPerDay, d
		}
	}
	if !(at > 2.2 && at < 7.5) || math.Abs(a.Limit.Turning.Metres()/at-1) > 0.06 {
		t.Errorf("the summit is named at %.3f m, a fine grid has it at %.1f m", a.Limit.Turning.Metres(), at)
	}
	free := mountCase(nil)
	free.antenna.PointingRMS, free.antenna.SurfaceRMS, free.power = 0, 0, 3
	b, err := free.study(t, None(), Family{}).Answer(r, nil)
	if err != nil || b.Limit.Turning != 0 {
		t.Errorf("without a mount %.3f m are named, %v", b.Limit.Turning.Metres(), err)
	}
}

// The least diameter, and the one up to which the needs are met, are those of a fine grid
// where bytes rise, fall by the mount and rise again: with rates that fall and then rise.
func TestLeastWithMountsAgainstGrid(t *testing.T) {
	c := mountCase(mountOf(6, 3, 0, 0, [3]float64{1.5, 10, 4}, [3]float64{3, 0.9, 0.9}, [3]float64{5, 8, 4}))
	c.days = 7
	r := Range{Low: 1.2, High: 6, Steps: 8}
	needs := None()
	needs.BytesPerDay = 1
	s := c.study(t, needs, Family{})
	var ds, bytes []float64
	for d := 1.2; d <= 6.0001; d *= 1.01 {
		o, err := s.outcome(Variant{Diameter: unit.Length(d)}, planned)
		if err != nil {
			t.Fatal(err)
		}
		ds, bytes = append(ds, d), append(bytes, o.BytesPerDay)
	}
	falls := false
	for i := 1; i < len(bytes); i++ {
		falls = falls || bytes[i] < 0.999*bytes[i-1]
	}
	if !falls {
		t.Fatalf("the bytes do not fall anywhere: %v", bytes)
	}
	low, high := bytes[0], 0.0
	for _, b := range bytes {
		high = max(high, b)
	}
	for _, share := range []float64{0.1, 0.3, 0.5, 0.6, 0.7, 0.8, 0.95} {
		ask := None()
		ask.BytesPerDay = low + share*(high-low)
		f, err := s.Least(ask.List(), r)
		if err != nil {
			t.Fatal(err)
		}
		first, last := 0.0, 0.0
		for i, b := range bytes {
			if b >= ask.BytesPerDay {
				if first == 0 {
					first = ds[i]
				}
				last = ds[i]
			} else if first > 0 {
				break
			}
		}
		if f.Diameter.Metres() > first*1.001 || f.Diameter.Metres() < first/1.012 {
			t.Errorf("%g bytes a day: least %.4f m, the grid's %.4f m", ask.BytesPerDay, f.Diameter.Metres(), first)
		}
		if f.Most.Metres() < last/1.001 || f.Most.Metres() > last*1.012 {
			t.Errorf("%g bytes a day: met up to %.4f m, by the grid %.4f m", ask.BytesPerDay, f.Most.Metres(), last)
		}
	}
}
