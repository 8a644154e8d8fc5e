package downlink

import (
	"fmt"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// IonosphereSpec is what the terms of the ionosphere are made from.
type IonosphereSpec struct {
	Frequency  unit.Frequency
	Exceedance propagation.Exceedance
	ClearSky   bool // no fades of scintillation

	Scintillation *unit.DB // as stated, in place of the table of P.618-14 (P.531)
	Rotation      *unit.DB // loss by Faraday rotation as stated, in place of P.531's order of magnitude

	Linear  bool                        // both antennas are linear, with a known angle between them
	Content propagation.ElectronContent // 0: TypicalElectronContent
	Field   float64                     // T along the path; 0: TypicalField
}

// The frequencies at which the ionosphere's terms count.
const (
	scintillationFrom = 100 * unit.Megahertz
	scintillationTo   = 1 * unit.Gigahertz
	rotationTo        = 10 * unit.Gigahertz
)

// Ionosphere holds the terms of the ionosphere, which are orders of magnitude and the
// same at every elevation. It is a PathModel.
type Ionosphere struct {
	terms  []TermInfo
	values []float64
	notes  []Note
	lacks  bool
}

// NewIonosphere returns the terms that exist at a frequency: fades of scintillation
// from 0.1 to 1 GHz, and between linear antennas the loss by Faraday rotation from
// 0.1 to 10 GHz. Stated losses stand at every frequency. Where a term should be and
// has no model, a warning says so.
func NewIonosphere(s IonosphereSpec) (*Ionosphere, error) {
	m := &Ionosphere{}
	if err := m.addScintillation(s); err != nil {
		return nil, err
	}
	return m, m.addRotation(s)
}

func (m *Ionosphere) add(name string, v unit.DB, source string) {
	m.terms = append(m.terms, TermInfo{name, -1, "dB", source})
	m.values = append(m.values, float64(v))
}

func (m *Ionosphere) note(kind NoteKind, format string, args ...any) {
	m.notes = append(m.notes, Note{kind, fmt.Sprintf(format, args...)})
}

func (m *Ionosphere) addScintillation(s IonosphereSpec) error {
	const name = "ionospheric scintillation"
	percent := s.Exceedance.Percents()
	switch {
	case s.Scintillation != nil:
		m.add(name, *s.Scintillation, "scenario")
	case s.ClearSky || s.Frequency > scintillationTo:
	case s.Frequency < scintillationFrom:
		m.lacks = true
		m.note(Warning, "ionospheric scintillation is missing: its table begins at 100 MHz; state a loss")
	case percent < 0.1 || percent > 1:
		m.lacks = true
		m.note(Warning, "ionospheric scintillation is missing: its table holds 0.1 to 1 %% of the year, not %g %%; state a loss", percent)
	default:
		v, err := propagation.IonosphericFade(s.Frequency, s.Exceedance)
		if err != nil {
			return err
		}
		m.add(name, v, "Rec. ITU-R P.618 Table 2 (P.531), middle latitudes, an order of magnitude")
		m.note(Assumption, "ionospheric scintillation: the fade of middle latitudes exceeded for %g %% of the year, an order of magnitude; near the geomagnetic equator after sunset and in the auroral zones fades are far deeper", percent)
	}
	return nil
}

func (m *Ionosphere) addRotation(s IonosphereSpec) error {
	const name = "ionospheric polarisation rotation"
	if s.Rotation != nil {
		m.add(name, *s.Rotation, "scenario")
		return nil
	}
	if !s.Linear || s.Frequency > rotationTo {
		return nil
	}
	if s.Frequency < scintillationFrom {
		m.note(Warning, "ionospheric polarisation rotation is missing: its model begins at 100 MHz; state a loss")
		return nil
	}
	content, field := s.Content, s.Field
	if content == 0 {
		content = propagation.TypicalElectronContent
	}
	if field == 0 {
		field = propagation.TypicalField
	}
	r, err := propagation.FaradayRotation(s.Frequency, content, field)
	if err != nil {
		return err
	}
	m.add(name, r.MeanLoss, "Rec. ITU-R P.531 §4.2, the mean power over rotations up to the largest, an order of magnitude")
	m.note(Assumption, "Faraday rotation up to %.4g deg (%.3g electrons/m², %.3g T along the path): the mean loss stands in the budget; 90 %% of the rotations lose no more than %.2f dB",
		r.Rotation.Degrees(), float64(content), field, float64(r.Loss90))
	return nil
}

// LacksScintillation tells whether fades should be there and have no model.
func (m *Ionosphere) LacksScintillation() bool { return m.lacks }

// Terms implements PathModel.
func (m *Ionosphere) Terms() []TermInfo { return m.terms }

// Losses implements PathModel.
func (m *Ionosphere) Losses(_ *Geometry, into []float64) error {
	copy(into, m.values)
	return nil
}

// Notes implements PathModel.
func (m *Ionosphere) Notes() []Note { return m.notes }
