package licence

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/orbit/unit"
)

// Use is what a contact is used for.
type Use int

// Uses.
const (
	Downlink Use = iota // the spacecraft radiates and the station receives
	Uplink              // the station radiates
)

// Course is where a spacecraft stands as seen from a station, over a pass. Between
// its samples azimuth (the short way round) and elevation go straight.
type Course struct {
	Start        time.Time
	Seconds      []float64 // after Start, rising
	AzimuthDeg   []float64
	ElevationDeg []float64
}

// Span is a time in seconds after the start of the course.
type Span struct{ From, To float64 }

// Binding is a rule that takes time away, with the time.
type Binding struct {
	Licence string
	Rule    string // "least elevation to receive 10 deg"
	Spans   []Span // in order
}

// Seconds returns how much time the rule takes away.
func (b *Binding) Seconds() float64 {
	sum := 0.0
	for _, s := range b.Spans {
		sum += s.To - s.From
	}
	return sum
}

// String returns a sentence.
func (b Binding) String() string {
	return fmt.Sprintf("licence %q: %s takes %.1f s", b.Licence, b.Rule, b.Seconds())
}

// Kept is what is left of a pass.
type Kept struct {
	Spans    []Span    // allowed, in order, apart from one another
	Bindings []Binding // the rules that bind, in the order of the licences; they may overlap in time
}

// Keep returns what the licences leave of a pass over a station. The course needs two
// samples at least; licences must have passed Check.
func Keep(licences []Licence, station string, c Course, use Use) (Kept, error) {
	if err := c.check(); err != nil {
		return Kept{}, err
	}
	var k Kept
	for i := range licences {
		k.Bindings = append(k.Bindings, licences[i].bindings(station, &c, use)...)
	}
	var taken []Span
	for _, b := range k.Bindings {
		taken = append(taken, b.Spans...)
	}
	k.Spans = outside(Span{c.Seconds[0], c.Seconds[len(c.Seconds)-1]}, union(taken))
	return k, nil
}

func (c *Course) check() error {
	n := len(c.Seconds)
	if n < 2 || len(c.AzimuthDeg) != n || len(c.ElevationDeg) != n {
		return fmt.Errorf("a course needs as many azimuths and elevations as instants, two at least; it has %d, %d and %d", len(c.AzimuthDeg), len(c.ElevationDeg), n)
	}
	for i := range n {
		if v := c.AzimuthDeg[i] + c.ElevationDeg[i] + c.Seconds[i]; math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("sample %d of the course is not finite", i+1)
		}
		if i > 0 && !(c.Seconds[i] > c.Seconds[i-1]) {
			return fmt.Errorf("sample %d of the course: %g s does not rise over %g s", i+1, c.Seconds[i], c.Seconds[i-1])
		}
	}
	return nil
}

// bindings lists the rules of one licence that take time away.
func (l *Licence) bindings(station string, c *Course, use Use) []Binding {
	var out []Binding
	add := func(rule string, spans []Span) {
		// AOS and LOS are to the millisecond: less than half of one is their rounding.
		spans = slices.DeleteFunc(union(spans), func(s Span) bool { return s.To-s.From < 5e-4 })
		if len(spans) > 0 {
			out = append(out, Binding{l.Name, rule, spans})
		}
	}
	whole := Span{c.Seconds[0], c.Seconds[len(c.Seconds)-1]}
	if rule, ok := l.allows(station); !ok {
		add(rule, []Span{whole})
	}
	low := func(rule string, least *unit.Angle) {
		if least != nil {
			d := least.Degrees()
			add(fmt.Sprintf("%s %g deg", rule, round(d)), c.where(func(_, el float64) bool { return el < d }, nil, &d))
		}
	}
	low("least elevation to radiate", l.LeastToRadiate)
	if use == Downlink {
		low("least elevation to receive", l.LeastToReceive)
	}
	for _, s := range l.Sectors {
		below := s.Below.Degrees()
		edges := []float64{s.From.Degrees(), s.To.Degrees()}
		add(s.String(), c.where(s.holds, edges, &below))
	}
	if len(l.Hours) > 0 {
		rule := "hours"
		for _, h := range l.Hours {
			rule += " " + h.String() + ";"
		}
		add(rule[:len(rule)-1], outside(whole, l.open(c.Start, whole)))
	}
	return out
}

// holds tells whether a direction lies in the sector; degrees.
func (s Sector) holds(az, el float64) bool {
	if s.Below < 90*unit.Degree && !(el < s.Below.Degrees()) {
		return false
	}
	width := s.To.Degrees() - s.From.Degrees()
	if width < 0 {
		width += 360
	}
	return turn(az-s.From.Degrees()) < width
}

// turn brings degrees into [0, 360).
func turn(d float64) float64 {
	d = math.Mod(d, 360)
	if d < 0 {
		d += 360
	}
	return d
}

// where returns the spans in which a condition holds, given the azimuths and the
// elevation at which it may change: each stretch between samples is cut there, and
// the middle of each piece decides.
func (c *Course) where(holds func(az, el float64) bool, azimuths []float64, elevation *float64) []Span {
	var out []Span
	var cuts []float64
	for i := 1; i < len(c.Seconds); i++ {
		az, el := c.AzimuthDeg[i-1], c.ElevationDeg[i-1]
		dAz, dEl := math.Remainder(c.AzimuthDeg[i]-az, 360), c.ElevationDeg[i]-el
		cuts = append(cuts[:0], 0, 1)
		if elevation != nil {
			cuts = append(cuts, (*elevation-el)/dEl)
		}
		for _, edge := range azimuths {
			to := math.Remainder(edge-az, 360)
			cuts = append(cuts, to/dAz, (to+360)/dAz, (to-360)/dAz)
		}
		slices.Sort(cuts) // what is not a number comes first
		from := 0.0
		for _, w := range cuts {
			if !(w > from && w <= 1) {
				continue
			}
			middle := (from + w) / 2
			if holds(turn(az+dAz*middle), el+dEl*middle) {
				step := c.Seconds[i] - c.Seconds[i-1]
				out = append(out, Span{c.Seconds[i-1] + from*step, c.Seconds[i-1] + w*step})
			}
			from = w
		}
	}
	return out
}

// open returns the spans of a time in which the licence's hours allow use.
func (l *Licence) open(start time.Time, within Span) []Span {
	start = start.UTC()
	midnight := time.Date(start.Year(), start.Month(), start.Day(), 0, 0, 0, 0, time.UTC)
	var out []Span
	for day := midnight.AddDate(0, 0, -2); day.Sub(start).Seconds() <= within.To; day = day.AddDate(0, 0, 1) {
		for _, h := range l.Hours {
			if len(h.Days) > 0 && !slices.Contains(h.Days, day.Weekday()) {
				continue
			}
			to := h.To
			if to <= h.From {
				to += 24 * time.Hour
			}
			s := Span{day.Add(h.From).Sub(start).Seconds(), day.Add(to).Sub(start).Seconds()}
			s.From, s.To = max(s.From, within.From), min(s.To, within.To)
			if s.To > s.From {
				out = append(out, s)
			}
		}
	}
	return union(out)
}

// outside returns what a span has beyond spans in order.
func outside(whole Span, spans []Span) []Span {
	var out []Span
	at := whole.From
	for _, s := range spans {
		if s.From > at {
			out = append(out, Span{at, s.From})
		}
		at = s.To
	}
	if at < whole.To {
		out = append(out, Span{at, whole.To})
	}
	return out
}

// union sorts spans and joins those that overlap or touch.
func union(spans []Span) []Span {
	spans = slices.Clone(spans)
	slices.SortFunc(spans, func(a, b Span) int { return cmp.Or(cmp.Compare(a.From, b.From), cmp.Compare(a.To, b.To)) })
	var out []Span
	for _, s := range spans {
		if n := len(out); n > 0 && s.From <= out[n-1].To {
			out[n-1].To = max(out[n-1].To, s.To)
		} else {
			out = append(out, s)
		}
	}
	return out
}
