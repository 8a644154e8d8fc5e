package cli

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/sizing"
	"slantwise/reports"
)

// dishReport is all that a page of a dish shows.
type dishReport struct {
	study         *dishStudy
	answer        *sizing.Answer
	planes        []*sizing.Plane
	sensitivities []sizing.Sensitivity
	chance        *sizing.Chance // nil: no tolerances, or nothing is required
	limits        *sheet         // nil: nothing is required
}

// writeDishReport writes the page and its numbers into a folder.
func writeDishReport(ctx context.Context, env *Env, d *dishStudy, a *sizing.Answer, o *dishOptions) error {
	r := &dishReport{study: d, answer: a}
	for _, axis := range sizing.Axes {
		p, err := d.plane(env, axis)
		if err != nil {
			return err
		}
		r.planes = append(r.planes, p)
	}
	var err error
	if r.sensitivities, err = d.sensitivities(env, a, o.diameter); err != nil {
		return err
	}
	if r.chance, err = d.chance(env, a, o.diameter); err != nil {
		return err
	}
	if len(a.Verdicts) > 0 {
		if r.limits, err = d.limitSheet(ctx, env, a, o.diameter); err != nil {
			return err
		}
	}
	if o.report != "" { // first, since the paper may go into its folder
		if err := r.write(env, o.report, o.static); err != nil {
			return err
		}
	}
	if o.pdf == "" {
		return nil
	}
	return r.writePaper(o.pdf)
}

// writePaper writes the page's content for print.
func (r *dishReport) writePaper(file string) error {
	content, err := reports.DishPaper(r.page(nil), r.study.scenario.Window.Start)
	if err != nil {
		return err
	}
	return writeWhole(file, content)
}

// write writes every file, the page last.
func (r *dishReport) write(env *Env, dir string, static bool) error {
	if info, err := os.Stat(dir); err == nil && !info.IsDir() {
		return inputErrorf("--report: %s is a file; name a folder", dir)
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return fmt.Errorf("making the folder of the report: %w", err)
	}
	var files []reports.DishFile
	put := func(name, what string, content []byte) error {
		files = append(files, reports.DishFile{Name: name, What: what})
		return writeWhole(filepath.Join(dir, name), content)
	}
	var b bytes.Buffer
	if err := writeJSON(&b, r.study.answerJSON(r.answer)); err != nil {
		return err
	}
	if err := put("answer.json", "the whole answer", b.Bytes()); err != nil {
		return err
	}
	for _, s := range r.sheets() {
		r.study.withNotes(s.sheet)
		for _, f := range []format{formatCSV, formatJSON} {
			var b bytes.Buffer
			quiet := *env
			quiet.Out, quiet.Err = &b, io.Discard
			if err := s.sheet.write(&quiet, f); err != nil {
				return err
			}
			if err := put(s.name+"."+string(f), s.what, b.Bytes()); err != nil {
				return err
			}
		}
	}
	content := r.page(files)
	content.Scriptless = static
	page, err := reports.DishPage(content)
	if err != nil {
		return err
	}
	index := filepath.Join(dir, "index.html")
	if err := writeWhole(index, page); err != nil {
		return err
	}
	env.note("open %s in a browser", printable(index))
	return nil
}

func writeWhole(path string, content []byte) error {
	return atomicfile.Write(path, 0o644, func(w io.Writer) error {
		_, err := w.Write(content)
		return err
	})
}

// namedSheet is a sheet that stands beside the page.
type namedSheet struct {
	name, what string
	sheet      *sheet
}

func (r *dishReport) sheets() []namedSheet {
	out := []namedSheet{
		{"requirements", "what is required", r.study.answerSheet(r.answer)}, {"trade", "the trade curves", r.study.tradeSheet(r.answer)},
		{"sensitivities", "what small changes cost", sensitivitySheet(r.sensitivities)},
	}
	for _, p := range r.planes {
		out = append(out, namedSheet{"map-" + string(p.Axis), "the map over the diameter and " + mapAxes[p.Axis].name, mapSheet(p)})
	}
	if r.chance != nil {
		out = append(out, namedSheet{"chances", "probabilities with every tolerance", chanceSheet(r.chance)})
	}
	if r.limits != nil {
		out = append(out, namedSheet{"limits", "what your dishes and the least one allow", r.limits})
	}
	return out
}

// page lays the page out.
func (r *dishReport) page(files []reports.DishFile) *reports.Dish {
	d, a := r.study, r.answer
	lines := d.sentences(a)
	out := &reports.Dish{Title: "Which dish for " + d.spacecraft.Name, Answer: lines[0], Lines: lines[1:], Files: files}
	out.Basis = about(basisOf(d.scenario, []*scenario.Spacecraft{d.spacecraft}, reports.CautionSizing), d.names()...)
	for i := range out.Basis.Orbits {
		o := &out.Basis.Orbits[i] // its age is that of the statistics' start
		o.Orbit, o.AgeTo = "kept orbit made of "+o.Orbit, o.AgeFrom
	}
	for i := range a.Verdicts {
		v := &a.Verdicts[i]
		q := reports.DishRequirement{Name: requirementText(v.Kind), Required: valueText(v.Required, v.Unit), Reached: valueText(v.ReachedNow, v.Unit), Met: v.MetNow,
			Binds: i == a.Binding, Least: "none of the range", Greatest: "–"}
		if v.Alone.Diameter > 0 {
			q.Least, q.Greatest = metres(v.Alone.Diameter.Metres()), metres(v.Alone.Most.Metres())
		}
		out.Requirements = append(out.Requirements, q)
	}
	out.Charts = append(r.tradeCharts(), r.mapCharts()...)
	for _, x := range r.sensitivities {
		c := reports.DishCost{Name: x.Name, Bytes: x.BytesPerDay, Text: "−" + bytesText(math.Abs(x.BytesPerDay)), Dish: "no dish of the range"}
		if !math.IsNaN(x.Diameter.Metres()) {
			c.Dish = fmt.Sprintf("+%.1f cm", 100*x.Diameter.Metres())
		}
		out.Costs = append(out.Costs, c)
	}
	r.addChances(out)
	r.addLimits(out)
	for _, n := range d.notes {
		if n.Kind == downlink.Warning {
			out.Warnings = append(out.Warnings, n.Text)
		} else {
			out.Notes = append(out.Notes, reports.Note{Kind: noteKinds[n.Kind], Text: n.Text})
		}
	}
	return out
}

// names are what the study is about, as notes of the scenario name it.
func (d *dishStudy) names() []string {
	out := []string{"spacecraft " + d.spacecraft.Name}
	for i := range d.links {
		out = append(out, "station "+d.links[i].station.Site.Name)
	}
	return out
}

func (r *dishReport) addChances(out *reports.Dish) {
	c := r.chance
	if c == nil {
		return
	}
	out.ChanceText = fmt.Sprintf("A dish of %s has %.2f dB to spare and, with every tolerance of the design control, meets all with a probability of %.1f %%.",
		metres(c.Diameter.Metres()), float64(c.Slack), 100*c.Probability)
	for _, x := range c.Assured {
		row := reports.DishChance{Probability: fmt.Sprintf("%.0f %%", 100*x.Probability), Diameter: "none of the range"}
		if x.Diameter > 0 {
			row.Diameter = metres(x.Diameter.Metres())
		}
		out.Chances = append(out.Chances, row)
	}
}

func (r *dishReport) addLimits(out *reports.Dish) {
	if r.limits == nil {
		return
	}
	for _, row := range r.limits.rows {
		dish, diameter, v := row[0].(string), row[1].(float64), row[3].(float64)
		if !math.IsNaN(diameter) {
			dish += ", " + metres(diameter)
		}
		if n := len(out.Limits); n == 0 || out.Limits[n-1].Dish != dish {
			out.Limits = append(out.Limits, reports.DishLimits{Dish: dish})
		}
		text := "none"
		switch u := row[4].(string); {
		case math.IsNaN(v):
		case u == "bit/s":
			text = scaled(v, u)
		case v < 0:
			text = fmt.Sprintf("−%.4g %s", -v, u)
		default:
			text = fmt.Sprintf("%.4g %s", v, u)
		}
		of := &out.Limits[len(out.Limits)-1]
		of.Rows = append(of.Rows, reports.DishLimit{Name: row[2].(string), Value: text, Meaning: row[5].(string)})
	}
}
