package downlink

import (
	"errors"
	"fmt"
	"time"

	"slantwise/downlink/modem"
	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// LinkSpec is what a link is made of.
type LinkSpec struct {
	Transmitter Transmitter
	Receiver    *Receiver           // not nil: the link is an uplink to it, in place of Transmitter, from the Antenna's transmit side; NoiseModels, Sun and Moon stay empty
	Mode        *modem.Mode         // nil: a carrier without data
	Frame       *station.Frame      // of the site; nil for a stated geometry without one
	Refraction  *station.Refraction // for the apparent elevation of profiles; nil: it stays NaN
	Antenna     *station.Antenna    // of the station
	PathModels  []PathModel         // their terms follow the free-space loss and the polarisation mismatch
	NoiseModels []NoiseModel

	Bodies    *Bodies           // the Sun and the Moon; nil: their angles are not known
	Sun, Moon *propagation.Disc // how bright they are; nil: they add no noise
	ClearSky  bool              // they shine through the clear air of the path

	Orbit *OrbitError // how uncertain the spacecraft's position is; nil: it is taken as exact

	CrossPolar CrossPolar // where the other polarisation is in use; nil: it is not
}

// CrossPolar tells the discrimination between the two polarisations at a geometric
// elevation, which is the ratio of the carrier to the interference from an equal
// carrier on the other polarisation.
type CrossPolar func(elevation unit.Angle) (unit.DB, error)

// Link is a transmitter, a mode, a site and an antenna prepared for the evaluation
// of budgets. It is immutable and safe for use by many goroutines.
type Link struct {
	spec  LinkSpec
	mode  *modem.Resolved // nil without a mode
	terms []TermInfo
	notes []Note

	base         []float64 // the value of each term that is the same everywhere
	slots        slots
	pathCounts   []int   // how many terms each path model has
	eirpTerms    int     // that many first terms make the EIRP toward the station
	waveNumberDB float64 // 20 log10(4π/λ), the free-space loss at 1 m

	pattern   *Pattern           // whose gain depends on the angle; nil: it is in base
	spin      *spinCurve         // of a pattern that turns; nil: it does not
	view      *bodyView          // nil: the angle to the boresight is all there is to know
	gain      *station.Tabulated // dBi; nil: not known
	gainLoss  float64            // dB, surface and blockage, that belong to the gain
	beamwidth unit.Angle         // 0: not known
	noise     noisePlan
	caps      rateCaps

	quantile *station.ErrorQuantile // of the pointing error in the budget; nil: the mean loss counts
	sure     *station.ErrorQuantile // by which the beam is judged; nil: the link knows no orbit error
}

// slots are the places of the terms that change with the geometry; -1: there is no
// such term, or it does not change.
type slots struct{ craftGain, freeSpace, path, stationGain, pointing, orbitPointing int }

// NewLink checks the spec and prepares the link. It returns all faults at once.
func NewLink(spec LinkSpec) (*Link, error) {
	l := &Link{spec: spec}
	if spec.Receiver != nil {
		l.spec.Transmitter = spec.Receiver.Transmitter
	}
	if err := l.check(); err != nil {
		return nil, err
	}
	spec = l.spec
	f := spec.Transmitter.Frequency
	l.waveNumberDB = float64(FreeSpaceLoss(unit.Metre, f))
	if g, ok := spec.Antenna.GainAt(f); ok {
		l.gain = g
	}
	l.beamwidth, _ = spec.Antenna.BeamwidthAt(f)
	l.view = l.newBodyView()
	if err := l.prepareOrbitError(); err != nil {
		return nil, err
	}
	l.buildTerms()
	if err := l.addBodies(); err != nil {
		return nil, err
	}
	l.buildNoise()
	l.buildCaps()
	l.writeNotes()
	return l, nil
}

func (l *Link) check() error {
	t, a := &l.spec.Transmitter, l.spec.Antenna
	var faults []error
	if err := l.validateCraft(); err != nil {
		faults = append(faults, fmt.Errorf("%s %q: %w", l.who(), t.Name, err))
	}
	if a == nil {
		return errors.Join(append(faults, errors.New("the link has no station antenna"))...)
	}
	if err := a.Validate(); err != nil {
		faults = append(faults, fmt.Errorf("antenna %q: %w", a.Name, err))
	} else if err := l.useAntenna(); err != nil {
		faults = append(faults, err)
	}
	if n := a.Noise; !l.up() && n != nil && n.SpillOver != nil && len(l.spec.NoiseModels) == 0 {
		faults = append(faults, fmt.Errorf("antenna %q: its temperature is to be worked out from the sky, and the link has no path to see it through; give the antenna temperature", a.Name))
	}
	if l.spec.Mode != nil {
		r, err := l.spec.Mode.Resolve()
		if err != nil {
			faults = append(faults, fmt.Errorf("mode %q: %w", l.spec.Mode.Name, err))
		}
		l.mode = &r
	}
	return errors.Join(faults...)
}

// validateCraft checks the spacecraft's end.
func (l *Link) validateCraft() error {
	if l.up() {
		return l.spec.Receiver.Validate()
	}
	return l.spec.Transmitter.Validate()
}

// useAntenna takes the antenna's side that the link uses and checks its frequency.
func (l *Link) useAntenna() error {
	f := l.Frequency()
	if l.up() {
		if len(l.spec.NoiseModels) > 0 || l.spec.Sun != nil || l.spec.Moon != nil {
			return errors.New("an uplink has no noise of the station's sky; leave NoiseModels, Sun and Moon out")
		}
		sending, err := l.spec.Antenna.Sending(f)
		if err != nil {
			return err
		}
		l.spec.Antenna = sending
	}
	return checkFrequency(l.spec.Antenna, f)
}

// BandError says that an antenna does not take a frequency.
type BandError struct {
	Antenna   string
	Frequency unit.Frequency
	Bands     []station.Band
}

// Error names the antenna, the frequency and the bands.
func (e *BandError) Error() string {
	s := fmt.Sprintf("antenna %q: %g MHz lies outside its bands", e.Antenna, e.Frequency.Megahertz())
	for i, b := range e.Bands {
		if i > 0 {
			s += ","
		}
		s += fmt.Sprintf(" %g to %g MHz", b.Low.Megahertz(), b.High.Megahertz())
	}
	return s + "; choose another antenna or transmitter"
}

func checkFrequency(a *station.Antenna, f unit.Frequency) error {
	taken := len(a.Bands) == 0
	for _, b := range a.Bands {
		taken = taken || b.Holds(f)
	}
	if !taken {
		return &BandError{a.Name, f, a.Bands}
	}
	tables := []*station.Tabulated{a.Gain, a.GOverT}
	if a.Noise != nil {
		tables = append(tables, a.Noise.SpillOver, a.Noise.AntennaTemperature, a.Noise.SystemTemperature)
	}
	for _, t := range tables {
		if t != nil && !t.HoldsFrequency(f) {
			return fmt.Errorf("antenna %q: a measured table does not reach %g MHz; a figure is not continued beyond its table", a.Name, f.Megahertz())
		}
	}
	return nil
}

// Terms lists the terms of every budget of the link, in their order.
func (l *Link) Terms() []TermInfo { return l.terms }

// Notes lists what was assumed, what was taken by default, and warnings.
func (l *Link) Notes() []Note { return l.notes }

// Mode returns the mode that the link was made for with what the catalogue adds to
// it, nil without one.
func (l *Link) Mode() *modem.Resolved { return l.mode }

// Frequency returns the carrier's frequency.
func (l *Link) Frequency() unit.Frequency { return l.spec.Transmitter.Frequency }

// Doppler returns the shift of the received carrier, -f ṙ/c: first order, in Hz.
func (l *Link) Doppler(rangeRate unit.Speed) unit.Frequency {
	return unit.Frequency(-l.Frequency().Hertz() * float64(rangeRate) / unit.SpeedOfLight)
}

// GeometryOf returns the geometry of a spacecraft's state at an instant and how fast the
// range grows. The link needs a Frame.
func (l *Link) GeometryOf(t time.Time, s orbit.State) (Geometry, unit.Speed) {
	look := l.spec.Frame.Look(s)
	g := Geometry{Time: t, Azimuth: look.Azimuth, Elevation: look.Elevation, Range: look.Range, state: s, flown: true}
	l.lookFromSpacecraft(&g, s)
	return g, look.RangeRate
}
