package verify

import (
	"math"
	"slices"
	"testing"
	"time"

	"slantwise/downlink/contacts"
)

const (
	second = contacts.Second
	minute = contacts.Minute
	hour   = contacts.Hour
)

// network is two spacecraft over two stations, one with two antennas. Passes 0 and 1 are
// of spacecraft 0 at antennas 0 and 2, pass 2 of spacecraft 1 at antenna 0, window 3
// serves request 0 at antenna 1, pass 4 is spacecraft 0 at antenna 2 later on.
func network() *contacts.Problem {
	pass := func(name string, craft, antenna int, from, to contacts.Ms) contacts.Candidate {
		return contacts.Candidate{Name: name, Request: -1, Spacecraft: craft, Antenna: antenna, Window: contacts.Span{From: from, To: to},
			Least: minute, SetUp: 30 * second, TearDown: 30 * second, Downlink: true, Uplink: true,
			Links: []contacts.Link{{Transmitter: "X-band", PerByte: 1, Volume: []contacts.Point{{At: from, Bytes: 0}, {At: to, Bytes: (to - from).Seconds() * 100}}}}}
	}
	p := &contacts.Problem{
		Start: time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC), Length: contacts.Day,
		Spacecraft: []contacts.Spacecraft{{Name: "Wagtail 1"}, {Name: "Wagtail 2"}},
		Stations:   []contacts.Station{{Name: "Skerry Point"}, {Name: "Dry Fell"}},
		Antennas:   []contacts.Antenna{{Name: "dish", Station: 0}, {Name: "mast", Station: 0}, {Name: "dish", Station: 1}},
		Requests:   []contacts.Request{{Name: "R", Desired: 5 * minute}},
		Candidates: []contacts.Candidate{
			pass("a", 0, 0, hour, hour+10*minute),
			pass("b", 0, 2, hour+5*minute, hour+15*minute),
			pass("c", 1, 0, hour+8*minute, hour+18*minute),
			{Name: "d", Request: 0, Spacecraft: 1, Antenna: 1, Window: contacts.Span{From: hour, To: 3 * hour}, Least: minute, PerSecond: 2, Downlink: true},
			pass("e", 0, 2, 4*hour, 4*hour+10*minute),
		},
	}
	return p
}

func take(candidate int, from, to contacts.Ms) contacts.Contact {
	return contacts.Contact{Candidate: candidate, Span: contacts.Span{From: from, To: to}}
}

func rules(b []Breach) []string {
	out := []string{}
	for _, x := range b {
		if !slices.Contains(out, x.Rule) {
			out = append(out, x.Rule)
		}
	}
	return out
}

func ptr[T any](v T) *T { return &v }

func TestRules(t *testing.T) {
	whole := []contacts.Contact{take(0, hour, hour+10*minute)}
	both := []contacts.Contact{take(0, hour, hour+6*minute), take(1, hour+6*minute, hour+15*minute)}
	for _, row := range []struct {
		name   string
		change func(*contacts.Problem)
		plan   []contacts.Contact
		want   []string
	}{
		{"all is well", nil, whole, nil},
		{"touching contacts of a spacecraft", nil, both, nil},
		{"antenna with a minute between", nil, []contacts.Contact{take(0, hour, hour+7*minute), take(2, hour+8*minute, hour+18*minute)}, nil},
		{"before the window", nil, []contacts.Contact{take(0, hour-second, hour+10*minute)}, []string{RuleWindow}},
		{"no window", nil, []contacts.Contact{take(7, hour, hour+10*minute)}, []string{RuleWindow}},
		{"too short", nil, []contacts.Contact{take(0, hour, hour+59*second)}, []string{RuleLength}},
		{"too long", func(p *contacts.Problem) { p.Candidates[0].Greatest = 5 * minute }, whole, []string{RuleLength}},
		{"between steps", nil, []contacts.Contact{take(0, hour+1, hour+10*minute)}, []string{RuleStep}},
		{"outage in the tear-down", func(p *contacts.Problem) {
			p.Antennas[0].Closed = []contacts.Span{{From: hour + 10*minute + 29*second, To: 2 * hour}}
		}, whole, []string{RuleClosed}},
		{"outage after the tear-down", func(p *contacts.Problem) {
			p.Stations[0].Closed = []contacts.Span{{From: hour + 10*minute + 30*second, To: 2 * hour}}
		}, whole, nil},
		{"manoeuvre", func(p *contacts.Problem) {
			p.Spacecraft[0].Closed = []contacts.Span{{From: hour + 10*minute - 1, To: 2 * hour}}
		}, whole, []string{RuleClosed}},
		{"shift begins after the set-up", func(p *contacts.Problem) {
			p.Stations[0].Staffed = []contacts.Span{{From: hour, To: 2 * hour}}
		}, whole, []string{RuleStaff}},
		{"two shifts that touch", func(p *contacts.Problem) {
			p.Stations[0].Staffed = []contacts.Span{{From: hour + 5*minute, To: 2 * hour}, {From: 0, To: hour + 5*minute}}
		}, whole, nil},
		{"too late to book", func(p *contacts.Problem) { p.Now, p.Stations[0].Lead = hour-2*minute, 2*minute }, whole, []string{RuleLead}},
		{"booked before", func(p *contacts.Problem) {
			p.Now, p.Stations[0].Lead, p.InForce = hour-2*minute, 2*minute, whole
		}, whole, nil},
		{"too late to cancel", func(p *contacts.Problem) {
			p.Now, p.Stations[0].Notice, p.InForce = hour-2*minute, 2*minute, whole
		}, nil, []string{RuleHeld}},
		{"fixed and moved", func(p *contacts.Problem) { p.Held = whole }, []contacts.Contact{take(0, hour, hour+9*minute)}, []string{RuleHeld}},
		{"antenna, tear-down and set-up overlap", nil, []contacts.Contact{take(0, hour, hour+7*minute+second), take(2, hour+8*minute, hour+18*minute)}, []string{RuleAntenna}},
		{"two stations", nil, []contacts.Contact{take(0, hour, hour+6*minute+second), take(1, hour+6*minute, hour+15*minute)}, []string{RuleSpacecraft}},
		{"two stations allowed", func(p *contacts.Problem) { p.Spacecraft[0].AtOnce = 2 }, []contacts.Contact{take(0, hour, hour+9*minute), take(1, hour+6*minute, hour+15*minute)}, nil},
		{"overlap too short", func(p *contacts.Problem) {
			p.Spacecraft[0].AtOnce, p.Spacecraft[0].HandOver = 2, contacts.HandOver{Least: minute, Greatest: 2 * minute}
		}, []contacts.Contact{take(0, hour, hour+7*minute-second), take(1, hour+6*minute, hour+15*minute)}, []string{RuleHandOver}},
		{"overlap too long", func(p *contacts.Problem) {
			p.Spacecraft[0].AtOnce, p.Spacecraft[0].HandOver = 2, contacts.HandOver{Least: minute, Greatest: 2 * minute}
		}, []contacts.Contact{take(0, hour, hour+8*minute+second), take(1, hour+6*minute, hour+15*minute)}, []string{RuleHandOver}},
		{"no time to turn", func(p *contacts.Problem) { p.Spacecraft[0].Repoint = second }, both, []string{RuleHandOver}},
		{"no time between", func(p *contacts.Problem) { p.Spacecraft[0].Between = second }, both, []string{RuleHandOver}},
		{"command missing", func(p *contacts.Problem) { p.Spacecraft[0].Command = &contacts.Command{Lead: minute} }, whole, []string{RuleCommand}},
		{"command loaded before the plan", func(p *contacts.Problem) {
			p.Spacecraft[0].Command = &contacts.Command{Lead: minute, Valid: 2 * hour, Loaded: []contacts.Ms{-hour}}
		}, whole, nil},
		{"command too old", func(p *contacts.Problem) {
			p.Spacecraft[0].Command = &contacts.Command{Lead: minute, Valid: 2 * hour, Loaded: []contacts.Ms{-hour - 1}}
		}, whole, []string{RuleCommand}},
		{"command from a contact", func(p *contacts.Problem) {
			p.Spacecraft[0].Command, p.Candidates[0].Downlink = &contacts.Command{Lead: 10 * second}, false
		}, []contacts.Contact{take(0, hour, hour+6*minute), take(1, hour+6*minute+10*second, hour+15*minute)}, nil},
		{"command too young", func(p *contacts.Problem) {
			p.Spacecraft[0].Command, p.Candidates[0].Downlink = &contacts.Command{Lead: 11 * second}, false
		}, []contacts.Contact{take(0, hour, hour+6*minute), take(1, hour+6*minute+10*second, hour+15*minute)}, []string{RuleCommand}},
		{"twice a request", nil, []contacts.Contact{take(3, hour, hour+minute), take(3, 2*hour, 2*hour+minute)}, []string{RuleOnce}},
		{"twice a request, split", func(p *contacts.Problem) { p.Split = true }, []contacts.Contact{take(3, hour, hour+minute), take(3, 2*hour, 2*hour+minute)}, nil},
		{"twice a pass", nil, []contacts.Contact{take(0, hour, hour+minute), take(0, hour+5*minute, hour+6*minute)}, []string{RuleOnce}},
		{"contacts a day", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "l", Spacecraft: []int{0}, Spans: p.UTCDays(), Contacts: ptr(1)}}
		}, both, []string{RuleLimit}},
		{"contacts a day of another", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "l", Spacecraft: []int{1}, Spans: p.UTCDays(), Contacts: ptr(0)}}
		}, both, nil},
		{"time over two days", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "l", Spans: []contacts.Span{{From: 0, To: hour + 5*minute}, {From: hour + 5*minute, To: contacts.Day}}, Time: ptr(10 * minute)}}
		}, both, nil},
		{"time of a contract", func(p *contacts.Problem) {
			p.Antennas[2].Contract = "Fell"
			p.Limits = []contacts.Limit{{Name: "l", Contract: "Fell", Time: ptr(9*minute - 1)}}
		}, both, []string{RuleLimit}},
		{"any three hours, contacts", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "l", Rolling: 3*hour - 6*minute, Contacts: ptr(1)}}
		}, []contacts.Contact{take(1, hour+6*minute, hour+15*minute), take(4, 4*hour, 4*hour+10*minute)}, nil},
		{"any three hours, contacts, one more", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "l", Rolling: 3*hour - 6*minute + 1, Contacts: ptr(1)}}
		}, []contacts.Contact{take(1, hour+6*minute, hour+15*minute), take(4, 4*hour, 4*hour+10*minute)}, []string{RuleLimit}},
		{"any three hours, time", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "l", Rolling: 3 * hour, Time: ptr(14 * minute)}}
		}, []contacts.Contact{take(1, hour+6*minute, hour+15*minute), take(4, 4*hour, 4*hour+10*minute)}, []string{RuleLimit}},
		{"any three hours, time that fits", func(p *contacts.Problem) {
			p.Limits = []contacts.Limit{{Name: "l", Rolling: 3 * hour, Time: ptr(15 * minute)}}
		}, []contacts.Contact{take(1, hour+6*minute, hour+15*minute), take(4, 4*hour, 4*hour+10*minute)}, nil},
		{"budget", func(p *contacts.Problem) {
			p.Antennas[0].PerContact, p.Antennas[2].PerMinute = 10, 2
			p.Limits = []contacts.Limit{{Name: "l", Price: ptr(27.9)}}
		}, both, []string{RuleLimit}},
		{"budget that lasts", func(p *contacts.Problem) {
			p.Antennas[0].PerContact, p.Antennas[2].PerMinute = 10, 2
			p.Limits = []contacts.Limit{{Name: "l", Price: ptr(28.0)}}
		}, both, nil},
		{"one radio chain", func(p *contacts.Problem) {
			p.Shared = []contacts.Shared{{Name: "s", Antennas: []int{0, 1}, Capacity: 1}}
		}, []contacts.Contact{whole[0], take(3, hour+10*minute, hour+15*minute)}, nil},
		{"one operator", func(p *contacts.Problem) {
			p.Shared = []contacts.Shared{{Name: "s", Antennas: []int{0, 1}, Capacity: 1, Busy: true}}
		}, []contacts.Contact{whole[0], take(3, hour+10*minute, hour+15*minute)}, []string{RuleShared}},
		{"one beam", func(p *contacts.Problem) {
			p.Clashes = []contacts.Clash{{A: 3, B: 0, Spans: []contacts.Span{{From: hour + 9*minute, To: 2 * hour}}}}
		}, []contacts.Contact{whole[0], take(3, hour+5*minute, hour+10*minute)}, []string{RuleClash}},
		{"one beam at another time", func(p *contacts.Problem) {
			p.Clashes = []contacts.Clash{{A: 3, B: 0, Spans: []contacts.Span{{From: hour + 10*minute, To: 2 * hour}}}}
		}, []contacts.Contact{whole[0], take(3, hour+5*minute, hour+10*minute)}, nil},
	} {
		t.Run(row.name, func(t *testing.T) {
			p := network()
			if row.change != nil {
				row.change(p)
			}
			if err := p.Check(); err != nil {
				t.Fatal(err)
			}
			got := Plan(p, contacts.Plan{Contacts: row.plan})
			if want := row.want; !slices.Equal(rules(got), want) && len(got)+len(want) > 0 {
				t.Errorf("breaches %v, want %v", got, want)
			}
		})
	}
}

func TestCable(t *testing.T) {
	// The cable reaches -270 to 270 deg. The first contact begins at 80 deg clockwise, so that
	// it can lie nowhere else (-280 deg is out of reach); the second begins at 200 deg = -160 deg and
	// goes on to 300 deg, which only the turn below holds: so the antenna turns back.
	p := network()
	p.Antennas[0].Slew = &contacts.Slew{AzimuthDegPerS: 5, ElevationDegPerS: 5, FromDeg: -270, ToDeg: 270}
	p.Candidates[0].Course = []contacts.Aim{{At: hour, AzimuthDeg: 80, ElevationDeg: 5}, {At: hour + 10*minute, AzimuthDeg: 250, ElevationDeg: 5}}
	p.Candidates[2].Course = []contacts.Aim{{At: hour + 8*minute, AzimuthDeg: 200, ElevationDeg: 5}, {At: hour + 18*minute, AzimuthDeg: 300, ElevationDeg: 5}}
	// Cut at 7 min the first ends at 199 deg; after 60 s idle the second begins at -150 deg, which
	// takes 69.8 s, after 80 s at -146.7 deg, which takes 69.1 s.
	first := take(0, hour, hour+7*minute)
	for _, row := range []struct {
		idle contacts.Ms
		want []string
	}{{80 * second, nil}, {60 * second, []string{RuleSlew}}} {
		begin := first.To + minute + row.idle
		// The begin moves along the pass: 10 deg a minute.
		second := take(2, begin, hour+18*minute)
		if got := Plan(p, contacts.Plan{Contacts: []contacts.Contact{first, second}}); !slices.Equal(rules(got), row.want) && len(got)+len(row.want) > 0 {
			t.Errorf("idle for %g s: breaches %v, want %v", row.idle.Seconds(), got, row.want)
		}
	}
	p.Candidates[2].Course[0].AzimuthDeg = -300 // 600 deg in one pass
	if got := rules(Plan(p, contacts.Plan{Contacts: []contacts.Contact{take(2, hour+8*minute, hour+18*minute)}})); !slices.Equal(got, []string{RuleCable}) {
		t.Errorf("a pass beyond the cable: breaches %v", got)
	}
}

func TestWorth(t *testing.T) {
	p := network()
	p.Weights = contacts.Weights{Share: 10, Price: 3, Change: 1000}
	p.Antennas[0].PerMinute, p.Spacecraft[1].Share, p.Split = 2, 500, true
	p.InForce = []contacts.Contact{take(0, hour, hour+9*minute), take(2, hour+12*minute, hour+15*minute)}
	p.Candidates = append(p.Candidates, p.Candidates[3])
	p.Candidates[5].Name, p.Candidates[5].PerSecond, p.Candidates[5].Antenna = "f", 5, 2
	plan := contacts.Plan{Contacts: []contacts.Contact{
		take(0, hour, hour+10*minute),           // 600 s at 100 B/s, 20 of money, moved
		take(3, hour, hour+4*minute),            // 2 a second, the second best: 180 s count
		take(5, 2*hour, 2*hour+2*minute),        // 5 a second: 120 s
		take(4, 4*hour+minute, 4*hour+2*minute), // 60 s
	}}
	w := Worth(p, plan)
	want := contacts.Worth{Contacts: 60000 + 360 + 600 + 6000, Share: 5000, Price: 60, Changes: 5000, Money: 20, Changed: 5, Bytes: 66000}
	want.Value = want.Contacts + want.Share - want.Price - want.Changes
	near := func(a, b float64) bool { return math.Abs(a-b) < 1e-6 }
	if !near(w.Value, want.Value) || !near(w.Contacts, want.Contacts) || !near(w.Share, want.Share) || !near(w.Price, want.Price) ||
		!near(w.Changes, want.Changes) || !near(w.Money, want.Money) || w.Changed != want.Changed || !near(w.Bytes, want.Bytes) {
		t.Errorf("worth %+v, want %+v", w, want)
	}
}

func TestSameDataCountsOnce(t *testing.T) {
	p := network()
	p.Spacecraft[0].AtOnce, p.Spacecraft[0].SameData = 2, true
	p.Candidates[1].Links[0].Volume[1].Bytes *= 2 // 200 B/s
	w := Worth(p, contacts.Plan{Contacts: []contacts.Contact{take(0, hour, hour+10*minute), take(1, hour+5*minute, hour+15*minute)}})
	if w.Value != 300*100+600*200 || w.ByContact[0] != 300*100 {
		t.Errorf("value %g by contacts %v, want 150000, of it 30000 from the first", w.Value, w.ByContact)
	}
}

// The figures follow from areas under straight lines, worked out by hand beside each row.
func TestRecorder(t *testing.T) {
	pass := take(0, hour, hour+10*minute) // 600 s at 100 B/s
	made := func(from, to contacts.Ms, rate float64) []contacts.Made {
		return []contacts.Made{{Span: contacts.Span{From: from, To: to}, BytesPerSecond: rate}}
	}
	for _, row := range []struct {
		name         string
		r            contacts.Recorder
		value, bytes float64
	}{
		{"less on board than the link carries", contacts.Recorder{Capacity: 1e9, Classes: []contacts.Class{{Weight: 2, OnBoard: 1000}}}, 2000, 1000},
		{"more on board", contacts.Recorder{Capacity: 1e9, Classes: []contacts.Class{{Weight: 2, OnBoard: 1e6}}}, 120000, 60000},
		// 3600 s at 100 B/s find room for 5000 B; in the pass another 60000 are made, sent as fast.
		{"full", contacts.Recorder{Capacity: 5000, Classes: []contacts.Class{{Weight: 1, Made: made(0, contacts.Day, 100)}}}, 60000, 60000},
		{"made after the pass", contacts.Recorder{Capacity: 5000, Classes: []contacts.Class{{Weight: 1, Made: made(2*hour, 3*hour, 100)}}}, 0, 0},
		// 6000 B of the first class go first in 60 s, the rest of the link is the second's.
		{"two classes", contacts.Recorder{Capacity: 1e9, Classes: []contacts.Class{{Weight: 10, OnBoard: 6000}, {Weight: 1, OnBoard: 1e6}}}, 60000 + 54000, 60000},
		// Made at time 0; sent from age 3600 to 4200 s; due at 3600 s, faded at 4200 s: half the worth.
		{"fades as it is sent", contacts.Recorder{Capacity: 1e9, Classes: []contacts.Class{{Weight: 1, OnBoard: 1e6, Due: hour, Fade: 10 * minute}}}, 30000, 60000},
		// Made in 600 s from 3000 s on, sent from 3600 s on at the same pace: all are 600 s old.
		{"even age", contacts.Recorder{Capacity: 1e9, Classes: []contacts.Class{{Weight: 1, Made: made(hour-10*minute, hour, 100), Due: 0, Fade: 20 * minute}}}, 30000, 60000},
		// Made at half the pace as it is sent: no age.
		{"sent as made", contacts.Recorder{Capacity: 1e9, Classes: []contacts.Class{{Weight: 1, Made: made(hour, 2*hour, 50), Due: 0, Fade: second}}}, 30000, 30000},
	} {
		t.Run(row.name, func(t *testing.T) {
			p := network()
			p.Spacecraft[0].Recorder = &row.r
			if err := p.Check(); err != nil {
				t.Fatal(err)
			}
			w := Worth(p, contacts.Plan{Contacts: []contacts.Contact{pass}})
			// A thousandth of a byte counts as nothing at each event, so to 0.05.
			if math.Abs(w.Value-row.value) > 0.05 || math.Abs(w.Bytes-row.bytes) > 0.05 {
				t.Errorf("value %g of %g bytes, want %g of %g", w.Value, w.Bytes, row.value, row.bytes)
			}
		})
	}
}
