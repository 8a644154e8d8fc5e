package linkset_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"slantwise/downlink/linkset"
)

// pass is 600 s: down at 1 kB/s from 100 s to 500 s, up at 10 B/s from 50 s to 550 s.
func pass() []linkset.Link {
	return []linkset.Link{
		{Name: "down", Spans: []linkset.Span{{From: 100, To: 500, BytesPerSecond: 1000}}},
		{Name: "up", Up: true, Spans: []linkset.Span{{From: 50, To: 550, BytesPerSecond: 10}}},
	}
}

// Each rule worked by hand.
func TestSharesByHand(t *testing.T) {
	for _, c := range []struct {
		name            string
		rule            linkset.Rule
		down, up        float64 // B
		downSec, upSecs float64
	}{
		{"together", linkset.Rule{}, 400e3, 5000, 400, 500},
		// Turns of 20 s: 4 s up, 1 s, 14 s down, 1 s. Down: 20 turns of 14 s. Up: from 60 s (the
		// turn of 40 s is up until 44 s) to 544 s: 25 turns of 4 s.
		{"in turns", linkset.Rule{Order: linkset.InTurns, Turn: 20, UpShare: 0.2, Change: 1}, 280e3, 1000, 280, 100},
		// Up works from 50 s: 90 s of it are over at 140 s, down begins at 142 s.
		{"up first for a time", linkset.Rule{Order: linkset.UpFirst, UpSeconds: 90, Change: 2}, 358e3, 900, 358, 90},
		// 1500 B at 10 B/s from 50 s: done at 200 s.
		{"up first for bytes", linkset.Rule{Order: linkset.UpFirst, UpBytes: 1500}, 300e3, 1500, 300, 150},
		{"up never done", linkset.Rule{Order: linkset.UpFirst, UpBytes: 1e6}, 0, 5000, 0, 500},
	} {
		if err := c.rule.Check(); err != nil {
			t.Errorf("%s: %v", c.name, err)
		}
		got := linkset.Divide(c.rule, 600, pass())
		for i, want := range [][2]float64{{c.down, c.downSec}, {c.up, c.upSecs}} {
			if math.Abs(got[i].Bytes-want[0]) > 1e-6 || math.Abs(got[i].Seconds-want[1]) > 1e-6 {
				t.Errorf("%s, %s: %.6f B in %.6f s, want %g in %g", c.name, got[i].Link, got[i].Bytes, got[i].Seconds, want[0], want[1])
			}
		}
		if got[0].AloneBytes != 400e3 || got[1].AloneBytes != 5000 {
			t.Errorf("%s: alone %v and %v", c.name, got[0].AloneBytes, got[1].AloneBytes)
		}
	}
}

// No link gets more than alone; half-duplex spans of the two directions stay apart by the
// change; a plain sum over milliseconds agrees.
func TestSharesAgainstAPlainSum(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		spans := func(name string) (out []linkset.Span) {
			at := 0.0
			for range rapid.IntRange(0, 4).Draw(t, name) {
				at += float64(rapid.IntRange(0, 40).Draw(t, "gap"))
				to := at + float64(rapid.IntRange(1, 60).Draw(t, "length"))
				out = append(out, linkset.Span{From: at, To: to, BytesPerSecond: float64(rapid.IntRange(0, 9).Draw(t, "rate"))})
				at = to
			}
			return out
		}
		links := []linkset.Link{{Name: "down", Spans: spans("down")}, {Name: "up", Up: true, Spans: spans("up")}, {Name: "more", Spans: spans("more")}}
		rule := linkset.Rule{Order: linkset.InTurns, Turn: float64(rapid.IntRange(10, 50).Draw(t, "turn")), UpShare: 0.5, Change: float64(rapid.IntRange(0, 2).Draw(t, "change"))}
		if rule.Check() != nil {
			t.Fatal(rule.Check())
		}
		const length = 150
		for i, s := range linkset.Divide(rule, length, links) {
			if !valid(s.Spans) || s.Bytes > s.AloneBytes+1e-9 {
				t.Fatalf("%s: %+v", s.Link, s)
			}
			sum := 0.0
			for k := 0; k < length*2; k++ { // half seconds: all edges are whole or half ones
				at := float64(k)/2 + 0.25
				turn := math.Mod(at, rule.Turn)
				mine := turn < rule.Turn/2
				if !s.Up {
					mine = turn > rule.Turn/2+rule.Change && turn < rule.Turn-rule.Change
				}
				for _, p := range links[i].Spans {
					if mine && at > p.From && at < p.To {
						sum += p.BytesPerSecond / 2
					}
				}
			}
			if math.Abs(sum-s.Bytes) > 1e-6 {
				t.Fatalf("%s: %v B, plain sum %v", s.Link, s.Bytes, sum)
			}
		}
	})
}

// valid tells whether spans are in order, apart, finite and of a rate of 0 or more.
func valid(spans []linkset.Span) bool {
	for i, s := range spans {
		if !(s.From < s.To && s.BytesPerSecond >= 0) || math.IsInf(s.To, 0) || math.IsInf(s.BytesPerSecond, 0) || i > 0 && s.From < spans[i-1].To {
			return false
		}
	}
	return true
}

func TestBadRules(t *testing.T) {
	for _, c := range []struct {
		rule linkset.Rule
		want string
	}{
		{linkset.Rule{Change: -1}, "dead time at a change: -1 s"},
		{linkset.Rule{Order: linkset.InTurns, UpShare: 0.5}, "length of a turn: 0 s"},
		{linkset.Rule{Order: linkset.InTurns, Turn: 10, UpShare: 1}, "share of a turn for up: 1"},
		{linkset.Rule{Order: linkset.InTurns, Turn: 10, UpShare: 0.9, Change: 1}, "leaves no time down"},
		{linkset.Rule{Order: linkset.UpFirst}, "one of the two"},
		{linkset.Rule{Order: linkset.UpFirst, UpBytes: 1, UpSeconds: math.NaN()}, "time for up: NaN s"},
	} {
		if err := c.rule.Check(); err == nil || !strings.HasPrefix(err.Error(), c.want) && !strings.Contains(err.Error(), c.want) {
			t.Errorf("%+v: %v, want %s", c.rule, err, c.want)
		}
	}
}

func ExampleDivide() {
	rule := linkset.Rule{Order: linkset.UpFirst, UpSeconds: 60, Change: 1}
	for _, s := range linkset.Divide(rule, 600, pass()) {
		fmt.Printf("%s: %.0f B in %.0f s, alone %.0f B\n", s.Link, s.Bytes, s.Seconds, s.AloneBytes)
	}
	// Output:
	// down: 389000 B in 389 s, alone 400000 B
	// up: 600 B in 60 s, alone 5000 B
}

func BenchmarkDivide(b *testing.B) {
	rule := linkset.Rule{Order: linkset.InTurns, Turn: 2, UpShare: 0.2, Change: 0.1}
	links := pass()
	b.ReportAllocs()
	for b.Loop() {
		linkset.Divide(rule, 600, links)
	}
}
