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
		p.PowerDBm, p.NoiseK = -120+10*math.Exp(-4*u*u), 70+100*math.Exp(-p.ElevationDeg/12)
		p.AzimuthDeg = 180 + 75*math.Tanh(2*u)
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
