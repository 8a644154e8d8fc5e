package propagation

import (
	"fmt"
	"slices"
	"strings"

	"slantwise/orbit/unit"
)

var gasSpecificBatch = batchModel{
	name:    "gas-specific",
	inputs:  fixed("frequency_ghz", "dry_pressure_hpa", "temperature_k", "water_vapour_density_g_m3"),
	results: []string{"result_gas_specific_attenuation_db_km"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) error {
		g, err := gasSpecificChecked(r.number("frequency_ghz"), r.number("dry_pressure_hpa"), r.number("temperature_k"),
			r.number("water_vapour_density_g_m3"), &r.notes)
		out[0] = g.Total()
		return err
	},
}

// The slant path of gases has three descriptions, told apart by the columns: Annex 2
// of P.676-13 with its oxygen heights, Annex 2 of P.676-12, and Annex 1 from the air
// at the surface.
var (
	annex2Columns = []string{"frequency_ghz", "elevation_deg", "temperature_k", "water_vapour_density_g_m3", "dry_pressure_hpa",
		"oxygen_height_a0_km", "oxygen_height_b0_km_per_k", "oxygen_height_c0_km_per_hpa", "oxygen_height_d0_km_per_g_m3"}
	annex2v12Columns = []string{"frequency_ghz", "elevation_deg", "station_height_km", "temperature_k", "dry_pressure_hpa",
		"water_vapour_density_g_m3", "integrated_water_vapour_kg_m2"}
	annex1Columns = append(slices.Clone(surfaceColumns), "surface_water_vapour_density_g_m3")
)

var gasSlantBatch = batchModel{
	name: "gas-slant",
	inputs: func(b *Batch) ([]string, error) {
		switch {
		case b.editions.P676 == 12:
			return b.need(annex2v12Columns...)
		case b.has("oxygen_height_a0_km"):
			return b.need(annex2Columns...)
		case b.has("surface_temperature_k"):
			elevation := "elevation_deg"
			if b.has("apparent_elevation_deg") {
				elevation = "apparent_elevation_deg"
			}
			return b.need(append(slices.Clone(annex1Columns), elevation)...)
		}
		return nil, fmt.Errorf("model \"gas-slant\" needs the columns of P.676-13 Annex 1 (apparent_elevation_deg or elevation_deg, %s) or of its Annex 2 (%s); for those of P.676-12 name the edition 676-12",
			strings.Join(annex1Columns, ", "), strings.Join(annex2Columns, ", "))
	},
	results: []string{"result_gas_attenuation_db"},
	evaluate: func(b *Batch, r *batchRow, out []float64) (err error) {
		switch {
		case b.editions.P676 == 12:
			out[0], err = gasAnnex2v12(r.number("frequency_ghz"), r.number("elevation_deg"), r.number("dry_pressure_hpa"), r.number("temperature_k"),
				r.number("water_vapour_density_g_m3"), r.number("integrated_water_vapour_kg_m2"), r.number("station_height_km"), &r.notes)
		case b.has("oxygen_height_a0_km"):
			oxygen := OxygenHeight{r.number("oxygen_height_a0_km"), r.number("oxygen_height_b0_km_per_k"),
				r.number("oxygen_height_c0_km_per_hpa"), r.number("oxygen_height_d0_km_per_g_m3")}
			out[0], err = gasAnnex2(r.number("frequency_ghz"), r.number("elevation_deg"), r.number("dry_pressure_hpa"), r.number("temperature_k"),
				r.number("water_vapour_density_g_m3"), oxygen, &r.notes)
		default:
			out[0], err = annex1OfSurface(b, r, "surface_water_vapour_density_g_m3", "integrated_water_vapour_kg_m2")
		}
		return err
	},
}

// surfaceColumns describe the air at a station for P.676-13 Annex 1.
var surfaceColumns = []string{"frequency_ghz", "station_height_km", "surface_temperature_k", "surface_pressure_hpa"}

// annex1OfSurface traces a ray through the mean annual global reference atmosphere,
// moved to the air at the surface and, where a column holds the integrated vapour, to
// that. The elevation is apparent or geometric by the column's name.
func annex1OfSurface(b *Batch, r *batchRow, density, column string) (float64, error) {
	base, err := MeanAnnualGlobal(7.5 * GramPerCubicMetre)
	if err != nil {
		return 0, err
	}
	t, p := unit.Temperature(r.number("surface_temperature_k")), Pressure(r.number("surface_pressure_hpa"))*Hectopascal
	rho := VapourDensity(r.number(density)) * GramPerCubicMetre
	height := unit.Length(r.number("station_height_km")) * unit.Kilometre
	a, err := base.WithSurface(height, Surface{&t, &p, &rho})
	if err == nil && b.has(column) {
		a, err = a.WithColumn(height, Column(r.number(column)))
	}
	if err != nil {
		return 0, err
	}
	l, err := NewLayers(a, height)
	if err != nil {
		return 0, err
	}
	var apparent unit.Angle
	if b.has("apparent_elevation_deg") {
		apparent = unit.Angle(r.number("apparent_elevation_deg")) * unit.Degree
	} else if apparent, err = l.Apparent(unit.Angle(r.number("elevation_deg")) * unit.Degree); err != nil {
		return 0, err
	}
	db, n, err := l.GasAttenuation(unit.Frequency(r.number("frequency_ghz"))*unit.Gigahertz, apparent)
	r.notes = append(r.notes, n...)
	return float64(db), err
}

var wetRefractivityBatch = batchModel{
	name: "wet-refractivity",
	inputs: func(b *Batch) ([]string, error) {
		if b.has("relative_humidity_percent") {
			return b.need("surface_temperature_k", "relative_humidity_percent", "surface_pressure_hpa")
		}
		return b.need("surface_temperature_k", "water_vapour_density_50pct_g_m3")
	},
	results: []string{"result_wet_refractivity_n_units"},
	evaluate: func(b *Batch, r *batchRow, out []float64) (err error) {
		if b.has("relative_humidity_percent") {
			out[0], err = wetOfHumidity(r.number("surface_temperature_k"), r.number("relative_humidity_percent")/100, r.number("surface_pressure_hpa"))
			return err
		}
		out[0], err = wetRefractivity(r.number("surface_temperature_k"), r.number("water_vapour_density_50pct_g_m3"))
		return err
	},
}
