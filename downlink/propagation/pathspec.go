package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// PathSpec is what a Path is prepared for.
type PathSpec struct {
	Frequency  unit.Frequency // from 10 MHz; P.838 has no rain under 1 GHz
	Climate    Climate
	Exceedance Exceedance // of an average year, 0.001 % to 50 %
	Tilt       unit.Angle // of the polarisation against the horizontal; 45° for circular
	Aperture   *Aperture  // nil: scintillation is left out, and a note says so
	Editions   Editions   // the zero value stands for Newest
	ClearSky   bool       // gas of the ordinary air only

	WithoutGas, WithoutCloud, WithoutRain, WithoutScintillation bool

	BelowHorizontal bool        // also rays from under the horizontal, down to the sea's edge, for a station on a height
	SatelliteHeight unit.Length // above the ground for the bending of the ray; 0: far away
}

// The columns of a path: the parts of one evaluation, scintillation as its square.
const (
	colGas = iota
	colClearGas
	colCloud
	colRain
	colScintillation
	columns
)

// pathModel evaluates all parts of a path without tables; elevations are geometric.
type pathModel struct {
	pPct, gasPct  float64 // percentage sought, and the one of the gas
	gas, clearGas *gasCurve
	cloudZenith   float64 // dB
	rain          *rainPath
	scintillation *scintillation
	low           *lowAngle // nil: the continuation of cloud's curved layer
	notes         notes
}

func newPathModel(s PathSpec) (*pathModel, error) { return newPathModelLike(s, nil) }

// newPathModelLike prepares a model and takes over the gas of another of the same
// spec, where its percentage asks for the same gas.
func newPathModelLike(s PathSpec, other *pathModel) (*pathModel, error) {
	e := s.Editions
	if e == (Editions{}) {
		e = Newest
	}
	fGHz, p := s.Frequency.Gigahertz(), s.Exceedance.Percents()
	m := &pathModel{pPct: p}
	err := firstError(e.check(), within("frequency", fGHz, "GHz", 0.01, 1000, ""),
		within("exceeded percentage", p, "%", 0.001, 50, "P.618's total covers this span"), checkTilt(s.Tilt.Degrees()),
		checkLatitude(s.Climate.Latitude.Degrees()), checkStationHeight(s.Climate.Height.Kilometres()),
		notNegative("satellite height", s.SatelliteHeight.Kilometres(), "km"))
	if err != nil {
		return nil, err
	}
	if h := s.SatelliteHeight.Kilometres(); h > 0 && h <= topKm {
		return nil, &unit.RangeError{Quantity: "satellite height", Value: h, Unit: "km", Allowed: "above 100 km, or 0 for far away"}
	}
	clear, err := s.Climate.profile(&m.notes)
	if err != nil {
		return nil, err
	}
	if err := m.prepareGas(s, e, clear, other); err != nil {
		return nil, err
	}
	if s.ClearSky {
		m.notes.add(Assumption, "clear sky: gas of the ordinary air only")
		return m, nil
	}
	return m, firstError(m.prepareCloud(s, e), m.prepareRain(s), m.prepareScintillation(s, clear))
}

func (m *pathModel) prepareGas(s PathSpec, e Editions, clear Atmosphere, other *pathModel) (err error) {
	fGHz := s.Frequency.Gigahertz()
	if other != nil {
		m.clearGas = other.clearGas
	} else if m.clearGas, err = s.gasOf(clear); err != nil {
		return err
	}
	m.gas = m.clearGas
	if s.WithoutGas {
		m.notes.add(Assumption, "gas is left out as asked")
		return nil
	}
	m.notes.beyond("P.676-13", "frequency", fGHz, "GHz", 1, 1000)
	m.notes.add(Assumption, "gas: P.676-13 Annex 1 line by line along the bent ray, %s", clear.Name())
	if s.ClearSky {
		return nil
	}
	m.gasPct = combinationPercent(m.pPct, e.P618)
	if other != nil && other.gasPct == m.gasPct {
		m.gas = other.gas
		return nil
	}
	humid, err := s.Climate.humid(clear, m.gasPct, &m.notes)
	if err != nil || s.Climate.Vapour.Empty() {
		return err
	}
	m.gas, err = s.gasOf(humid)
	return err
}

// gasOf traces the rays through an atmosphere; without gas they still bend.
func (s *PathSpec) gasOf(a Atmosphere) (*gasCurve, error) {
	layers, err := NewLayers(a, s.Climate.Height)
	if err != nil {
		return nil, err
	}
	radius := math.Inf(1)
	if s.SatelliteHeight > 0 {
		radius = earthRadiusKm + s.SatelliteHeight.Kilometres()
	}
	absorption := make([]float64, len(layers.shells))
	if !s.WithoutGas {
		absorption = layers.absorption(s.Frequency.Gigahertz())
	}
	c := newGasCurve(layers, absorption, radius)
	if !s.BelowHorizontal {
		return c, nil
	}
	f := s.Frequency.Gigahertz()
	if s.WithoutGas {
		f = 0
	}
	return c, c.addBelow(f)
}

func (m *pathModel) prepareCloud(s PathSpec, e Editions) error {
	if s.WithoutCloud {
		m.notes.add(Assumption, "cloud is left out as asked")
		return nil
	}
	liquid, known, err := s.Climate.liquid(combinationPercent(m.pPct, e.P618), &m.notes)
	if err != nil || !known {
		return err
	}
	fGHz := s.Frequency.Gigahertz()
	m.notes.beyond(cloudEditionName(e.P840), "frequency", fGHz, "GHz", 1, 200)
	m.cloudZenith = cloudMassAbsorption(fGHz, e.P840) * liquid
	m.notes.add(Assumption, "cloud: P.840-%d; under 5 deg, where it gives no rule, the path through a layer 2 km thick over the curved Earth, joined at 5 deg", e.P840)
	return nil
}

func (m *pathModel) prepareRain(s PathSpec) error {
	fGHz := s.Frequency.Gigahertz()
	switch {
	case s.WithoutRain:
		m.notes.add(Assumption, "rain is left out as asked")
		return nil
	case fGHz < 1:
		m.notes.add(Assumption, "rain is left out: P.838-3 begins at 1 GHz, where rain takes under 0.01 dB")
		return nil
	case m.pPct > 5:
		m.notes.add(Assumption, "rain does not count above 5 %% of the year (P.618-14 equation (66))")
		return nil
	}
	site, known, err := s.Climate.rain(&m.notes)
	if err != nil || !known {
		return err
	}
	m.notes.beyond("P.618-14 §2.2.1.1", "frequency", fGHz, "GHz", 1, 55)
	path := newRainPath(site, fGHz, s.Tilt.Degrees())
	m.rain = &path
	return nil
}

func (m *pathModel) prepareScintillation(s PathSpec, clear Atmosphere) error {
	switch {
	case s.WithoutScintillation:
		m.notes.add(Assumption, "scintillation is left out as asked")
		return nil
	case s.Aperture == nil:
		m.notes.add(Warning, "scintillation is missing: the antenna's diameter is not known")
		return nil
	}
	sc := scintillation{s.Frequency.Gigahertz(), s.Aperture.Diameter.Metres(), s.Aperture.Efficiency, s.Climate.wet(clear, &m.notes)}
	if err := sc.check(&m.notes); err != nil {
		return err
	}
	m.notes.beyond("P.618-14 §2.4.1", "exceeded percentage", m.pPct, "%", 0.01, 50)
	m.scintillation = &sc
	if s.Climate.LowPath == nil {
		m.notes.add(Default, "scintillation under 5 deg: P.618-14 §2.4.2 needs the refractivity gradient, which is not stated; §2.4.1 is continued with the path length of its step 4 in place of 1/sin")
		return nil
	}
	low, err := newLowAngle(sc, s.Climate.Latitude.Degrees(), s.Climate.Height.Kilometres(), m.pPct, *s.Climate.LowPath, &m.notes)
	if err != nil {
		return fmt.Errorf("scintillation under 5 deg: %w", err)
	}
	m.low = low
	m.notes.add(Assumption, "scintillation under 5 deg: P.618-14 §2.4.2 and §2.4.3, expected to hold from 0.5 deg up")
	return nil
}
