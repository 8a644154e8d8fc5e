package downlink

import (
	"fmt"
	"strings"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func (l *Link) note(kind NoteKind, format string, args ...any) {
	l.notes = append(l.notes, Note{kind, fmt.Sprintf(format, args...)})
}

// writeNotes gathers what every budget of the link takes for granted.
func (l *Link) writeNotes() {
	if l.up() {
		l.noteReceiver()
	} else {
		l.noteTransmitter()
	}
	l.notePolarization()
	l.noteAntenna()
	l.noteOrbitError()
	l.noteNoise()
	l.noteMode()
	for _, m := range l.spec.PathModels {
		l.notes = append(l.notes, m.Notes()...)
	}
	for _, m := range l.spec.NoiseModels {
		l.notes = append(l.notes, m.Notes()...)
	}
	if len(l.spec.PathModels) == 0 {
		l.note(Assumption, "the path is free space: no attenuation by gases, cloud, rain or ionosphere is in the budget")
	}
}

func (l *Link) noteTransmitter() {
	t := &l.spec.Transmitter
	l.note(Assumption, "power flux density: the whole carrier in free space at the site, extra losses of the spacecraft taken off")
	if t.EIRP != nil {
		l.note(Assumption, "the EIRP is taken as it is in every direction; no attitude is applied")
		return
	}
	l.noteCraftAntenna()
}

// noteCraftAntenna says how the spacecraft's antenna is taken.
func (l *Link) noteCraftAntenna() {
	t := &l.spec.Transmitter
	// A steered antenna needs no pattern: one gain in every direction is that on its axis.
	steered := t.Attitude == AttitudeStation && t.Pattern.Kind == Isotropic
	if share := t.Pattern.RadiatedShare(); share > 1+1e-9 && !steered {
		l.note(Warning, "the %s's pattern radiates %.3g times the power that it is fed (%.2f dB too much, integrated over the sphere): its gain or its width is wrong",
			l.antennaName(), share, float64(decibels(share)))
	}
	switch t.Attitude {
	case AttitudeUnstated:
		if t.Pattern.Kind != Isotropic {
			l.note(Assumption, "attitude left out: a stated geometry without an off-boresight angle is taken at the %s's boresight", l.antennaName())
		}
	case AttitudeStation:
		l.note(Assumption, "attitude station: the %s's boresight points at the station, without an error", l.antennaName())
	case AttitudeNadir:
		if l.view != nil {
			l.noteBody()
			return
		}
		l.note(Assumption, "attitude nadir: the boresight points at the Earth's centre (the geodetic nadir lies up to 0.2 deg from it)")
	case AttitudeSun, AttitudeSpin, AttitudeYawSteering, AttitudeHistory:
		l.noteBody()
	case AttitudeTumbling:
		l.noteProbability()
		l.note(Assumption, "attitude tumbling: every direction is equally likely, and the gain reached or exceeded with probability %g stands in the budget; it serves the margin, the volume of a fading link is another matter", t.attitudeProbability())
	}
}

func (l *Link) noteProbability() {
	if l.spec.Transmitter.AttitudeProbability == 0 {
		l.note(Default, "attitude probability left out: %g", DefaultAttitudeProbability)
	}
}

// noteBody says how the body is held and where the antenna sits on it.
func (l *Link) noteBody() {
	t := &l.spec.Transmitter
	held := map[Attitude]string{
		AttitudeNadir:       "body z points at the Earth's centre and body y against the orbit's normal, x completes",
		AttitudeSun:         "body z points at the Sun, and the Earth's north pole lies on the side of body x",
		AttitudeSpin:        "body z is the spin axis, fixed among the stars; the phase of the spin is not known",
		AttitudeYawSteering: "body z points at the Earth's centre, body y is normal to the Sun, and the Sun stands on the side of body x; turns at noon and midnight of the orbit are taken as fast as the law asks, which a spacecraft may not follow",
	}[t.Attitude]
	if t.Attitude == AttitudeHistory {
		held = "the body is held by " + t.Body.History.Source()
	}
	where := "the boresight is body z"
	if b := t.Body.Boresight; b.OffZ != 0 {
		where = fmt.Sprintf("the boresight stands %g deg off body z and %g deg around it, from x toward y", asGiven(b.OffZ), asGiven(b.AroundZ))
	}
	l.note(Assumption, "attitude %s: %s; %s; no error of the attitude is counted", t.Attitude, held, where)
	if t.Pattern.Kind == GainGrid && t.Attitude != AttitudeSpin {
		l.note(Assumption, "the pattern's angle around the boresight counts from the direction away from body z (with the boresight on z, from body x)%s", turned(t.Body.Turn))
	}
	if t.Attitude != AttitudeSpin {
		return
	}
	l.noteProbability()
	if t.Body.SpinGain != SpinWorst {
		l.note(Assumption, "attitude spin: the gain fades at the spin's rate about what stands in the budget; it serves the margin, the volume of a fading link is another matter")
	}
}

func turned(by unit.Angle) string {
	if by == 0 {
		return ""
	}
	return fmt.Sprintf(", turned by %g deg", asGiven(by))
}

func decibels(ratio float64) unit.DB {
	d, err := unit.RatioDB(ratio)
	if err != nil {
		panic("downlink: " + err.Error()) // shares are positive
	}
	return d
}

func (l *Link) notePolarization() {
	m, ok := l.mismatch()
	if !ok {
		l.note(Warning, "polarisation left out on one side or both: no mismatch is in the budget, and up to 3 dB may hide there (more between linear antennas or opposite hands)")
		return
	}
	a, b := l.spec.Transmitter.Polarization, l.spec.Antenna.Polarization
	for _, side := range []struct {
		who string
		p   *station.Polarization
	}{{l.who(), a}, {"antenna", b}} {
		switch {
		case side.p.AxialRatio != nil:
		case side.p.Kind == station.Linear:
			l.note(Default, "axial ratio of the %s left out: taken as perfectly linear", side.who)
		default:
			l.note(Default, "axial ratio of the %s left out: 0 dB, perfectly circular", side.who)
		}
	}
	if l.spec.Transmitter.Attitude == AttitudeTumbling {
		l.note(Warning, "the polarisation is that on the %s's boresight; as the spacecraft tumbles it changes, to the opposite hand behind many antennas", l.antennaName())
	}
	l.note(Assumption, "polarisation mismatch %.2f dB (%s), best %.2f dB", float64(m.Loss), m.Basis, float64(m.Best))
	if float64(m.NinetyPercent) >= 0 {
		l.note(Warning, "the angle between two linear polarisations is not known: the budget holds the mean, %.2f dB; 90 %% of the angles lose no more than %.2f dB", float64(m.Loss), float64(m.NinetyPercent))
	}
	if m.Capped {
		l.note(Assumption, "the polarisation mismatch is held at %g dB, as no antenna is purer than that on its axis (common practice)", float64(station.LargestMismatch))
	}
	if a.Kind != station.Linear && b.Kind != station.Linear && a.Kind != b.Kind {
		l.note(Warning, "%s and antenna have opposite hands of circular polarisation", l.who())
	}
}

func (l *Link) noteAntenna() {
	a := l.spec.Antenna
	if l.beamwidth > 0 {
		l.note(Assumption, "pointing error: root mean square over both axes together, %g deg, with a half-power beamwidth of %.4g deg; the mean loss over the error", asGiven(a.PointingRMS), l.beamwidth.Degrees())
	} else {
		l.note(Assumption, "the beamwidth is not known: no pointing loss")
	}
	if a.Beamwidth == 0 && a.Diameter > 0 && a.BeamwidthFactor == 0 {
		l.note(Default, "beamwidth factor left out: %g deg times λ/D (58 for a uniform illumination to 73)", station.DefaultBeamwidthFactor.Degrees())
	}
	if a.Gain != nil && (a.SurfaceRMS > 0 || a.BlockageFraction > 0) {
		l.note(Assumption, "the measured gain holds surface error and blockage: neither is taken off again")
	}
	if a.Gain == nil && a.SurfaceRMS > 0 && !station.SurfaceLossHolds(a.SurfaceRMS, l.Frequency()) {
		l.note(Warning, "the surface error is over a twentieth of the wavelength, where Ruze's formula no longer holds")
	}
	if len(a.Bands) == 0 {
		l.note(Default, "the antenna has no bands: it is taken to work at %g MHz", l.Frequency().Megahertz())
	}
}

func (l *Link) noteNoise() {
	a := l.spec.Antenna
	if l.up() {
		return // noteReceiver said it
	}
	if (a.Noise == nil || a.Noise.PhysicalTemperature == 0) && l.noise.kind != noiseSystem && l.noise.kind != noiseUnknown {
		l.note(Default, "physical temperature left out: 290 K")
	}
	switch l.noise.kind {
	case noiseCascade:
		l.note(Assumption, "system noise: a cascade with all temperatures referred to the input of the first amplifier")
		if l.noise.first != nil {
			l.note(Assumption, "the antenna temperature is that of the clear sky with spill-over, as stated")
		}
	case noiseSystem:
		l.note(Assumption, "the measured system noise temperature is used as it is at the input of the first amplifier; losses of the station add nothing to it%s", l.addedNoise())
	case noiseGOverT:
		l.note(Assumption, "G/T as measured%s is used unchanged%s; the feed loss enters the received power alone, and the system noise shown is the one that gain and G/T imply", measuredWhen(a.Measurement), l.addedNoise())
	case noiseUnknown:
		l.note(Warning, "G/T as measured%s is used unchanged at every elevation and in all weather; the antenna's gain is not known, so that received power and system noise do not exist", measuredWhen(a.Measurement))
		if len(l.spec.NoiseModels) > 0 {
			l.note(Warning, "noise of the weather, the Sun and the Moon is left out, as a G/T without the gain cannot take it")
		}
	}
	for _, t := range l.tables() {
		low, high := t.table.Span()
		if !t.table.IsConstant() && (low > 0 || high < 90*unit.Degree) {
			l.note(Assumption, "the table of the %s runs from %g to %g deg of elevation; beyond it the value at its end is held", t.name, asGiven(low), asGiven(high))
		}
	}
	if a.GOverTElevation != nil {
		l.note(Assumption, "G/T was measured at %g deg elevation", asGiven(*a.GOverTElevation))
	}
}

// addedNoise says what the noise models add to a measured figure, which holds the
// clear sky.
func (l *Link) addedNoise() string {
	var names []string
	for i := range l.noise.counts {
		for _, p := range l.spec.NoiseModels[i].Parts() {
			names = append(names, p.Name)
		}
	}
	if len(names) == 0 {
		return ""
	}
	return ", and to it is added: " + strings.Join(names, ", ")
}

func (l *Link) noteMode() {
	m, t := l.mode, &l.spec.Transmitter
	if m == nil {
		l.note(Assumption, "no mode: no Eb/N0, margin or achievable rate")
		return
	}
	if m.ErrorRateText != "" {
		l.note(Assumption, "required Eb/N0 %.2f dB of %s with %s: %s; %s", float64(m.Required), m.Coding, m.Modulation, m.ErrorRateText, m.RequiredSource)
	} else {
		l.note(Assumption, "required Eb/N0 %.2f dB of %s with %s: from the scenario", float64(m.Required), m.Coding, m.Modulation)
	}
	l.note(Assumption, "achievable rate: with the threshold of mode %q at the required margin of %g dB; framing is not taken off", m.Name, float64(t.RequiredMargin))
	if m.InformationRate == 0 {
		l.note(Warning, "mode %q has neither data rate nor symbol rate: no Eb/N0 and no margin", m.Name)
	}
	l.noteBandwidth()
}

func (l *Link) noteBandwidth() {
	m, b := l.mode, l.spec.Transmitter.AllottedBandwidth
	if b == 0 {
		return
	}
	if m.CodeRate == 0 {
		l.note(Warning, "the code rate of %q is not known: the allotted bandwidth does not cap the achievable rate", m.Coding)
		return
	}
	if !m.ShapingGiven {
		l.note(Default, "roll-off left out: %g", modem.DefaultRollOff)
	}
	if need := m.Bandwidth.Hertz(); need > b.Hertz() {
		l.note(Warning, "mode %q takes %.4g MHz, more than the allotted %.4g MHz", m.Name, need/1e6, b.Megahertz())
	}
}
