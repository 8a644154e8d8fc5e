package scenario

import (
	"errors"
	"fmt"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// Ephemeris flies a spacecraft over [from, to]: the one way in which commands come by
// an ephemeris. scratch is rebuilt and returned where its memory may be used again;
// nil makes a new one. After an error the scratch holds nothing.
//
// The error is that of orbit.NewEphemeris or of Ephemeris.Follow, and an *EndedError
// where the span lies after ValidUntil. Where the orbit ends inside the span, the
// ephemeris ends there and tells why (Truncated); where it is not to be flown, it has gaps (Gaps).
func (s *Scenario) Ephemeris(c *Spacecraft, from, to time.Time, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error) {
	if scratch == nil {
		scratch = &orbit.Ephemeris{}
	}
	end := to
	if u := c.ValidUntil; !u.IsZero() && u.Before(to) {
		if !u.After(from) {
			return nil, &EndedError{From: from, Until: u}
		}
		end = u
	}
	var err error
	if c.Trajectory != nil {
		err = scratch.Follow(c.Trajectory, c.Shift, from, end, s.Earth)
	} else {
		err = scratch.Rebuild(s.ElementsOver(c, from, to).Elements, from, end, s.Earth)
	}
	if err != nil {
		return nil, err
	}
	if end.Before(to) {
		scratch.AddGap(orbit.Gap{From: end, To: to, Reason: c.afterwards()})
	}
	return scratch, nil
}

// EndedError says that an orbit was given up before the time asked for.
type EndedError struct {
	From  time.Time // asked for
	Until time.Time // valid_until_utc of the spacecraft
}

// Error names both instants.
func (e *EndedError) Error() string {
	return fmt.Sprintf("no orbit is known at %s: valid_until_utc, %s: after it the orbit is another; give the orbit after the manoeuvre, or ask for an earlier time",
		stampOf(e.From), stampOf(e.Until))
}

// EphemerisAt flies a spacecraft where every instant of [from, to], both included and
// perhaps the same, has a state. Beside the errors of Ephemeris it is a *orbit.SpanError,
// which names all that the orbit covers, where one has none.
func (s *Scenario) EphemerisAt(c *Spacecraft, from, to time.Time) (*orbit.Ephemeris, error) {
	// A span of no length has no knots to look between; where an ephemeris ends there are no others.
	eph, err := s.Ephemeris(c, from, to.Add(time.Second), nil)
	var outside *orbit.SpanError
	if errors.As(err, &outside) && c.Trajectory != nil {
		eph, err = s.Ephemeris(c, from, to, nil)
	}
	if err == nil {
		err = eph.Whole(from, to)
	}
	if !errors.As(err, &outside) {
		return eph, err
	}
	told := *outside
	told.Time, told.Until = from, to
	if from.Equal(to) {
		told.Until = time.Time{}
	}
	if c.Trajectory != nil {
		told.Object, told.Spans = c.Trajectory.Name, c.covered()
		told.From, told.To = told.Spans[0].From, told.Spans[len(told.Spans)-1].To
		if gaps := c.gaps(from, to.Add(time.Millisecond)); told.Reason == "" && len(gaps) > 0 {
			told.Reason = gaps[0].Reason
		}
	}
	return nil, &told
}

// covered returns what a trajectory covers, moved as the spacecraft is.
func (c *Spacecraft) covered() []orbit.TimeSpan {
	spans, moved := c.Trajectory.Spans(), c.Shift.Late+c.Shift.Slip
	for i := range spans {
		spans[i].From, spans[i].To = spans[i].From.Add(moved), spans[i].To.Add(moved)
	}
	return spans
}

// ElementsOver returns the element set that Ephemeris flies over [from, to]: the one
// chosen for the middle of it, which is Elements for the window itself.
func (s *Scenario) ElementsOver(c *Spacecraft, from, to time.Time) elements.Chosen {
	if from.Equal(s.Window.Start) && to.Equal(s.Window.End) {
		return c.Elements
	}
	return c.ElementsAt(from.Add(to.Sub(from) / 2))
}

// Kept returns the orbit of the spacecraft as its operator keeps it, for statistics over
// spans that one element set does not carry its theory through.
func (c *Spacecraft) Kept() (*orbit.KeptOrbit, error) { return orbit.KeepOrbit(c.Elements.Elements) }
