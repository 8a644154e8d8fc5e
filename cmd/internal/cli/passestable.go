package cli

import (
	"fmt"
	"iter"
	"slices"
	"time"

	"slantwise/station/pass"
)

// writeTable writes the list for people: UTC, and the station's own time of AOS where
// a station has a time zone.
func (p *passSearch) writeTable(env *Env, passes iter.Seq[pass.Found]) error {
	if n := p.list.Len(); n > mostTableRows {
		return inputErrorf("--format: a table of %d passes is more than %d; take --format csv, or filter them", n, mostTableRows)
	}
	local := false
	for i := range p.stations {
		local = local || p.stations[i].Site.TimeZone != nil
	}
	columns := []column{textColumn("spacecraft"), textColumn("station"), textColumn("AOS UTC")}
	if local {
		columns = append(columns, textColumn("AOS local"))
	}
	columns = append(columns, textColumn("culmination UTC"), textColumn("LOS UTC"), numberColumn("duration s"),
		numberColumn("max elevation deg"), numberColumn("AOS azimuth deg"), numberColumn("culmination azimuth deg"),
		numberColumn("LOS azimuth deg"), numberColumn("least range km"), textColumn("cut"))
	if p.sure != nil {
		columns = append(columns, numberColumn("AOS ± s"), numberColumn("LOS ± s"), numberColumn("takes place %"))
	}
	if p.mounts != nil {
		columns = append(columns, textColumn("antenna"), numberColumn("not followed s"), numberColumn("without a plan s"), numberColumn("axis from deg"), numberColumn("axis to deg"), numberColumn("turn-overs"))
	}
	var rows [][]string
	for f := range passes {
		row := []string{p.spacecraft[f.Spacecraft].Name, p.stations[f.Site].Site.Name, utc(f.AOS)}
		if local {
			row = append(row, localTime(f.AOS, p.stations[f.Site].Site.TimeZone))
		}
		row = append(row, laterUTC(f.Culmination, f.AOS), laterUTC(f.LOS, f.AOS), fixed(f.Duration().Seconds(), 1),
			fixed(f.MaxElevation.Degrees(), 2), azimuth(f.AOSAzimuth.Degrees(), 1), azimuth(f.CulminationAzimuth.Degrees(), 1),
			azimuth(f.LOSAzimuth.Degrees(), 1), fixed(f.MinRange.Kilometres(), 1), f.Cut.String())
		if p.sure != nil {
			m := p.sure.of(&f)
			row = append(row, fixed(m[0], 2), fixed(m[1], 2), fixed(100*m[3], 1))
		}
		if p.mounts != nil {
			row = append(row, p.mounts.cells(&f)...)
		}
		rows = append(rows, row)
	}
	if len(rows) == 0 {
		_, err := fmt.Fprintf(env.Out, "no passes from %s to %s\n", utc(p.window.From), utc(p.window.To))
		return err
	}
	return writeTable(env.Out, env.outWidth(), slices.Clip(columns), rows)
}

func azimuth(deg float64, decimals int) string { return string(appendAzimuth(nil, deg, decimals)) }

// localTime returns an instant by the clock of a station, to the second, with the
// name of its time; empty without a time zone.
func localTime(t time.Time, zone *time.Location) string {
	if zone == nil {
		return ""
	}
	return t.Round(time.Second).In(zone).Format("2006-01-02 15:04:05 MST")
}

// laterUTC returns an instant without its date where that is the date of an earlier
// one beside it.
func laterUTC(t, beside time.Time) string {
	s := utc(t)
	const date = len("2006-01-02T")
	if s[:date] == utc(beside)[:date] {
		return s[date:]
	}
	return s
}
