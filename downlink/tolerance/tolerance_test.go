package tolerance_test

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"strings"
	"testing"

	"slantwise/downlink/tolerance"
	"slantwise/orbit/unit"
)

// lawOf are the abbreviations of testdata/review/tolerance_worked_example.csv.
var lawOf = map[string]tolerance.Law{
	"none": tolerance.SingleValue, "uni": tolerance.Uniform, "tri": tolerance.Triangular, "gau": tolerance.Gaussian,
}

func rows(t testing.TB, name string) [][]string {
	t.Helper()
	f, err := os.Open("../../testdata/review/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil || len(all) < 2 {
		t.Fatalf("%s: %d rows, %v", name, len(all), err)
	}
	return all[1:]
}

func num(t testing.TB, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func workedItems(t testing.TB) (items []tolerance.Item, means, variances []float64) {
	for _, r := range rows(t, "tolerance_worked_example.csv") {
		law, ok := lawOf[r[4]]
		if !ok {
			t.Fatalf("law %q of the worked example is not known", r[4])
		}
		items = append(items, tolerance.Item{
			Name: r[0], Design: unit.DB(num(t, r[1])), Favourable: unit.DB(num(t, r[2])), Adverse: unit.DB(num(t, r[3])), Law: law,
		})
		means, variances = append(means, num(t, r[5])), append(variances, num(t, r[6]))
	}
	return items, means, variances
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.9g, want %.9g, difference %.3g over %.3g", what, got, want, got-want, tol)
	}
}

// The worked example was computed outside of this program and is printed to six
// digits (testdata/SOURCES.md): half of the last one is the tolerance.
func TestWorkedExample(t *testing.T) {
	items, means, variances := workedItems(t)
	table, err := tolerance.Evaluate(items, nil)
	if err != nil {
		t.Fatal(err)
	}
	for i, r := range table.Rows {
		near(t, r.Name+": mean", float64(r.Mean), means[i], 1e-6)
		near(t, r.Name+": variance", r.Variance, variances[i], 1e-8)
	}
	got := map[string]float64{
		"nominal margin = sum of design values":           float64(table.Nominal),
		"mean margin = sum of means":                      float64(table.Mean),
		"sum of variances (dB^2)":                         table.Variance,
		"sigma":                                           float64(table.Sigma),
		"mean minus 2 sigma":                              float64(table.MeanLess(2)),
		"mean minus 3 sigma":                              float64(table.MeanLess(3)),
		"mean plus 3 sigma":                               float64(table.MeanLess(-3)),
		"adverse RSS margin = nominal - sqrt(sum A^2)":    float64(table.WorstRSS),
		"favourable RSS margin = nominal + sqrt(sum F^2)": float64(table.BestRSS),
		"worst case arithmetic = nominal + sum A":         float64(table.Worst),
		"best case arithmetic = nominal + sum F":          float64(table.Best),
	}
	for _, r := range rows(t, "tolerance_worked_example_results.csv") {
		v, ok := got[r[0]]
		if !ok {
			t.Errorf("%s: the table does not give it", r[0])
			continue
		}
		near(t, r[0], v, num(t, r[1]), 1e-6)
	}
}

// draw takes a value of a law by its own construction, not by its mean and variance.
func draw(r *rand.Rand, l tolerance.Law, f, a float64) float64 {
	switch l {
	case tolerance.Uniform:
		return a + (f-a)*r.Float64()
	case tolerance.Triangular: // the inverse of the distribution function
		u, c := r.Float64(), -a/(f-a)
		if u < c {
			return a + math.Sqrt(u*(f-a)*-a)
		}
		return f - math.Sqrt((1-u)*(f-a)*f)
	case tolerance.Gaussian:
		return (f+a)/2 + (f-a)/6*r.NormFloat64()
	case tolerance.Arcsine: // the sine of an unknown phase between the limits
		return (f+a)/2 + (f-a)/2*math.Sin(2*math.Pi*r.Float64())
	}
	return 0
}

// TestLawsBySimulation holds mean and variance of each law against 200,000 draws;
// the tolerances are five standard errors (the variance's own error by the greatest
// kurtosis of the five, 3).
func TestLawsBySimulation(t *testing.T) {
	const n = 200_000
	for _, c := range []struct{ f, a float64 }{{0.5, -0.5}, {1, -2}, {0, -1.5}, {3, 0}, {0.2, -0.7}} {
		for _, l := range []tolerance.Law{tolerance.Uniform, tolerance.Triangular, tolerance.Gaussian, tolerance.Arcsine} {
			r := rand.New(rand.NewPCG(7, uint64(l)))
			sum, sum2 := 0.0, 0.0
			for range n {
				v := draw(r, l, c.f, c.a)
				sum, sum2 = sum+v, sum2+v*v
			}
			mean := sum / n
			variance := sum2/n - mean*mean
			it := tolerance.Item{Design: 4, Favourable: unit.DB(c.f), Adverse: unit.DB(c.a), Law: l}
			near(t, l.String()+": mean", float64(it.Mean())-4, mean, 5*math.Sqrt(variance/n))
			near(t, l.String()+": variance", it.Variance(), variance, 5*variance*math.Sqrt(2.0/n))
		}
	}
}

// TestSumBySimulation draws the worked example as a whole: mean and sigma of the
// margin are those of the table, without any rule of sums.
func TestSumBySimulation(t *testing.T) {
	items, _, _ := workedItems(t)
	table, err := tolerance.Evaluate(items, nil)
	if err != nil {
		t.Fatal(err)
	}
	const n = 200_000
	r := rand.New(rand.NewPCG(11, 12))
	sum, sum2 := 0.0, 0.0
	for range n {
		v := 0.0
		for _, it := range items {
			v += float64(it.Design) + draw(r, it.Law, float64(it.Favourable), float64(it.Adverse))
		}
		sum, sum2 = sum+v, sum2+v*v
	}
	mean := sum / n
	sigma := math.Sqrt(sum2/n - mean*mean)
	near(t, "mean", float64(table.Mean), mean, 5*sigma/math.Sqrt(n))
	near(t, "sigma", float64(table.Sigma), sigma, 5*sigma/math.Sqrt(2*n))
}

// TestRSSFromMean works the second convention out by hand: means 0.5 and -1, adverse
// limits 1.5 and 2 below them, so 10 - 0.5 - 2.5.
func TestRSSFromMean(t *testing.T) {
	table, err := tolerance.Evaluate([]tolerance.Item{
		{Name: "a", Design: 12, Favourable: 2, Adverse: -1, Law: tolerance.Uniform},
		{Name: "b", Design: -2, Favourable: 1, Adverse: -3, Law: tolerance.Gaussian},
	}, nil)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "mean", float64(table.Mean), 9.5, 1e-12)
	near(t, "worst RSS from mean", float64(table.WorstRSSFromMean), 7, 1e-12)
}

func TestCriteria(t *testing.T) {
	items, _, _ := workedItems(t)
	// Reached: the results of the worked example; the least margins are picked about them.
	for _, c := range []struct {
		statement tolerance.Statement
		sigmas    float64
		least     unit.DB
		distance  float64
		met       bool
	}{
		{tolerance.NominalMargin, 0, 3, 8.3, true},
		{tolerance.MeanMargin, 0, 10.5, -0.183333, false},
		{tolerance.WorstCase, 0, 0, 4.6, true},
		{tolerance.WorstRSS, 0, 9, -0.305763, false},
		{tolerance.MeanLessSigmas, 3, 0, 7.555779, true},
		{tolerance.MeanLessSigmas, 2, 9, -0.523925, false},
	} {
		table, err := tolerance.Evaluate(items, []tolerance.Criterion{{Name: "x", Statement: c.statement, Sigmas: c.sigmas, Least: c.least}})
		if err != nil {
			t.Fatal(err)
		}
		v := table.Verdicts[0]
		near(t, c.statement.String(), float64(v.Distance), c.distance, 1e-6)
		if v.Met != c.met {
			t.Errorf("%s of at least %g dB: met is %v, want %v", c.statement, float64(c.least), v.Met, c.met)
		}
	}
	exact, err := tolerance.Evaluate([]tolerance.Item{{Name: "a", Design: 3}}, []tolerance.Criterion{{Name: "x", Least: 3}})
	if err != nil || !exact.Verdicts[0].Met {
		t.Errorf("a margin of 3 dB meets a least margin of 3 dB; got %+v, %v", exact, err)
	}
}

func TestBadInput(t *testing.T) {
	nan := unit.DB(math.NaN())
	for _, c := range []struct {
		name     string
		item     tolerance.Item
		criteria []tolerance.Criterion
		want     string
	}{
		{"favourable below 0", tolerance.Item{Name: "a", Favourable: -1, Law: tolerance.Uniform}, nil, `item "a": favourable tolerance: -1 dB is not allowed; it must be 0 to 10000 dB; it says how much better the term may be`},
		{"adverse above 0", tolerance.Item{Name: "a", Adverse: 1, Law: tolerance.Uniform}, nil, `item "a": adverse tolerance: 1 dB is not allowed; it must be -10000 to 0 dB; it says how much worse the term may be, as a negative figure`},
		{"NaN", tolerance.Item{Name: "a", Design: nan}, nil, `item "a": design value: NaN dB is not allowed; it must be -10000 to 10000 dB`},
		{"spread of a single value", tolerance.Item{Name: "a", Favourable: 1}, nil, `item "a": a single value has no tolerance, and one is given; give the law of the spread, or 0 for both`},
		{"law", tolerance.Item{Name: "a", Law: 9}, nil, `item "a": law 9 is not known`},
		{"sigmas", tolerance.Item{Name: "a"}, []tolerance.Criterion{{Name: "c", Statement: tolerance.MeanLessSigmas}}, `criterion "c": number of sigmas: 0 is not allowed; it must be greater than 0 and at most 10; 2 and 3 are usual`},
		{"needless sigmas", tolerance.Item{Name: "a"}, []tolerance.Criterion{{Name: "c", Sigmas: 2}}, `criterion "c": the number of sigmas has no effect on nominal; leave it out`},
		{"least", tolerance.Item{Name: "a"}, []tolerance.Criterion{{Name: "c", Least: nan}}, `criterion "c": least margin: NaN dB is not allowed; it must be -10000 to 10000 dB`},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := tolerance.Evaluate([]tolerance.Item{c.item}, c.criteria)
			if err == nil || err.Error() != c.want {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
		})
	}
	if _, err := tolerance.Evaluate(nil, nil); err == nil || !strings.Contains(err.Error(), "no item") {
		t.Errorf("an empty table: got %v", err)
	}
}

func TestNamesComeBack(t *testing.T) {
	for _, n := range tolerance.Laws() {
		if l, err := tolerance.ParseLaw(n); err != nil || l.String() != n {
			t.Errorf("law %q: got %v, %v", n, l, err)
		}
	}
	for _, n := range tolerance.Statements() {
		if s, err := tolerance.ParseStatement(n); err != nil || s.String() != n {
			t.Errorf("statement %q: got %v, %v", n, s, err)
		}
	}
	if _, err := tolerance.ParseLaw("gauss"); err == nil || !strings.Contains(err.Error(), "gaussian") {
		t.Errorf("law gauss: got %v", err)
	}
}

func BenchmarkEvaluate(b *testing.B) {
	items, _, _ := workedItems(b)
	criteria := []tolerance.Criterion{{Statement: tolerance.MeanLessSigmas, Sigmas: 3}}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := tolerance.Evaluate(items, criteria); err != nil {
			b.Fatal(err)
		}
	}
}
