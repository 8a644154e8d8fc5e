package measured

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

// trial is one made-up log: which parameters have what truth, and their fit.
type trial func(rng *rand.Rand) (truth map[string]float64, f *Fit, err error)

// coveredBy runs trials and judges the interval of each parameter that has a truth.
func coveredBy(t *testing.T, what string, trials int, one trial) {
	t.Helper()
	hits := map[string]int{}
	for seed := range trials {
		truth, f, err := one(rand.New(rand.NewPCG(uint64(seed), 7)))
		if err != nil {
			t.Fatal(err)
		}
		found := 0
		for _, p := range f.Parameters {
			w, ok := truth[p.Name]
			if !ok {
				continue
			}
			found++
			hits[p.Name] += 0
			if math.Abs(p.Value-w) <= p.Span {
				hits[p.Name]++
			}
		}
		if found != len(truth) {
			t.Fatalf("%s: %d of %d parameters are there: %+v, %q", what, found, len(truth), f.Parameters, f.Advice)
		}
	}
	for name, n := range hits {
		judge(t, what+", "+name, n, trials)
	}
}

// covered runs trials of one interval.
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
	judge(t, what, hits, trials)
}

// judge asks that intervals of 95 % hold the truth as often as the binomial law lets them:
// within 3 standard deviations.
func judge(t *testing.T, what string, hits, trials int) {
	t.Helper()
	got, bound := float64(hits)/float64(trials), 3*math.Sqrt(0.95*0.05/float64(trials))
	t.Logf("%s: the interval of 95 %% holds the truth in %.1f %% of %d trials", what, 100*got, trials)
	if math.Abs(got-0.95) > bound {
		t.Errorf("%s: coverage %.4f is not 0.95 ± %.4f", what, got, bound)
	}
}

// TestCoverage puts known truths into made-up logs whose noise is correlated from sample to
// sample as in life, with dropouts and spurs.
func TestCoverage(t *testing.T) {
	for _, rho := range []float64{0, 0.6, 0.85} {
		t.Run(fmt.Sprintf("correlation %g", rho), func(t *testing.T) {
			t.Parallel()
			coveredBy(t, "level", 200, levelTrial(rho))
			coveredBy(t, "frequency", 200, frequencyTrial(rho))
			if rho == 0.6 {
				return // in between
			}
			coveredBy(t, "aim", 200, aimTrial(rho))
			coveredBy(t, "noise in pairs", 200, noiseTrial(rho))
			coveredBy(t, "noise by elevation", 200, warmTrial(rho))
			coveredBy(t, "relative power", 200, relativeTrial(rho))
		})
	}
	t.Run("passes", func(t *testing.T) {
		t.Parallel()
		for _, spread := range []float64{0, 1} {
			coveredBy(t, fmt.Sprintf("level of 7 passes, spread %g", spread), 200, passesTrial(spread, true))
			coveredBy(t, fmt.Sprintf("frequency of 7 passes, spread %g", spread), 200, passesTrial(spread, false))
		}
	})
	t.Run("skyline", func(t *testing.T) {
		t.Parallel()
		coveredBy(t, "skyline", 500, skylineTrial)
	})
}

func levelTrial(rho float64) trial {
	return func(rng *rand.Rand) (map[string]float64, *Fit, error) {
		points := synthetic(rng, rho, func(p *Point) (float64, float64) {
			c := math.Cos(p.ElevationDeg*math.Pi/180) / 1.5
			return -1.7 - 12*0.09*c*c, 0
		})
		f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz, BeamDeg: 1.5})
		return map[string]float64{"offset": -1.7, "square of the azimuth error": 0.09}, f, err
	}
}

func frequencyTrial(rho float64) trial {
	return func(rng *rand.Rand) (map[string]float64, *Fit, error) {
		points := synthetic(rng, rho, func(p *Point) (float64, float64) {
			since := p.At.Sub(time.Date(2026, 9, 15, 0, 54, 59, 0, time.UTC)).Seconds()
			return 0, -320 - 1.4*p.FrequencyRateHzS + 0.11*since
		})
		f, err := FitFrequency(points, true)
		return map[string]float64{"transmitter offset": -320, "time offset of the elements": 1.4, "transmitter drift": 0.11}, f, err
	}
}

// aimTrial scans the antenna in a slow figure around the spacecraft while its encoders are biased.
func aimTrial(rho float64) trial {
	return func(rng *rand.Rand) (map[string]float64, *Fit, error) {
		const a, e, beam = 0.22, -0.31, 1.5
		at := 0.0
		points := synthetic(rng, rho, func(p *Point) (float64, float64) {
			at++
			c := math.Cos(p.ElevationDeg * math.Pi / 180)
			p.Values[AzimuthDeg] = p.AzimuthDeg + 0.3*math.Sin(at/9)/c
			p.Values[ElevationDeg] = p.ElevationDeg + 0.3*math.Cos(at/7)
			x, y := 0.3*math.Sin(at/9)+a*c, 0.3*math.Cos(at/7)+e
			return 0.8 - 12*(x*x+y*y)/(beam*beam), 0
		})
		f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz, BeamDeg: beam})
		return map[string]float64{"offset": 0.8, azimuthBias: a, elevationBias: e}, f, err
	}
}

// withPower adds a received power that shares the fading of C/N0, and noise on C/N0 of its own.
func withPower(rng *rand.Rand, rho float64, points []Point, into Quantity, scale, offset, addedK float64) {
	own := rng.NormFloat64()
	for i := range points {
		own = rho*own + math.Sqrt(1-rho*rho)*rng.NormFloat64()
		p := &points[i]
		faded := p.Residual(CN0DBHz)
		p.Values[into] = p.PowerDBm + faded + offset + (scale-1)*(p.PowerDBm+115)
		p.Values[CN0DBHz] += -10*math.Log10(1+addedK/p.NoiseK) + 0.1*own
	}
}

func noiseTrial(rho float64) trial {
	return func(rng *rand.Rand) (map[string]float64, *Fit, error) {
		points := synthetic(rng, rho, func(*Point) (float64, float64) { return -2, 0 })
		withPower(rng, rho, points, PowerDBm, 1, 0, 35)
		f, err := FitNoise(points)
		return map[string]float64{addedNoiseName: 35}, f, err
	}
}

// warmTrial has C/N0 alone: noise is told from the level by the warm sky near the horizon.
func warmTrial(rho float64) trial {
	return func(rng *rand.Rand) (map[string]float64, *Fit, error) {
		points := synthetic(rng, rho, func(p *Point) (float64, float64) { return 0.5 - 10*math.Log10(1+60/p.NoiseK), 0 })
		f, err := FitLevel(points, LevelOptions{Quantity: CN0DBHz, Noise: true})
		return map[string]float64{"offset": 0.5, addedNoiseName: 60}, f, err
	}
}

func relativeTrial(rho float64) trial {
	return func(rng *rand.Rand) (map[string]float64, *Fit, error) {
		points := synthetic(rng, rho, func(*Point) (float64, float64) { return 0, 0 })
		withPower(rng, rho, points, RelativePowerDB, 2.2, 140, 0)
		for i := range points {
			points[i].Values[CN0DBHz] = math.NaN()
		}
		f, err := FitLevel(points, LevelOptions{Quantity: RelativePowerDB})
		return map[string]float64{"slope of the receiver's scale less 1": 1.2}, f, err
	}
}

// passesTrial has seven passes that differ by what stays the same through each.
func passesTrial(spread float64, level bool) trial {
	return func(rng *rand.Rand) (map[string]float64, *Fit, error) {
		var all []Point
		for k := range 7 {
			off, tone, late := 0.4*spread*rng.NormFloat64(), 60*spread*rng.NormFloat64(), 0.2*spread*rng.NormFloat64()
			points := synthetic(rng, 0.6, func(p *Point) (float64, float64) {
				c := math.Cos(p.ElevationDeg*math.Pi/180) / 1.5
				return -1.7 + off - 12*0.09*c*c, -320 + tone - (1.4+late)*p.FrequencyRateHzS
			})
			for i := range points {
				if i%3 != 0 {
					continue
				}
				const middle = (6*95*60 + 297*2) / 2.0 // s
				points[i].At = points[i].At.Add(time.Duration(k) * 95 * time.Minute)
				points[i].Values[FrequencyHz] += 300 * (float64(k*95*60+2*i) - middle) / 86400
				all = append(all, points[i])
			}
		}
		if level {
			f, err := FitLevel(all, LevelOptions{Quantity: CN0DBHz, BeamDeg: 1.5})
			return map[string]float64{"offset": -1.7, "square of the azimuth error": 0.09}, f, err
		}
		f, err := FitFrequency(all, true)
		return map[string]float64{"transmitter offset": -320, "time offset of the elements": 1.4, "transmitter drift": 300}, f, err
	}
}

// skyline is a made-up horizon through points every 45 deg.
var skyline = []float64{3, 7, 4, 2, 9, 5, 5, 6}

func skylineAt(azimuth float64) float64 {
	at := azimuth / 45
	i := int(at)
	part := at - float64(i)
	return skyline[i%8]*(1-part) + skyline[(i+1)%8]*part
}

// skylinePasses are passes in every direction, heard above a skyline that is rough, locked
// 4 s after the signal appears, and some of them from late on.
func skylinePasses(rng *rand.Rand, passes int) []Point {
	var out []Point
	start := time.Date(2026, 9, 15, 0, 0, 0, 0, time.UTC)
	for k := range passes {
		from, turn, top := 360*rng.Float64(), 120+90*rng.Float64(), 20+50*rng.Float64()
		rough := [2]float64{0.4 * rng.NormFloat64(), 0.4 * rng.NormFloat64()}
		if rng.Float64() < 0.04 {
			rough[0] = 15 // the recorder was started late
		}
		heardSince := time.Time{}
		step := 2
		for s := 0; s <= 600; s += step {
			u := float64(s)/300 - 1
			p := Point{Sample: newSample(start.Add(time.Duration(k)*100*time.Minute+time.Duration(s)*time.Second), len(out)+2), MarginDB: 8}
			p.AzimuthDeg = math.Mod(from+turn*(u+1)/2, 360)
			p.ElevationDeg = top * (1 - u*u)
			p.ElevationRateDegS, p.AzimuthRateDegS = -2*top*u/300, turn/600
			if step = 2; p.ElevationDeg > 20 {
				step = 20 // nothing happens there
			}
			side := 0
			if u > 0 {
				side = 1
			}
			p.Values[Locked] = 0
			if p.ElevationDeg > skylineAt(p.AzimuthDeg)+rough[side] {
				if heardSince.IsZero() {
					heardSince = p.At
				}
				if p.At.Sub(heardSince) >= 4*time.Second {
					p.Values[Locked] = 1
				}
			}
			out = append(out, p)
		}
	}
	return out
}

func skylineTrial(rng *rand.Rand) (map[string]float64, *Fit, error) {
	h, err := FitHorizon([][]Point{skylinePasses(rng, 22)}, HorizonOptions{Knots: 8})
	if err != nil {
		return nil, nil, err
	}
	truth := map[string]float64{"time to lock": 4}
	for _, k := range h.Knots {
		truth[fmt.Sprintf("skyline over the known one at %.0f deg", k.Azimuth.Degrees())] = skylineAt(k.Azimuth.Degrees())
	}
	return truth, h.Fit, nil
}
