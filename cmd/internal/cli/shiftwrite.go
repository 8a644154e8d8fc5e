package cli

import (
	"bufio"
	"fmt"
	"math"

	"slantwise/reports"
)

// shiftSheetNames are what the CSV may hold.
var shiftSheetNames = []string{"contacts", "minutes", "steps", "causes"}

// writeShift writes the sheet to standard output.
func writeShift(env *Env, s *reports.Shift, o *shiftOptions) error {
	switch o.format {
	case formatJSON:
		whole, err := shiftJSONOf(s)
		if err != nil {
			return err
		}
		return writeJSON(env.Out, whole)
	case formatCSV:
		out := map[string]func(*reports.Shift) *sheet{
			"contacts": shiftContactRows, "minutes": shiftMinuteRows, "steps": shiftStepRows, "causes": shiftCauseRows,
		}[o.show](s)
		if s.None != "" {
			out.notes = append(out.notes, s.None)
		}
		out.notes = append(out.notes, s.Left...)
		return out.write(env, formatCSV)
	}
	w := bufio.NewWriter(env.Out)
	for _, line := range reports.ShiftText(s) {
		w.WriteString(printable(line) + "\n") // an error stays in the writer until it is flushed
	}
	if err := w.Flush(); err != nil {
		return fmt.Errorf("write the sheet: %w", err)
	}
	return nil
}

// shiftContactRows is a row a contact.
func shiftContactRows(s *reports.Shift) *sheet {
	out := &sheet{name: "contacts", columns: []sheetColumn{
		numbersAs("number", "number", 0), wordsAs("contact", "contact"), wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station"), wordsAs("antenna", "antenna"),
		wordsAs("transmitter", "transmitter"), wordsAs("start_utc", "start UTC"), wordsAs("highest_utc", "highest UTC"), wordsAs("end_utc", "end UTC"), wordsAs("aos_utc", "AOS UTC"), wordsAs("los_utc", "LOS UTC"),
	}}
	for _, e := range []string{"start", "highest", "end"} {
		out.columns = append(out.columns, numbersAs(e+"_azimuth_deg", e+" azimuth deg", 4), numbersAs(e+"_elevation_deg", e+" elevation deg", 4),
			numbersAs(e+"_received_hz", e+" received Hz", 3), numbersAs(e+"_doppler_hz", e+" Doppler Hz", 3))
	}
	out.columns = append(out.columns, numbersAs("volume_bytes", "volume B", 0), numbersAs("aos_plus_minus_s", "AOS ± s", 4), numbersAs("los_plus_minus_s", "LOS ± s", 4),
		numbersAs("existence_probability", "existence", 4), numbersAs("late_or_early_at_most_s", "late or early s", 4), numbersAs("offset_step_s", "offset step s", 4), numbersAs("offset_steps", "offset steps", 0),
		wordsAs("give_up_utc", "give up UTC"))
	for i := range s.Contacts {
		c := &s.Contacts[i]
		row := []any{float64(i + 1), c.Name, c.Spacecraft, s.Station, c.Antenna, c.Transmitter, utc(c.Start), utc(c.Events[1].Time), utc(c.End), utc(c.AOS), utc(c.LOS)}
		for _, e := range c.Events {
			row = append(row, e.AzimuthDeg, e.ElevationDeg, e.ReceivedHz, e.ShiftHz)
		}
		q := &c.Search
		out.rows = append(out.rows, append(row, c.Bytes, q.AOSSeconds, q.LOSSeconds, q.Existence, q.MostSeconds, q.StepSeconds, stepsOrNone(q), utc(q.Until)))
	}
	return out
}

// stepsOrNone is how many offsets there are to each side; none where that is not known.
func stepsOrNone(q *reports.ShiftSearch) float64 {
	if math.IsNaN(q.StepSeconds) {
		return none
	}
	return float64(q.Steps)
}

// shiftMinuteRows is a row a minute.
func shiftMinuteRows(s *reports.Shift) *sheet {
	out := &sheet{name: "minutes", columns: []sheetColumn{
		numbersAs("number", "number", 0), wordsAs("spacecraft", "spacecraft"), wordsAs("transmitter", "transmitter"), wordsAs("utc", "UTC"),
		numbersAs("azimuth_deg", "azimuth deg", 4), numbersAs("elevation_deg", "elevation deg", 4), numbersAs("received_power_dbm", "received dBm", 3),
		numbersAs("cn0_dbhz", "C/N0 dBHz", 3), wordsAs("mode", "mode"), numbersAs("margin_db", "margin dB", 3),
	}}
	for i := range s.Contacts {
		c := &s.Contacts[i]
		for _, m := range c.Minutes {
			out.rows = append(out.rows, []any{float64(i + 1), c.Spacecraft, c.Transmitter, utc(m.Time), m.AzimuthDeg, m.ElevationDeg, m.ReceivedDBm, m.CN0DBHz, m.Mode, m.MarginDB})
		}
	}
	return out
}

// shiftStepRows is a row a step of the rate plans.
func shiftStepRows(s *reports.Shift) *sheet {
	out := &sheet{name: "steps", columns: []sheetColumn{
		numbersAs("number", "number", 0), wordsAs("spacecraft", "spacecraft"), wordsAs("transmitter", "transmitter"), wordsAs("from_utc", "from UTC"), wordsAs("to_utc", "to UTC"), wordsAs("mode", "mode"),
		numbersAs("information_rate_bps", "information bit/s", 0), numbersAs("net_rate_bps", "net bit/s", 0), numbersAs("least_margin_db", "least margin dB", 3),
	}}
	for i := range s.Contacts {
		c := &s.Contacts[i]
		for _, p := range c.Steps {
			out.rows = append(out.rows, []any{float64(i + 1), c.Spacecraft, c.Transmitter, utc(p.From), utc(p.To), p.Mode, p.InformationRate.BitsPerSecond(), p.NetRate.BitsPerSecond(), p.LeastMarginDB})
		}
	}
	return out
}

// shiftCauseRows is a row a cause of a low signal, by rank.
func shiftCauseRows(s *reports.Shift) *sheet {
	out := &sheet{name: "causes", columns: []sheetColumn{
		numbersAs("number", "number", 0), wordsAs("spacecraft", "spacecraft"), numbersAs("rank", "rank", 0), wordsAs("cause", "cause"),
		numbersAs("low_end_db", "low end dB", 3), numbersAs("highest_db", "highest dB", 3), wordsAs("all_of_it", "all of it"), wordsAs("detail", "detail"),
	}}
	for i := range s.Contacts {
		c := &s.Contacts[i]
		for k := range c.Causes {
			q := &c.Causes[k]
			low, all := finiteOrAll(q.LowDB)
			high, too := finiteOrAll(q.HighDB)
			where := ""
			switch {
			case all && too:
				where = "both"
			case all:
				where = "low end"
			case too:
				where = "highest"
			}
			out.rows = append(out.rows, []any{float64(i + 1), c.Spacecraft, float64(k + 1), q.Kind.Name(), low, high, where, q.Detail})
		}
	}
	return out
}

// finiteOrAll parts a loss from one that leaves nothing.
func finiteOrAll(v float64) (db float64, all bool) {
	if math.IsInf(v, 1) {
		return none, true
	}
	return v, false
}
