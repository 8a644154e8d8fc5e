package downlink

import (
	"errors"
	"time"

	"slantwise/downlink/modem"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// LinkSpec is what a link is made of.
type LinkSpec struct {
	Transmitter Transmitter
	Mode        *modem.Mode      // nil: a carrier without data
	Frame       *station.Frame   // of the site; nil for a stated geometry without one
	Antenna     *station.Antenna // of the station
	PathModels  []PathModel      // their terms follow the free-space loss and the polarisation mismatch
	NoiseModels []NoiseModel
}

// Link is a transmitter, a mode, a site and an antenna prepared for the evaluation
// of budgets. It is immutable and safe for use by many goroutines.
type Link struct {
	spec  LinkSpec
	terms []TermInfo
	notes []Note
}

// NewLink checks the spec and prepares the link. It returns all faults at once.
func NewLink(spec LinkSpec) (*Link, error) { return nil, errors.New("downlink: not built yet") }

// Terms lists the terms of every budget of the link, in their order.
func (l *Link) Terms() []TermInfo { return l.terms }

// Notes lists what was assumed, what was taken by default, and warnings.
func (l *Link) Notes() []Note { return l.notes }

// Mode returns the mode that the link was made for, nil without one.
func (l *Link) Mode() *modem.Mode { return l.spec.Mode }

// GeometryOf returns the geometry of a spacecraft's state; it needs a Frame.
func (l *Link) GeometryOf(s orbit.State) Geometry { return Geometry{} }

// StatedGeometry returns the geometry of a stated range and elevation, where the
// azimuth is not known and no element set is needed. offBoresight nil: worked out
// from the attitude over a sphere.
func (l *Link) StatedGeometry(slant unit.Length, elevation unit.Angle, offBoresight *unit.Angle) (Geometry, error) {
	return Geometry{}, errors.New("downlink: not built yet")
}

// At returns the budget at a geometry.
func (l *Link) At(g Geometry) (*Budget, error) { return nil, errors.New("downlink: not built yet") }

// Track gives Earth-fixed states over a span of seconds; *orbit.Ephemeris is one.
type Track interface {
	Seconds(t time.Time) float64
	Span() float64
	StateAt(s float64) orbit.State
}

// Profile returns the budget along a pass from aos to los, a sample every step and
// one at los.
func (l *Link) Profile(track Track, aos, los time.Time, step time.Duration) (*Profile, error) {
	return nil, errors.New("downlink: not built yet")
}
