package contacts

import (
	"cmp"
	"slices"
	"time"
)

// Ms is a time in whole milliseconds: an instant after the start of the problem, or a
// length.
type Ms int64

// Lengths.
const (
	Second Ms = 1000
	Minute    = 60 * Second
	Hour      = 60 * Minute
	Day       = 24 * Hour
)

// Seconds returns the time in seconds.
func (t Ms) Seconds() float64 { return float64(t) / 1000 }

// Span is the time from From to To, To not included.
type Span struct{ From, To Ms }

// Length returns To - From.
func (s Span) Length() Ms { return s.To - s.From }

// Overlap returns how much time two spans share, 0 where they only touch.
func (s Span) Overlap(o Span) Ms { return max(0, min(s.To, o.To)-max(s.From, o.From)) }

// Holds tells whether o lies wholly in s.
func (s Span) Holds(o Span) bool { return s.From <= o.From && o.To <= s.To }

// At returns the instant t of the problem.
func (p *Problem) At(t Ms) time.Time {
	return p.Start.Add(time.Duration(t) * time.Millisecond).UTC()
}

// Ms returns an instant as time of the problem, rounded to the nearest millisecond.
func (p *Problem) Ms(t time.Time) Ms {
	return Ms(t.Sub(p.Start).Round(time.Millisecond) / time.Millisecond)
}

// UTCDays returns the UTC days that the problem touches, in order.
func (p *Problem) UTCDays() []Span { return p.LocalDays(time.UTC) }

// LocalDays returns the civil days of a time zone that the problem touches, in order.
// A day lasts from its first instant to that of the next: 23 or 25 hours where clocks
// change, and a date that a zone skips has none.
func (p *Problem) LocalDays(zone *time.Location) []Span {
	var out []Span
	first := p.At(0).In(zone)
	y, m, d := first.Date()
	for i := 0; ; i++ {
		from := p.Ms(firstInstant(y, m, d+i, zone))
		to := p.Ms(firstInstant(y, m, d+i+1, zone))
		if from >= p.Length {
			return out
		}
		if to > 0 && to > from {
			out = append(out, Span{from, to})
		}
	}
}

// firstInstant returns the first instant of a civil day; where midnight does not exist
// the day begins with what follows the gap.
func firstInstant(y int, m time.Month, d int, zone *time.Location) time.Time {
	t := time.Date(y, m, d, 0, 0, 0, 0, zone)
	// time.Date may land before a gap or, where midnight comes twice, on either of the two.
	want := time.Date(y, m, d, 0, 0, 0, 0, time.UTC)
	civil := func(u time.Time) time.Time {
		w := u.In(zone)
		return time.Date(w.Year(), w.Month(), w.Day(), w.Hour(), w.Minute(), w.Second(), 0, time.UTC)
	}
	lo, hi := t.Add(-26*time.Hour), t.Add(26*time.Hour)
	step := 15 * time.Minute
	for u := lo; u.Before(hi); u = u.Add(step) {
		if !civil(u).Before(want) {
			return exact(u.Add(-step), u, func(v time.Time) bool { return !civil(v).Before(want) })
		}
	}
	return t
}

// exact finds the second in (lo, hi] at which holds turns true.
func exact(lo, hi time.Time, holds func(time.Time) bool) time.Time {
	for hi.Sub(lo) > time.Second {
		mid := lo.Add((hi.Sub(lo) / 2).Truncate(time.Second))
		if holds(mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return hi.Truncate(time.Second)
}

// Union returns spans in order, joined where they touch or overlap; empty ones fall away.
func Union(spans []Span) []Span {
	s := slices.DeleteFunc(slices.Clone(spans), func(s Span) bool { return s.To <= s.From })
	slices.SortFunc(s, func(a, b Span) int { return cmp.Or(cmp.Compare(a.From, b.From), cmp.Compare(a.To, b.To)) })
	out := s[:0]
	for _, x := range s {
		if n := len(out); n > 0 && x.From <= out[n-1].To {
			out[n-1].To = max(out[n-1].To, x.To)
			continue
		}
		out = append(out, x)
	}
	return out
}

// Without returns what is left of a span when others are taken from it.
func (s Span) Without(others []Span) []Span {
	var out []Span
	at := s.From
	for _, o := range Union(others) {
		if o.To <= at {
			continue
		}
		if o.From >= s.To {
			break
		}
		if o.From > at {
			out = append(out, Span{at, o.From})
		}
		at = o.To
	}
	if at < s.To {
		out = append(out, Span{at, s.To})
	}
	return out
}
