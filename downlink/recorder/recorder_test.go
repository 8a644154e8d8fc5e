package recorder_test

import (
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/downlink/recorder"
)

var monday = time.Date(2026, 3, 9, 0, 0, 0, 0, time.UTC)

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.9g, want %.9g, difference %.3g over %.3g", what, got, want, got-want, tol)
	}
}

func run(t *testing.T, p recorder.Plan) *recorder.Result {
	t.Helper()
	if p.Start.IsZero() {
		p.Start = monday
	}
	r, err := recorder.Simulate(&p)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func contact(station string, from, to, rate, loss float64, uplink bool) recorder.Contact {
	return recorder.Contact{Station: station, From: from, To: to, Uplink: uplink, Steps: []recorder.Step{{From: from, To: to, BytesPerSecond: rate, Loss: loss}}}
}

// mostStored is the greatest filling of a course and when it is first reached.
func mostStored(r *recorder.Result) recorder.Point {
	most := r.Course[0]
	for _, p := range r.Course {
		if p.Stored > most.Stored {
			most = p
		}
	}
	return most
}

// simple is one class of 10 B/s over 1000 s, and a contact of 100 B/s from 500 to 600 s.
func simple() recorder.Plan {
	return recorder.Plan{
		Length: 1000, Capacity: 1e6,
		Classes:  []recorder.Class{{Name: "images", Made: recorder.ByTime(1000, 10)}},
		Contacts: []recorder.Contact{contact("Skerry", 500, 600, 100, 0, false)},
	}
}

// Worked by hand: 5000 B wait at 500 s; 100 B/s against 10 B/s empty the recorder at
// 555.56 s; from then on data go straight through. In all 6000 B arrive, 4000 B stay.
// Ages fall evenly from 500 s to 0 for the first 5555.56 B, and are 0 for the rest: the
// median of 6000 B is where 3000 of 5555.56 B are younger, less the 444.44 B of age 0.
func TestByHand(t *testing.T) {
	r := run(t, simple())
	c := r.Classes[0]
	near(t, "made", c.Made, 10000, 1e-6)
	near(t, "received", c.Received, 6000, 1e-6)
	near(t, "on board", c.OnBoardEnd, 4000, 1e-6)
	near(t, "backlog after the contact", r.Contacts[0].Backlog, 0, 1e-6)
	near(t, "offered", r.Contacts[0].Offered, 10000, 1e-6)
	near(t, "most stored", mostStored(r).Stored, 5000, 1e-6)
	near(t, "when", mostStored(r).Seconds, 500, 1e-6)
	near(t, "worst age", r.Latency.AtStation.Worst, 500, 1e-6)
	near(t, "median age", r.Latency.AtStation.Median, 500*(3000-6000+50000.0/9)/(50000.0/9), 1e-3)
	near(t, "95 % age", r.Latency.AtStation.P95, 500*(0.95*6000-6000+50000.0/9)/(50000.0/9), 1e-3)
	near(t, "age at the user", r.Latency.AtUser.Worst, 500, 1e-6)
}

// With a recorder of 3000 B: full at 300 s. Lost till 500 s: 2000 B either way, but
// the oldest data on board are then from 0 s or from 200 s.
func TestFull(t *testing.T) {
	for _, c := range []struct {
		rule  recorder.FullRule
		worst float64
	}{{recorder.LoseNew, 500}, {recorder.Overwrite, 300}} {
		p := simple()
		p.Capacity, p.WhenFull = 3000, c.rule
		r := run(t, p)
		near(t, c.rule.String()+": lost", r.Classes[0].LostFull, 2000+1000, 0.01) // and 1000 B after 900 s
		near(t, c.rule.String()+": worst age", r.Latency.AtStation.Worst, c.worst, 0.01)
		near(t, c.rule.String()+": most stored", mostStored(r).Stored, 3000, 0.01)
	}
}

// TestPriority: the last class loses first and is sent last. 10 B/s of each; the
// contact carries 100 B/s for 20 s, all of it for the first class, which has 5000 B.
func TestPriority(t *testing.T) {
	p := simple()
	p.Classes = []recorder.Class{{Name: "first", Made: recorder.ByTime(1000, 10)}, {Name: "second", Made: recorder.ByTime(1000, 10)}}
	p.Contacts = []recorder.Contact{contact("Skerry", 500, 520, 100, 0, false)}
	r := run(t, p)
	near(t, "first received", r.Classes[0].Received, 2000, 1e-6)
	near(t, "second received", r.Classes[1].Received, 0, 1e-6)
	// Full at 400 s; the contact makes room for 2000 B, which last from 500 s to 600 s:
	// 100 s and 400 s without room.
	p.Capacity = 8000
	r = run(t, p)
	near(t, "first lost", r.Classes[0].LostFull, 5000, 0.01)
	near(t, "second lost", r.Classes[1].LostFull, 5000, 0.01)
	// Overwriting, the first class takes the room of the second: 10000 B less 2000 B
	// sent fill it.
	p.WhenFull = recorder.Overwrite
	r = run(t, p)
	near(t, "first lost, overwriting", r.Classes[0].LostFull, 0, 0.01)
	near(t, "second lost, overwriting", r.Classes[1].LostFull, 10000, 0.01)
}

// TestAcknowledged: half of what is sent fails. Without uplink it is lost; with one it
// is sent again until it is through: 1000 B at 100 B/s, acknowledged each 10 s.
func TestAcknowledged(t *testing.T) {
	p := recorder.Plan{Length: 1000, Capacity: 1e6, Classes: []recorder.Class{{Name: "a", OnBoard: 1000}}}
	p.Contacts = []recorder.Contact{contact("Skerry", 500, 900, 100, 0.5, false)}
	r := run(t, p)
	near(t, "received without uplink", r.Classes[0].Received, 500, 1e-6)
	near(t, "lost on the way", r.Classes[0].LostOnTheWay, 500, 1e-6)
	p.Copies = 2
	near(t, "received of two copies", run(t, p).Classes[0].Received, 750, 1e-6)
	p.Copies = 0
	p.Contacts[0].Uplink = true
	p.Acknowledge = recorder.Acknowledge{Every: 10, Delay: 1}
	r = run(t, p)
	near(t, "received with uplink", r.Classes[0].Received, 1000, 1)
	near(t, "left on board", r.Classes[0].OnBoardEnd, 0, 1)
	if r.Contacts[0].Sent < 1900 || r.Contacts[0].Sent > 2001 {
		t.Errorf("sent %.1f B for 1000 B at a loss of one half; want about 2000", r.Contacts[0].Sent)
	}
	// Kept for a later uplink: all of it takes room until then.
	p.WithoutUplink = recorder.KeepForUplink
	p.Contacts = []recorder.Contact{contact("Fell", 100, 200, 100, 0.5, false), contact("Skerry", 500, 501, 100, 0, true)}
	r = run(t, p)
	for _, c := range r.Course {
		if c.Seconds > 200 && c.Seconds < 500 && math.Abs(c.Stored-1000) > 1e-6 {
			t.Errorf("at %g s %.1f B take room, want all 1000", c.Seconds, c.Stored)
		}
	}
	near(t, "received", r.Classes[0].Received, 600, 1e-6) // 500 at Fell, 100 more in the second at Skerry
}

// TestGroundLine: 5000 B come at 100 B/s and leave at 50 B/s: the last byte is 50 s
// later at the user. A second contact finds the line free again.
func TestGroundLine(t *testing.T) {
	p := recorder.Plan{Length: 1000, Capacity: 1e6, Classes: []recorder.Class{{Name: "a", OnBoard: 5000}}}
	p.Contacts = []recorder.Contact{contact("Skerry", 100, 200, 100, 0, false)}
	p.Lines = []recorder.Line{{Station: "Skerry", BytesPerSecond: 50}}
	r := run(t, p)
	near(t, "worst at the station", r.Latency.AtStation.Worst, 150, 1e-6)
	near(t, "worst at the user", r.Latency.AtUser.Worst, 200, 1e-6)
	near(t, "median at the user", r.Latency.AtUser.Median, 150, 1e-6)
	near(t, "on the line at the end", r.OnLine, 0, 1e-6)
	p.Length = 210
	p.Lines[0].BytesPerSecond = 25 // through at 300 s
	near(t, "on the line at 210 s", run(t, p).OnLine, 5000-110*25, 1e-6)
	// The line catches up: 50 s at 100 B/s, then 10 B/s straight from the making. The
	// queue of 2500 B at 150 s shrinks by 40 B/s, and is gone at 212.5 s.
	p = recorder.Plan{Length: 1000, Capacity: 1e6, Classes: []recorder.Class{{Name: "a", OnBoard: 5000, Made: []recorder.Made{{From: 150, To: 400, BytesPerSecond: 10}}}}}
	p.Contacts = []recorder.Contact{contact("Skerry", 100, 400, 100, 0, false)}
	p.Lines = []recorder.Line{{Station: "Skerry", BytesPerSecond: 50}}
	r = run(t, p)
	near(t, "worst at the user", r.Latency.AtUser.Worst, 200, 1e-6) // the last of the old data
	// The new 2500 B have ages of at most 50 s, the old ones of 100 s to 200 s at 50 B/s:
	// 3750 B are younger than 125 s.
	near(t, "median at the user", r.Latency.AtUser.Median, 125, 1e-6)
}

func TestVolumes(t *testing.T) {
	p := recorder.Plan{Start: monday.Add(-2 * time.Hour), Length: 4 * 86400, Capacity: 1e9}
	p.Classes = []recorder.Class{{Name: "a", OnBoard: 1e6}}
	p.Contacts = []recorder.Contact{
		contact("Skerry", 7150, 7250, 100, 0, false), // half on Sunday, half on Monday
		contact("Fell", 8000, 8100, 100, 0, false),
		contact("Skerry", 9000, 9100, 100, 0, false),
	}
	r := run(t, p)
	want := []recorder.Volume{
		{Station: "Skerry", From: monday.AddDate(0, 0, -1), Bytes: 5000},
		{Station: "Fell", From: monday, Bytes: 10000},
		{Station: "Skerry", From: monday, Bytes: 15000},
	}
	if len(r.Days) != len(want) {
		t.Fatalf("days: got %+v", r.Days)
	}
	for i, w := range want {
		if d := r.Days[i]; d.Station != w.Station || !d.From.Equal(w.From) || math.Abs(d.Bytes-w.Bytes) > 1e-6 {
			t.Errorf("day %d: got %+v, want %+v", i, d, w)
		}
	}
	if len(r.Weeks) != 3 || !r.Weeks[0].From.Equal(monday.AddDate(0, 0, -7)) || !r.Weeks[1].From.Equal(monday) {
		t.Errorf("weeks: got %+v", r.Weeks)
	}
}

func TestByOrbit(t *testing.T) {
	p := simple()
	p.Classes[0].Made = recorder.ByOrbit([]float64{0, 300, 900}, 50, 100, 700)
	r := run(t, p)
	near(t, "made", r.Classes[0].Made, 2*700+350, 1e-6) // the last is cut by the end
}

func TestHousekeeping(t *testing.T) {
	p := simple()
	p.Housekeeping = 0.25
	r := run(t, p)
	near(t, "offered", r.Contacts[0].Offered, 7500, 1e-6)
	near(t, "housekeeping", r.Contacts[0].Housekeeping, 2500, 1e-6)
}

func TestNothingArrives(t *testing.T) {
	p := simple()
	p.Contacts = nil
	r := run(t, p)
	if !math.IsNaN(r.Latency.AtStation.Median) || !math.IsNaN(r.Classes[0].Latency.AtUser.Worst) {
		t.Errorf("ages of nothing: got %+v", r.Latency)
	}
	near(t, "on board", r.Classes[0].OnBoardEnd, 10000, 1e-6)
}

func TestBadInput(t *testing.T) {
	for _, c := range []struct {
		name   string
		change func(*recorder.Plan)
		want   string
	}{
		{"length", func(p *recorder.Plan) { p.Length = math.NaN() }, "length: NaN s is not allowed"},
		{"capacity", func(p *recorder.Plan) { p.Capacity = 0 }, "capacity: 0 B is not allowed; it must be greater than 0 and at most 1e15 B"},
		{"housekeeping", func(p *recorder.Plan) { p.Housekeeping = 1 }, "share of housekeeping: 1 is not allowed; it must be 0 and more, less than 1"},
		{"classes", func(p *recorder.Plan) { p.Classes = nil }, "there is no class of data"},
		{"class twice", func(p *recorder.Plan) { p.Classes = append(p.Classes, p.Classes[0]) }, `class "images": the name stands twice`},
		{"made", func(p *recorder.Plan) { p.Classes[0].Made[0].To = -1 }, `class "images": data made from 0 to -1 s`},
		{"rate", func(p *recorder.Plan) { p.Classes[0].Made[0].BytesPerSecond = math.Inf(1) }, `class "images": rate: +Inf B/s`},
		{"too much on board", func(p *recorder.Plan) { p.Classes[0].OnBoard = 2e6 }, "2e+06 B are on board at the start"},
		{"contact beyond", func(p *recorder.Plan) { p.Contacts[0].To = 1001 }, "contact 1 (Skerry): it lasts from 500 to 1001 s"},
		{"overlap", func(p *recorder.Plan) { p.Contacts = append(p.Contacts, contact("Fell", 599, 700, 1, 0, false)) }, "contact 2 (Fell): it begins at 599 s"},
		{"loss", func(p *recorder.Plan) { p.Contacts[0].Steps[0].Loss = 1.1 }, "contact 1 (Skerry): share lost: 1.1"},
		{"step", func(p *recorder.Plan) { p.Contacts[0].Steps[0].To = 601 }, "contact 1 (Skerry): step from 500 to 601 s"},
		{"acknowledge", func(p *recorder.Plan) { p.Contacts[0].Uplink = true }, "time between acknowledgements: 0 s"},
		{"kept for ever", func(p *recorder.Plan) { p.WithoutUplink = recorder.KeepForUplink }, "data are kept until an uplink acknowledges them, and no contact has one; take delete_when_sent"},
		{"line", func(p *recorder.Plan) { p.Lines = []recorder.Line{{Station: "Skerry"}} }, `ground line of "Skerry": 0 B/s`},
		{"copies", func(p *recorder.Plan) { p.Copies = -1 }, "copies: -1"},
	} {
		p := simple()
		c.change(&p)
		if _, err := recorder.Simulate(&p); err == nil || !strings.HasPrefix(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %s", c.name, err, c.want)
		}
	}
}
