package sizing

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
)

// The search agrees with every diameter of a fine grid, for all kinds of requirement
// and for families whose margin has a summit inside the range.
func TestLeastAgainstBruteForce(t *testing.T) {
	c := usualCase()
	c.days = 7
	largest := 0.0
	families := []Family{{Wind: &Wind{Error: 0.06 * unit.Degree, Diameter: 3, Exponent: 1}}, {}, {SurfaceShare: 2.2e-4}}
	if testing.Short() {
		families = families[:1]
	}
	for _, family := range families {
		needs := None()
		needs.BytesPerDay, needs.WorstWeekBytesPerDay, needs.WorstMonthBytesPerDay = 1, 1, 1
		needs.Margin = &MarginAt{10 * unit.Degree, 0}
		needs.Availability, needs.LongestGap = 50, 14
		s := c.study(t, needs, family)
		const ratio = 1.004
		var fine []*Outcome
		for d := 0.8; d <= 14; d *= ratio {
			o, err := s.Outcome(Variant{Diameter: unit.Length(d)})
			if err != nil {
				t.Fatal(err)
			}
			fine = append(fine, o)
		}
		list := needs.List()
		rapid.Check(t, func(t *rapid.T) {
			// Requirements between what the grid reaches at its worst and a little over its best.
			var asked []Need
			for _, n := range list {
				if !rapid.Bool().Draw(t, "asked") {
					continue
				}
				worst, best := math.Inf(1), math.Inf(-1)
				for _, o := range fine {
					v := n.Reached(o)
					if n.Most {
						v = -v
					}
					worst, best = min(worst, v), max(best, v)
				}
				n.Required = worst + (best-worst)*rapid.Float64Range(0.05, 1.05).Draw(t, "required")
				if n.Most {
					n.Required = -n.Required
				}
				asked = append(asked, n)
			}
			if len(asked) == 0 {
				return
			}
			got, err := s.Least(asked, Range{Low: 0.8, High: 14})
			if err != nil {
				t.Fatal(err)
			}
			want := 0.0
			for _, o := range fine {
				if meetsAll(asked, o) {
					want = o.Variant.Diameter.Metres()
					break
				}
			}
			if got.Diameter == 0 {
				if want > 0 {
					t.Fatalf("the search finds none, the grid %.4f m", want)
				}
				return
			}
			o, err := s.Outcome(Variant{Diameter: got.Diameter})
			if err != nil {
				t.Fatal(err)
			}
			if !meetsAll(asked, o) {
				t.Fatalf("%.4f m does not meet what it was found for", got.Diameter.Metres())
			}
			if want > 0 {
				difference := got.Diameter.Metres() - want
				largest = max(largest, math.Abs(difference)/want)
				if difference > resolution*want || difference < -(ratio-1)*want*1.001 {
					t.Fatalf("the search finds %.4f m, the grid %.4f m", got.Diameter.Metres(), want)
				}
			}
		})
	}
	t.Logf("largest difference between search and grid: %.2g of the diameter", largest)
}

func meetsAll(needs []Need, o *Outcome) bool {
	for i := range needs {
		if !needs[i].Met(o) {
			return false
		}
	}
	return true
}

// More power is never worse, but for a few parts in ten thousand of the bytes: plans are
// made for one weather and counted in all.
func TestMorePowerIsNeverWorse(t *testing.T) {
	c := usualCase()
	c.days = 7
	needs := marginAt(10*unit.Degree, 3)
	needs.MarginShare = &MarginOver{99, 0}
	s := c.study(t, needs, Family{})
	var before *Outcome
	for p := -12.0; p <= 12; p += 0.5 {
		o, err := s.Outcome(Variant{Diameter: 2.4, Power: unit.DB(p)})
		if err != nil {
			t.Fatal(err)
		}
		if b := before; b != nil && (o.BytesPerDay < b.BytesPerDay*(1-5e-4) || o.MarginDB < b.MarginDB || o.ShareMarginDB < b.ShareMarginDB-2e-3 ||
			o.AvailabilityPercent < b.AvailabilityPercent || o.WorstMonthAvailabilityPercent < b.WorstMonthAvailabilityPercent || o.LongestGapH > b.LongestGapH) {
			t.Errorf("at %g dB: %+v, before %+v", p, *o, *b)
		}
		before = o
	}
}

func TestLeastRefuses(t *testing.T) {
	c := usualCase()
	c.days, c.clear = 7, true
	s := c.study(t, None(), Family{})
	if _, err := s.Least(nil, Range{Low: 1, High: 2}); err == nil {
		t.Error("no requirement: no error")
	}
	needs := marginAt(10*unit.Degree, 3)
	for _, r := range []Range{{Low: 2, High: 1}, {Low: 0, High: 3}, {Low: unit.Length(math.NaN()), High: 3}, {Low: 1, High: 2, Steps: 1}} {
		if _, err := s.Least(needs.List(), r); err == nil {
			t.Errorf("%+v: no error", r)
		}
	}
}
