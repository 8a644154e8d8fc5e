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
// The error is that of orbit.NewEphemeris. Where the orbit ends inside the span, the
// ephemeris ends there and tells why (Truncated).
func (s *Scenario) Ephemeris(c *Spacecraft, from, to time.Time, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error) {
	if scratch == nil {
		scratch = &orbit.Ephemeris{}
	}
	el := s.ElementsOver(c, from, to).Elements
	if err := scratch.Rebuild(el, from, to, s.Earth); err != nil {
		return nil, err
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
