package propagation

import (
	"fmt"

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
	annex1Columns = []string{"frequency_ghz", "apparent_elevation_deg", "station_height_km", "surface_water_vapour_density_g_m3",
		"surface_temperature_k", "surface_pressure_hpa"}
)

var gasSlantBatch = batchModel{
	name: "gas-slant",
	inputs: func(b *Batch) ([]string, error) {
		switch {
		case b.editions.P676 == 12:
			return b.need(annex2v12Columns...)
		case b.has("oxygen_height_a0_km"):
			return b.need(annex2Columns...)
		case b.has("apparent_elevation_deg"):
			return b.need(annex1Columns...)
		}
		return nil, fmt.Errorf("model \"gas-slant\" needs the columns of P.676-13 Annex 1 (%v) or of its Annex 2 (%v); for those of P.676-12 name the edition 676-12",
			annex1Columns, annex2Columns)
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
			out[0], err = annex1OfSurface(r)
		}
		return err
	},
}

// annex1OfSurface traces a ray through the mean annual global reference atmosphere,
// moved to the stated air at the surface.
func annex1OfSurface(r *batchRow) (float64, error) {
	base, err := MeanAnnualGlobal(7.5 * GramPerCubicMetre)
	if err != nil {
		return 0, err
	}
	t, p := unit.Temperature(r.number("surface_temperature_k")), Pressure(r.number("surface_pressure_hpa"))*Hectopascal
	rho := VapourDensity(r.number("surface_water_vapour_density_g_m3")) * GramPerCubicMetre
	height := unit.Length(r.number("station_height_km")) * unit.Kilometre
	a, err := base.WithSurface(height, Surface{&t, &p, &rho})
	if err != nil {
		return 0, err
	}
	l, err := NewLayers(a, height)
	if err != nil {
		return 0, err
	}
	db, n, err := l.GasAttenuation(unit.Frequency(r.number("frequency_ghz"))*unit.Gigahertz, unit.Angle(r.number("apparent_elevation_deg"))*unit.Degree)
	r.notes = append(r.notes, n...)
	return float64(db), err
}

var wetRefractivityBatch = batchModel{
	name:    "wet-refractivity",
	inputs:  fixed("surface_temperature_k", "water_vapour_density_50pct_g_m3"),
	results: []string{"result_wet_refractivity_n_units"},
	evaluate: func(_ *Batch, r *batchRow, out []float64) (err error) {
		out[0], err = wetRefractivity(r.number("surface_temperature_k"), r.number("water_vapour_density_50pct_g_m3"))
		return err
	},
}
