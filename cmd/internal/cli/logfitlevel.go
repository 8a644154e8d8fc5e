package cli

import (
	"fmt"
	"math"
	"slices"

	"slantwise/downlink/measured"
)

// groupFit is what was fitted to the log of one link.
type groupFit struct {
	*overLog
	found     []foundFit
	notes     []string
	frequency *measured.Fit
	level     *measured.Fit // the offset and the aim, by the quantity that tells most
	levelOf   measured.Quantity
	noise     *measured.Fit // nil: not told apart
}

// foundFit is a fit under the heading that it goes by.
type foundFit struct {
	of  string
	fit *measured.Fit
}

func newGroupFit(o *overLog) *groupFit { return &groupFit{overLog: o} }

// copied returns the points for a fit of its own, which marks them.
func (f *groupFit) copied() []measured.Point { return slices.Clone(f.points) }

func (f *groupFit) add(of string, fit *measured.Fit, err error) bool {
	if err != nil {
		f.notes = append(f.notes, err.Error())
		return false
	}
	f.found = append(f.found, foundFit{of, fit})
	for _, a := range fit.Advice {
		f.notes = append(f.notes, of+": "+a)
	}
	return true
}

// fit fits all that the log holds.
func (f *groupFit) fit() {
	for _, q := range measured.Compared() {
		if f.log.Has(q) {
			f.notes = append(f.notes, measured.MixedUnits(f.points, q)...)
		}
	}
	beam := 0.0
	if w, ok := f.antenna.BeamwidthAt(f.transmitter.Frequency); ok {
		beam = w.Degrees()
	}
	for _, q := range []measured.Quantity{measured.PowerDBm, measured.CN0DBHz, measured.EbN0DB, measured.RelativePowerDB} {
		if !f.log.Has(q) {
			continue
		}
		points := f.copied()
		fit, err := measured.FitLevel(points, measured.LevelOptions{Quantity: q, BeamDeg: beam})
		if f.add(q.String(), fit, err) && f.level == nil && q != measured.RelativePowerDB {
			f.level, f.levelOf = fit, q
		}
		f.notes = append(f.notes, leftOut(q, points)...)
	}
	f.fitNoise(beam)
	if f.log.Has(measured.FrequencyHz) {
		points := f.copied()
		fit, err := measured.FitFrequency(points, true)
		if f.add(measured.FrequencyHz.String(), fit, err) {
			f.frequency = fit
		}
		f.notes = append(f.notes, leftOut(measured.FrequencyHz, points)...)
	}
}

// fitNoise tells noise from level where the log can.
func (f *groupFit) fitNoise(beam float64) {
	ratio := measured.CN0DBHz
	if !f.log.Has(ratio) {
		ratio = measured.EbN0DB
	}
	if !f.log.Has(ratio) {
		return
	}
	if f.log.Has(measured.PowerDBm) || f.log.Has(measured.RelativePowerDB) {
		fit, err := measured.FitNoise(f.copied())
		if f.add("noise", fit, err) && f.log.Has(measured.PowerDBm) {
			f.noise = fit
		}
		return
	}
	fit, err := measured.FitLevel(f.copied(), measured.LevelOptions{Quantity: ratio, BeamDeg: beam, Noise: true})
	if err != nil {
		return // said for the level alone
	}
	for _, p := range fit.Parameters {
		if p.Unit != "K" {
			continue
		}
		switch usual := f.usualNoise(); {
		case p.Span > usual/2 || p.Value < -usual/2:
			f.notes = append(f.notes, fmt.Sprintf("%s alone does not tell noise (so G/T) from level here: a noise temperature of %s ± %s K over the predicted %s K would do; log received power in the same samples, or more of the low elevations",
				ratio, fixed(p.Value, 0), fixed(p.Span, 0), fixed(usual, 0)))
		default:
			f.add(ratio.String()+", noise apart", fit, nil)
			if math.Abs(p.Value) > standsOut*p.Span { // level and noise lean on each other: one in twenty is too often to move both
				f.level, f.levelOf, f.noise = fit, ratio, fit
			}
		}
	}
}

// standsOut is how many times its interval a noise must be to be taken apart from the level by C/N0 alone.
const standsOut = 2

// usualNoise is the predicted noise in the middle of the samples, K.
func (f *groupFit) usualNoise() float64 {
	var k []float64
	for i := range f.points {
		if v := f.points[i].NoiseK; !math.IsNaN(v) {
			k = append(k, v)
		}
	}
	if len(k) == 0 {
		return none
	}
	slices.Sort(k)
	return k[len(k)/2]
}

// rows adds the fits to a sheet.
func (f *groupFit) rows(out *sheet) {
	for _, q := range f.found {
		addFit(out, q.of, q.fit, f.spacecraft.Name, f.station.Site.Name)
	}
	if f.clear != nil {
		out.notes = append(out.notes, "levels are predicted under a clear sky; the scenario's weather is left out of it")
	}
	if len(f.found) > 0 && !slices.ContainsFunc(f.found, func(q foundFit) bool { return q.fit.Passes > 1 }) {
		out.notes = append(out.notes, "one pass does not tell how passes differ: the intervals hold for what was so in it; --entry takes several together")
	}
	out.notes = append(out.notes, f.notes...)
}

func newFitSheet() *sheet {
	return &sheet{name: "fits", columns: []sheetColumn{wordsAs("quantity", "quantity"), wordsAs("parameter", "parameter"), numbersAs("value", "value", 4),
		numbersAs("plus_minus", "± (95 %)", 4), wordsAs("unit", "unit"), numbersAs("samples", "samples", 0), numbersAs("outliers", "outliers", 0),
		numbersAs("noise", "noise of a sample", 3), wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station")}, rows: [][]any{}}
}

func addFit(out *sheet, of string, fit *measured.Fit, spacecraft, station string) {
	for _, p := range fit.Parameters {
		out.rows = append(out.rows, []any{of, p.Name, p.Value, p.Span, p.Unit, float64(fit.Used), float64(len(fit.Outliers)), fit.Scale, spacecraft, station})
	}
}

// leftOut counts and names the samples that a fit did not use.
func leftOut(q measured.Quantity, points []measured.Point) []string {
	var out []string
	count := measured.Count(points)
	for _, s := range measured.LeftOut() {
		if n := count[s]; n > 0 {
			out = append(out, fmt.Sprintf("%s: %d samples left out: %s", q, n, s))
		}
	}
	for i := range points {
		if p := &points[i]; p.State == measured.Outlier {
			out = append(out, fmt.Sprintf("%s: outlier%s, %s: %s off the prediction", q, inLine(p.Line), utc(p.At), fixed(p.Residual(q), 2)))
		}
	}
	return out
}

// inLine says the line of a file, nothing for a sample of the logbook.
func inLine(line int) string {
	if line == 0 {
		return ""
	}
	return fmt.Sprintf(" in line %d", line)
}
