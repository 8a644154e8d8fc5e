package cli

import (
	"fmt"
	"strconv"
	"strings"

	"slantwise/orbit"
	"slantwise/orbit/fit"
)

// write writes the report in a format: a table for people, the residuals as CSV, all as
// JSON.
func (f *fitReport) write(env *Env, as format) error {
	switch as {
	case formatJSON:
		return writeJSON(env.Out, f.answer())
	case formatCSV:
		return f.residualSheet().write(env, as)
	}
	return f.writeText(env)
}

// residualSheet has a row a datum.
func (f *fitReport) residualSheet() *sheet {
	out := &sheet{name: "residuals", notes: append([]string{f.summary()}, f.notes...), columns: []sheetColumn{
		wordsAs("utc", "UTC"), wordsAs("line", "line"), numbersAs("radial_m", "radial m", 3), numbersAs("along_m", "along m", 3),
		numbersAs("across_m", "across m", 3), numbersAs("radial_m_s", "radial m/s", 6), numbersAs("along_m_s", "along m/s", 6),
		numbersAs("across_m_s", "across m/s", 6), wordsAs("left_out", "left out"), wordsAs("far_off", "far off"),
	}}
	for i := range f.r.Residuals {
		x := &f.r.Residuals[i]
		line := ""
		if x.Line > 0 {
			line = strconv.Itoa(x.Line)
		}
		out.rows = append(out.rows, []any{utc(x.Time), line, x.Radial, x.Along, x.Across, x.RadialRate, x.AlongRate, x.AcrossRate,
			yes(x.Rejected), yes(x.Suspect)})
	}
	return out
}

// fitElement is a row of the elements' table.
type fitElement struct {
	key, head, unit string
	value, sigma    float64
	decimals        int // of the value in the table
}

func (f *fitReport) elements() []fitElement {
	el, s := &f.r.Elements, &f.sigmas
	return []fitElement{
		{"mean_motion_rev_day", "mean motion", "rev/day", el.MeanMotion, s.MeanMotion, 8},
		{"eccentricity", "eccentricity", "", el.Eccentricity, s.Eccentricity, 8},
		{"inclination_deg", "inclination", "deg", el.Inclination.Degrees(), s.Inclination, 6},
		{"right_ascension_of_node_deg", "right ascension of the node", "deg", el.RAAN.Degrees(), s.RAAN, 6},
		{"argument_of_perigee_deg", "argument of perigee", "deg", el.ArgPerigee.Degrees(), s.ArgPerigee, 6},
		{"mean_anomaly_deg", "mean anomaly", "deg", el.MeanAnomaly.Degrees(), s.MeanAnomaly, 6},
		{"b_star_per_earth_radius", f.dragHead(), "1/Earth radii", el.BStar, s.BStar, 9},
	}
}

func (f *fitReport) dragHead() string {
	if f.r.DragFound {
		return "B* (fitted)"
	}
	return "B* (stated)"
}

// fitStatistic is a row of the residuals' table.
type fitStatistic struct {
	key, head, unit string
	fit.Statistics
}

func (f *fitReport) statistics() []fitStatistic {
	r := f.r
	rows := []fitStatistic{{"radial", "radial", "m", r.Radial}, {"along", "along", "m", r.Along}, {"across", "across", "m", r.Across}}
	if f.states > 0 {
		rows = append(rows, fitStatistic{"radial_velocity", "velocity, radial", "m/s", r.RadialRate},
			fitStatistic{"along_velocity", "velocity, along", "m/s", r.AlongRate}, fitStatistic{"across_velocity", "velocity, across", "m/s", r.AcrossRate})
	}
	return rows
}

func (f *fitReport) writeText(env *Env) error {
	el := &f.r.Elements
	if _, err := fmt.Fprintf(env.Out, "%s\nepoch %s, TEME, UTC\n\n", printable(f.summary()), utc(el.Epoch)); err != nil {
		return fmt.Errorf("write the report: %w", err)
	}
	var rows [][]string
	for _, e := range f.elements() {
		rows = append(rows, []string{e.head, fixed(e.value, e.decimals), digits(e.sigma, 2), e.unit})
	}
	width := env.outWidth()
	if err := writeTable(env.Out, width, []column{textColumn("element"), numberColumn("value"), numberColumn("1 sigma"), textColumn("unit")}, rows); err != nil {
		return err
	}
	rows = nil
	for _, s := range f.statistics() {
		rows = append(rows, []string{s.head, digits(s.RMS, 3), digits(s.Mean, 3), digits(s.Worst, 3), utc(s.At), s.unit})
	}
	fmt.Fprintln(env.Out) // an error of the writer comes back from the next table
	if err := writeTable(env.Out, width, []column{textColumn("residual"), numberColumn("RMS"), numberColumn("mean"), numberColumn("worst"),
		textColumn("worst at UTC"), textColumn("unit")}, rows); err != nil {
		return err
	}
	if err := f.writeAhead(env, width); err != nil {
		return err
	}
	return f.writeTwoLines(env)
}

func (f *fitReport) writeAhead(env *Env, width int) error {
	if len(f.ahead) == 0 {
		return nil
	}
	var rows [][]string
	for _, a := range f.ahead {
		rows = append(rows, []string{utc(a.at), fixed(a.days, 0), digits(a.spread.Radial.Metres(), 3), digits(a.spread.Along.Metres(), 3), digits(a.spread.Across.Metres(), 3)})
	}
	fmt.Fprintln(env.Out)
	err := writeTable(env.Out, width, []column{textColumn("spread, 1 sigma, at UTC"), numberColumn("days from epoch"), numberColumn("radial m"),
		numberColumn("along m"), numberColumn("across m")}, rows)
	if err != nil || f.rule == (orbit.AgeRule{}) {
		return err
	}
	keys, km := f.ruleKeys()
	for i := range keys {
		keys[i] += ": " + digits(km[i], 3)
	}
	if _, err := fmt.Fprintf(env.Out, "\nby age, as a scenario takes it:\nposition_uncertainty: {%s}\n", strings.Join(keys, ", ")); err != nil {
		return fmt.Errorf("write the report: %w", err)
	}
	return nil
}

func (f *fitReport) writeTwoLines(env *Env) error {
	text := f.twoLine.lines
	if text == "" {
		text = "no two-line set: " + f.twoLine.why + "\n"
	} else {
		text += fmt.Sprintf("as two lines at most %s m from the fit over the data\n", digits(f.twoLine.farthest, 3))
	}
	if _, err := fmt.Fprintf(env.Out, "\n%s", text); err != nil {
		return fmt.Errorf("write the report: %w", err)
	}
	for _, n := range append(f.twoLine.lost, f.notes...) {
		env.note("%s", printable(strings.TrimSpace(n)))
	}
	return nil
}
