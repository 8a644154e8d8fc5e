package scenario

import (
	"fmt"
	"slices"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// PathChoice says which models of the path apply, and for what share of the year.
type PathChoice struct {
	Exceedance propagation.Exceedance // attenuation and noise are those exceeded for so much of an average year
	ClearSky   bool                   // gas of the ordinary air alone

	Gas, Cloud, Rain, Scintillation, Ionosphere, Sun, Moon bool

	Environment *propagation.Environment // of stations that state none; nil: no man-made noise

	IonosphericScintillation, IonosphericRotation *unit.DB                    // as stated; nil: by the model
	ElectronContent                               propagation.ElectronContent // 0: the package's typical one
	MagneticField                                 float64                     // T along the path; 0: the typical one

	SunFlux []FluxPoint // rising frequency, or one without a frequency that holds at each; empty: the quiet Sun
}

// FluxPoint is the Sun's flux density at a frequency.
type FluxPoint struct {
	Frequency unit.Frequency
	Flux      float64 // W/(m² Hz)
}

var pathKeys = []string{
	"exceeded_percent", "models", "clear_sky", "noise_environment",
	"ionospheric_scintillation_loss_db", "ionospheric_rotation_loss_db", "electron_content_1_m2", "magnetic_field_ut", "sun_flux_sfu",
}

// pathModels are the words of path.models, in the order of the help.
var pathModels = []string{"gas", "cloud", "rain", "scintillation", "ionosphere", "sun", "moon"}

// defaultExceededPercent is the share of the year that a budget is for where the
// scenario says nothing.
const defaultExceededPercent = 1

func (r *reader) path(top object) PathChoice {
	o := top.child("path", pathKeys)
	o.about = "path"
	p := PathChoice{ClearSky: o.flag("clear_sky"), Exceedance: defaultExceededPercent * propagation.Percent}
	if o.node == nil {
		o.r.assumptions = append(o.r.assumptions, Note{About: "path", Text: fmt.Sprintf(
			"path left out: attenuation exceeded for %d %% of an average year, by every model for which the stations' climates state enough", defaultExceededPercent)})
	} else if !o.has("exceeded_percent") && !p.ClearSky {
		o.assume("exceeded_percent left out: %d %% of an average year", defaultExceededPercent)
	}
	if v, ok := o.number("exceeded_percent", span{low: 0.001, high: 50, unit: "%", next: "P.618 combines the parts of the path over this span"}); ok {
		p.Exceedance = propagation.Exceedance(v) * propagation.Percent
	}
	o.pathModels(&p)
	p.Environment = o.environment()
	p.IonosphericScintillation = o.statedLoss("ionospheric_scintillation_loss_db")
	p.IonosphericRotation = o.statedLoss("ionospheric_rotation_loss_db")
	p.ElectronContent = propagation.ElectronContent(o.numberOr("electron_content_1_m2", above(0, 1e20, "1/m2"), 0))
	p.MagneticField = o.numberOr("magnetic_field_ut", above(0, 100, "uT"), 0) / 1e6
	p.SunFlux = o.sunFlux()
	if !p.ClearSky {
		// P.618's rule takes gas and cloud at 5 % under 5 %.
		r.asked = max(p.Exceedance, 5*propagation.Percent)
	}
	return p
}

func (o object) pathModels(p *PathChoice) {
	chosen := pathModels
	if n := o.get("models"); n != nil {
		chosen = nil
		for i, item := range o.words("models", "models of the path", pathModels) {
			if slices.Contains(chosen, item) {
				o.fault(n, fmt.Sprintf("models[%d]", i), "%s stands twice", "name each model once", quote(item))
			}
			chosen = append(chosen, item)
		}
	}
	has := func(word string) bool { return slices.Contains(chosen, word) }
	p.Gas, p.Cloud, p.Rain, p.Scintillation = has("gas"), has("cloud"), has("rain"), has("scintillation")
	p.Ionosphere, p.Sun, p.Moon = has("ionosphere"), has("sun"), has("moon")
}

// environment reads the class of man-made noise; nil where it is left out.
func (o object) environment() *propagation.Environment {
	word, given := o.word("noise_environment", "city", "residential", "rural", "quiet_rural")
	if !given {
		return nil
	}
	e := map[string]propagation.Environment{"city": propagation.City, "residential": propagation.Residential,
		"rural": propagation.Rural, "quiet_rural": propagation.QuietRural}[word]
	return &e
}

func (o object) statedLoss(key string) *unit.DB {
	v, ok := o.number(key, lossDB)
	if !ok {
		return nil
	}
	d := unit.DB(v)
	return &d
}

// sunFlux reads one figure, which holds at every frequency, or rows of [MHz, flux].
func (o object) sunFlux() []FluxPoint {
	n := o.get("sun_flux_sfu")
	if n == nil {
		o.assume("sun_flux_sfu left out: the quiet Sun by P.372, good to a factor of about 1.5; an active Sun is several times brighter under 10 GHz")
		return nil
	}
	in := above(0, 1e7, "solar flux units")
	if n.Kind != tree.List {
		if v, ok := o.numberAt(n, "sun_flux_sfu", in); ok {
			return []FluxPoint{{Flux: v * propagation.SolarFluxUnit}}
		}
		return nil
	}
	of := "[frequency in MHz, flux in solar flux units]"
	rows, ok := o.pairs("sun_flux_sfu", of, frequencyMHz, in)
	if !ok {
		return nil
	}
	var out []FluxPoint
	for i, r := range rows {
		if i > 0 && !(r[0] > rows[i-1][0]) {
			o.fault(n, fmt.Sprintf("sun_flux_sfu[%d]", i), "%g MHz does not rise over %g MHz", "sort the rows by frequency, each once", r[0], rows[i-1][0])
		}
		out = append(out, FluxPoint{unit.Frequency(r[0]) * unit.Megahertz, r[1] * propagation.SolarFluxUnit})
	}
	return out
}
