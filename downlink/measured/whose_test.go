package measured

import (
	"fmt"
	"math"
	"math/rand/v2"
	"runtime"
	"sync"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// shared is an invented launch: objects on one orbit, let go one after the other.
type shared struct {
	predictions []*Prediction
	start       time.Time // of a pass of the first
}

// newShared makes n objects so many seconds apart, their planes so many degrees.
func newShared(t *testing.T, n int, apart, tilt float64) *shared {
	t.Helper()
	site := &station.Site{Name: "Skerry Point", Latitude: 58.4 * unit.Degree, Longitude: -6.1 * unit.Degree}
	out := &shared{start: time.Date(2026, 9, 15, 0, 51, 0, 0, time.UTC)}
	for k := range n {
		el := orbit.Elements{Name: fmt.Sprint("object ", k), CatalogNumber: 90001 + k, Epoch: time.Date(2026, 9, 14, 12, 0, 0, 0, time.UTC), MeanMotion: 15.17962267, Eccentricity: 0.0011,
			Inclination: unit.Angle(97.45+tilt*float64(k)) * unit.Degree, RAAN: 18.2 * unit.Degree, ArgPerigee: 74 * unit.Degree,
			MeanAnomaly: unit.Angle(286.2-apart*float64(k)*15.17962267*360/86400) * unit.Degree, BStar: 3.1e-5}
		eph, err := orbit.NewEphemeris(el, out.start.Add(-5*time.Minute), out.start.Add(20*time.Minute), orbit.EarthOrientation{})
		if err != nil {
			t.Fatal(err)
		}
		out.predictions = append(out.predictions, &Prediction{Orbit: eph, Frame: site.Frame(), Carrier: func(time.Time) unit.Frequency { return 437.2 * unit.Megahertz }})
	}
	return out
}

// log draws a log of object k, late by so much: a sample every 10 s, correlated noise, a sample in
// 30 a spur.
func (s *shared) log(t *testing.T, rng *rand.Rand, k int, late, offset, noise float64) []Sample {
	t.Helper()
	var samples []Sample
	for i := range 80 {
		samples = append(samples, newSample(s.start.Add(time.Duration(10*i)*time.Second), i+2))
	}
	points := s.predictions[k].Late(samples, late)
	if points == nil {
		t.Fatal("the orbit does not cover the log")
	}
	const rho = 0.4
	own := rng.NormFloat64()
	var heard []Sample
	for i := range samples {
		if i > 0 {
			own = rho*own + math.Sqrt(1-rho*rho)*rng.NormFloat64()
		}
		samples[i].Values[FrequencyHz] = points[i].PredictedFrequencyHz + offset + noise*own
		if rng.Float64() < 1.0/30 {
			samples[i].Values[FrequencyHz] += 4000
		}
		if points[i].State != Outside {
			heard = append(heard, samples[i])
		}
	}
	return heard
}

func (s *shared) candidates(samples []Sample) []Candidate {
	var out []Candidate
	for k, p := range s.predictions {
		late := func(seconds float64) []Point { return p.Late(samples, seconds) }
		out = append(out, Candidate{Name: fmt.Sprint(k), Points: late(0), Late: late})
	}
	return out
}

// TestWhoseIsCalibrated: over many logs of objects whose sets are late by some seconds, what is
// said with a probability p is right in p of the cases, and answers are right in 95 % or more;
// where the objects are far apart nearly all are answered, where they are near few.
func TestWhoseIsCalibrated(t *testing.T) {
	for _, c := range []struct {
		apart, late     float64
		trials          int
		least, greatest float64 // share of answers
	}{{apart: 60, late: 4, trials: 40, least: 0.97, greatest: 1}, {apart: 8, late: 4, trials: 120, least: 0.02, greatest: 0.6}} {
		trials := c.trials
		s := newShared(t, 5, c.apart, 0.01)
		type result struct {
			answer, right, first bool
			p, off               float64
		}
		results := make([]result, trials)
		var group sync.WaitGroup
		limit := make(chan struct{}, runtime.GOMAXPROCS(0))
		for i := range trials {
			limit <- struct{}{}
			group.Go(func() {
				defer func() { <-limit }()
				rng := rand.New(rand.NewPCG(uint64(i), 12))
				k, late := rng.IntN(5), c.late*rng.NormFloat64()
				samples := s.log(t, rng, k, late, 1500*rng.NormFloat64(), 40)
				ranked, answer := Rank(s.candidates(samples), RankOptions{NoiseHz: 40, OffsetHz: 1500, LateS: c.late})
				results[i] = result{answer, answer && ranked[0].Name == fmt.Sprint(k), ranked[0].Name == fmt.Sprint(k), ranked[0].Probability, ranked[0].LateS - late}
			})
		}
		group.Wait()
		told, right, first := 0.0, 0.0, 0.0
		var sum, variance, offs float64
		for _, r := range results {
			if r.answer {
				told++
			}
			if r.right {
				right++
				offs += r.off * r.off
			}
			if r.first {
				first++
			}
			sum, variance = sum+r.p, variance+r.p*(1-r.p)
		}
		t.Logf("%g s apart, late by %g s: %.0f of %d answered, %.0f of them right; the first is right in %.0f, and by its own word in %.1f ± %.1f; its lateness is right within %.3f s",
			c.apart, c.late, told, trials, right, first, sum, math.Sqrt(variance), math.Sqrt(offs/max(right, 1)))
		if told/float64(trials) < c.least || told/float64(trials) > c.greatest {
			t.Errorf("%.0f of %d answered", told, trials)
		}
		if wrong := told - right; wrong > 0.05*told+3*math.Sqrt(0.05*0.95*told) {
			t.Errorf("%.0f of %.0f answers are wrong", wrong, told)
		}
		if math.Abs(first-sum) > 3*math.Sqrt(variance)+1 {
			t.Errorf("the first is right in %.0f cases, and says itself %.1f ± %.1f", first, sum, math.Sqrt(variance))
		}
	}
}

// TestWhoseOfNone: the object heard is none of the candidates.
func TestWhoseOfNone(t *testing.T) {
	s := newShared(t, 4, 120, 0.01)
	answered := 0
	for i := range 20 {
		rng := rand.New(rand.NewPCG(uint64(i), 13))
		samples := s.log(t, rng, 3, 0, 500, 40)
		if _, answer := Rank(s.candidates(samples)[:3], RankOptions{NoiseHz: 40, OffsetHz: 1500, LateS: 4}); answer {
			answered++
		}
	}
	if answered > 0 {
		t.Errorf("%d of 20 logs of an object that is not in the list were given to one", answered)
	}
}

// TestLateIsTheShiftedOrbit: an orbit that is 20 s late on its own plane is that of a set whose
// mean anomaly is less by 20 s of its motion; an eccentricity of 0.0011 and the node's turn in 20 s
// leave some hertz of 437 MHz. Not late, it is what Over predicts.
func TestLateIsTheShiftedOrbit(t *testing.T) {
	s := newShared(t, 2, 20, 0)
	samples := s.log(t, rand.New(rand.NewPCG(1, 1)), 0, 0, 0, 0)
	late, behind := s.predictions[0].Late(samples, 20), s.predictions[1].Late(samples, 0)
	over, err := s.predictions[1].Over(samples)
	if err != nil {
		t.Fatal(err)
	}
	moved := 0.0
	for i := range late {
		if d := late[i].PredictedFrequencyHz - behind[i].PredictedFrequencyHz; math.Abs(d) > 8 {
			t.Errorf("sample %d: %.1f Hz off the shifted orbit", i, d)
		}
		if d := behind[i].PredictedFrequencyHz - over[i].PredictedFrequencyHz; math.Abs(d) > 1e-3 {
			t.Errorf("sample %d: %.4f Hz off Over", i, d)
		}
		if d := behind[i].FrequencyRateHzS - over[i].FrequencyRateHzS; math.Abs(d) > 0.03*math.Abs(over[i].FrequencyRateHzS)+0.5 { // what the Earth's turn adds
			t.Errorf("sample %d: rate %.3f Hz/s off Over", i, d)
		}
		moved = max(moved, math.Abs(late[i].PredictedFrequencyHz-s.predictions[0].Late(samples[i:i+1], 0)[0].PredictedFrequencyHz))
	}
	if moved < 500 {
		t.Errorf("20 s move the frequency by %.0f Hz at most", moved)
	}
	if s.predictions[0].Late(samples, 1500) != nil {
		t.Error("an orbit that ends before is taken")
	}
}
