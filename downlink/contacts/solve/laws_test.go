package solve

import (
	"context"
	"math"
	"testing"
	"time"
	_ "time/tzdata" // the zones of the tests, on machines without them

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/instance"
)

// optimum returns the proven optimum, or false where it was not proven.
func optimum(t *testing.T, p *contacts.Problem) (float64, bool) {
	t.Helper()
	r, err := Solve(context.Background(), p, Options{Rounds: 60, Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	return r.Value, r.Proven
}

// small are problems whose optimum is proven fast, plain ones and a few requests.
func small(t *testing.T, seed uint64) *contacts.Problem {
	t.Helper()
	if seed%2 == 0 {
		return instance.Small(seed, true)
	}
	p, err := middling(seed, 5, 10, false).Problem()
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// seeds is how many problems the laws are tried on. Seed 27 once had a part of the tree
// thrown away that held the optimum.
const seeds = 28

func TestLessIsNeverMore(t *testing.T) {
	if testing.Short() {
		t.Skip("some seconds")
	}
	one := 1
	compared := 0
	for seed := range uint64(seeds) {
		base, ok := optimum(t, small(t, seed))
		if !ok {
			continue
		}
		for name, change := range map[string]func(p *contacts.Problem){
			"without an antenna": func(p *contacts.Problem) {
				p.Antennas[0].Closed = []contacts.Span{{From: -contacts.Hour, To: p.Length + contacts.Hour}}
			},
			"one contact a spacecraft": func(p *contacts.Problem) {
				p.Limits = []contacts.Limit{{Name: "one", Spacecraft: []int{0}, Spans: p.UTCDays(), Contacts: &one}}
			},
			"an hour between contacts": func(p *contacts.Problem) { p.Spacecraft[0].Between = contacts.Hour },
			"one radio chain": func(p *contacts.Problem) {
				p.Shared = []contacts.Shared{{Name: "chain", Antennas: []int{0, 1}, Capacity: 1}}
			},
			"a longer set-up": func(p *contacts.Problem) {
				for i := range p.Candidates {
					p.Candidates[i].SetUp += contacts.Minute
				}
			},
		} {
			p := small(t, seed)
			change(p)
			if got, ok := optimum(t, p); ok {
				compared++
				if got > base*(1+1e-6)+1e-6 {
					t.Errorf("seed %d, %s: %g, and %g before", seed, name, got, base)
				}
			}
		}
	}
	if compared < 3*seeds {
		t.Errorf("only %d optima were proven and compared", compared)
	}
}

func TestShiftInTimeChangesNothing(t *testing.T) {
	if testing.Short() {
		t.Skip("some seconds")
	}
	two := 2
	for seed := range uint64(seeds) {
		with := func(shift contacts.Ms) *contacts.Problem {
			p := small(t, seed)
			days := p.UTCDays()
			p.Limits = []contacts.Limit{{Name: "two a day", Spacecraft: []int{0}, Spans: days, Contacts: &two}}
			p.Start = p.Start.Add(-time.Duration(shift) * time.Millisecond)
			p.Length += shift
			for i := range days {
				days[i].From, days[i].To = days[i].From+shift, days[i].To+shift
			}
			for i := range p.Candidates {
				c := &p.Candidates[i]
				c.Window.From, c.Window.To = c.Window.From+shift, c.Window.To+shift
				for k := range c.Links {
					for v := range c.Links[k].Volume {
						c.Links[k].Volume[v].At += shift
					}
				}
			}
			return p
		}
		a, okA := optimum(t, with(0))
		b, okB := optimum(t, with(37*contacts.Hour+13*contacts.Minute))
		if okA != okB || math.Abs(a-b) > 1e-6*math.Abs(a) {
			t.Errorf("seed %d: %g (proven %v), later %g (proven %v)", seed, a, okA, b, okB)
		}
	}
}

// Between the UTC days of 28 and 29 March 2026 London changes to summer time: its 29 March
// lasts from 00:00 to 23:00 UTC. At Kiritimati a day begins at 10:00 UTC, at Pago Pago, on
// the other side of the date line, at 11:00 (IANA time zone database 2024a).
func TestDaysOfLimits(t *testing.T) {
	start := time.Date(2026, 3, 28, 0, 0, 0, 0, time.UTC)
	one := 1
	for _, row := range []struct {
		zone     string
		contacts int // with one a day of the windows below
	}{{"UTC", 2}, {"Europe/London", 3}, {"Pacific/Kiritimati", 2}, {"Pacific/Pago_Pago", 2}} {
		p := &contacts.Problem{Start: start, Length: 3 * contacts.Day}
		for i, at := range []time.Duration{23*time.Hour + 10*time.Minute, 46*time.Hour + 30*time.Minute, 47*time.Hour + 30*time.Minute} {
			err := p.AddWindows([]contacts.WindowRow{{Place: "row", Request: string(rune('A' + i)), Spacecraft: "Wagtail 1", Station: "Skerry Point", Antenna: "dish",
				Start: start.Add(at), End: start.Add(at + 10*time.Minute), MinimumS: 60, DesiredS: 600, ValuePerS: 1}})
			if err != nil {
				t.Fatal(err)
			}
		}
		zone, err := time.LoadLocation(row.zone)
		if err != nil {
			t.Fatal(err)
		}
		p.Limits = []contacts.Limit{{Name: "one a day", Spans: p.LocalDays(zone), Contacts: &one}}
		r, err := Solve(context.Background(), p, Options{Rounds: 50})
		if err != nil {
			t.Fatal(err)
		}
		if len(r.Plan.Contacts) != row.contacts || !r.Proven {
			t.Errorf("%s: %d contacts (proven %v), want %d", row.zone, len(r.Plan.Contacts), r.Proven, row.contacts)
		}
	}
}
