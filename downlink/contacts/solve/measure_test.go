package solve

import (
	"context"
	"fmt"
	"os"
	"testing"
	"time"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/instance"
)

// instances are those by which the solver is measured, each with the time that it gets
// on two cores and the gap (percent) that it should reach.
var instances = []struct {
	name  string
	limit time.Duration
	gap   float64
	make  func() (*contacts.Problem, error)
}{
	{"10x5 passes of a week", 5 * time.Second, 1, func() (*contacts.Problem, error) {
		return instance.Passes(instance.Network{Seed: 1, Spacecraft: 10, Stations: 5, Days: 7, Crowded: 0.4})
	}},
	{"100x20 passes of a week", 60 * time.Second, 5, func() (*contacts.Problem, error) {
		return instance.Passes(instance.Network{Seed: 1, Spacecraft: 100, Stations: 20, Days: 7, Crowded: 0.3})
	}},
	{"300 requests, windows of 30 min", 60 * time.Second, 3, func() (*contacts.Problem, error) {
		return instance.Demand{Seed: 1, Requests: 300, Windows: 3000, Antennas: 15, Craft: 30, Days: 7, Split: true, Load: 0.3, Window: 30 * contacts.Minute}.Problem()
	}},
	{"300 requests, windows of 3 h", 60 * time.Second, 3, func() (*contacts.Problem, error) {
		return instance.Demand{Seed: 1, Requests: 300, Windows: 3000, Antennas: 15, Craft: 30, Days: 7, Split: true, Load: 0.7, Window: 3 * contacts.Hour, Tick: time.Minute}.Problem()
	}},
	{"300 requests, windows of 8 h", 60 * time.Second, 3, func() (*contacts.Problem, error) {
		return instance.Demand{Seed: 1, Requests: 300, Windows: 3000, Antennas: 15, Craft: 30, Days: 7, Split: true, Load: 0.9, Window: 8 * contacts.Hour}.Problem()
	}},
	{"300 requests, too many, windows of 8 h", 60 * time.Second, 3, func() (*contacts.Problem, error) {
		return instance.Demand{Seed: 1, Requests: 300, Windows: 3000, Antennas: 15, Craft: 30, Days: 7, Split: true, Load: 1.2, Window: 8 * contacts.Hour}.Problem()
	}},
}

// TestMeasure solves the instances within their time and tells how far it gets. It runs
// where SLANTWISE_MEASURE is "all" or the begin of an instance's name.
func TestMeasure(t *testing.T) {
	want := os.Getenv("SLANTWISE_MEASURE")
	if want == "" {
		t.Skip("set SLANTWISE_MEASURE to all, or to the begin of a name, to measure")
	}
	for _, x := range instances {
		if want != "all" && (len(want) > len(x.name) || x.name[:len(want)] != want) {
			continue
		}
		p, err := x.make()
		if err != nil {
			t.Fatal(err)
		}
		ctx, stop := context.WithTimeout(context.Background(), x.limit)
		begin, last := time.Now(), 0.0
		r, err := Solve(ctx, p, Options{Progress: func(x Progress) {
			if s := time.Since(begin).Seconds(); s > last*1.3 {
				last = s
				fmt.Printf("%6.2f s round %d value %.6g bound %.6g gap %.3f %%\n", s, x.Round, x.Value, x.Bound, x.GapPercent)
			}
		}})
		stop()
		if err != nil {
			t.Fatal(err)
		}
		fmt.Printf("%s: %d candidates, %d contacts, first plan %.6g, value %.6g, bound %.6g, gap %.4f %% (aim %g), %s after %d rounds and %.1f s\n",
			x.name, len(p.Candidates), len(r.Plan.Contacts), r.First, r.Value, r.Bound, r.GapPercent, x.gap, r.Stop, r.Rounds, time.Since(begin).Seconds())
	}
}

// BenchmarkSolve10x5 is ten rounds of a week of ten spacecraft over five stations.
func BenchmarkSolve10x5(b *testing.B) {
	p, err := instances[0].make()
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		r, err := Solve(context.Background(), p, Options{Rounds: 10})
		if err != nil {
			b.Fatal(err)
		}
		b.ReportMetric(r.GapPercent, "gap_percent")
	}
}

// BenchmarkBound10x5 is one evaluation of the bound on the exact grid.
func BenchmarkBound10x5(b *testing.B) {
	p, err := instances[0].make()
	if err != nil {
		b.Fatal(err)
	}
	d := newDual(newModel(p))
	grids := d.grids()
	g := grids[len(grids)-1]
	prices := make([]float64, len(d.rows))
	b.ReportAllocs()
	for b.Loop() {
		g.evaluate(prices, 1)
	}
}
