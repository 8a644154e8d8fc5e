package downlink

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

var errNoAzimuth = errors.New("a fixed antenna's pointing loss needs the azimuth of the spacecraft; give it, or a boresight in the zenith")

// At returns the budget at a geometry. Range must be greater than 0 and elevation
// known. The error says which term has no value there.
func (l *Link) At(g Geometry) (*Budget, error) {
	if !(g.Range > 0) || math.IsInf(float64(g.Range), 1) {
		return nil, &unit.RangeError{Quantity: "range", Value: g.Range.Kilometres(), Unit: "km", Allowed: "greater than 0 km and finite"}
	}
	if !(math.Abs(g.Elevation.Degrees()) <= 90) {
		return nil, &unit.RangeError{Quantity: "elevation", Value: asGiven(g.Elevation), Unit: "deg", Allowed: "-90 to 90 deg"}
	}
	s := l.newScratch()
	s.geometry = g
	if err := l.evaluate(s); err != nil {
		return nil, err
	}
	r := &s.result
	b := &Budget{
		Time: g.Time, Azimuth: g.Azimuth, Elevation: g.Elevation, Range: g.Range, OffBoresight: g.OffBoresight,
		AroundBoresight: g.AroundBoresight, BodyOffZ: g.BodyOffZ, BodyAroundZ: g.BodyAroundZ,
		ReceivedPowerDBm: r.receivedDBm, PowerFluxDensity: r.fluxDBWM2,
		SystemNoise: unit.Temperature(r.systemK), GOverT: unit.DB(r.gOverT), CN0: unit.DB(r.cn0),
		EbN0: unit.DB(r.ebn0), RequiredEbN0: unit.DB(math.NaN()), Margin: unit.DB(r.margin), MarginOver: unit.DB(r.marginOver),
		DataRate: l.dataRate(), AchievableRate: unit.BitRate(r.achievableBps), AchievableLimit: r.limit,
		Usable: r.usable, CI: unit.DB(math.NaN()),
	}
	if l.mode != nil {
		b.RequiredEbN0 = l.mode.Required
	}
	b.Terms = make([]Term, len(l.terms))
	for i := range l.terms {
		b.Terms[i] = Term{l.terms[i], s.terms[i]}
	}
	b.NoiseParts = make([]NoisePart, len(l.noise.parts))
	for i, p := range l.noise.parts {
		b.NoiseParts[i] = NoisePart{p.Name, unit.Temperature(s.noise[i]), p.Source}
	}
	b.OrbitAlong, b.OrbitTotal, b.SureError = r.look.Along, r.look.Total(), r.sureError
	b.DopplerSpread = l.dopplerSpread(r.look)
	b.Sun, b.Moon = s.geometry.bodies.sun, s.geometry.bodies.moon
	b.Cautions = l.cautions(&g, r)
	if l.spec.CrossPolar == nil {
		return b, nil
	}
	ci, err := l.spec.CrossPolar(g.Elevation)
	if err != nil {
		b.Cautions = append(b.Cautions, "no discrimination of the other polarisation: "+err.Error())
		return b, nil
	}
	b.CI = ci
	return b, nil
}

func (l *Link) noTransmitGain(g *Geometry) error {
	t := &l.spec.Transmitter
	unknown := math.IsNaN(g.OffBoresight.Radians())
	if l.spin != nil {
		unknown = math.IsNaN(g.BodyOffZ.Radians())
	}
	switch {
	case unknown && l.view != nil && t.Attitude == AttitudeHistory:
		_, _, _, err := t.Body.History.BodyAxes(g.Time, l.spec.Bodies.earth)
		return fmt.Errorf("transmitter %q: %w", t.Name, err)
	case unknown && t.Attitude.HasBody():
		return fmt.Errorf("%s %q: attitude %s needs the Sun and the stars, and the link was made without the sky of a window", l.who(), t.Name, t.Attitude)
	case unknown:
		return fmt.Errorf("%s %q: its attitude is left out, and its gain depends on it; give the attitude", l.who(), t.Name)
	case l.spin != nil:
		return fmt.Errorf("%s %q: at %.2f deg off the spin axis the turning antenna shows a side where its pattern has no gain that counts as %q; give its pattern there, or let the spin count as something else",
			l.who(), t.Name, g.BodyOffZ.Degrees(), t.Body.SpinGain)
	}
	_, err := l.pattern.GainToward(g.OffBoresight, g.AroundBoresight)
	return fmt.Errorf("%s %q: %w", l.who(), t.Name, err)
}

// cautions says what is doubtful at a geometry.
func (l *Link) cautions(g *Geometry, r *result) []string {
	var out []string
	say := func(format string, args ...any) { out = append(out, fmt.Sprintf(format, args...)) }
	if g.Elevation < 0 {
		say("the spacecraft stands below the horizontal, at %.2f deg: the ground may be in the way", g.Elevation.Degrees())
	}
	switch w := l.beamwidth; {
	case !r.usable:
		say("the spacecraft stands %.3g deg off the beam's axis, outside the main lobe (%.3g deg): the link counts as unusable", r.pointing.Degrees(), w.Degrees())
	case w > 0 && r.sureError > w/2:
		say("by the orbit's error and the antenna's the spacecraft may stand %.3g deg off the beam's axis (probability %g), beyond the half-power point at %.3g deg: the beam is too narrow to be sure of",
			r.sureError.Degrees(), SureProbability, (w / 2).Degrees())
	case w > 0 && r.pointing > w/2:
		say("the spacecraft stands %.3g deg off the beam's axis, beyond the half-power point: the pointing loss may be up to 4.3 dB more", r.pointing.Degrees())
	}
	for _, t := range l.tables() {
		low, high := t.table.Span()
		if t.table.IsConstant() || g.Elevation >= low-slack && g.Elevation <= high+slack {
			continue
		}
		say("the table of the %s runs from %g to %g deg: at %.2f deg the value at its end is held", t.name, asGiven(low), asGiven(high), g.Elevation.Degrees())
	}
	return out
}

// slack is how far beyond a table's end nothing is said: AOS at the end itself is
// known to a millisecond alone.
const slack = 0.01 * unit.Degree

type namedTable struct {
	name  string
	table *station.Tabulated
}

// tables lists what the link reads from a table over elevation.
func (l *Link) tables() []namedTable {
	name := [...]string{"antenna temperature", "system noise temperature", "measured G/T", "measured G/T", ""}[l.noise.kind]
	var out []namedTable
	if l.noise.first != nil {
		out = append(out, namedTable{name, l.noise.first})
	}
	if l.gain != nil {
		out = append(out, namedTable{"measured gain", l.gain})
	}
	return out
}
