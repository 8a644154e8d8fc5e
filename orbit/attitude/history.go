package attitude

import (
	"fmt"
	"math"
	"sort"
	"strings"
	"time"

	"slantwise/orbit"
)

// History is the attitude of one object over the spans of its segments. It is immutable
// and safe for use by many goroutines.
type History struct {
	Object   string   // as the file names it
	Warnings []string // what was read and not used, with its line
	source   string
	segments []segment // in the order of their starts, which do not overlap
}

// segment holds records in one frame: TEME for every inertial one, or the Earth-fixed.
type segment struct {
	from, to time.Time // the useable span, both ends included
	fixed    bool      // Earth-fixed; else TEME
	seconds  []float64 // after from of each record, rising
	turns    []Quaternion
}

// SpanError says that an instant lies outside the spans of a history.
type SpanError struct {
	Time  time.Time
	Spans [][2]time.Time
}

// Error names the instant and the spans.
func (e *SpanError) Error() string {
	var list []string
	for _, s := range e.Spans {
		list = append(list, stamp(s[0])+" to "+stamp(s[1]))
	}
	return fmt.Sprintf("the attitude history does not hold %s; it is useable from %s", stamp(e.Time), strings.Join(list, ", "))
}

func stamp(t time.Time) string { return t.UTC().Format("2006-01-02T15:04:05.000Z") }

// Spans returns the useable spans in the order of time.
func (h *History) Spans() [][2]time.Time {
	out := make([][2]time.Time, len(h.segments))
	for i := range h.segments {
		out[i] = [2]time.Time{h.segments[i].from, h.segments[i].to}
	}
	return out
}

// Source says in words what the records are and how they are interpolated.
func (h *History) Source() string { return h.source }

// BodyAxes returns the body's axes at an instant in Earth-fixed components. The error is
// a *SpanError outside the useable spans.
func (h *History) BodyAxes(t time.Time, earth orbit.EarthOrientation) (x, y, z orbit.Vec3, err error) {
	i := sort.Search(len(h.segments), func(i int) bool { return !h.segments[i].to.Before(t) })
	if i == len(h.segments) || t.Before(h.segments[i].from) {
		return x, y, z, &SpanError{t, h.Spans()}
	}
	s := &h.segments[i]
	x, y, z = s.at(t.Sub(s.from).Seconds()).Axes()
	if s.fixed {
		return x, y, z, nil
	}
	turn := func(v orbit.Vec3) orbit.Vec3 { return orbit.TEMEToEarthFixed(v, orbit.Vec3{}, t, earth).Position }
	return turn(x), turn(y), turn(z), nil
}

// at returns the turn at seconds after the start of the useable span, which the records
// enclose.
func (s *segment) at(sec float64) Quaternion {
	if len(s.seconds) == 1 {
		return s.turns[0]
	}
	j := sort.SearchFloat64s(s.seconds, sec)
	j = max(1, min(j, len(s.seconds)-1))
	w := (sec - s.seconds[j-1]) / (s.seconds[j] - s.seconds[j-1])
	return between(s.turns[j-1], s.turns[j], max(0, min(1, w))) // rounding only
}

// widestTurn returns the greatest angle in degrees between two records that follow each
// other.
func (s *segment) widestTurn() float64 {
	widest := 0.0
	for i := 1; i < len(s.turns); i++ {
		widest = max(widest, 2*math.Acos(min(1, math.Abs(s.turns[i].dot(s.turns[i-1])))))
	}
	return widest * 180 / math.Pi
}
