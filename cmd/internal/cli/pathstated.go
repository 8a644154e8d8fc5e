package cli

import (
	"bufio"
	"fmt"
	"slices"

	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// pathAnswer is what the command shows, in whatever format.
type pathAnswer struct {
	target *pathTarget
	axis   *sweepAxis // nil for a single path
	points []pathPoint
	notes  []downlink.Note
}

func runPathStated(env *Env, o *pathOptions) error {
	s, err := env.load(needRadio)
	if err != nil {
		return err
	}
	t, err := o.target(s)
	if err != nil {
		return err
	}
	a := &pathAnswer{target: t, notes: t.notes}
	points, notes, err := t.pathAt(t.spec, unit.Angle(*o.elevationDeg)*unit.Degree)
	if err != nil {
		return err
	}
	a.points = points
	a.addNotes(notes)
	if o.format == formatTable {
		return a.writeTerms(env)
	}
	return a.write(env, o.format)
}

// addNotes adds those that are not there yet.
func (a *pathAnswer) addNotes(notes []downlink.Note) {
	for _, n := range notes {
		if !slices.Contains(a.notes, n) {
			a.notes = append(a.notes, n)
		}
	}
}

// head says what the answer is about, and first what it lacks.
func (a *pathAnswer) head() []string {
	t := a.target
	over := func(name string) bool { return a.axis != nil && a.axis.name == name }
	line := "path to " + t.station.Site.Name
	if !over("frequency") {
		line += fmt.Sprintf(" at %g MHz", t.spec.Frequency.Megahertz())
	}
	switch {
	case t.spec.ClearSky:
		return []string{line + ", clear sky"}
	case over("percentage"):
		return a.withMissing(line + ", over the percentage of an average year")
	}
	line += fmt.Sprintf(", exceeded for %g %% of an average year", t.spec.Exceedance.Percents())
	if w, err := propagation.WorstMonth(t.spec.Exceedance); err == nil {
		line += fmt.Sprintf(" (%.3g %% of the average worst month, P.841)", w.Percents())
	}
	return a.withMissing(line)
}

// withMissing adds to a line at the head what is missing.
func (a *pathAnswer) withMissing(line string) []string {
	if missing := a.missing(); len(missing) > 0 {
		return []string{line, missingText(missing)}
	}
	return []string{line}
}

// missing lists the parts that are in no number of the answer.
func (a *pathAnswer) missing() []string {
	spec := a.target.spec
	if a.axis != nil && a.axis.name == "frequency" {
		spec.Frequency = unit.Frequency(a.axis.to) * unit.Megahertz // rain counts from 1 GHz
	}
	return missingParts(&spec)
}

// writeTerms writes the terms of one path, a line each.
func (a *pathAnswer) writeTerms(env *Env) error {
	w := bufio.NewWriter(env.Out)
	for _, l := range a.head() {
		fmt.Fprintln(w, printable(l))
	}
	q := &a.points[0]
	fmt.Fprintf(w, "elevation %.3f deg\n\n", q.elevation.Degrees())
	if err := w.Flush(); err != nil {
		return err
	}
	var rows [][]string
	add := func(is bool, name string, v float64, decimals int, u, from string) {
		if is {
			rows = append(rows, []string{name, fixed(v, decimals), u, from})
		}
	}
	s, p := &q.sample, q.parts
	add(p.Gas, "gas attenuation", float64(s.Gas), 3, "dB", "P.676")
	add(p.Cloud, "cloud attenuation", float64(s.Cloud), 3, "dB", "P.840")
	add(p.Rain, "rain attenuation", float64(s.Rain), 3, "dB", "P.618 with P.838")
	add(p.Scintillation, "scintillation", float64(s.Scintillation), 3, "dB", "P.618, tropospheric")
	add(s.Combination > 0, "atmospheric combination", -float64(s.Combination), 3, "dB", "what P.618's rule takes off the sum")
	add(true, "total attenuation", float64(s.Total), 3, "dB", "P.618 §2.5")
	for _, t := range q.ionosphere {
		add(true, t.Name, t.Value, 3, "dB", t.Source)
	}
	add(p.Gas && !a.target.spec.ClearSky, "gas attenuation, clear sky", float64(s.ClearGas), 3, "dB", "P.676, the ordinary air")
	add(!a.target.spec.ClearSky, "sky brightness", q.sky.Weather.Kelvins(), 2, "K", "P.618 §3, through gas, cloud and rain")
	add(true, "sky brightness, clear sky", q.sky.Clear.Kelvins(), 2, "K", "P.618 §3, through the ordinary air")
	add(fixed(float64(q.xpd), 2) != "", "cross-polar discrimination", float64(q.xpd), 2, "dB", "P.618 §4.1, not exceeded for the percentage")
	if err := writeTable(env.Out, env.outWidth(), []column{textColumn("term"), numberColumn("value"), textColumn("unit"), textColumn("from")}, rows); err != nil {
		return err
	}
	return a.writeNotes(env)
}

func (a *pathAnswer) writeNotes(env *Env) error {
	w := bufio.NewWriter(env.Out)
	fmt.Fprintln(w)
	for _, n := range a.notes {
		fmt.Fprintf(w, "%s: %s\n", n.Kind, printable(n.Text))
	}
	return w.Flush()
}
