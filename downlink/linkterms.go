package downlink

import (
	"fmt"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// add appends a term and returns its place.
func (l *Link) add(name string, sign int, u string, value float64, source string) int {
	l.terms = append(l.terms, TermInfo{Name: name, Sign: sign, Unit: u, Source: source})
	l.base = append(l.base, value)
	return len(l.terms) - 1
}

func (l *Link) loss(name string, value unit.DB, source string) {
	l.add(name, -1, "dB", float64(value), source)
}

// buildTerms lays down the terms in their order. Terms that change with the geometry
// hold 0 in base.
func (l *Link) buildTerms() {
	l.slots = slots{-1, -1, -1, -1, -1, -1}
	if l.up() {
		l.addSent()
	} else {
		l.addRadiated()
	}
	l.eirpTerms = len(l.terms)
	l.slots.freeSpace = l.add("free-space loss", -1, "dB", 0,
		fmt.Sprintf("Rec. ITU-R P.525, exact: 20 log10(4π d/λ) at %g MHz", l.Frequency().Megahertz()))
	l.addMismatch()
	l.slots.path = len(l.terms)
	for _, m := range l.spec.PathModels {
		terms := m.Terms()
		l.pathCounts = append(l.pathCounts, len(terms))
		for _, t := range terms {
			l.terms = append(l.terms, t)
			l.base = append(l.base, 0)
		}
	}
	if l.up() {
		l.addArrived()
	} else {
		l.addReceived()
	}
}

func (l *Link) addRadiated() {
	t := &l.spec.Transmitter
	switch {
	case t.EIRP != nil:
		l.add("EIRP", 1, "dBm", t.EIRP.DBm(), "scenario, toward the station")
	default:
		l.add("transmit power", 1, "dBm", t.Power.DBm(), "scenario")
		l.loss("line loss", t.LineLoss, "scenario")
		l.addCraftGain()
	}
	for _, x := range t.ExtraLosses {
		l.loss(x.Name, x.Loss, "scenario, at the spacecraft")
	}
}

func (l *Link) addCraftGain() {
	t := &l.spec.Transmitter
	name := l.antennaName() + " gain"
	switch {
	case t.Pattern.Kind == Isotropic:
		l.slots.craftGain = l.add(name, 1, "dBi", float64(t.Pattern.PeakGain), "scenario, the same in every direction")
	case t.Attitude == AttitudeTumbling:
		q := t.attitudeProbability()
		l.slots.craftGain = l.add(name, 1, "dBi", float64(t.Pattern.GainExceeded(q)),
			fmt.Sprintf("%s pattern, reached or exceeded with probability %g over all attitudes", t.Pattern.Kind, q))
	case t.Attitude == AttitudeSpin:
		l.pattern, l.spin = &t.Pattern, newSpinCurve(&t.Pattern, &t.Body, t.attitudeProbability())
		what := fmt.Sprintf("reached or exceeded with probability %g over a turn", t.attitudeProbability())
		switch t.Body.SpinGain {
		case SpinMean:
			what = "mean power over a turn"
		case SpinWorst:
			what = "the least of a turn"
		}
		l.slots.craftGain = l.add(name, 1, "dBi", 0, fmt.Sprintf("%s pattern at the angle off the spin axis, %s", t.Pattern.Kind, what))
	default:
		l.pattern = &t.Pattern
		l.slots.craftGain = l.add(name, 1, "dBi", 0,
			fmt.Sprintf("%s pattern at the off-boresight angle, attitude %s", t.Pattern.Kind, t.Attitude))
	}
}

// mismatch returns the polarisation loss; ok is false where a side is left out.
func (l *Link) mismatch() (m station.Mismatch, ok bool) {
	a, b := l.spec.Transmitter.Polarization, l.spec.Antenna.Polarization
	if a == nil || b == nil {
		return m, false
	}
	return a.Mismatch(*b), true
}

func (l *Link) addMismatch() {
	m, ok := l.mismatch()
	if !ok {
		return
	}
	source := fmt.Sprintf("axial ratios, %s; best %.2f dB", m.Basis, float64(m.Best))
	if float64(m.NinetyPercent) >= 0 {
		source += fmt.Sprintf(", not over %.2f dB at 90 %% of the angles", float64(m.NinetyPercent))
	}
	l.loss("polarisation mismatch", m.Loss, source)
}

// addReceived adds the terms of the station. Where the station's gain is not known
// (a measured G/T alone) they end with what falls on the antenna, less what C/N0
// loses to pointing and extra losses.
func (l *Link) addReceived() {
	a := l.spec.Antenna
	if l.gain != nil {
		l.addStationGain()
	}
	if l.beamwidth > 0 {
		l.addPointing()
	}
	if l.gain != nil {
		l.loss("feed loss", a.FeedLoss, "scenario")
	}
	l.addStationLosses()
	l.setGainLoss(a)
}

// addStationLosses adds the antenna's losses that have names of their own.
func (l *Link) addStationLosses() {
	for _, x := range l.spec.Antenna.ExtraLosses {
		source := "scenario, at the station"
		if x.Dissipative {
			source += ", dissipative"
		}
		l.loss(x.Name, x.Loss, source)
	}
}

// setGainLoss keeps what surface and blockage take off the gain of a dish.
func (l *Link) setGainLoss(a *station.Antenna) {
	f := l.Frequency()
	if a.Gain != nil || l.gain == nil {
		return
	}
	if a.SurfaceRMS > 0 {
		l.gainLoss += float64(station.SurfaceLoss(a.SurfaceRMS, f))
	}
	if a.BlockageFraction > 0 {
		l.gainLoss += float64(station.BlockageLoss(a.BlockageFraction))
	}
}

func (l *Link) addStationGain() {
	a, f := l.spec.Antenna, l.Frequency()
	const name = "station antenna gain"
	if a.Gain != nil {
		source := "scenario, as measured" + measuredWhen(a.Measurement)
		at := l.add(name, 1, "dBi", l.gain.Value(0), source)
		if !l.gain.IsConstant() {
			l.slots.stationGain = at
		}
		return
	}
	l.add(name, 1, "dBi", l.gain.Value(0),
		fmt.Sprintf("10 log10(η (π D/λ)²), D %g m, η %g", a.Diameter.Metres(), a.Efficiency))
	if a.SurfaceRMS > 0 {
		l.loss("surface loss", station.SurfaceLoss(a.SurfaceRMS, f), fmt.Sprintf("Ruze, %g mm root mean square", a.SurfaceRMS.Metres()*1000))
	}
	if a.BlockageFraction > 0 {
		l.loss("blockage loss", station.BlockageLoss(a.BlockageFraction), fmt.Sprintf("-20 log10(1 - b), b %g of the area", a.BlockageFraction))
	}
}

func (l *Link) addPointing() {
	a := l.spec.Antenna
	source := fmt.Sprintf("12 (e/w)² inside the main lobe, w %.4g deg, e %g deg", l.beamwidth.Degrees(), asGiven(a.PointingRMS))
	if a.Kind == station.Fixed {
		source += " with the angle off the antenna's boresight"
	}
	at := l.add("pointing loss", -1, "dB", float64(station.PointingLoss(a.PointingRMS, l.beamwidth)), source)
	if a.Kind == station.Fixed {
		l.slots.pointing = at
	}
	l.addOrbitPointing()
}

func measuredWhen(m *station.Measurement) string {
	if m == nil {
		return ""
	}
	s := ""
	for _, part := range []string{m.Date, m.Weather} {
		if part != "" {
			s += ", " + part
		}
	}
	return s
}
