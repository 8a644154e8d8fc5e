package oem

import (
	"cmp"
	"fmt"
	"slices"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// place is where in a message the reader is.
type place int

const (
	inHeader place = iota
	inMeta
	inData
	inCovariances
)

// builder makes trajectories of what the two notations hold.
type builder struct {
	name    string
	earth   orbit.EarthOrientation
	file    File
	faults  elements.Faults
	where   place
	stopped bool // nothing more can be read

	meta     meta
	states   []orbit.TimedState
	pending  covariance
	covs     []covariance
	segments []segment
	first    int // line of the first state
}

// segment is a finished segment with where it stands.
type segment struct {
	object object
	line   int
	orbit.TrajectorySegment
	covariance []orbit.CovarianceAt
}

type object struct{ name, id string }

// state takes a state in the segment's frame and time scale: km and km/s.
func (b *builder) state(line int, epoch string, x *[6]float64) {
	t, problem := instant(epoch)
	if problem == "" {
		t, problem = b.meta.scale.utcOf(t, b.earth.UT1MinusUTC)
	}
	if problem != "" {
		b.fault(line, "EPOCH", short(epoch), problem, "")
		return
	}
	if n := len(b.states); n > 0 && !t.After(b.states[n-1].Time) {
		b.fault(line, "EPOCH", short(epoch), "does not come after the state before it; times must rise within a segment", "sort the states, or begin a new segment")
		return
	}
	s := orbit.TimedState{Time: t, Position: orbit.Vec3{X: x[0], Y: x[1], Z: x[2]}.Scale(1000), Velocity: orbit.Vec3{X: x[3], Y: x[4], Z: x[5]}.Scale(1000)}
	if problem := implausible(s); problem != "" {
		b.fault(line, "state", "", problem, "check the units, km and km/s, and the centre")
		return
	}
	if len(b.states) == 0 {
		b.first = line
	}
	b.states = append(b.states, s)
}

const (
	leastRadius = 6.33e6 // m; the Earth's pole is 6356.8 km from its centre
	mostRadius  = 5e9    // m; farther than anything about the Earth
	mostSpeed   = 5e4    // m/s
)

// implausible says why a state cannot be one of a spacecraft about the Earth.
func implausible(s orbit.TimedState) string {
	switch r, v := s.Position.Norm(), s.Velocity.Norm(); {
	case !(r >= leastRadius):
		return fmt.Sprintf("the position lies inside the Earth, %.3f km from its centre", r/1000)
	case !(r <= mostRadius):
		return fmt.Sprintf("a position %.4g km from the Earth's centre is not allowed; it must be at most 5e6 km", r/1000)
	case !(v <= mostSpeed):
		return fmt.Sprintf("a speed of %.4g km/s is not allowed; it must be at most 50 km/s", v/1000)
	}
	return ""
}

// closeSegment makes a segment of what was read since META_START.
func (b *builder) closeSegment() {
	if b.meta.line == 0 {
		return
	}
	defer func() { b.meta, b.states, b.covs = meta{}, nil, nil }()
	if b.meta.faulty || b.faults.Total > b.meta.told {
		return // what else could be said follows from that
	}
	m := &b.meta
	if len(b.states) == 0 {
		b.fault(m.line, "segment", "", "it has no state", "give at least two")
		return
	}
	how, ok := b.interpolation(m)
	if !ok {
		return
	}
	s := segment{object: m.object, line: m.line}
	s.Frame, s.States, s.Interpolation = m.frame, b.states, how
	if problem := contradiction(s.States); problem != "" {
		b.fault(m.line, "segment", "", problem, "check the velocities: their units, signs and frame, and that they are given")
		return
	}
	if !b.usable(m, &s) {
		return
	}
	if err := (&orbit.Trajectory{Segments: []orbit.TrajectorySegment{s.TrajectorySegment}}).Validate(); err != nil {
		b.fault(m.line, "segment", "", err.Error(), "")
		return
	}
	s.covariance = b.covariances(&s.TrajectorySegment)
	if m.scale != utc && m.scale != ut1 && s.To.After(LeapsKnownUntil) {
		b.warn(m.line, "leap seconds are known until %s; later instants in %s are taken with the last offset", LeapsKnownUntil.Format("2006-01-02"), m.scale)
	}
	b.segments = append(b.segments, s)
}

// interpolation settles the polynomial of a segment.
func (b *builder) interpolation(m *meta) (orbit.Interpolation, bool) {
	how := m.how
	if !m.howGiven {
		how = orbit.Interpolation{Kind: orbit.Hermite, Degree: min(7, 2*len(b.states)-1)}
		b.warn(m.line, "INTERPOLATION is not given: HERMITE of degree %d is taken", how.Degree)
	}
	if n := how.Points(); len(b.states) < n {
		b.fault(m.line, "segment", "", fmt.Sprintf("%s takes %d states, and there are %d", how, n, len(b.states)), "state a lower INTERPOLATION_DEGREE")
		return how, false
	}
	return how, true
}

// usable settles the span in which a segment is used.
func (b *builder) usable(m *meta, s *segment) bool {
	first, last := s.States[0].Time, s.States[len(s.States)-1].Time
	// What is printed to the millisecond may round over the state that it means.
	const doubt = time.Millisecond
	inside := func(key string, t instantAt, fallback time.Time) (time.Time, bool) {
		switch {
		case t.line == 0:
			return fallback, true
		case t.Before(first.Add(-doubt)) || t.After(last.Add(doubt)):
			b.fault(t.line, key, stamp(t.Time), fmt.Sprintf("lies outside the states, %s to %s: there is nothing to interpolate", stamp(first), stamp(last)), "")
			return fallback, false
		}
		return clamp(t.Time, first, last), true
	}
	// START_TIME and STOP_TIME are those of the states; what they claim beyond is told.
	start, stop := first, last
	if m.start.line > 0 && m.start.After(first) {
		start = clamp(m.start.Time, first, last)
	}
	if m.stop.line > 0 && m.stop.Before(last) {
		stop = clamp(m.stop.Time, first, last)
	}
	if m.start.line > 0 && m.start.Before(first.Add(-doubt)) || m.stop.line > 0 && m.stop.After(last.Add(doubt)) {
		b.warn(m.line, "START_TIME or STOP_TIME lies beyond the states, which are used from %s to %s", stamp(first), stamp(last))
	}
	var ok, okTo bool
	s.From, ok = inside("USEABLE_START_TIME", m.useFrom, start)
	s.To, okTo = inside("USEABLE_STOP_TIME", m.useTo, stop)
	if !ok || !okTo {
		return false
	}
	if !s.To.After(s.From) {
		b.fault(m.line, "segment", "", fmt.Sprintf("its usable span from %s to %s has no length", stamp(s.From), stamp(s.To)), "")
		return false
	}
	return true
}

func clamp(t, low, high time.Time) time.Time {
	if t.Before(low) {
		return low
	}
	if t.After(high) {
		return high
	}
	return t
}

func stamp(t time.Time) string { return t.UTC().Format("2006-01-02T15:04:05.000Z") }

// finish makes the trajectories, one an object.
func (b *builder) finish() (*File, error) {
	b.closeSegment()
	if len(b.segments) == 0 && b.faults.Total == 0 {
		b.fault(0, "", "", "holds no segment", "give an OEM with states")
	}
	index := map[object]int{}
	var groups [][]segment
	for _, s := range b.segments {
		k, known := index[s.object]
		if !known {
			k = len(groups)
			index[s.object] = k
			groups = append(groups, nil)
		}
		groups[k] = append(groups[k], s)
	}
	for _, g := range groups {
		b.file.Trajectories = append(b.file.Trajectories, b.trajectory(g))
	}
	if b.faults.Total > 0 {
		slices.SortStableFunc(b.faults.List, func(a, c *elements.Fault) int { return cmp.Compare(a.Line, c.Line) })
		return nil, &b.faults
	}
	return &b.file, nil
}

// trajectory joins the segments of one object; spans that overlap are a fault.
func (b *builder) trajectory(g []segment) orbit.Trajectory {
	t := orbit.Trajectory{Name: g[0].object.name, ID: g[0].object.id, Source: orbit.Source{File: b.name, Line: g[0].line}}
	slices.SortStableFunc(g, func(a, c segment) int { return a.From.Compare(c.From) })
	last := 0 // the one that reaches farthest
	for i := range g {
		s, o := &g[i], &g[last]
		if i > 0 && s.From.Before(o.To) {
			b.fault(max(s.line, o.line), "segment", "", fmt.Sprintf("the usable spans of the segments in line %d, %s to %s, and in line %d, %s to %s, overlap",
				o.line, stamp(o.From), stamp(o.To), s.line, stamp(s.From), stamp(s.To)),
				"set USEABLE_START_TIME and USEABLE_STOP_TIME so that one follows the other")
		}
		if s.To.After(o.To) {
			last = i
		}
		t.Segments = append(t.Segments, s.TrajectorySegment)
		t.Covariance = append(t.Covariance, s.covariance...)
	}
	slices.SortStableFunc(t.Covariance, func(a, c orbit.CovarianceAt) int { return a.Time.Compare(c.Time) })
	t.Covariance = slices.CompactFunc(t.Covariance, func(a, c orbit.CovarianceAt) bool { return a.Time.Equal(c.Time) })
	return t
}
