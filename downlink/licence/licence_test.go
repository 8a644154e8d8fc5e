package licence_test

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/downlink/licence"
	"slantwise/orbit/unit"
)

func angle(deg float64) *unit.Angle {
	a := unit.Angle(deg) * unit.Degree
	return &a
}

// tuesday is 10 March 2026, a Tuesday, at 06:00 UTC.
var tuesday = time.Date(2026, 3, 10, 6, 0, 0, 0, time.UTC)

// arch rises from 0 to 80 deg in 400 s and falls again, from azimuth 300 over north to 60.
var arch = licence.Course{
	Start: tuesday, Seconds: []float64{0, 400, 800}, AzimuthDeg: []float64{300, 0, 60}, ElevationDeg: []float64{0, 80, 0},
}

// Worked by hand: the arch climbs 0.2 deg/s and turns 0.15 deg/s.
func TestKeep(t *testing.T) {
	sector := licence.Sector{From: 345 * unit.Degree, To: 15 * unit.Degree, Below: 90 * unit.Degree}
	low := licence.Sector{From: 0, To: 90 * unit.Degree, Below: 20 * unit.Degree}
	for _, c := range []struct {
		name string
		l    licence.Licence
		use  licence.Use
		want []licence.Span
		rule string
	}{
		{"nothing limited", licence.Licence{}, licence.Downlink, []licence.Span{{0, 800}}, ""},
		{"station", licence.Licence{Stations: []string{"Fell", "Moor"}}, licence.Downlink, nil, "stations allowed: Fell, Moor"},
		{"the station itself", licence.Licence{Stations: []string{"Fell", "Skerry"}}, licence.Downlink, []licence.Span{{0, 800}}, ""},
		{"receive", licence.Licence{LeastToReceive: angle(10)}, licence.Downlink, []licence.Span{{50, 750}}, "least elevation to receive 10 deg"},
		{"receive does not bind the uplink", licence.Licence{LeastToReceive: angle(10)}, licence.Uplink, []licence.Span{{0, 800}}, ""},
		{"radiate binds the uplink", licence.Licence{LeastToRadiate: angle(20)}, licence.Uplink, []licence.Span{{100, 700}}, "least elevation to radiate 20 deg"},
		{"radiate binds the downlink", licence.Licence{LeastToRadiate: angle(20)}, licence.Downlink, []licence.Span{{100, 700}}, "least elevation to radiate 20 deg"},
		{"sector over north", licence.Licence{Sectors: []licence.Sector{sector}}, licence.Downlink, []licence.Span{{0, 300}, {500, 800}}, "blocked sector 345 to 15 deg"},
		{"low sector", licence.Licence{Sectors: []licence.Sector{low}}, licence.Downlink, []licence.Span{{0, 700}}, "blocked sector 0 to 90 deg below 20 deg"},
		{"hours", licence.Licence{Hours: []licence.Hours{{From: 6*time.Hour + 5*time.Minute, To: 18 * time.Hour}}}, licence.Downlink, []licence.Span{{300, 800}}, "hours 06:05:00 to 18:00:00 UTC"},
		{"through midnight", licence.Licence{Hours: []licence.Hours{{From: 22 * time.Hour, To: 6*time.Hour + 100*time.Second, Days: []time.Weekday{time.Monday}}}}, licence.Downlink, []licence.Span{{0, 100}}, "hours 22:00:00 to 06:01:40 UTC on Monday"},
		{"another day", licence.Licence{Hours: []licence.Hours{{From: 0, To: 24 * time.Hour, Days: []time.Weekday{time.Sunday}}}}, licence.Downlink, nil, "hours 00:00:00 to 24:00:00 UTC on Sunday"},
	} {
		t.Run(c.name, func(t *testing.T) {
			c.l.Name = "L"
			if err := c.l.Check(); err != nil {
				t.Fatal(err)
			}
			k, err := licence.Keep([]licence.Licence{c.l}, "Skerry", arch, c.use)
			if err != nil {
				t.Fatal(err)
			}
			if !slices.EqualFunc(k.Spans, c.want, same) {
				t.Errorf("kept %v, want %v", k.Spans, c.want)
			}
			rule := ""
			if len(k.Bindings) > 0 {
				rule = k.Bindings[0].Rule
			}
			if rule != c.rule || len(k.Bindings) > 1 {
				t.Errorf("bindings %v, want %q", k.Bindings, c.rule)
			}
		})
	}
}

func same(a, b licence.Span) bool {
	return math.Abs(a.From-b.From) < 1e-9 && math.Abs(a.To-b.To) < 1e-9
}

// TestEveryRuleIsNamed: rules that bind at the same time are all named, each with its
// own time.
func TestEveryRuleIsNamed(t *testing.T) {
	k, err := licence.Keep([]licence.Licence{
		{Name: "A", LeastToReceive: angle(10), LeastToRadiate: angle(5)},
		{Name: "B", LeastToReceive: angle(20)},
	}, "Skerry", arch, licence.Downlink)
	if err != nil {
		t.Fatal(err)
	}
	got := fmt.Sprint(k.Spans)
	for _, b := range k.Bindings {
		got += "\n" + b.String()
	}
	want := `[{100 700}]
licence "A": least elevation to radiate 5 deg takes 50.0 s
licence "A": least elevation to receive 10 deg takes 100.0 s
licence "B": least elevation to receive 20 deg takes 200.0 s`
	if got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

// TestKeepAgainstInstants asks a plain question at many instants: may it be used now?
func TestKeepAgainstInstants(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := licence.Course{Start: tuesday.Add(time.Duration(rapid.IntRange(0, 86400).Draw(t, "start")) * time.Second)}
		at := 0.0
		for range rapid.IntRange(2, 8).Draw(t, "samples") {
			c.Seconds = append(c.Seconds, at)
			c.AzimuthDeg = append(c.AzimuthDeg, float64(rapid.IntRange(0, 359).Draw(t, "azimuth"))+0.37) // never along an edge
			c.ElevationDeg = append(c.ElevationDeg, float64(rapid.IntRange(-5, 89).Draw(t, "elevation"))+0.37)
			at += rapid.Float64Range(1, 20000).Draw(t, "step")
		}
		l := licence.Licence{Name: "L", LeastToReceive: angle(float64(rapid.IntRange(-5, 90).Draw(t, "receive")))}
		for range rapid.IntRange(0, 3).Draw(t, "sectors") {
			l.Sectors = append(l.Sectors, licence.Sector{
				From: *angle(float64(rapid.IntRange(0, 360).Draw(t, "from"))), To: *angle(float64(rapid.IntRange(0, 360).Draw(t, "to"))),
				Below: *angle(float64(rapid.IntRange(0, 90).Draw(t, "below"))),
			})
		}
		for range rapid.IntRange(0, 2).Draw(t, "hours") {
			h := licence.Hours{
				From: time.Duration(rapid.IntRange(0, 86400).Draw(t, "open")) * time.Second,
				To:   time.Duration(rapid.IntRange(0, 86400).Draw(t, "shut")) * time.Second,
			}
			if rapid.Bool().Draw(t, "one day") {
				h.Days = []time.Weekday{time.Weekday(rapid.IntRange(0, 6).Draw(t, "day"))}
			}
			l.Hours = append(l.Hours, h)
		}
		if l.Check() != nil {
			t.Skip("a sector or hours of no width")
		}
		k, err := licence.Keep([]licence.Licence{l}, "Skerry", c, licence.Downlink)
		if err != nil {
			t.Fatal(err)
		}
		for range 50 {
			s := rapid.Float64Range(0, c.Seconds[len(c.Seconds)-1]).Draw(t, "instant")
			if atEdge(&k, s) {
				continue // an edge belongs to either side
			}
			kept := slices.ContainsFunc(k.Spans, func(p licence.Span) bool { return p.From < s && s < p.To })
			if want := allowed(&l, &c, s); kept != want {
				t.Fatalf("at %g s: kept is %v, want %v; spans %v", s, kept, want, k.Spans)
			}
		}
	})
}

func atEdge(k *licence.Kept, s float64) bool {
	spans := slices.Clone(k.Spans)
	for _, b := range k.Bindings {
		spans = append(spans, b.Spans...)
	}
	return slices.ContainsFunc(spans, func(p licence.Span) bool { return math.Abs(p.From-s) < 1e-6 || math.Abs(p.To-s) < 1e-6 })
}

// allowed is the plain answer for one instant.
func allowed(l *licence.Licence, c *licence.Course, s float64) bool {
	i := 1
	for i < len(c.Seconds)-1 && c.Seconds[i] < s {
		i++
	}
	w := (s - c.Seconds[i-1]) / (c.Seconds[i] - c.Seconds[i-1])
	d := c.AzimuthDeg[i] - c.AzimuthDeg[i-1]
	for d > 180 {
		d -= 360
	}
	for d < -180 {
		d += 360
	}
	az := math.Mod(c.AzimuthDeg[i-1]+w*d+720, 360)
	el := c.ElevationDeg[i-1] + w*(c.ElevationDeg[i]-c.ElevationDeg[i-1])
	if el < l.LeastToReceive.Degrees() {
		return false
	}
	for _, b := range l.Sectors {
		from, to := b.From.Degrees(), b.To.Degrees()
		inside := az >= from && az < to
		if to < from {
			inside = az >= from || az < to
		}
		if inside && el < b.Below.Degrees() {
			return false
		}
	}
	return len(l.Hours) == 0 || inHours(l, c.Start.Add(time.Duration(s*1e9)))
}

func inHours(l *licence.Licence, now time.Time) bool {
	since := time.Duration(now.Hour())*time.Hour + time.Duration(now.Minute())*time.Minute + time.Duration(now.Second())*time.Second + time.Duration(now.Nanosecond())
	on := func(h licence.Hours, day time.Weekday) bool { return len(h.Days) == 0 || slices.Contains(h.Days, day) }
	for _, h := range l.Hours {
		today, yesterday := on(h, now.Weekday()), on(h, now.AddDate(0, 0, -1).Weekday())
		if h.From < h.To && today && since >= h.From && since < h.To {
			return true
		}
		if h.From > h.To && (today && since >= h.From || yesterday && since < h.To) {
			return true
		}
	}
	return false
}

func TestBreaches(t *testing.T) {
	eirp, over := unit.LevelDBW(3), unit.LevelDBW(4.25)
	l := licence.Licence{Name: "L", HighestEIRP: &eirp, Widest: 5 * unit.Megahertz, Low: 8175 * unit.Megahertz, High: 8185 * unit.Megahertz}
	for _, c := range []struct {
		name string
		e    licence.Emission
		want []string
	}{
		{"kept, to the edge", licence.Emission{EIRP: &eirp, Centre: 8180 * unit.Megahertz, Width: 5 * unit.Megahertz}, nil},
		{"too strong, too wide, too far up", licence.Emission{EIRP: &over, Centre: 8182 * unit.Megahertz, Width: 7 * unit.Megahertz}, []string{
			`licence "L": EIRP at most 3 dBW is not kept: 4.25 dBW`,
			`licence "L": occupied bandwidth at most 5 MHz is not kept: 7 MHz`,
			`licence "L": emission within 8175 to 8185 MHz is not kept: 8178.500000 to 8185.500000 MHz`,
		}},
		{"not known", licence.Emission{Centre: 8180 * unit.Megahertz}, []string{
			`licence "L": EIRP at most 3 dBW cannot be checked, since the greatest EIRP is not known`,
			`licence "L": occupied bandwidth at most 5 MHz cannot be checked, since the occupied bandwidth is not known`,
			`licence "L": emission within 8175 to 8185 MHz cannot be checked, since the occupied bandwidth is not known`,
		}},
	} {
		var got []string
		for _, b := range l.Breaches(c.e) {
			got = append(got, b.String())
		}
		if !slices.Equal(got, c.want) {
			t.Errorf("%s:\n got %s\nwant %s", c.name, strings.Join(got, "\n     "), strings.Join(c.want, "\n     "))
		}
	}
	if b := l.Breaches(licence.Emission{EIRP: &over, Centre: 8180 * unit.Megahertz, Width: 1e6}); len(b) != 1 || math.Abs(float64(b[0].Over)-1.25) > 1e-9 {
		t.Errorf("1.25 dB too much: got %+v", b)
	}
}

func TestFor(t *testing.T) {
	l := licence.Licence{Spacecraft: "Wagtail 1", Transmitter: "X-band"}
	for _, c := range []struct {
		craft, tx string
		want      bool
	}{{"Wagtail 1", "X-band", true}, {"Wagtail 1", "S-band", false}, {"Wagtail 2", "X-band", false}} {
		if got := l.For(c.craft, c.tx); got != c.want {
			t.Errorf("%s, %s: got %v", c.craft, c.tx, got)
		}
	}
	if !(&licence.Licence{}).For("any", "thing") {
		t.Error("a licence that names nobody is for all")
	}
}

func TestBadInput(t *testing.T) {
	nan := unit.Angle(math.NaN())
	eirp := unit.LevelDBW(math.Inf(1))
	for _, c := range []struct {
		l    licence.Licence
		want string
	}{
		{licence.Licence{Name: "L", LeastToRadiate: angle(91)}, `licence "L": least elevation to radiate: 91 deg is not allowed; it must be -5 to 90 deg`},
		{licence.Licence{Name: "L", LeastToReceive: &nan}, `licence "L": least elevation to receive: NaN deg`},
		{licence.Licence{Name: "L", Sectors: []licence.Sector{{From: 10 * unit.Degree, To: 400 * unit.Degree, Below: 1}}}, `licence "L": blocked sector 1: last azimuth: 400 deg is not allowed; it must be 0 to 360 deg`},
		{licence.Licence{Name: "L", Sectors: []licence.Sector{{From: 1, To: 1, Below: 1}}}, `licence "L": blocked sector 1: it begins and ends`},
		{licence.Licence{Name: "L", Hours: []licence.Hours{{From: -1, To: time.Hour}}}, `licence "L": hours 1: begin`},
		{licence.Licence{Name: "L", Hours: []licence.Hours{{From: time.Hour, To: time.Hour}}}, `licence "L": hours 1: they begin and end at 01:00:00`},
		{licence.Licence{Name: "L", HighestEIRP: &eirp}, `licence "L": highest EIRP: +Inf dBW`},
		{licence.Licence{Name: "L", Low: 2, High: 1}, `licence "L": band`},
		{licence.Licence{Name: "L", Widest: -1}, `licence "L": widest bandwidth`},
	} {
		if err := c.l.Check(); err == nil || !strings.HasPrefix(err.Error(), c.want) {
			t.Errorf("got %v, want %s", err, c.want)
		}
	}
	for _, c := range []licence.Course{
		{}, {Seconds: []float64{0, 1}, AzimuthDeg: []float64{0, 0}},
		{Seconds: []float64{0, 0}, AzimuthDeg: []float64{0, 0}, ElevationDeg: []float64{0, 0}},
		{Seconds: []float64{0, 1}, AzimuthDeg: []float64{0, math.NaN()}, ElevationDeg: []float64{0, 0}},
	} {
		if _, err := licence.Keep(nil, "x", c, licence.Downlink); err == nil {
			t.Errorf("course %+v was accepted", c)
		}
	}
}

func BenchmarkKeep(b *testing.B) {
	var c licence.Course
	for i := range 721 {
		c.Seconds = append(c.Seconds, float64(i))
		c.AzimuthDeg = append(c.AzimuthDeg, float64(i)/2)
		c.ElevationDeg = append(c.ElevationDeg, 60*math.Sin(math.Pi*float64(i)/720))
	}
	l := []licence.Licence{{Name: "L", LeastToReceive: angle(5), LeastToRadiate: angle(10), Sectors: []licence.Sector{{From: 1, To: 2, Below: 1}}, Hours: []licence.Hours{{From: 0, To: 12 * time.Hour}}}}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := licence.Keep(l, "s", c, licence.Downlink); err != nil {
			b.Fatal(err)
		}
	}
}
