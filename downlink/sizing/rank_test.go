package sizing

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// drawYield draws what some sites bring in overlapping stretches of few cells.
func drawYield(t *rapid.T) *Yield {
	y := &Yield{Days: 3, cell: 10}
	for range rapid.IntRange(1, 8).Draw(t, "sites") {
		var cells []cellGain
		for c := range int32(40) {
			if rapid.IntRange(0, 2).Draw(t, "in contact") == 0 {
				cells = append(cells, cellGain{c, float32(rapid.IntRange(0, 9).Draw(t, "bytes")), 1, float32(rapid.Float64Range(0, 1).Draw(t, "up"))})
			}
		}
		y.sites = append(y.sites, cells)
	}
	return y
}

// TestBestSetsAgainstAllSets counts every set of small cases out: the search finds as much.
func TestBestSetsAgainstAllSets(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		y := drawYield(t)
		n := len(y.sites)
		candidates := make([]int, n)
		for i := range candidates {
			candidates[i] = n - 1 - i
		}
		for _, got := range y.BestSets(candidates, 4) {
			best := 0.0
			for mask := range 1 << n {
				var set []int
				for i := range n {
					if mask>>i&1 == 1 {
						set = append(set, i)
					}
				}
				if len(set) == len(got.Sites) {
					best = max(best, bytesByHand(y, set))
				}
			}
			if math.Abs(got.BytesPerDay-best/y.Days) > 1e-9*(1+best) || math.Abs(y.Bytes(got.Sites)-got.BytesPerDay) > 1e-9 {
				t.Fatalf("sites %v bring %g, the best of all sets %g", got.Sites, got.BytesPerDay, best/y.Days)
			}
			if !slices.IsSorted(got.Sites) || len(slices.Compact(slices.Clone(got.Sites))) != len(got.Sites) {
				t.Fatalf("sites %v", got.Sites)
			}
		}
	})
}

// bytesByHand takes the best site of each cell.
func bytesByHand(y *Yield, set []int) float64 {
	best := map[int32]float64{}
	for _, i := range set {
		for _, c := range y.sites[i] {
			best[c.cell] = max(best[c.cell], float64(c.bytes))
		}
	}
	sum := 0.0
	for _, b := range best {
		sum += b
	}
	return sum
}

// TestAvailableBounds: independent weather is never worse than one weather, a site alone knows no
// difference, and the two agree with a count by hand.
func TestAvailableBounds(t *testing.T) {
	y := &Yield{Days: 1, sites: [][]cellGain{{{0, 1, 1, 0.9}, {1, 1, 1, 0.5}}, {{1, 1, 1, 0.8}, {2, 1, 0.5, 0.25}}}}
	one, ind := y.Available([]int{0, 1})
	if math.Abs(one-(0.9+0.8+0.25)/2.5) > 1e-6 || math.Abs(ind-(0.9+0.9+0.25)/2.5) > 1e-6 {
		t.Errorf("one weather %g, independent %g", one, ind)
	}
	if one, ind := y.Available([]int{1}); one != ind || math.Abs(one-1.05/1.5) > 1e-6 {
		t.Errorf("alone %g, %g", one, ind)
	}
	rapid.Check(t, func(t *rapid.T) {
		y := drawYield(t)
		all := make([]int, len(y.sites))
		for i := range all {
			all[i] = i
		}
		if one, ind := y.Available(all); one > ind+1e-9 || ind > 1 {
			t.Fatalf("one weather %g, independent %g", one, ind)
		}
	})
}

// TestYieldIsTheOutcome: a site alone brings in the ranking what a study of it alone says, in
// bytes (to the digits of the cells) and in availability; two sites together bring at least what the
// study's handing over in the order of AOS does, up to the share that overlaps.
func TestYieldIsTheOutcome(t *testing.T) {
	c := usualCase()
	c.days = 10
	c.sites = append(c.sites, station.Site{Name: "East", Latitude: 58 * unit.Degree, Longitude: 20 * unit.Degree, MinimumElevation: 5 * unit.Degree},
		station.Site{Name: "South", Latitude: -46 * unit.Degree, Longitude: 170 * unit.Degree, MinimumElevation: 10 * unit.Degree})
	f, places := c.fly(t)
	spec := Spec{Flight: f, Places: places, Rates: newPlanner(t, caseRules), Mode: caseModes[0], Margin: 3, Needs: None()}
	all, err := NewStudy(spec)
	if err != nil {
		t.Fatal(err)
	}
	y, err := all.Yield(Variant{})
	if err != nil {
		t.Fatal(err)
	}
	for i := range c.sites {
		spec.Sites = []int{i}
		alone, err := NewStudy(spec)
		if err != nil {
			t.Fatal(err)
		}
		o, err := alone.Outcome(Variant{})
		if err != nil {
			t.Fatal(err)
		}
		if got := y.Bytes([]int{i}); math.Abs(got/o.BytesPerDay-1) > 1e-5 {
			t.Errorf("%s: %g bytes a day, the study has %g", c.sites[i].Name, got, o.BytesPerDay)
		}
		if got, _ := y.Available([]int{i}); math.Abs(100*got-o.AvailabilityPercent) > 0.01 {
			t.Errorf("%s: %g %% available, the study has %g %%", c.sites[i].Name, 100*got, o.AvailabilityPercent)
		}
	}
	spec.Sites = []int{0, 1}
	both, err := NewStudy(spec)
	if err != nil {
		t.Fatal(err)
	}
	o, err := both.Outcome(Variant{})
	if err != nil {
		t.Fatal(err)
	}
	got, sum := y.Bytes([]int{0, 1}), y.Bytes([]int{0})+y.Bytes([]int{1})
	if !(got > o.BytesPerDay*0.98 && got < sum) {
		t.Errorf("two sites: %g bytes a day, in the order of AOS %g, apart %g", got, o.BytesPerDay, sum)
	}
	// The far site overlaps with none: what it brings alone is added whole.
	if with := y.Bytes([]int{0, 1, 2}); math.Abs(with-got-y.Bytes([]int{2})) > 1e-6*with {
		t.Errorf("the site on the other side of the Earth adds %g bytes a day, alone it brings %g", with-got, y.Bytes([]int{2}))
	}
}

// BenchmarkBestSets looks for the best four of forty sites over a year of low passes.
func BenchmarkBestSets(b *testing.B) {
	y := &Yield{Days: 365, cell: 10}
	candidates := make([]int, 40)
	for i := range candidates {
		candidates[i] = i
		var cells []cellGain
		for pass := range int32(365 * 6) {
			from := (pass*1440 + int32(i)*(31+7*(pass%11))) // 4 h apart, sites drift through one another
			for k := range int32(40 + (i*13)%25) {
				cells = append(cells, cellGain{from + k, float32(1 + (i*7)%5), 1, 1})
			}
		}
		y.sites = append(y.sites, cells)
	}
	b.ReportAllocs()
	for b.Loop() {
		sets := y.BestSets(candidates, 4)
		b.ReportMetric(float64(sets[3].Tried), "sets")
	}
}
