package modem

import (
	"fmt"
	"math"
	"slices"
	"sync"
)

// Catalogue is a list of modulations and of codings upon them. It does not change once
// it is made and may be shared between goroutines.
type Catalogue struct {
	modulations []Modulation
	rows        []Row
	index       map[[2]string]int // of rows, by modulation and coding
}

// Rows lists the rows: first by coding in the order of the tables, then by modulation.
func (c *Catalogue) Rows() []Row { return slices.Clone(c.rows) }

// Modulations lists the modulations.
func (c *Catalogue) Modulations() []Modulation { return slices.Clone(c.modulations) }

// With returns the catalogue with further rows after its own. A row that is there
// already is an error, as two thresholds for one name would hide one another.
func (c *Catalogue) With(rows ...Row) (*Catalogue, error) {
	out := newCatalogue(slices.Clone(c.modulations), slices.Clone(c.rows))
	for _, r := range rows {
		if err := r.check(); err != nil {
			return nil, err
		}
		key := [2]string{r.Modulation.Name, r.Coding.Name}
		if _, there := out.index[key]; there {
			return nil, fmt.Errorf("%s: the row is in the catalogue already; give the coding another name", r.Name())
		}
		known, err := out.FindModulation(r.Modulation.Name)
		if err != nil {
			out.modulations = append(out.modulations, r.Modulation)
		} else if known != r.Modulation {
			return nil, fmt.Errorf("%s: the modulation %q is in the catalogue with %d bits a symbol and %g Hz/baud of width; give another name", r.Name(), known.Name, known.BitsPerSymbol, known.Width)
		}
		out.index[key] = len(out.rows)
		out.rows = append(out.rows, r)
	}
	return out, nil
}

func newCatalogue(modulations []Modulation, rows []Row) *Catalogue {
	c := &Catalogue{modulations: modulations, rows: rows, index: map[[2]string]int{}}
	for i := range rows {
		c.index[[2]string{rows[i].Modulation.Name, rows[i].Coding.Name}] = i
	}
	return c
}

// Standard returns the embedded catalogue. A fault in its tables is one of the program:
// the tests read them too.
var Standard = sync.OnceValue(func() *Catalogue {
	c, err := assemble(modulationsCSV, codingsCSV, thresholdsCSV, curvesCSV, spectraCSV)
	if err != nil {
		panic("modem: " + err.Error())
	}
	return c
})

// assemble puts the tables together: a row for each coding and modulation that carries
// it, with its formulas, curves and thresholds.
func assemble(modulations, codings, thresholds, curves, spectra string) (*Catalogue, error) {
	mods, err := readModulations(modulations)
	if err != nil {
		return nil, fmt.Errorf("modulations: %w", err)
	}
	list, err := readCodings(codings)
	if err != nil {
		return nil, fmt.Errorf("codings: %w", err)
	}
	needs, err := readThresholds(thresholds)
	if err != nil {
		return nil, fmt.Errorf("thresholds: %w", err)
	}
	points, err := readCurves(curves)
	if err != nil {
		return nil, fmt.Errorf("curves: %w", err)
	}
	bounds, err := readSpectra(spectra)
	if err != nil {
		return nil, fmt.Errorf("spectra: %w", err)
	}
	c := newCatalogue(mods, nil)
	for _, coding := range list {
		for _, name := range coding.modulations {
			m, err := c.FindModulation(name)
			if err != nil {
				return nil, err
			}
			r := Row{Modulation: m, Coding: coding.Coding}
			r.fill(needs, points, bounds)
			if err := r.check(); err != nil {
				return nil, err
			}
			c.index[[2]string{name, coding.Name}] = len(c.rows)
			c.rows = append(c.rows, r)
		}
	}
	return c, nil
}

// fill gives a row its formulas, curves and thresholds. Without a threshold of its own
// it gets that of its first curve.
func (r *Row) fill(needs []thresholdRow, points []curveRow, bounds map[string]*unionBound) {
	r.Curves = append(r.Curves, r.formulas(bounds)...)
	for _, p := range points {
		if p.coding == r.Coding.Name && slices.Contains(p.modulations, r.Modulation.Name) {
			r.Curves = append(r.Curves, p.Curve)
		}
	}
	for _, n := range needs {
		if n.coding == r.Coding.Name && slices.Contains(n.modulations, r.Modulation.Name) {
			t := n.Threshold
			if n.perSymbol {
				t.EbN0 -= r.EsN0(0)
			}
			r.Thresholds = append(r.Thresholds, t)
		}
	}
	r.Curves = append(r.Curves, r.coded(points)...)
	if len(r.Thresholds) > 0 || len(r.Curves) == 0 {
		return
	}
	c := &r.Curves[0]
	if need, err := c.EbN0(c.usual()); err == nil {
		r.Thresholds = []Threshold{{need, c.usual(), c.Metric, c.Provenance, c.Source}}
	}
}

func (r *Row) check() error {
	if r.Modulation.Name == "" || r.Coding.Name == "" {
		return fmt.Errorf("a row must name its modulation and its coding; they are %q and %q", r.Modulation.Name, r.Coding.Name)
	}
	if len(r.Thresholds) == 0 {
		return fmt.Errorf("%s: no threshold is known", r.Name())
	}
	for _, t := range r.Thresholds {
		if !(math.Abs(float64(t.EbN0)) <= 100) || !(t.ErrorRate > 0 && t.ErrorRate < 1) || !slices.Contains(metrics, t.Metric) || t.Source == "" {
			return fmt.Errorf("%s: a threshold of %g dB for a %s of %g with the source %q is not allowed; it must be -100 to 100 dB, for an error rate greater than 0 and less than 1, with its source", r.Name(), float64(t.EbN0), t.Metric, t.ErrorRate, t.Source)
		}
	}
	if w := r.Modulation.Width; !(w >= 0 && w <= 1000) {
		return fmt.Errorf("%s: a width of %g Hz/baud is not allowed; it must be 0 (shaped pulses) to 1000", r.Name(), w)
	}
	if !(r.Coding.Rate > 0 && r.Coding.Rate <= 1) || r.Modulation.BitsPerSymbol < 1 || r.Modulation.BitsPerSymbol > 16 {
		return fmt.Errorf("%s: a code rate of %g at %d bits a symbol is not allowed; it must be greater than 0 and at most 1, at 1 to 16 bits", r.Name(), r.Coding.Rate, r.Modulation.BitsPerSymbol)
	}
	if err := r.Coding.Frame.check(); err != nil {
		return fmt.Errorf("%s: %w", r.Name(), err)
	}
	return nil
}
