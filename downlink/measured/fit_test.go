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
	if _, answer := Rank([]Candidate{{Name: "A", Points: points}, {Name: "B", Points: points}}, RankOptions{NoiseHz: 20, OffsetHz: 1000}); answer {
		t.Error("two equal candidates are told apart")
	}
	other := synthetic(rand.New(rand.NewPCG(1, 9)), 0, func(p *Point) (float64, float64) { return 0, -30 * p.FrequencyRateHzS })
	if ranked, answer := Rank([]Candidate{{Name: "A", Points: other}}, RankOptions{NoiseHz: 20, OffsetHz: 1000}); answer {
		t.Errorf("the only candidate explains nothing and is taken: %+v", ranked)
	}
}

func TestMixedUnitsAreTold(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(8, 1)), 0, func(*Point) (float64, float64) { return 0, 0 })
	for i := range points {
		points[i].Values[PowerDBm] = points[i].PowerDBm
	}
	if notes := append(MixedUnits(points, PowerDBm), MixedUnits(points, FrequencyHz)...); len(notes) != 0 {
		t.Errorf("of one unit: %q", notes)
	}
	for i := 20; i < 25; i++ {
		points[i].Values[PowerDBm] -= 30
		points[i+50].Values[FrequencyHz] /= 1e3
	}
	for q, line := range map[Quantity]string{PowerDBm: "5 rows, the first in line 22", FrequencyHz: "5 rows, the first in line 72"} {
		if notes := MixedUnits(points, q); len(notes) != 1 || !strings.Contains(notes[0], line) {
			t.Errorf("%v: %q, want %q in it", q, notes, line)
		}
	}
}

// TestBeaconTellsOfRain keeps out what was sent while the beacon faded, whatever the level looks like.
func TestBeaconTellsOfRain(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(9, 1)), 0, func(*Point) (float64, float64) { return 0, 0 })
	for i := range points {
		points[i].Values[BeaconDB] = -40
		if i >= 100 && i < 180 {
			points[i].Values[BeaconDB] = -43
			points[i].Values[CN0DBHz] -= 1.2
		}
	}
	f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz})
	if err != nil {
		t.Fatal(err)
	}
	if n := Count(points)[Wet]; n < 70 || n > 80 || math.Abs(f.Parameters[0].Value) > 3*f.Parameters[0].Sigma {
		t.Errorf("%d of 80 wet, offset %+v", n, f.Parameters[0])
	}
	if trends := Trends(points, CN0DBHz); len(trends) != 5 || trends[4].By != "beacon" || trends[4].Fit != nil {
		t.Errorf("of dry samples the beacon does not vary: %+v", trends)
	}
}

// TestWhatCannotBeToldApartIsLeftOut has a sky of one noise, under which noise is a level.
func TestWhatCannotBeToldApartIsLeftOut(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(10, 1)), 0, func(*Point) (float64, float64) { return -1, 0 })
	for i := range points {
		points[i].NoiseK = 120
	}
	f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz, Noise: true})
	if err != nil {
		t.Fatal(err)
	}
	if len(f.Parameters) != 1 || !strings.Contains(strings.Join(f.Advice, ";"), "cannot tell added noise temperature from offset") {
		t.Errorf("%+v, %q", f.Parameters, f.Advice)
	}
	if _, err := FitNoise(points); err == nil {
		t.Error("noise is told without a received power")
	}
}

// TestThreeThatAreOne names three parameters of which no two are alike, but which are known only together.
func TestThreeThatAreOne(t *testing.T) {
	d := &series{}
	rng := rand.New(rand.NewPCG(11, 1))
	for i := range 200 {
		a, b := rng.NormFloat64(), rng.NormFloat64()
		d.t, d.y, d.x = append(d.t, float64(i)), append(d.y, rng.NormFloat64()), append(d.x, []float64{a, b, a + b + 0.05*rng.NormFloat64()})
	}
	f, err := d.solve([]Parameter{{Name: "one"}, {Name: "two"}, {Name: "three"}})
	if err != nil {
		t.Fatal(err)
	}
	if len(f.Advice) != 1 || !strings.Contains(f.Advice[0], "one, two and three apart (singular value 0.0") {
		t.Errorf("%q, singular values %v", f.Advice, f.Singular)
	}
}

func TestAntennaElsewhereIsLeftOut(t *testing.T) {
	points := synthetic(rand.New(rand.NewPCG(12, 1)), 0, func(*Point) (float64, float64) { return 0, 0 })
	for i := range points {
		points[i].Values[AzimuthDeg] = points[i].AzimuthDeg
		points[i].Values[ElevationDeg] = points[i].ElevationDeg + 0.3*math.Sin(float64(i)/5)
		if i < 30 {
			points[i].Values[ElevationDeg] += 4
		} else {
			points[i].Values[CN0DBHz] -= 12 * math.Pow(0.3*math.Sin(float64(i)/5)/1.5, 2)
		}
	}
	f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz, BeamDeg: 1.5})
	if err != nil {
		t.Fatal(err)
	}
	if n := Count(points)[Astray]; n != 30 || math.Abs(f.Parameters[0].Value) > 4*f.Parameters[0].Sigma {
		t.Errorf("%d points of an antenna that looks elsewhere, want 30; %+v", n, f.Parameters)
	}
}
