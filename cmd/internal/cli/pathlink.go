package cli

import (
	"fmt"
	"math"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// skies prepares what lies between the spacecraft and the stations of a scenario, each
// path once: links that differ by their mode alone share it. Not for use by several
// goroutines.
type skies struct {
	scenario *scenario.Scenario
	bodies   *downlink.Bodies // nil without a window
	paths    map[skyKey]*propagation.Path
	flight   pass.Window // when orbits are flown; zero: they are not
}

// skyKey tells paths apart.
type skyKey struct {
	station   string
	frequency unit.Frequency
	tilt      unit.Angle
	aperture  propagation.Aperture
}

func newSkies(s *scenario.Scenario) *skies {
	k := &skies{scenario: s, paths: map[skyKey]*propagation.Path{}, flight: pass.Window{From: s.Window.Start, To: s.Window.End}}
	if !s.Window.Start.IsZero() {
		k.bodies = downlink.NewBodies(s.Window.Start, s.Window.End, s.Earth)
	}
	return k
}

// skyLink is what the air does to one transmitter and antenna, ready for a link.
type skyLink struct {
	path    *propagation.Path
	spec    propagation.PathSpec // of the path
	paths   []downlink.PathModel
	noise   []downlink.NoiseModel
	sun     *propagation.Disc
	moon    *propagation.Disc
	cross   downlink.CrossPolar
	missing []string // parts that were asked for and that the scenario does not state
	notes   []downlink.Note
}

// between prepares the sky of a downlink, under its weather or as a clear sky.
func (k *skies) between(st *scenario.Station, t *downlink.Transmitter, a *station.Antenna, clear bool) (*skyLink, error) {
	out, err := k.over(st, t, a, clear)
	if err != nil {
		return nil, err
	}
	if err := out.addNoise(st, t, a, clear); err != nil {
		return nil, err
	}
	if err := out.addBodies(&k.scenario.Path, t.Frequency); err != nil {
		return nil, err
	}
	if t.OtherPolarization && !clear {
		out.addCross()
	}
	return out, nil
}

// over prepares what the air takes, of a link in either direction.
func (k *skies) over(st *scenario.Station, t *downlink.Transmitter, a *station.Antenna, clear bool) (*skyLink, error) {
	out := &skyLink{}
	choice := &k.scenario.Path
	var err error
	if out.path, err = k.path(st, t, a, out); err != nil {
		return nil, err
	}
	weather := downlink.NewWeather(out.path)
	if clear && !choice.ClearSky { // else the path itself is a clear sky's
		weather = downlink.NewClearSky(out.path)
	}
	out.paths = append(out.paths, weather)
	if choice.Ionosphere {
		ionosphere, err := downlink.NewIonosphere(downlink.IonosphereSpec{
			Frequency: t.Frequency, Exceedance: choice.Exceedance, ClearSky: clear,
			Scintillation: choice.IonosphericScintillation, Rotation: choice.IonosphericRotation,
			Linear: bothLinear(t, a), Content: choice.ElectronContent, Field: choice.MagneticField,
		})
		if err != nil {
			return nil, err
		}
		out.paths = append(out.paths, ionosphere)
		if !clear && ionosphere.LacksScintillation() {
			out.missing = append(out.missing, "ionosphere")
		}
	}
	return out, nil
}

// addCross adds the discrimination of the other polarisation.
func (l *skyLink) addCross() {
	l.cross = func(elevation unit.Angle) (unit.DB, error) {
		v, _, err := l.path.CrossPolar(elevation)
		return v, err
	}
	l.note(downlink.Assumption, "the other polarisation is in use: C/I is the discrimination not exceeded for the path's percentage (P.618 §4.1), from rain alone and for an equal carrier; it stands beside C/N0 and takes nothing off it; beyond 60 deg of elevation and 1 %% of the year, where its stated range ends, the formula's value is given")
}

func (l *skyLink) note(kind downlink.NoteKind, format string, args ...any) {
	l.notes = append(l.notes, downlink.Note{Kind: kind, Text: fmt.Sprintf(format, args...)})
}

// path returns the prepared path of a link and notes what is missing from it.
func (k *skies) path(st *scenario.Station, t *downlink.Transmitter, a *station.Antenna, into *skyLink) (*propagation.Path, error) {
	spec := k.spec(st, t.Frequency)
	spec.Tilt = k.tilt(t, into)
	spec.Aperture = apertureOf(a, t.Frequency)
	into.missing, into.spec = missingParts(&spec), spec
	key := skyKey{station: st.Site.Name, frequency: t.Frequency, tilt: spec.Tilt}
	if spec.Aperture != nil {
		key.aperture = *spec.Aperture
	}
	if p := k.paths[key]; p != nil {
		return p, nil
	}
	p, err := propagation.NewPath(spec)
	if err != nil {
		return nil, fmt.Errorf("station %s: path at %g MHz: %w", st.Site.Name, t.Frequency.Megahertz(), err)
	}
	k.paths[key] = p
	return p, nil
}

// spec is the path of a station at a frequency, as the scenario asks for it.
func (k *skies) spec(st *scenario.Station, f unit.Frequency) propagation.PathSpec {
	c := &k.scenario.Path
	return propagation.PathSpec{
		Frequency: f, Climate: st.Climate, Exceedance: c.Exceedance, ClearSky: c.ClearSky,
		WithoutGas: !c.Gas, WithoutCloud: !c.Cloud, WithoutRain: !c.Rain, WithoutScintillation: !c.Scintillation,
		BelowHorizontal: st.Site.MinimumElevation < 0,
	}
}

// tilt returns the tilt of the wave's polarisation, 45° where it is circular.
func (k *skies) tilt(t *downlink.Transmitter, into *skyLink) unit.Angle {
	const circular = 45 * unit.Degree
	switch p := t.Polarization; {
	case p == nil:
		into.note(downlink.Assumption, "the polarisation is not stated: rain takes it as circular")
	case p.Kind != station.Linear:
	case p.Tilt == nil:
		into.note(downlink.Assumption, "the tilt of the linear polarisation is not known: rain takes it as 45 deg")
	default:
		return *p.Tilt
	}
	return circular
}

// apertureOf returns the antenna as scintillation sees it: only the product of its
// efficiency and the square of its diameter counts, which a gain gives, too. Nil where
// neither is known.
func apertureOf(a *station.Antenna, f unit.Frequency) *propagation.Aperture {
	if a.Diameter > 0 && a.Efficiency > 0 {
		return &propagation.Aperture{Diameter: a.Diameter, Efficiency: a.Efficiency}
	}
	if gain, ok := a.GainAt(f); ok {
		d := f.Wavelength().Metres() / math.Pi * math.Sqrt(unit.DB(gain.Value(90*unit.Degree)).Ratio())
		return &propagation.Aperture{Diameter: unit.Length(d), Efficiency: 1}
	}
	if a.Diameter > 0 {
		return &propagation.Aperture{Diameter: a.Diameter, Efficiency: 0.5} // P.618's careful choice
	}
	return nil
}

// missingParts lists the parts of the path that were asked for and have nothing to be
// computed from.
func missingParts(s *propagation.PathSpec) []string {
	if s.ClearSky {
		return nil
	}
	c := &s.Climate
	var out []string
	if !s.WithoutRain && c.Rate001 == nil && c.Months == nil && s.Frequency >= unit.Gigahertz {
		out = append(out, "rain")
	}
	if !s.WithoutCloud && c.CloudWater.Empty() && c.CloudLogNormal == nil {
		out = append(out, "cloud")
	}
	if !s.WithoutScintillation && s.Aperture == nil {
		out = append(out, "scintillation")
	}
	return out
}

// bothLinear tells whether both antennas are linear with a known angle between them:
// only there a rotation of the polarisation takes anything off.
func bothLinear(t *downlink.Transmitter, a *station.Antenna) bool {
	known := func(p *station.Polarization) bool { return p != nil && p.Kind == station.Linear && p.Tilt != nil }
	return known(t.Polarization) && known(a.Polarization)
}
