package scenario

import (
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// Ephemeris flies a spacecraft over [from, to]: the one way in which commands come by
// an ephemeris. scratch is rebuilt and returned where its memory may be used again;
// nil makes a new one. After an error the scratch holds nothing.
//
// The error is that of orbit.NewEphemeris or of Ephemeris.Follow, and a *orbit.SpanError
// where the span lies after ValidUntil. Where the orbit ends inside the span, the
// ephemeris ends there and tells why (Truncated); where it is not to be flown, it has gaps (Gaps).
func (s *Scenario) Ephemeris(c *Spacecraft, from, to time.Time, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error) {
	if scratch == nil {
		scratch = &orbit.Ephemeris{}
	}
	end := to
	if u := c.ValidUntil; !u.IsZero() && u.Before(to) {
		if !u.After(from) {
			return nil, &orbit.SpanError{Object: c.Name, Time: from, Until: to, From: s.Window.Start, To: u, Reason: c.afterwards()}
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
