package reports

import "slices"

// addSky says what the path in the numbers of the index is, and what is missing where.
func (v *indexView) addSky(rows []row) {
	var beside bool
	var where []string // by station and what is missing, in the order of the rows
	for i := range rows {
		r := &rows[i]
		beside = beside || finite(r.clearModeBytes)
		if text := r.station + ": " + inWords(r.path.Missing); len(r.path.Missing) > 0 && !slices.Contains(where, text) {
			where = append(where, text)
		}
		if v.Sky != "" {
			continue
		}
		switch {
		case r.path.ClearSky:
			v.Sky = "Margins and volumes are those of a clear sky."
		case r.path.ExceededPercent > 0:
			v.Sky = "Margins and volumes are those with the attenuation and noise exceeded " + percentText(&r.path) +
				" of an average year: the least margin under them is what counts."
		}
	}
	if beside && v.Sky != "" {
		v.Sky += " Under each stands that of a clear sky."
	}
	slices.Sort(where)
	v.Lacks = where
}
