package propagation

import (
	"strconv"
	"strings"
)

// gasOfRow returns the gas of a total: by P.676-12 Annex 2 in that edition, which the
// sheets feed with the pressure as that of dry air, else by P.676-13 Annex 1 through
// the mean annual global reference atmosphere moved to the air at the surface and,
// where the table has it, to the integrated vapour. elevation_deg is geometric.
func gasOfRow(b *Batch, r *batchRow) (float64, error) {
	h := held(b)
	density, column := "water_vapour_density_"+h+"_g_m3", "integrated_water_vapour_"+h+"_kg_m2"
	if b.editions.P676 == 12 {
		return gasAnnex2v12(r.number("frequency_ghz"), r.number("elevation_deg"), r.number("surface_pressure_hpa"), r.number("surface_temperature_k"),
			r.number(density), r.number(column), r.number("station_height_km"), &r.notes)
	}
	return annex1OfSurface(b, r, density, column)
}

func expand(pattern, held string) string { return strings.ReplaceAll(pattern, "%s", held) }

func editionNumber(n int) string { return strconv.Itoa(n) }

// unique keeps the first of each string.
func unique(all []string) []string {
	seen := map[string]bool{}
	var kept []string
	for _, s := range all {
		if !seen[s] {
			seen[s] = true
			kept = append(kept, s)
		}
	}
	return kept
}
