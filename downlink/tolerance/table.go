package tolerance

import (
	"math"

	"slantwise/orbit/unit"
)

// Table is a design control table worked out. The margin is the sum of the items, so
// what is required stands among them as a negative item.
type Table struct {
	Rows []Row

	Nominal  unit.DB // sum of the design values
	Mean     unit.DB // sum of the means
	Variance float64 // dB², sum of the variances
	Sigma    unit.DB // its root

	Worst, Best       unit.DB // everything adverse, everything favourable, at once
	WorstRSS, BestRSS unit.DB // nominal, and the root of the sum of the squared tolerances from it
	WorstRSSFromMean  unit.DB // the other convention: mean, and the distances of the adverse limits from the means

	Verdicts []Verdict // one a criterion, in their order
}

// Row is an item with what its law makes of it.
type Row struct {
	Item
	Mean     unit.DB
	Variance float64 // dB²
}

// Evaluate works a table out and judges it by the criteria, which may be none. The
// error joins every fault of the input.
func Evaluate(items []Item, criteria []Criterion) (*Table, error) {
	if err := Check(items, criteria); err != nil {
		return nil, err
	}
	t := &Table{Rows: make([]Row, len(items))}
	var adverse2, favourable2, fromMean2 float64
	for i := range items {
		r := Row{Item: items[i], Mean: items[i].Mean(), Variance: items[i].Variance()}
		t.Rows[i] = r
		t.Nominal += r.Design
		t.Mean += r.Mean
		t.Variance += r.Variance
		t.Worst += r.Design + r.Adverse
		t.Best += r.Design + r.Favourable
		adverse2 += float64(r.Adverse * r.Adverse)
		favourable2 += float64(r.Favourable * r.Favourable)
		below := float64(r.Mean - r.Design - r.Adverse)
		fromMean2 += below * below
	}
	t.Sigma = unit.DB(math.Sqrt(t.Variance))
	t.WorstRSS = t.Nominal - unit.DB(math.Sqrt(adverse2))
	t.BestRSS = t.Nominal + unit.DB(math.Sqrt(favourable2))
	t.WorstRSSFromMean = t.Mean - unit.DB(math.Sqrt(fromMean2))
	for _, c := range criteria {
		t.Verdicts = append(t.Verdicts, t.judge(c))
	}
	return t, nil
}

// MeanLess returns the mean margin less n sigma.
func (t *Table) MeanLess(n float64) unit.DB { return t.Mean - unit.DB(n*float64(t.Sigma)) }
