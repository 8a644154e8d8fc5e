package cli

import (
	"fmt"
	"strings"
)

// pathMissing is the column of every CSV of a path that names the parts in no number, as
// the words at its head go to stderr and do not stay with the file.
const pathMissing = "path_missing"

// missingText says which parts of the path are in no number, as the scenario does not
// state what they follow from.
func missingText(parts []string) string {
	keys := map[string]string{
		"rain":          "rain_rate_001_mm_h or the months under climate",
		"cloud":         "cloud_liquid_water_kg_m2 under climate",
		"scintillation": "the antenna's diameter or gain",
		"ionosphere":    "ionospheric_scintillation_loss_db under path, as the table of fades ends at 100 MHz and holds 0.1 to 1 % of the year,",
	}
	var need []string
	for _, p := range parts {
		need = append(need, fmt.Sprintf("%s (%s is not stated)", p, keys[p]))
	}
	return "missing from the path: " + strings.Join(need, ", ")
}

// pathHead says at the head of a budget what its numbers of the path are.
func (r *budgetResult) pathHead() []string {
	if r.scenario.Path.ClearSky {
		return []string{"path: clear sky"}
	}
	head := []string{fmt.Sprintf("path: attenuation and noise exceeded for %g %% of an average year", r.scenario.Path.Exceedance.Percents())}
	if len(r.sky.missing) > 0 {
		head = append(head, missingText(r.sky.missing))
	}
	return head
}
