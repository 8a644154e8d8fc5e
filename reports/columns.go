package reports

import (
	"strings"

	"slantwise/downlink"
)

// column is one quantity along a pass. The names and the order of the columns are
// what a reader of the CSV and JSON files relies on: add, do not rename.
type column struct {
	name     string // with its unit
	decimals int
	values   []float64
}

// columns lists all samples of a pass; columns that a pass without a radio does not
// have are left out.
func columns(p *Pass) []column {
	f := p.Profile
	list := []column{
		{"azimuth_deg", 4, f.AzimuthDeg},
		{"elevation_deg", 4, f.ElevationDeg},
		{"apparent_elevation_deg", 4, f.ApparentElevationDeg},
		{"range_km", 4, f.RangeKm},
		{"range_rate_km_s", 6, f.RangeRateKmS},
	}
	if p.Radio != nil {
		list = append(list, column{"doppler_hz", 1, f.DopplerHz}, column{"off_boresight_deg", 3, f.OffBoresightDeg})
		list = append(list, termColumns(f)...)
		list = append(list,
			column{"received_power_dbm", 3, f.ReceivedPowerDBm},
			column{"power_flux_density_dbw_m2", 3, f.FluxDensityDBWM2},
			column{"system_noise_k", 2, f.SystemNoiseK},
			column{"g_over_t_db_k", 3, f.GOverTDBK},
			column{"c_n0_dbhz", 3, f.CN0DBHz},
			column{"eb_n0_db", 3, f.EbN0DB},
			column{"margin_db", 3, f.MarginDB},
			column{"margin_over_required_db", 3, f.MarginOverDB},
			column{"achievable_rate_bps", 0, f.AchievableRateBps},
			column{"achievable_bytes", 0, p.Radio.AchievableBytes},
			column{"mode_bytes", 0, p.Radio.ModeBytes},
		)
	}
	return ofLength(list, len(f.Seconds))
}

// laterColumns lists the columns that came to stand behind all of columns: the path's,
// the noise's, those of the pass under a clear sky, the rate plan's, the uplinks', and
// those of the ground.
func laterColumns(p *Pass) []column {
	var list []column
	if p.Radio != nil {
		list = radioLaterColumns(p)
	}
	for i := range p.Uplinks {
		list = append(list, uplinkColumns(&p.Uplinks[i])...)
	}
	return ofLength(append(list, groundColumns(p)...), len(p.Profile.Seconds))
}

func radioLaterColumns(p *Pass) []column {
	f, r := p.Profile, p.Radio
	list := []column{{"path_attenuation_db", 3, r.PathTotalDB}}
	for _, n := range r.NoiseParts {
		list = append(list, column{"noise_" + underscored(n.Name) + "_k", 2, n.Values})
	}
	list = append(list, column{"around_boresight_deg", 3, f.AroundBoresightDeg}, column{"body_off_z_deg", 3, f.BodyOffZDeg}, column{"body_around_z_deg", 3, f.BodyAroundZDeg})
	list = append(list, column{"sun_off_beam_deg", 2, f.SunDeg}, column{"moon_off_beam_deg", 2, f.MoonDeg})
	if c := r.ClearSky; c != nil {
		list = append(list,
			column{"clear_sky_received_power_dbm", 3, c.ReceivedPowerDBm},
			column{"clear_sky_system_noise_k", 2, c.SystemNoiseK},
			column{"clear_sky_margin_db", 3, c.MarginDB},
			column{"clear_sky_achievable_rate_bps", 0, c.AchievableRateBps},
			column{"clear_sky_achievable_bytes", 0, r.ClearAchievableBytes},
			column{"clear_sky_mode_bytes", 0, r.ClearModeBytes},
		)
	}
	if r.Plan != nil {
		list = append(list, planColumns(r.Plan)...)
	}
	return append(append(list, suretyColumns(p)...), mountColumns(p)...)
}

// ofLength keeps the columns that have a value for each sample.
func ofLength(list []column, samples int) []column {
	kept := list[:0]
	for _, c := range list {
		if len(c.values) == samples {
			kept = append(kept, c)
		}
	}
	return kept
}

func underscored(s string) string { return strings.ReplaceAll(slug(s), "-", "_") }

// termColumns gives each term of the budget a column named after it and its unit;
// a loss stays a positive number.
func termColumns(f *downlink.Profile) []column {
	list := make([]column, 0, len(f.Terms))
	for i, t := range f.Terms {
		list = append(list, column{"term_" + underscored(t.Name+" "+t.Unit), 3, f.TermValues[i]})
	}
	return list
}

// limitName says in a word what holds the achievable rate; empty where there is none.
func limitName(l downlink.RateLimit) string {
	if l == downlink.LimitUnknown {
		return ""
	}
	return l.String()
}
