package tolerance

import (
	"math"
	"math/rand/v2"
	"testing"

	"slantwise/orbit/unit"
)

func chanceOf(t testing.TB, items ...Item) *Chance {
	t.Helper()
	c, err := NewChance(items)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// Sums whose laws are known: two even ones make a triangle, normal ones a normal one;
// and each law by itself.
func TestChanceOfKnownSums(t *testing.T) {
	even := Item{Name: "a", Favourable: 1, Adverse: -1, Law: Uniform}
	two := chanceOf(t, even, Item{Name: "b", Favourable: 1, Adverse: -1, Law: Uniform})
	for _, x := range []float64{-1.9, -1, -0.3, 0, 0.5, 1.7} {
		want := (2 + x) * (2 + x) / 8
		if x > 0 {
			want = 1 - (2-x)*(2-x)/8
		}
		if got := two.Below(x); math.Abs(got-want) > 2e-5 {
			t.Errorf("two even laws under %g dB: %.6f, the triangle has %.6f", x, got, want)
		}
	}
	// Limits of 3 and 4 dB at three sigma: sigmas 1 and 4/3, together 5/3.
	normal := chanceOf(t, Item{Name: "a", Favourable: 3, Adverse: -3, Law: Gaussian}, Item{Name: "b", Favourable: 4, Adverse: -4, Law: Gaussian})
	for _, x := range []float64{-4, -1, 0, 2, 5} {
		if got, want := normal.Below(x), 0.5*math.Erfc(-x/(5.0/3)/math.Sqrt2); math.Abs(got-want) > 2e-5 {
			t.Errorf("two normal laws under %g dB: %.6f, want %.6f", x, got, want)
		}
	}
	arc := chanceOf(t, Item{Name: "a", Favourable: 1, Adverse: -1, Law: Arcsine})
	if got := arc.Below(0.5); math.Abs(got-2.0/3) > 2e-3 {
		t.Errorf("arcsine under half its limit: %.5f, want 2/3", got)
	}
	lopsided := chanceOf(t, Item{Name: "a", Favourable: 1, Adverse: -3, Law: Triangular})
	if got := lopsided.Below(0); math.Abs(got-0.75) > 2e-3 {
		t.Errorf("a triangle from -3 to 1 dB with its top at 0: %.5f below it, want 3/4", got)
	}
	if p := 0.9; math.Abs(normal.Reached(p)+5.0/3*1.2815516) > 1e-3 {
		t.Errorf("reached with 90 %%: %.4f dB", normal.Reached(p))
	}
}

// A table of all laws against simulation; mean and variance are the table's.
func TestChanceAgainstSimulation(t *testing.T) {
	items := []Item{
		{Name: "u", Favourable: 0.5, Adverse: -1, Law: Uniform}, {Name: "t", Favourable: 0.3, Adverse: -0.8, Law: Triangular},
		{Name: "g", Favourable: 0.9, Adverse: -0.9, Law: Gaussian}, {Name: "s", Favourable: 0.4, Adverse: -0.4, Law: Arcsine}, {Name: "x", Law: SingleValue, Design: 30},
	}
	c := chanceOf(t, items...)
	rng := rand.New(rand.NewPCG(1, 2))
	const n = 400_000
	under := map[float64]float64{-2: 0, -1: 0, -0.4: 0, 0: 0, 0.5: 0, 1: 0}
	for range n {
		u := rng.Float64()
		x := -1 + 1.5*u
		if u = rng.Float64(); u < 0.8/1.1 {
			x += -0.8 + math.Sqrt(u*1.1*0.8)
		} else {
			x += 0.3 - math.Sqrt((1-u)*1.1*0.3)
		}
		x += 0.3*rng.NormFloat64() + 0.4*math.Sin(2*math.Pi*rng.Float64())
		for k := range under {
			if x < k {
				under[k] += 1.0 / n
			}
		}
	}
	for x, want := range under {
		if got := c.Below(x); math.Abs(got-want) > 4e-3 { // five standard errors
			t.Errorf("under %g dB: %.5f, simulated %.5f", x, got, want)
		}
	}
	table, err := Evaluate(items, nil)
	if err != nil {
		t.Fatal(err)
	}
	mean, square := 0.0, 0.0
	for i := 1; i < len(c.upTo); i++ {
		x, p := c.low+(float64(i)-0.5)*chanceStep, c.upTo[i]-c.upTo[i-1]
		mean, square = mean+p*x, square+p*x*x
	}
	if math.Abs(mean-float64(table.Mean-table.Nominal)) > 3e-3 || math.Abs(square-mean*mean-table.Variance) > 3e-3 {
		t.Errorf("mean %.5f and variance %.5f, the table has %.5f and %.5f", mean, square-mean*mean, float64(table.Mean-table.Nominal), table.Variance)
	}
}

func TestChanceRefuses(t *testing.T) {
	if _, err := NewChance([]Item{{Name: "a", Favourable: -1, Law: Uniform}}); err == nil {
		t.Error("a negative favourable tolerance: no error")
	}
	if _, err := NewChance([]Item{{Name: "a", Favourable: 80, Adverse: -80, Law: Uniform}}); err == nil {
		t.Error("160 dB: no error")
	}
	if got := chanceOf(t, Item{Name: "a", Favourable: unit.DB(0), Law: SingleValue}).Below(0.1); got != 1 {
		t.Errorf("without tolerances nothing is more than the design value: %g", got)
	}
}
