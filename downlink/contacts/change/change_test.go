package change

import (
	"context"
	"testing"
	"time"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/instance"
	"slantwise/downlink/contacts/solve"
	"slantwise/downlink/contacts/verify"
)

func network(t testing.TB) *contacts.Problem {
	t.Helper()
	p, err := instance.Passes(instance.Network{Seed: 1, Spacecraft: 10, Stations: 5, Days: 7, Crowded: 0.4})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func solved(t testing.TB, p *contacts.Problem, rounds int) solve.Result {
	t.Helper()
	r, err := solve.Solve(context.Background(), p, solve.Options{Rounds: rounds})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// replanned is the plan after an antenna has failed from the third day's noon for six
// hours, with a price a change.
func replanned(t testing.TB, p *contacts.Problem, plan contacts.Plan, price float64, rounds int) (*contacts.Problem, solve.Result) {
	t.Helper()
	q := *p
	q.Now = 2*contacts.Day + 12*contacts.Hour
	q.Weights.Change = price
	q.Antennas = append([]contacts.Antenna{}, p.Antennas...)
	q.Antennas[0].Closed = []contacts.Span{{From: q.Now, To: q.Now + 6*contacts.Hour}}
	for i := range q.Stations {
		q.Stations = append([]contacts.Station{}, q.Stations...)
		q.Stations[i].Lead = contacts.Hour
	}
	if lost := Carry(p, plan, &q); len(lost) > 0 {
		t.Fatalf("lost %v", lost)
	}
	// What runs on the antenna as it fails is no promise any more.
	for i := 0; i < len(q.Held); i++ {
		if !q.Stands(q.Held[i]) {
			q.Held = append(q.Held[:i], q.Held[i+1:]...)
			i--
		}
	}
	r, err := solve.Solve(context.Background(), &q, solve.Options{Rounds: rounds, Start: &contacts.Plan{Contacts: append(append([]contacts.Contact{}, q.Held...), q.InForce...)}})
	if err != nil {
		t.Fatal(err)
	}
	return &q, r
}

func TestReplanAfterAnOutage(t *testing.T) {
	p := network(t)
	first := solved(t, p, 1)
	dear := 0.0
	changes := map[bool]int{}
	for _, free := range []bool{true, false} {
		price := 0.0
		if !free {
			price = first.Value / 500
		}
		q, r := replanned(t, p, first.Plan, price, 2)
		if b := verify.Plan(q, r.Plan); len(b) > 0 {
			t.Fatal(b)
		}
		for _, d := range Compare(p, first.Plan, q, r.Plan) {
			if d.Kind == Kept {
				continue
			}
			changes[free]++
			if when := d.when(); when.Before(q.At(q.Now)) {
				t.Errorf("%s at %s, which is over", d.Kind, when)
			}
			if d.Kind == Added && d.IsStart.Before(q.At(q.Now+contacts.Hour)) {
				t.Errorf("added at %s, before it can be booked", d.IsStart)
			}
		}
		dear = r.Value
	}
	if changes[true] <= changes[false] || dear <= 0 {
		t.Errorf("%d changes when they cost nothing, %d when they are dear", changes[true], changes[false])
	}
}

func TestCompare(t *testing.T) {
	start := time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)
	make1 := func(at time.Time) *contacts.Problem {
		p := &contacts.Problem{Start: at, Length: contacts.Day, Split: true}
		row := contacts.WindowRow{Place: "row", Request: "R", Spacecraft: "Wagtail 1", Station: "Skerry Point", Antenna: "dish",
			Start: start.Add(time.Hour), End: start.Add(5 * time.Hour), MinimumS: 60, DesiredS: 6000, ValuePerS: 1}
		if err := p.AddWindows([]contacts.WindowRow{row}); err != nil {
			t.Fatal(err)
		}
		return p
	}
	p, q := make1(start), make1(start.Add(-time.Hour))
	plan := func(p *contacts.Problem, minutes ...int) contacts.Plan {
		var out contacts.Plan
		for i := 0; i < len(minutes); i += 2 {
			at := func(m int) contacts.Ms { return p.Ms(start.Add(time.Duration(m) * time.Minute)) }
			out.Contacts = append(out.Contacts, contacts.Contact{Span: contacts.Span{From: at(minutes[i]), To: at(minutes[i+1])}})
		}
		return out
	}
	got := Compare(p, plan(p, 60, 70, 80, 90, 100, 110), q, plan(q, 60, 70, 85, 95, 120, 130))
	want := []Kind{Kept, Moved, Dropped, Added}
	if len(got) != len(want) {
		t.Fatalf("differences %v", got)
	}
	for i := range want {
		if got[i].Kind != want[i] {
			t.Errorf("difference %d is %s, want %s", i, got[i].Kind, want[i])
		}
	}
}

func TestCarryHoldsWhatIsUnderWay(t *testing.T) {
	p := network(t)
	r := solved(t, p, 1)
	q := network(t)
	q.Now = contacts.Day
	q.Candidates = q.Candidates[:0] // new elements: every window is gone
	lost := Carry(p, r.Plan, q)
	begun := 0
	for _, c := range r.Plan.Contacts {
		if p.Busy(c).From <= q.Now {
			begun++
		}
	}
	if len(q.Held) != begun || len(lost) != len(r.Plan.Contacts)-begun || len(q.InForce) != 0 {
		t.Errorf("%d held, %d lost, %d in force; %d of %d contacts have begun", len(q.Held), len(lost), len(q.InForce), begun, len(r.Plan.Contacts))
	}
	if err := q.Check(); err != nil {
		t.Error(err)
	}
}

// BenchmarkReplan is a new plan after an outage for ten spacecraft and five stations.
func BenchmarkReplan(b *testing.B) {
	p := network(b)
	first := solved(b, p, 10)
	for b.Loop() {
		_, r := replanned(b, p, first.Plan, first.Value/5000, 4)
		b.ReportMetric(r.GapPercent, "gap_percent")
	}
}
