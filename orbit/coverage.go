package orbit

import (
	"fmt"
	"strings"
	"time"
)

// Span is an uninterrupted time with states, both ends included, in seconds after an
// ephemeris' Reference.
type Span struct{ From, To float64 }

// Gap is a part of the span asked for in which an ephemeris has no state, though no
// theory failed: a trajectory has none there, or is not to be used.
type Gap struct {
	From, To time.Time
	Reason   string // completes "there are no passes …", as "before the ephemeris begins"
}

// String returns the instants with the reason.
func (g Gap) String() string {
	return g.From.UTC().Format(timeLayout) + " to " + g.To.UTC().Format(timeLayout) + ": " + g.Reason
}

// run is a row of knots at equal steps, the step being that of all runs.
type run struct {
	from, end float64
	last      int // the greatest interval
	base      int // index of the first knot; the one at base+reach is at from
}

// Spans returns where there are states, by time, at least one. They do not touch.
func (e *Ephemeris) Spans() []Span {
	if len(e.spans) == 0 {
		return []Span{{0, e.end}}
	}
	return e.spans
}

// Gaps returns the parts of the span asked for without a state, by time; where a
// theory fails, see Truncated.
func (e *Ephemeris) Gaps() []Gap { return e.gaps }

// AddGap notes a part of the time asked for that the ephemeris was not built for. It
// may be called before the ephemeris is shared.
func (e *Ephemeris) AddGap(g Gap) { e.gaps = append(e.gaps, g) }

// Covers tells whether there is a state at s.
func (e *Ephemeris) Covers(s float64) bool {
	if len(e.spans) == 0 {
		return s >= 0 && s <= e.end
	}
	for _, span := range e.spans {
		if s >= span.From && s <= span.To {
			return true
		}
	}
	return false
}

// edgeDoubt is how far over the edge of a span an argument may lie, in s: instants are
// rounded to the millisecond.
const edgeDoubt = 1e-3

// elsewhere returns, for an argument beyond the first run of knots, the one by which
// locate finds its knots, as if all runs were one.
func (e *Ephemeris) elsewhere(s float64) float64 {
	if len(e.spans) == 0 {
		panic(fmt.Sprintf("orbit: %g s is outside the ephemeris' span of 0 to %g s", s, e.end))
	}
	if s > -edgeDoubt && s < e.end+edgeDoubt {
		return max(0, min(s, e.end))
	}
	for k := range e.later {
		r := &e.later[k]
		if s > r.from-edgeDoubt && s < r.end+edgeDoubt {
			return e.first + float64(r.base)*e.step + max(r.from, min(s, r.end)) - r.from
		}
	}
	panic(fmt.Sprintf("orbit: %g s is in none of the ephemeris' spans %v", s, e.spans))
}

// TimeSpan is an uninterrupted time, both ends included.
type TimeSpan struct{ From, To time.Time }

// String returns "FROM to TO".
func (s TimeSpan) String() string {
	return s.From.UTC().Format(timeLayout) + " to " + s.To.UTC().Format(timeLayout)
}

// SpanError says that an instant, or the whole of a time asked for, lies outside the
// spans of an ephemeris.
type SpanError struct {
	Time, From, To time.Time  // the instant; the first and the last of the ephemeris
	Until          time.Time  // the end of the time asked for; zero: an instant
	Spans          []TimeSpan // where there are states, if in several spans
	Object         string     // may be empty
	Reason         string     // why there is no state, may be empty
}

// Error names the instant and the spans.
func (e *SpanError) Error() string {
	asked := e.Time.UTC().Format(timeLayout)
	if !e.Until.IsZero() {
		asked += " to " + e.Until.UTC().Format(timeLayout)
	}
	s := "ephemeris"
	if e.Object != "" {
		s += " of " + e.Object
	}
	s += ": " + asked + " is outside the span "
	if len(e.Spans) > 1 {
		texts := make([]string, len(e.Spans))
		for i, one := range e.Spans {
			texts[i] = one.String()
		}
		const most = 8
		if more := len(texts) - most; more > 0 {
			texts = append(texts[:most], fmt.Sprintf("%d more", more))
		}
		s = strings.TrimSuffix(s, " ") + "s " + strings.Join(texts, ", ")
	} else {
		s += TimeSpan{e.From, e.To}.String()
	}
	if e.Reason != "" {
		s += "; " + e.Reason
	}
	return s
}

func (e *Ephemeris) spanError(t time.Time) *SpanError {
	out := &SpanError{Time: t, From: e.reference, To: e.Time(e.Span())}
	for _, s := range e.spans {
		out.Spans = append(out.Spans, TimeSpan{e.Time(s.From), e.Time(s.To)})
	}
	return out
}

// Whole returns nil where there is a state at every instant of [from, to]; else why
// there is none: what Truncated tells, or a *SpanError.
func (e *Ephemeris) Whole(from, to time.Time) error {
	a, b := e.Seconds(from), e.Seconds(to)
	for _, s := range e.Spans() {
		if a >= s.From && b <= s.To {
			return nil
		}
	}
	if e.truncated != nil {
		return e.truncated
	}
	out := e.spanError(from)
	out.Until = to
	for _, g := range e.gaps {
		if g.From.Before(to) && g.To.After(from) {
			out.Reason = g.Reason
			break
		}
	}
	return out
}
