package sizing

import (
	"errors"
	"fmt"
	"math"

	"slantwise/downlink"
	"slantwise/downlink/rateplan"
	"slantwise/downlink/recorder"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Scheduler decides which mode a spacecraft sends in when, by its rules. It is used by
// one goroutine at a time.
type Scheduler interface {
	// Modes lists what may be sent, by any order; Rules are those of the plans.
	Modes() []rateplan.Mode
	Rules() rateplan.Rules
	// Settle chooses what holds for all passes together, before they are planned.
	Settle(tracks []rateplan.Track) error
	// Plan plans a pass; the modes are those that the plan's steps count in.
	Plan(t rateplan.Track) (rateplan.Plan, []rateplan.Mode, error)
	// Pattern appends to b what the plan of a track hangs on beside its instants, so that one
	// plan serves all tracks that are alike in it; ok is false where there is no such thing.
	Pattern(t *rateplan.Track, b []byte) (pattern []byte, ok bool, err error)
}

// Spec is everything that a study is made of.
type Spec struct {
	Flight *Flight
	Places []Place // of the flight's sites
	Sites  []int   // which of them together; empty: all
	Family Family
	Rates  Scheduler
	// Settles tells whether Settle chooses anything, which costs a look at all passes.
	Settles bool
	Mode    rateplan.Mode // whose margin and availability are meant
	Margin  unit.DB       // required, which is in the need of every mode
	Needs   Requirements
	// Latency returns the 95 % age of data at delivery in seconds for contacts of the
	// year, in order and apart; nil: there is no recorder to tell it.
	Latency func([]recorder.Contact) (float64, error)
}

// Study answers questions about one spacecraft and a set of sites. It is not for use by
// several goroutines.
type Study struct {
	spec  Spec
	turns []Turn
	sites []siteStudy // by the flight's sites; those that take no part stay empty
	need  float64     // least C/N0 with which anything closes, guard included

	turning *turning
	shared  *schedules

	known map[Variant]*Outcome
	plans int // how often the year was planned
}

// siteStudy is what a study keeps of a site.
type siteStudy struct {
	year  *SiteYear
	air   *air
	place []place // of each sample
	own   unit.Length

	marginFlux float64 // dB(W/m²) at the elevation of the margin that is asked for
}

// NewStudy prepares a study. All faults of the sites come at once.
func NewStudy(spec Spec) (*Study, error) {
	if len(spec.Sites) == 0 {
		spec.Sites = spec.Flight.allSites()
	}
	if len(spec.Places) != len(spec.Flight.Sites) {
		return nil, fmt.Errorf("%d places for %d sites; give one each", len(spec.Places), len(spec.Flight.Sites))
	}
	s := &Study{spec: spec, sites: make([]siteStudy, len(spec.Places)), known: map[Variant]*Outcome{}, need: math.Inf(1)}
	faults := []error{spec.Family.Check(), spec.Needs.Check()}
	for _, m := range spec.Rates.Modes() {
		s.need = min(s.need, m.NeedDBHz+float64(spec.Rates.Rules().Guard))
	}
	if math.IsInf(s.need, 1) {
		faults = append(faults, errors.New("the transmitter has no mode; give it one"))
	}
	for _, i := range spec.Sites {
		if err := s.prepare(i); err != nil {
			faults = append(faults, fmt.Errorf("station %s: %w", spec.Flight.Sites[i].Site.Name, err))
		}
	}
	if err := errors.Join(faults...); err != nil {
		return nil, err
	}
	s.turns, s.turning = spec.Flight.Turns(spec.Sites), newTurning(spec.Flight)
	s.shared = newSchedules()
	return s, nil
}

func (s *Study) prepare(i int) error {
	y, p := &s.spec.Flight.Sites[i], &s.spec.Places[i]
	if len(y.Passes) == 0 {
		return errors.New("the spacecraft never passes over it")
	}
	lowest := 90.0
	for _, el := range y.ElevationDeg {
		lowest = min(lowest, el)
	}
	if p.Weather != nil {
		lowest = max(lowest, p.Weather.Lowest().Degrees())
	}
	if m := s.spec.Needs.Margin; m != nil {
		lowest = min(lowest, m.Elevation.Degrees())
	}
	a, err := newAir(p, lowest)
	if err != nil {
		return err
	}
	own := p.Clear.Antenna.Diameter
	if _, err := s.spec.Family.Antenna(p.Clear.Antenna, max(own, 1)); err != nil {
		return err
	}
	st := siteStudy{year: y, air: a, own: own, place: make([]place, len(y.ElevationDeg))}
	for k, el := range y.ElevationDeg {
		st.place[k] = a.ladder.find(max(el, lowest))
	}
	s.sites[i] = st
	return s.prepareMargin(i)
}

// prepareMargin finds the flux density at the elevation at which a margin is asked for:
// the mean over the passes through it, or where the contacts do not reach so low, that
// of the orbit's distance there.
func (s *Study) prepareMargin(i int) error {
	m := s.spec.Needs.Margin
	if m == nil {
		return nil
	}
	y := &s.spec.Flight.Sites[i]
	if _, flux, ok := y.At(m.Elevation); ok {
		s.sites[i].marginFlux = flux
		return nil
	}
	link, err := downlink.NewLink(s.spec.Places[i].Clear)
	if err != nil {
		return err
	}
	g, err := link.StatedGeometry(y.slantAt(m.Elevation), m.Elevation, nil, nil)
	if err != nil {
		return err
	}
	b, err := link.At(g)
	if err != nil {
		return err
	}
	s.sites[i].marginFlux = b.PowerFluxDensity
	return nil
}

// Variant is a change of the design. The zero value is the scenario's own.
type Variant struct {
	Diameter unit.Length      // of every site's antenna; 0: each site's own
	Power    unit.DB          // added to the transmit power
	Pointing unit.DB          // added to the loss of pointing
	Noise    unit.Temperature // added to the system noise
	Raise    unit.Angle       // added to every site's least elevation
	follows  bool             // mounts follow everything
	thin     int              // every so many passes are planned, and stand for the others; 0: all
}

// Plans returns how often the passes of the year were planned.
func (s *Study) Plans() int { return s.plans }

// Moved tells how many of the sites' antennas have a mount to reckon with, of how many.
func (s *Study) Moved() (with, of int) {
	for _, i := range s.spec.Sites {
		if s.spec.Places[i].Clear.Antenna.Mount != nil {
			with++
		}
	}
	return with, len(s.spec.Sites)
}

// Own returns the diameter of the scenario's antennas where all have the same; ok is
// false otherwise.
func (s *Study) Own() (d unit.Length, ok bool) {
	for k, i := range s.spec.Sites {
		own := s.sites[i].own
		if k > 0 && own != d {
			return 0, false
		}
		d = own
	}
	return d, d > 0
}

// antenna returns a site's antenna in a variant: the scenario's own without a diameter,
// or the family's.
func (s *Study) antenna(i int, v Variant) (*station.Antenna, error) {
	a := s.spec.Places[i].Clear.Antenna
	if v.Diameter == 0 {
		return s.spec.Family.Antenna(a, s.sites[i].own)
	}
	return s.spec.Family.Antenna(a, v.Diameter)
}

func (s *Study) front(i int, v Variant) (*front, error) {
	a, err := s.antenna(i, v)
	if err != nil {
		return nil, err
	}
	return s.sites[i].air.newFront(&s.spec.Places[i], a, v.Noise.Kelvins())
}
