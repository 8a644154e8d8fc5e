package propagation

import (
	"math"
	"slices"
)

// cloudLogNormalColumns are those that every row of the log-normal approximation
// fills; mean and sigma are read where there is cloud at the percentage.
var cloudLogNormalColumns = []string{"frequency_ghz", "elevation_deg", "exceedance_percent", "lognormal_probability_percent"}

var cloudBatch = batchModel{
	name: "cloud",
	inputs: func(b *Batch) ([]string, error) {
		if b.options.LogNormal {
			_, err := b.need(append(slices.Clone(cloudLogNormalColumns), "lognormal_mean_ln_kg_m2", "lognormal_sigma")...)
			return cloudLogNormalColumns, err
		}
		return b.need("frequency_ghz", "elevation_deg", "cloud_liquid_water_kg_m2")
	},
	results: []string{"result_cloud_attenuation_db"},
	evaluate: func(b *Batch, r *batchRow, out []float64) (err error) {
		f, el := r.number("frequency_ghz"), r.number("elevation_deg")
		if b.options.LogNormal {
			p, probability := r.number("exceedance_percent"), r.number("lognormal_probability_percent")
			mean, sigma := 0.0, 1.0 // of no consequence where there is no cloud, where the map has none
			if liquidLogNormal(p, mean, sigma, probability) > 0 {
				mean, sigma = r.number("lognormal_mean_ln_kg_m2"), r.number("lognormal_sigma")
			}
			out[0], err = cloudLogNormal(f, el, p, mean, sigma, probability, b.editions.P840, &r.notes)
			return err
		}
		out[0], err = cloudDirect(f, el, r.number("cloud_liquid_water_kg_m2"), b.editions.P840, &r.notes)
		return err
	},
}

var scintillationColumns = []string{"frequency_ghz", "elevation_deg", "exceedance_percent", "antenna_diameter_m",
	"antenna_efficiency", "wet_refractivity_n_units"}

var scintillationBatch = batchModel{
	name:    "scintillation",
	inputs:  fixed(scintillationColumns...),
	results: []string{"result_scintillation_fade_db"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) (err error) {
		out[0], err = scintillationOfRow(r)
		return err
	},
}

func scintillationOfRow(r *batchRow) (float64, error) {
	return scintillationChecked(scintillation{r.number("frequency_ghz"), r.number("antenna_diameter_m"), r.number("antenna_efficiency"),
		r.number("wet_refractivity_n_units")}, r.number("elevation_deg"), r.number("exceedance_percent"), &r.notes)
}

// totalPart is a contribution to the total: taken from a column where the table has
// one of the names, else computed from columns of its own.
type totalPart struct {
	given  []string
	needed func(b *Batch) []string
	from   func(b *Batch, r *batchRow) (float64, error)
}

// held returns "1pct" or "5pct", the percentage in the names of the columns at which
// gas and cloud are held.
func held(b *Batch) string {
	if b.editions.P618 == 13 {
		return "1pct"
	}
	return "5pct"
}

var (
	gasPart = totalPart{
		given: []string{"gas_attenuation_%s_db", "gas_attenuation_%s_implied_db", "gas_attenuation_db"},
		needed: func(b *Batch) []string {
			h := held(b)
			columns := append(slices.Clone(surfaceColumns), "elevation_deg", "water_vapour_density_"+h+"_g_m3")
			if b.editions.P676 == 12 || b.has("integrated_water_vapour_"+h+"_kg_m2") {
				columns = append(columns, "integrated_water_vapour_"+h+"_kg_m2")
			}
			return columns
		},
		from: gasOfRow,
	}
	cloudPart = totalPart{
		given: []string{"cloud_attenuation_%s_db", "cloud_attenuation_db"},
		needed: func(b *Batch) []string {
			return []string{"frequency_ghz", "elevation_deg", "cloud_liquid_water_" + held(b) + "_kg_m2"}
		},
		from: func(b *Batch, r *batchRow) (float64, error) {
			return cloudDirect(r.number("frequency_ghz"), r.number("elevation_deg"), r.number("cloud_liquid_water_"+held(b)+"_kg_m2"), b.editions.P840, &r.notes)
		},
	}
	rainPart = totalPart{
		given:  []string{"rain_attenuation_db"},
		needed: func(*Batch) []string { return rainColumns },
		from:   func(_ *Batch, r *batchRow) (float64, error) { return rainOfRow(r) },
	}
	scintillationPart = totalPart{
		given:  []string{"scintillation_fade_db"},
		needed: func(*Batch) []string { return scintillationColumns },
		from:   func(_ *Batch, r *batchRow) (float64, error) { return scintillationOfRow(r) },
	}
)

// column returns the name of the column that gives the part, "" where none does.
func (p *totalPart) column(b *Batch) string {
	for _, pattern := range p.given {
		if name := expand(pattern, held(b)); b.has(name) {
			return name
		}
	}
	return ""
}

func (p *totalPart) value(b *Batch, r *batchRow) (float64, error) {
	if c := p.column(b); c != "" {
		v := r.number(c)
		if err := notNegative(c, v, "dB"); err != nil {
			return 0, &CellError{r.line, c, err}
		}
		return v, nil
	}
	return p.from(b, r)
}

var totalBatch = batchModel{
	name: "total",
	inputs: func(b *Batch) ([]string, error) {
		columns := []string{"exceedance_percent"}
		for _, p := range []*totalPart{&gasPart, &cloudPart, &rainPart, &scintillationPart} {
			if c := p.column(b); c != "" {
				columns = append(columns, c)
			} else {
				columns = append(columns, p.needed(b)...)
			}
		}
		return b.need(unique(columns)...)
	},
	results: []string{"result_total_attenuation_db"},
	evaluate: func(b *Batch, r *batchRow, out []float64) error {
		var parts [4]float64
		for i, p := range []*totalPart{&gasPart, &cloudPart, &rainPart, &scintillationPart} {
			v, err := p.value(b, r)
			if err != nil {
				return err
			}
			parts[i] = v
		}
		p := r.number("exceedance_percent")
		r.notes.beyond("P.618-"+editionNumber(b.editions.P618)+" §2.5", "exceeded percentage", p, "%", 0.001, 50)
		if p > 5 {
			parts[2] = 0 // equation (66)
		}
		if h := combinationPercent(p, b.editions.P618); h > combinationPercent(0, b.editions.P618) {
			r.notes.add(Warning, "gas and cloud are those of the columns, exceeded for %s; at this percentage the rule takes %s %%", held(b), number(h))
		}
		out[0] = combined(parts[0], parts[1], parts[2], math.Pow(parts[3], 2))
		return nil
	},
}
