package cli

import (
	"fmt"
	"io"
	"strconv"
	"strings"

	"slantwise/downlink"
)

// writeBudgetCSV writes a row a sample with a column a term. A term's column is its
// name with the unit; values are those of the budget, losses positive. Where the
// scenario states how uncertain the position is, what that does stands in four more.
func writeBudgetCSV(w io.Writer, r *budgetResult) error {
	header := []string{"utc", "azimuth_deg", "elevation_deg", "range_km", "off_boresight_deg"}
	header = append(header, termColumns(r.link.Terms())...)
	header = append(header, "received_power_dbm", "power_flux_density_dbw_m2", "system_noise_k", "g_over_t_db_k", "c_n0_dbhz",
		"eb_n0_db", "margin_db", "margin_over_required_db", "data_rate_bps", "achievable_rate_bps", "achievable_rate_limit", "usable",
		"c_i_other_polarization_db", "sun_off_beam_deg", "moon_off_beam_deg", pathMissing)
	body, uncertain := r.link.HasBodyAngles(), r.orbit != nil
	if body {
		header = append(header, "around_boresight_deg", "body_off_z_deg", "body_around_z_deg")
	}
	if uncertain {
		header = append(header, "orbit_pointing_along_deg", "orbit_pointing_deg", "doppler_spread_hz", "pointing_error_95_deg")
	}
	missing := strings.Join(r.sky.missing, " ")
	return writeCSV(w, header, func(yield func([]string) bool) {
		for _, b := range r.samples {
			row := append(budgetRow(b), missing)
			if body {
				row = append(row, fixed(b.AroundBoresight.Degrees(), 6), fixed(b.BodyOffZ.Degrees(), 6), fixed(b.BodyAroundZ.Degrees(), 6))
			}
			if uncertain {
				row = append(row, fixed(b.OrbitAlong.Degrees(), 6), fixed(b.OrbitTotal.Degrees(), 6), fixed(b.DopplerSpread.Hertz(), 3), fixed(b.SureError.Degrees(), 6))
			}
			if !yield(row) {
				return
			}
		}
	})
}

// termColumns names the terms' columns, each once: names of the user may be alike.
func termColumns(terms []downlink.TermInfo) []string {
	taken := map[string]bool{}
	var out []string
	for _, t := range terms {
		base := columnName(t.Name) + "_" + columnName(t.Unit)
		name := base
		for i := 2; taken[name]; i++ {
			name = fmt.Sprintf("%s_%d", base, i)
		}
		taken[name] = true
		out = append(out, name)
	}
	return out
}

// columnName makes "free-space loss" to free_space_loss.
func columnName(s string) string {
	words := strings.FieldsFunc(strings.ToLower(s), func(r rune) bool { return strings.ContainsRune(" -/.,;:()\"'\t\r\n", r) })
	return strings.Join(words, "_")
}

func budgetRow(b *downlink.Budget) []string {
	row := []string{utc(b.Time), fixed(b.Azimuth.Degrees(), 6), fixed(b.Elevation.Degrees(), 6), fixed(b.Range.Kilometres(), 6), fixed(b.OffBoresight.Degrees(), 6)}
	for _, t := range b.Terms {
		row = append(row, fixed(t.Value, 9))
	}
	return append(row, fixed(printedSum(b), 9), fixed(b.PowerFluxDensity, 6), fixed(b.SystemNoise.Kelvins(), 6), fixed(float64(b.GOverT), 6),
		fixed(float64(b.CN0), 6), fixed(float64(b.EbN0), 6), fixed(float64(b.Margin), 6), fixed(float64(b.MarginOver), 6),
		fixed(ifAny(float64(b.DataRate)), 3), fixed(float64(b.AchievableRate), 3), b.AchievableLimit.String(), strconv.FormatBool(b.Usable),
		fixed(float64(b.CI), 6), fixed(b.Sun.Degrees(), 4), fixed(b.Moon.Degrees(), 4))
}
