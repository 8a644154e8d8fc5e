package cli

import (
	"fmt"
	"io"
	"math"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/scenario"
	"slantwise/reports"
)

// pageName refuses a name for the page that leaves none for the files beside it.
func (o *compareOptions) pageName() error {
	if o.page != "" && filepath.Ext(o.page) != ".html" {
		return inputErrorf("--page: %q does not end in .html; the numbers of the page go into files of the same name that end in .csv and .json", o.page)
	}
	return nil
}

// writePage writes the page, and every number of it as CSV and JSON beside it.
func (c *comparison) writePage(env *Env) error {
	base := strings.TrimSuffix(c.options.page, ".html")
	whole := c.page()
	whole.Files = []string{filepath.Base(base) + ".csv", filepath.Base(base) + ".json"}
	page, err := reports.ComparisonPage(whole)
	if err != nil {
		return err
	}
	table := c.sheet(true)
	text, err := c.json(whole, table)
	if err != nil {
		return fmt.Errorf("write the JSON: %w", err)
	}
	for _, f := range []struct {
		name  string
		write func(io.Writer) error
	}{
		{base + ".csv", table.csv},
		{base + ".json", func(w io.Writer) error { return writeJSON(w, text) }},
		{c.options.page, func(w io.Writer) error { _, err := w.Write(page); return err }},
	} {
		if err := atomicfile.Write(f.name, 0o644, f.write); err != nil {
			return err
		}
	}
	env.note("open %s in a browser", printable(c.options.page))
	return nil
}

// page is the content of the page.
func (c *comparison) page() *reports.Comparison {
	out := &reports.Comparison{Title: "What changes", Notes: c.notes, Totals: c.totals()}
	for i, s := range c.sides {
		out.Names[i] = filepath.Base(s.Label)
		var craft []*scenario.Spacecraft
		for _, pair := range c.craft {
			craft = append(craft, pair[i])
		}
		out.Basis[i] = basisOf(s, craft, reports.CautionCompare)
		if out.From.IsZero() || s.Window.Start.Before(out.From) {
			out.From = s.Window.Start
		}
		if s.Window.End.After(out.To) {
			out.To = s.Window.End
		}
	}
	if out.Names[0] == out.Names[1] { // in two folders
		out.Names = [2]string{out.Names[0] + " (before)", out.Names[1] + " (after)"}
	}
	for _, d := range scenario.Differences(c.sides[0], c.sides[1]) {
		out.Differs = append(out.Differs, reports.Difference(d))
	}
	for i := range c.passes {
		p := &c.passes[i]
		out.Uplink = out.Uplink || !math.IsNaN(p.links[0].uplinkDB) || !math.IsNaN(p.links[1].uplinkDB)
		if !p.same() || !c.options.moved {
			out.Passes = append(out.Passes, p.reported())
		}
	}
	slices.SortStableFunc(out.Passes, func(a, b reports.ComparedPass) int { return firstOf(a.AOS).Compare(firstOf(b.AOS)) })
	out.Answer, out.Lines = c.answer(&out.Totals[0])
	return out
}

// firstOf is the instant before, or the one after where there is no other.
func firstOf(pair [2]time.Time) time.Time {
	if pair[0].IsZero() {
		return pair[1]
	}
	return pair[0]
}

func (p *comparedPass) reported() reports.ComparedPass {
	r := reports.ComparedPass{Spacecraft: p.craft, Station: p.station, Change: p.change, AOSShift: p.byAOS, LOSShift: p.byLOS,
		PlusMinus: p.plusMinus, MaxElevationDeg: p.maxElevationDegs}
	for i, at := range p.at {
		if at != nil {
			r.AOS[i], r.LOS[i] = at.AOS, at.LOS
		}
		r.MarginDB[i], r.Bytes[i], r.UplinkMarginDB[i] = p.links[i].marginDB, p.links[i].bytes, p.links[i].uplinkDB
	}
	return r
}

// totals sums all passes, and then those of each spacecraft over each station.
func (c *comparison) totals() []reports.ComparedTotal {
	all := reports.ComparedTotal{}
	out := []reports.ComparedTotal{all}
	at := map[[2]string]int{}
	changes := [][]float64{nil}
	for i := range c.passes {
		p := &c.passes[i]
		key := [2]string{p.craft, p.station}
		n, ok := at[key]
		if !ok {
			n = len(out)
			at[key] = n
			out, changes = append(out, reports.ComparedTotal{Spacecraft: p.craft, Station: p.station}), append(changes, nil)
		}
		for _, k := range []int{0, n} {
			for side, q := range p.at {
				if q == nil {
					continue
				}
				out[k].Passes[side]++
				out[k].Contact[side] += q.Duration()
				if v := p.links[side].bytes; !math.IsNaN(v) {
					out[k].Bytes[side] += v
				}
			}
			if d := p.links[1].marginDB - p.links[0].marginDB; !math.IsNaN(d) {
				changes[k] = append(changes[k], d)
			}
		}
	}
	for k := range out {
		out[k].MarginChangeDB = medianOf(changes[k])
	}
	return out
}

// moveText writes a difference with two decimals and its sign, what rounds to nothing without.
func moveText(dB float64) string {
	s := fmt.Sprintf("%+.2f", dB)
	if s == "+0.00" || s == "-0.00" {
		return "0.00"
	}
	return s
}

// medianOf is the middle value, of two the mean; it does not exist for none.
func medianOf(values []float64) float64 {
	if len(values) == 0 {
		return none
	}
	s := slices.Sorted(slices.Values(values))
	n := len(s) / 2
	if len(s)%2 == 1 {
		return s[n]
	}
	return (s[n-1] + s[n]) / 2
}

// answer says in a sentence what the second file changes, and what else is to be said
// first.
func (c *comparison) answer(all *reports.ComparedTotal) (string, []string) {
	count := map[string]int{}
	var most float64
	var margins []float64
	for i := range c.passes {
		p := &c.passes[i]
		count[p.change]++
		if math.Abs(p.byAOS) > math.Abs(most) {
			most = p.byAOS
		}
		if d := p.links[1].marginDB - p.links[0].marginDB; !math.IsNaN(d) {
			margins = append(margins, d)
		}
	}
	s := fmt.Sprintf("%s before, %s after", counted(all.Passes[0], "pass", "passes"), counted(all.Passes[1], "pass", "passes"))
	if a, b := all.Bytes[0], all.Bytes[1]; a > 0 || b > 0 {
		s += "; " + scaled(a, "B") + " become " + scaled(b, "B")
		if a > 0 && a != b {
			s += fmt.Sprintf(" (%+.1f %%)", 100*(b/a-1))
		}
	}
	if len(margins) > 0 {
		s += fmt.Sprintf("; the greatest margin changes by %s dB (median)", moveText(medianOf(margins)))
	}
	lines := []string{fmt.Sprintf("%d stay as they were in time, %d moved, %d are gone, %d are new.", count["same"], count["moved"], count["gone"], count["new"])}
	if most != 0 {
		lines = append(lines, fmt.Sprintf("AOS moves by %+.3f s at most.", most))
	}
	if n := len(margins); n > 0 {
		lines = append(lines, fmt.Sprintf("Margins change by %s to %s dB over the %s that both have.", moveText(slices.Min(margins)), moveText(slices.Max(margins)), counted(n, "pass", "passes")))
	}
	return s + ".", lines
}
