package pass

import (
	"testing"
	"time"

	"pgregory.net/rapid"
)

func passesAt(minutes ...int) []Pass {
	out := make([]Pass, len(minutes))
	for i, m := range minutes {
		out[i].Culmination = time.Date(2026, 3, 10, 0, m, 0, 0, time.UTC)
	}
	return out
}

// shown lists pairs as minutes, -1 where there is none.
func shown(pairs []Pair) [][2]int {
	minute := func(p *Pass) int {
		if p == nil {
			return -1
		}
		return int(p.Culmination.Sub(time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)).Minutes())
	}
	var out [][2]int
	for _, p := range pairs {
		out = append(out, [2]int{minute(p.Before), minute(p.After)})
	}
	return out
}

func TestAlign(t *testing.T) {
	for _, c := range []struct {
		name          string
		before, after []Pass
		want          [][2]int
	}{
		{"both empty", nil, nil, nil},
		{"all gone", passesAt(10, 100), nil, [][2]int{{10, -1}, {100, -1}}},
		{"all new", nil, passesAt(10), [][2]int{{-1, 10}}},
		{"all late by eleven", passesAt(10, 105, 700), passesAt(21, 116, 711), [][2]int{{10, 21}, {105, 116}, {700, 711}}},
		{"one gone and one new", passesAt(10, 105, 700), passesAt(12, 702, 800), [][2]int{{10, 12}, {105, -1}, {700, 702}, {-1, 800}}},
		{"alone in the order of time", passesAt(10, 500), passesAt(300, 900), [][2]int{{10, -1}, {-1, 300}, {500, -1}, {-1, 900}}},
		{"the nearer of two", passesAt(100), passesAt(80, 110), [][2]int{{-1, 80}, {100, 110}}},
		{"more pairs before shorter ways", passesAt(100, 130), passesAt(70, 101), [][2]int{{100, 70}, {130, 101}}},
	} {
		got := shown(Align(c.before, c.after, 45*time.Minute))
		if len(got) != len(c.want) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
			continue
		}
		for i := range got {
			if got[i] != c.want[i] {
				t.Errorf("%s: got %v, want %v", c.name, got, c.want)
			}
		}
	}
}

// TestAlignLosesNothing: every pass stands in the pairs once, in its order, pairs keep
// to the distance, and no pairing of short lists has more pairs or moves less.
func TestAlignLosesNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		draw := func(name string) []Pass {
			at, out := 0, []int{}
			for _, d := range rapid.SliceOfN(rapid.IntRange(1, 60), 0, 6).Draw(t, name) {
				at += d
				out = append(out, at)
			}
			return passesAt(out...)
		}
		const apart = 30 * time.Minute
		before, after := draw("before"), draw("after")
		var worth alignment
		i, j := 0, 0
		for _, p := range Align(before, after, apart) {
			if p.Before != nil {
				if p.Before != &before[i] {
					t.Fatalf("pass %d of the first list out of its order", i)
				}
				i++
			}
			if p.After != nil {
				if p.After != &after[j] {
					t.Fatalf("pass %d of the second list out of its order", j)
				}
				j++
			}
			if p.Before != nil && p.After != nil {
				worth.pairs++
				worth.moved += distance(p.Before, p.After)
				if distance(p.Before, p.After) > apart {
					t.Fatalf("a pair is too far apart: %v", shown([]Pair{p}))
				}
			}
		}
		if i != len(before) || j != len(after) {
			t.Fatalf("%d of %d and %d of %d passes", i, len(before), j, len(after))
		}
		if want := exhaustive(before, after, apart); worth != want {
			t.Fatalf("got %+v, best %+v", worth, want)
		}
	})
}

// exhaustive tries every pairing.
func exhaustive(before, after []Pass, apart time.Duration) alignment {
	if len(before) == 0 || len(after) == 0 {
		return alignment{}
	}
	best := exhaustive(before[1:], after, apart)
	for j := range after {
		if d := distance(&before[0], &after[j]); d <= apart {
			rest := exhaustive(before[1:], after[j+1:], apart)
			if rest.pairs, rest.moved = rest.pairs+1, rest.moved+d; rest.better(best) {
				best = rest
			}
		}
	}
	return best
}
