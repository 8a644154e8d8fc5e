package explain

import (
	"context"
	"math"
	"slices"
	"strings"
	"testing"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/instance"
	"slantwise/downlink/contacts/solve"
	"slantwise/downlink/contacts/verify"
)

// three passes over one antenna: a and b overlap, c lies apart.
func three() *contacts.Problem {
	pass := func(name string, craft int, from, to contacts.Ms, rate float64) contacts.Candidate {
		return contacts.Candidate{Name: name, Request: -1, Spacecraft: craft, Window: contacts.Span{From: from, To: to}, Least: to - from, Downlink: true,
			Links: []contacts.Link{{Transmitter: "X-band", PerByte: 1, Volume: []contacts.Point{{At: from}, {At: to, Bytes: (to - from).Seconds() * rate}}}}}
	}
	m := contacts.Minute
	return &contacts.Problem{
		Start: instance.Start, Length: contacts.Day, Spacecraft: []contacts.Spacecraft{{Name: "Invented 1"}, {Name: "Invented 2"}},
		Stations: []contacts.Station{{Name: "Site 1"}}, Antennas: []contacts.Antenna{{Name: "dish"}},
		Candidates: []contacts.Candidate{pass("a", 0, 10*m, 20*m, 1), pass("b", 1, 15*m, 25*m, 3), pass("c", 0, 60*m, 70*m, 2)},
	}
}

func solved(t *testing.T, p *contacts.Problem) contacts.Plan {
	t.Helper()
	r, err := solve.Solve(context.Background(), p, solve.Options{Rounds: 10})
	if err != nil {
		t.Fatal(err)
	}
	return r.Plan
}

func TestWindows(t *testing.T) {
	n := 1
	for _, row := range []struct {
		name   string
		change func(*contacts.Problem)
		window string
		want   Untaken
		text   string
	}{
		{"another took its place", nil, "a", Untaken{Possible: true, Worth: 600, Instead: []int{0}, Cost: 1200}, `antenna "dish" serves one contact at a time`},
		{"an outage", func(p *contacts.Problem) {
			p.Antennas[0].Closed = []contacts.Span{{From: contacts.Hour, To: 2 * contacts.Hour}}
		}, "c", Untaken{}, `antenna "dish" is closed`},
		{"one contact a day", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "a day", Spans: p.UTCDays(), Contacts: &n}}
		}, "c", Untaken{Possible: true, Worth: 1200, Instead: []int{0}, Cost: 600}, `limit "a day": 2 contacts begin`},
		{"worth nothing", func(p *contacts.Problem) { p.Candidates[2].Links = nil }, "c", Untaken{Possible: true, Cost: 0}, "adds nothing"},
	} {
		t.Run(row.name, func(t *testing.T) {
			p := three()
			if row.change != nil {
				row.change(p)
			}
			list, err := Windows(context.Background(), p, solved(t, p), nil)
			if err != nil {
				t.Fatal(err)
			}
			i := slices.IndexFunc(list, func(u Untaken) bool { return u.Name == row.window })
			if i < 0 {
				t.Fatalf("%q is not among %v", row.window, list)
			}
			u := list[i]
			if u.Possible != row.want.Possible || math.Abs(u.Worth-row.want.Worth) > 1e-6 || math.Abs(u.Cost-row.want.Cost) > 1e-6 || !slices.Equal(u.Instead, row.want.Instead) && len(u.Instead)+len(row.want.Instead) > 0 || !strings.Contains(u.Text, row.text) {
				t.Errorf("explained by %+v; want %+v and %q", u, row.want, row.text)
			}
		})
	}
}

// The cost that is said is kept: the plan with the window, judged by the checker, is worth
// the value of the plan less the cost, on problems with every rule.
func TestCostIsKept(t *testing.T) {
	for seed := range uint64(60) {
		p := instance.Small(seed, false)
		r, err := solve.Solve(context.Background(), p, solve.Options{Rounds: 3, Workers: 1})
		if err != nil {
			continue // what is fixed breaks rules
		}
		trials, err := solve.NewTrials(p, r.Plan)
		if err != nil {
			t.Fatal(err)
		}
		list, err := Windows(context.Background(), p, r.Plan, nil)
		if err != nil {
			t.Fatal(err)
		}
		for _, u := range list {
			trial, ok := trials.Take(u.Candidate)
			if ok != u.Possible {
				t.Errorf("seed %d, %s: possible %v, and then %v", seed, u.Name, u.Possible, ok)
			}
			if !ok {
				continue
			}
			if b := verify.Plan(p, trial.Plan); len(b) > 0 {
				t.Errorf("seed %d, %s: the plan with it breaks %v", seed, u.Name, b)
			}
			if !slices.ContainsFunc(trial.Plan.Contacts, func(c contacts.Contact) bool { return c.Candidate == u.Candidate }) {
				t.Errorf("seed %d, %s: the plan with it has no contact in it", seed, u.Name)
			}
			if trial.Value > r.Bound+1e-6*math.Abs(r.Bound) {
				t.Errorf("seed %d, %s: value %g with it is beyond the bound %g", seed, u.Name, trial.Value, r.Bound)
			}
		}
	}
}

func TestLimits(t *testing.T) {
	p := three()
	n := 1
	p.Limits = []contacts.Limit{{Name: "a day", Spans: p.UTCDays(), Contacts: &n}, {Name: "loose", Spans: p.UTCDays(), Contacts: &[]int{5}[0]}}
	list, err := Limits(context.Background(), p, solved(t, p), 5)
	if err != nil {
		t.Fatal(err)
	}
	// One contact a day is b (1800); two are b and c (3000). A second antenna is no help then.
	if len(list) != 2 || list[0].Name != "a day" || math.Abs(list[0].Gain-1200) > 1e-6 || list[0].AtMost < list[0].Gain || list[1].Gain != 0 {
		t.Errorf("worths %+v", list)
	}
	p.Limits = nil
	list, err = Limits(context.Background(), p, solved(t, p), 5)
	if err != nil {
		t.Fatal(err)
	}
	if len(list) != 1 || math.Abs(list[0].Gain-600) > 1e-6 || math.Abs(list[0].Hours-1.0/6) > 1e-9 {
		t.Errorf("without limits: worths %+v; a second antenna takes a as well", list)
	}
}

// TestRoundingIsNoCost: bytes of a day in another order of summing differ in the last digits.
func TestRoundingIsNoCost(t *testing.T) {
	for _, row := range []struct{ value, other, want float64 }{{2e10, 2e10 - 3.05176e-05, 0}, {2e10, 2e10 - 1, 1}, {0, 0, 0}, {5, 7, -2}} {
		if got := lost(row.value, row.other); got != row.want {
			t.Errorf("%g against %g: cost %g, want %g", row.value, row.other, got, row.want)
		}
	}
}
