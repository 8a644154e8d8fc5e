package cli

import (
	"bufio"
	"fmt"
	"math"
	"regexp"

	"github.com/spf13/pflag"

	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// sweepOptions asks for the path over one quantity.
type sweepOptions struct {
	over             string
	from, to, points *float64
	into             string
	static           bool
}

func (o *sweepOptions) flags(fs *pflag.FlagSet) []optional {
	fs.StringVar(&o.over, "sweep", "", "over `elevation`, frequency or percentage")
	fs.StringVar(&o.into, "into", "", "write a chart page into this `FILE` of HTML, too")
	fs.BoolVar(&o.static, "static", false, "write that page without script, its charts drawn in it")
	return []optional{
		{"from", "begin of a sweep: `VALUE` in deg, MHz or % (left out: 5 deg, 1000 MHz, 0.01 %)", &o.from},
		{"to", "end of a sweep: `VALUE` in deg, MHz or % (left out: 90 deg, 50000 MHz, 50 %)", &o.to},
		{"points", "`NUMBER` of points of a sweep, 2 to 2000 (left out: 86 for elevation, 61 for frequency, 41 for percentage)", &o.points},
	}
}

// alone tells whether nothing of a sweep is asked for.
func (o *sweepOptions) alone() bool {
	return o.from == nil && o.to == nil && o.points == nil && o.into == ""
}

// sweepAxis is what a sweep runs over.
type sweepAxis struct {
	name             string
	unit             string
	from, to, points float64
	least, most      float64
	logarithmic      bool
}

var sweepAxes = []sweepAxis{
	{"elevation", "deg", 5, 90, 86, -2, 90, false},
	{"frequency", "MHz", 1000, 50_000, 61, 10, 1e6, true},
	{"percentage", "%", 0.01, 50, 41, 0.001, 50, true},
}

// axis returns what the options ask for, checked.
func (o *sweepOptions) axis() (*sweepAxis, error) {
	a, err := pick("sweep", o.over, append([]sweepAxis(nil), sweepAxes...), func(a *sweepAxis) string { return a.name })
	if err != nil {
		return nil, inputErrorf("--sweep: %q is not allowed; it must be elevation, frequency or percentage", o.over)
	}
	for _, f := range []struct {
		flag string
		give *float64
		into *float64
	}{{"from", o.from, &a.from}, {"to", o.to, &a.to}} {
		if f.give == nil {
			continue
		}
		if !(*f.give >= a.least && *f.give <= a.most) {
			return nil, inputErrorf("--%s: %g %s is not allowed; it must be %g to %g %s", f.flag, *f.give, a.unit, a.least, a.most, a.unit)
		}
		*f.into = *f.give
	}
	if !(a.to > a.from) {
		return nil, inputErrorf("--to: %g %s is not above --from, %g %s; a sweep rises", a.to, a.unit, a.from, a.unit)
	}
	if o.points != nil {
		a.points = *o.points
	}
	if !(a.points >= 2 && a.points <= 2000) || a.points != math.Trunc(a.points) {
		return nil, inputErrorf("--points: %g is not allowed; it must be a whole number, 2 to 2000", a.points)
	}
	return a, nil
}

// values lists the points, evenly spaced, or evenly in the logarithm.
func (a *sweepAxis) values() []float64 {
	out := make([]float64, int(a.points))
	last := float64(len(out) - 1)
	for i := range out {
		w := float64(i) / last
		if a.logarithmic {
			out[i] = a.from * math.Pow(a.to/a.from, w)
		} else {
			out[i] = a.from + w*(a.to-a.from)
		}
	}
	out[0], out[len(out)-1] = a.from, a.to
	return out
}

func runPathSweep(env *Env, o *pathOptions) error {
	axis, err := o.sweep.axis()
	if err != nil {
		return err
	}
	s, err := env.load(needRadio)
	if err != nil {
		return err
	}
	if axis.name == "frequency" && o.frequencyMHz == nil && o.spacecraft == "" {
		o.frequencyMHz = &axis.from // every point has its own
	}
	t, err := o.target(s)
	if err != nil {
		return err
	}
	if axis.name != "elevation" && o.elevationDeg == nil {
		return inputErrorf("--sweep %s needs --elevation-deg, at which the path is seen", axis.name)
	}
	a, err := o.sweepPath(t, axis)
	if err != nil {
		return err
	}
	if o.sweep.into != "" {
		if err := a.writePage(env, &o.sweep, axis); err != nil {
			return err
		}
	}
	if o.format == formatTable {
		return a.writeSweep(env)
	}
	return a.write(env, o.format)
}

// sweepPath evaluates the path at every point of an axis.
func (o *pathOptions) sweepPath(t *pathTarget, axis *sweepAxis) (*pathAnswer, error) {
	a := &pathAnswer{target: t, axis: axis, notes: t.notes}
	values := axis.values()
	if axis.name == "elevation" {
		elevations := make([]unit.Angle, len(values))
		for i, v := range values {
			elevations[i] = unit.Angle(v) * unit.Degree
		}
		var notes []downlink.Note
		var err error
		a.points, notes, err = t.pathAt(t.spec, elevations...)
		a.addNotes(notes)
		return a, err
	}
	var all []downlink.Note
	for _, v := range values {
		spec := t.spec
		if axis.name == "frequency" {
			spec.Frequency = unit.Frequency(v) * unit.Megahertz
		} else {
			spec.Exceedance = propagation.Exceedance(v) * propagation.Percent
		}
		points, notes, err := t.pathAt(spec, unit.Angle(*o.elevationDeg)*unit.Degree)
		if err != nil {
			return nil, inputErrorf("at %g %s: %w", v, axis.unit, err)
		}
		a.points = append(a.points, points...)
		all = append(all, notes...)
	}
	a.addNotes(alike(all))
	return a, nil
}

var numberInText = regexp.MustCompile(`[0-9]+(\.[0-9]+)?(e[-+]?[0-9]+)?`)

// alike joins notes that differ by numbers alone: the first stands for them, with how
// many there are.
func alike(notes []downlink.Note) []downlink.Note {
	var out []downlink.Note
	at, seen, more := map[string]int{}, map[downlink.Note]bool{}, map[int]int{}
	for _, n := range notes {
		if seen[n] {
			continue
		}
		seen[n] = true
		key := n.Kind.String() + numberInText.ReplaceAllString(n.Text, "#")
		if i, is := at[key]; is {
			more[i]++
			continue
		}
		at[key] = len(out)
		out = append(out, n)
	}
	for i, n := range more {
		out[i].Text += fmt.Sprintf(" (and %d more points)", n)
	}
	return out
}

// writeSweep writes a line a point.
func (a *pathAnswer) writeSweep(env *Env) error {
	w := bufio.NewWriter(env.Out)
	for _, l := range a.head() {
		fmt.Fprintln(w, printable(l))
	}
	fmt.Fprintln(w)
	if err := w.Flush(); err != nil {
		return err
	}
	columns := []column{}
	for _, h := range []string{"elevation deg", "MHz", "exceeded %", "gas dB", "cloud dB", "rain dB", "scintillation dB", "combination dB", "total dB", "sky K", "clear sky K"} {
		columns = append(columns, numberColumn(h))
	}
	var rows [][]string
	for i := range a.points {
		v := a.points[i].numbers()
		rows = append(rows, []string{fixed(v[0], 2), fixed(v[1], 1), fixed(v[2], 4), fixed(v[3], 3), fixed(v[4], 3), fixed(v[5], 3), fixed(v[6], 3),
			fixed(-v[7], 3), fixed(v[8], 3), fixed(v[12], 1), fixed(v[13], 1)})
	}
	if err := writeTable(env.Out, env.outWidth(), columns, rows); err != nil {
		return err
	}
	return a.writeNotes(env)
}
