package cli

import (
	"math"

	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// pathPoint is what a path takes at one elevation, frequency and percentage. What does
// not exist is NaN.
type pathPoint struct {
	elevation unit.Angle
	frequency unit.Frequency
	p         propagation.Exceedance

	parts      propagation.Parts
	sample     propagation.Sample
	ionosphere []downlink.Term
	sky        propagation.Sky
	xpd        unit.DB
}

// pathColumns are the columns of a path's CSV and JSON; names and order are a promise.
var pathColumns = []string{"elevation_deg", "frequency_mhz", "exceeded_percent",
	"gas_attenuation_db", "cloud_attenuation_db", "rain_attenuation_db", "scintillation_db", "atmospheric_combination_db", "total_attenuation_db",
	"clear_sky_gas_attenuation_db", "ionospheric_scintillation_db", "ionospheric_polarisation_rotation_db",
	"sky_brightness_k", "clear_sky_brightness_k", "xpd_db"}

// numbers returns the values of pathColumns.
func (q *pathPoint) numbers() []float64 {
	known := func(is bool, v unit.DB) float64 {
		if !is {
			return math.NaN()
		}
		return float64(v)
	}
	s, p := &q.sample, q.parts
	return []float64{q.elevation.Degrees(), q.frequency.Megahertz(), q.p.Percents(),
		known(p.Gas, s.Gas), known(p.Cloud, s.Cloud), known(p.Rain, s.Rain), known(p.Scintillation, s.Scintillation),
		float64(s.Combination), float64(s.Total), known(p.Gas, s.ClearGas), q.ionospheric("ionospheric scintillation"), q.ionospheric("ionospheric polarisation rotation"),
		q.sky.Weather.Kelvins(), q.sky.Clear.Kelvins(), float64(q.xpd)}
}

func (q *pathPoint) ionospheric(name string) float64 {
	for _, t := range q.ionosphere {
		if t.Name == name {
			return t.Value
		}
	}
	return math.NaN()
}

// pathAt prepares the path of a spec and evaluates it at elevations.
func (t *pathTarget) pathAt(spec propagation.PathSpec, elevations ...unit.Angle) ([]pathPoint, []downlink.Note, error) {
	path, err := propagation.NewPath(spec)
	if err != nil {
		return nil, nil, &InputError{Err: err}
	}
	notes := downlink.NewWeather(path).Notes()
	var ionosphere []downlink.Term
	if t.choice.Ionosphere {
		m, err := downlink.NewIonosphere(downlink.IonosphereSpec{Frequency: spec.Frequency, Exceedance: spec.Exceedance, ClearSky: spec.ClearSky,
			Scintillation: t.choice.IonosphericScintillation, Rotation: t.choice.IonosphericRotation, Linear: t.linear,
			Content: t.choice.ElectronContent, Field: t.choice.MagneticField})
		if err != nil {
			return nil, nil, &InputError{Err: err}
		}
		notes = append(notes, m.Notes()...)
		values := make([]float64, len(m.Terms()))
		if err := m.Losses(&downlink.Geometry{}, values); err != nil {
			return nil, nil, &InputError{Err: err}
		}
		for i, info := range m.Terms() {
			ionosphere = append(ionosphere, downlink.Term{TermInfo: info, Value: values[i]})
		}
	}
	var out []pathPoint
	for _, el := range elevations {
		q := pathPoint{elevation: el, frequency: spec.Frequency, p: spec.Exceedance, parts: path.Parts(), ionosphere: ionosphere, xpd: unit.DB(math.NaN())}
		if q.sample, err = path.At(el); err != nil {
			return nil, nil, &InputError{Err: err}
		}
		if q.sky, err = path.Sky(el); err != nil {
			return nil, nil, &InputError{Err: err}
		}
		if q.parts.Rain && q.sample.Rain > 0 {
			// Outside its range there is none: no error and no note.
			if v, beyond, err := path.CrossPolar(el); err == nil && len(beyond) == 0 {
				q.xpd = v
			}
		}
		out = append(out, q)
	}
	return out, notes, nil
}
