package measured

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"
)

// synthetic is a pass of 10 min, a sample every 2 s, with correlated noise, some dropouts
// and outliers.
func synthetic(rng *rand.Rand, rho float64, truth func(p *Point) (level, frequency float64)) []Point {
	start := time.Date(2026, 9, 15, 0, 50, 0, 0, time.UTC)
	out := make([]Point, 300)
	var level, tone float64
	for i := range out {
		u := (float64(i) - 149.5) / 150
		p := &out[i]
		p.Sample = newSample(start.Add(time.Duration(2*i)*time.Second), i+2)
		p.ElevationDeg = 5 + 70*math.Exp(-6*u*u)
		p.CN0DBHz = 55 + 10*math.Exp(-4*u*u)
		p.PredictedFrequencyHz = 437e6 - 9000*math.Tanh(3*u)
		p.FrequencyRateHzS = -9000 * 3 / math.Pow(math.Cosh(3*u), 2) / 300
		fresh := math.Sqrt(1 - rho*rho)
		if i == 0 {
			fresh = 1
		}
		level = rho*level + fresh*rng.NormFloat64()
		tone = rho*tone + fresh*rng.NormFloat64()
		dl, df := truth(p)
		p.Values[CN0DBHz] = p.CN0DBHz + dl + 0.4*level
		p.Values[FrequencyHz] = p.PredictedFrequencyHz + df + 20*tone
		switch {
		case rng.Float64() < 0.02:
			p.Values[CN0DBHz] -= 30 // dropout
		case rng.Float64() < 0.02:
			p.Values[FrequencyHz] += 2000 // a spur
		}
	}
	return out
}

// covered runs trials and asks that the 95 % intervals hold the truth as often as the
// binomial law lets them: within 3 standard deviations of 0.95.
func covered(t *testing.T, what string, trials int, one func(rng *rand.Rand) (bool, error)) {
	t.Helper()
	hits := 0
	for seed := range trials {
		ok, err := one(rand.New(rand.NewPCG(uint64(seed), 7)))
		if err != nil {
			t.Fatal(err)
		}
		if ok {
			hits++
		}
	}
	got, bound := float64(hits)/float64(trials), 3*math.Sqrt(0.95*0.05/float64(trials))
	t.Logf("%s: the interval of 95 %% holds the truth in %.1f %% of %d trials", what, 100*got, trials)
	if math.Abs(got-0.95) > bound {
		t.Errorf("%s: coverage %.4f is not 0.95 ± %.4f", what, got, bound)
	}
}

func TestCoverage(t *testing.T) {
	const trials = 400
	for _, rho := range []float64{0, 0.6, 0.85} {
		for j, truth := range []float64{-1.7, 0.09} {
			covered(t, []string{"level offset", "azimuth error squared"}[j], trials, func(rng *rand.Rand) (bool, error) {
				points := synthetic(rng, rho, func(p *Point) (float64, float64) {
					c := math.Cos(p.ElevationDeg*math.Pi/180) / 1.5
					return -1.7 - 12*0.09*c*c, 0
				})
				f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz, BeamDeg: 1.5})
				if err != nil {
					return false, err
				}
				return math.Abs(f.Parameters[j].Value-truth) <= f.Parameters[j].Span, nil
			})
		}
		for j, truth := range []float64{-320, 1.4, 0.11} {
			covered(t, []string{"frequency offset", "time offset", "drift"}[j], trials, func(rng *rand.Rand) (bool, error) {
				points := synthetic(rng, rho, func(p *Point) (float64, float64) {
					since := p.At.Sub(time.Date(2026, 9, 15, 0, 54, 59, 0, time.UTC)).Seconds()
					return 0, -320 - 1.4*p.FrequencyRateHzS + 0.11*since
				})
				f, err := FitFrequency(points, true)
				if err != nil {
					return false, err
				}
				return math.Abs(f.Parameters[j].Value-truth) <= f.Parameters[j].Span, nil
			})
		}
	}
}

func TestOutliersAreListed(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(1, 1)), 0, func(*Point) (float64, float64) { return 1, 0 })
	points[40].Values[CN0DBHz] += 6
	f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz})
	if err != nil {
		t.Fatal(err)
	}
	if points[40].State != Outlier || len(f.Outliers)+f.Used+Count(points)[Dropout] != len(points) {
		t.Errorf("state %v, %d outliers, %d used, %v: every sample must be somewhere", points[40].State, len(f.Outliers), f.Used, Count(points))
	}
}

func TestWetAndSaturatedAreKeptOut(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(2, 1)), 0, func(*Point) (float64, float64) { return 0, 0 })
	for i := range points {
		points[i].Values[CN0DBHz] = min(points[i].Values[CN0DBHz], 63)
		if i >= 40 && i < 90 {
			points[i].Values[CN0DBHz] -= 4
		}
	}
	f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz})
	if err != nil {
		t.Fatal(err)
	}
	n := Count(points)
	if n[Wet] < 40 || n[Wet] > 70 || n[Saturated] < 20 || math.Abs(f.Parameters[0].Value) > 3*f.Parameters[0].Sigma {
		t.Errorf("%v, offset %v", n, f.Parameters[0])
	}
}

func TestWhatCannotBeToldApart(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(3, 1)), 0, func(*Point) (float64, float64) { return 0, 0 })
	f, err := FitFrequency(points[140:160], true) // 40 s around the culmination
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(strings.Join(f.Advice, ";"), "transmitter offset and time offset of the elements") {
		t.Errorf("advice %q, correlation %v", f.Advice, f.Correlation)
	}
}

func TestRank(t *testing.T) {
	wrong, told := 0, 0
	for seed := range uint64(200) {
		var candidates []Candidate
		for k, late := range []float64{0, 3, 12} { // s along the track
			points := synthetic(rand.New(rand.NewPCG(seed, 9)), 0.6, func(p *Point) (float64, float64) { return 0, 150 })
			for i := range points {
				points[i].PredictedFrequencyHz -= late * points[i].FrequencyRateHzS
			}
			candidates = append(candidates, Candidate{Name: string(rune('A' + k)), Points: points})
		}
		ranked, answer := Rank(candidates, RankOptions{NoiseHz: 20, OffsetHz: 1000})
		if answer {
			told++
			if ranked[0].Name != "A" {
				wrong++
			}
		}
	}
	t.Logf("%d of 200 answered, %d wrong", told, wrong)
	if told < 190 || wrong > 0 {
		t.Errorf("%d of 200 answered, %d of them wrong", told, wrong)
	}
}

func TestRankCannotTell(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(1, 9)), 0, func(*Point) (float64, float64) { return 0, 0 })
	if _, answer := Rank([]Candidate{{"A", points}, {"B", points}}, RankOptions{NoiseHz: 20, OffsetHz: 1000}); answer {
		t.Error("two equal candidates are told apart")
	}
	other := synthetic(rand.New(rand.NewPCG(1, 9)), 0, func(p *Point) (float64, float64) { return 0, -30 * p.FrequencyRateHzS })
	if ranked, answer := Rank([]Candidate{{"A", other}}, RankOptions{NoiseHz: 20, OffsetHz: 1000}); answer {
		t.Errorf("the only candidate explains nothing and is taken: %+v", ranked)
	}
}
