package sizing

import (
	"testing"

	"slantwise/downlink/rateplan"
	"slantwise/orbit/unit"
)

// forgetful plans every track anew.
type forgetful struct{ planner }

func (forgetful) Pattern(*rateplan.Track, []byte) ([]byte, bool, error) { return nil, false, nil }

// Plans that are shared between diameters, powers and elevations bring to the last bit what
// plans of their own do, in whatever order the variants are asked for.
func TestSharedSchedules(t *testing.T) {
	c := usualCase()
	c.days = 7
	c.antenna.Mount = mountOf(2, 2, 1, 1)
	needs := None()
	needs.LongestGap = 10
	shared := c.study(t, needs, Family{})
	spec := shared.spec
	spec.Rates = forgetful{newPlanner(t, caseRules)}
	alone, err := NewStudy(spec)
	if err != nil {
		t.Fatal(err)
	}
	var list []Variant
	for d := unit.Length(1); d < 6; d *= 1.07 {
		list = append(list, Variant{Diameter: d}, Variant{Diameter: d, Power: 1.5}, Variant{Diameter: d, Raise: 4 * unit.Degree}, Variant{Diameter: d, thin: 3})
	}
	for i := range list {
		v := list[(i*7)%len(list)]
		a, err := shared.Outcome(v)
		if err != nil {
			t.Fatal(err)
		}
		b, err := alone.Outcome(v)
		if err != nil {
			t.Fatal(err)
		}
		if a.BytesPerDay != b.BytesPerDay || a.WorstMonthBytesPerDay != b.WorstMonthBytesPerDay || a.MountLostBytesPerDay != b.MountLostBytesPerDay || a.LongestGapH != b.LongestGapH {
			t.Fatalf("%+v: shared %+v, alone %+v", v, a, b)
		}
	}
	if n := len(shared.shared.known); n == 0 || n > shared.Plans()*len(shared.turns)/2 {
		t.Errorf("%d plans are kept of %d", n, shared.Plans()*len(shared.turns))
	}
}
