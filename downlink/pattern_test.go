package downlink

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

func table(points ...float64) Pattern {
	p := Pattern{Kind: GainTable}
	for i := 0; i < len(points); i += 2 {
		p.Table = append(p.Table, PatternPoint{deg(points[i]), unit.DB(points[i+1])})
	}
	return p
}

func TestGainAt(t *testing.T) {
	cosine := Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2, BackLobe: dbp(-10)}
	points := table(0, 6, 30, 5.1, 60, 1.8, 90, -4)
	for _, c := range []struct {
		name      string
		p         Pattern
		off, want float64
	}{
		{"cos² at 60 deg is a quarter: definition", cosine, 60, 6 - 20*math.Log10(2)},
		{"back lobe", cosine, 120, -10},
		{"back lobe begins at 90 deg", cosine, 90, -10},
		{"isotropic", Pattern{PeakGain: 2}, 170, 2},
		{"at a point", points, 30, 5.1},
		{"between points, linear in dB", points, 45, 3.45},
		{"at the end", points, 90, -4},
	} {
		got, err := c.p.GainAt(deg(c.off))
		if err != nil || math.Abs(float64(got)-c.want) > 1e-9 {
			t.Errorf("%s: got %v dBi, %v, want %v", c.name, got, err, c.want)
		}
	}
	for name, p := range map[string]Pattern{"cosine": cosine, "table": points} {
		if g, err := p.GainAt(unit.Angle(math.NaN())); err == nil {
			t.Errorf("%s at no angle: %v dBi", name, g)
		}
	}
	bare := Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2}
	for p, want := range map[*Pattern]string{&bare: "give its back lobe", &points: "where the pattern's table ends"} {
		if _, err := p.GainAt(deg(95)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s beyond what it knows: got %v, want %q in it", p.Kind, err, want)
		}
	}
}

// patternsOfTheSphere are patterns known everywhere, monotone and not.
func patternsOfTheSphere() map[string]Pattern {
	return map[string]Pattern{
		"isotropic":          {PeakGain: 2},
		"cos":                {Kind: CosinePower, PeakGain: 3, Exponent: 1, BackLobe: dbp(-12)},
		"cos³, high back":    {Kind: CosinePower, PeakGain: 6, Exponent: 3, BackLobe: dbp(1)},
		"back over the peak": {Kind: CosinePower, PeakGain: 2, Exponent: 0.7, BackLobe: dbp(4)},
		"half spheres":       {Kind: CosinePower, PeakGain: 2, Exponent: 0, BackLobe: dbp(-3)},
		"falling table":      table(0, 6, 30, 5.1, 60, 1.8, 90, -4, 180, -15),
		"table with lobes":   table(0, -3, 40, 3, 80, 0, 100, 0, 120, -25, 150, 2, 180, -8),
		"flat table":         table(0, 1, 90, 1, 180, 1),
	}
}

// RadiatedShare against the trapezoidal rule in the angle with a million steps; the
// break of a pattern with a back lobe costs half a step.
func TestRadiatedShareAgainstQuadrature(t *testing.T) {
	const n = 1_000_000
	for name, p := range patternsOfTheSphere() {
		sum := 0.0
		for i := range n {
			theta := (float64(i) + 0.5) * math.Pi / n
			g, ok := p.gain(theta)
			if !ok {
				t.Fatalf("%s has no gain at %g rad", name, theta)
			}
			sum += g.Ratio() * math.Sin(theta) / 2 * math.Pi / n
		}
		if got := p.RadiatedShare(); math.Abs(got-sum) > 1e-6 {
			t.Errorf("%s: got %.9f, want %.9f", name, got, sum)
		}
	}
	// A cosine power of exponent n with 2(n+1) as its peak radiates all (textbooks).
	full := Pattern{Kind: CosinePower, PeakGain: unit.DB(10 * math.Log10(6)), Exponent: 2}
	if got := full.RadiatedShare(); math.Abs(got-1) > 1e-12 {
		t.Errorf("cos² with a directivity of 6: %.15f, want 1", got)
	}
}

// GainExceeded against the sorted gains of directions that share the sphere evenly:
// the cosine of the angle in a hundred thousand equal steps, in which the quantile
// lies within two steps of probability.
func TestGainExceededAgainstSphere(t *testing.T) {
	const n = 100_000
	for name, p := range patternsOfTheSphere() {
		gains := make([]float64, n)
		for i := range gains {
			g, ok := p.gain(math.Acos(1 - (2*float64(i)+1)/n))
			if !ok {
				t.Fatalf("%s has a hole", name)
			}
			gains[i] = float64(g)
		}
		slices.Sort(gains)
		for _, q := range []float64{0.01, 0.3, 0.5, 0.51, 0.75, 0.9, 0.99} {
			got := float64(p.GainExceeded(q))
			at := func(share float64) float64 { return gains[min(n-1, max(0, int(math.Round((1-share)*n))))] }
			low, high := at(q+2.0/n), at(q-2.0/n)
			if !(got >= low-1e-9 && got <= high+1e-9) {
				t.Errorf("%s, %g: got %.6f dBi, want %.6f to %.6f", name, q, got, low, high)
			}
		}
	}
}

// The same by drawing: of random directions the share that reaches the gain is q,
// within four standard deviations (fixed seed).
func TestGainExceededByDrawing(t *testing.T) {
	const n, q = 200_000, 0.9
	random := rand.New(rand.NewPCG(1, 2))
	for name, p := range patternsOfTheSphere() {
		g := float64(p.GainExceeded(q))
		reached := 0
		for range n {
			v, _ := p.gain(math.Acos(2*random.Float64() - 1))
			if float64(v) >= g-1e-9 {
				reached++
			}
		}
		if share := float64(reached) / n; share < q-4*math.Sqrt(q*(1-q)/n) {
			t.Errorf("%s: %.4f of the directions reach %.3f dBi, want %g", name, share, g, q)
		}
	}
}

func TestBadPatterns(t *testing.T) {
	for _, c := range []struct {
		name string
		p    Pattern
		want string
	}{
		{"not a number", Pattern{PeakGain: unit.DB(math.NaN())}, "peak gain: NaN"},
		{"exponent negative", Pattern{Kind: CosinePower, Exponent: -1}, "exponent: -1"},
		{"one point", table(0, 6), "two points"},
		{"begins late", table(10, 6, 90, 0), "begin it at 0 deg"},
		{"unsorted", table(0, 6, 60, 1, 30, 4), "does not rise over"},
		{"too far", table(0, 6, 181, 1), "0 to 180 deg"},
		{"gain infinite", table(0, math.Inf(1), 180, 1), "point 1 of the pattern: +Inf"},
	} {
		if err := c.p.Validate(); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q in it", c.name, err, c.want)
		}
	}
}
