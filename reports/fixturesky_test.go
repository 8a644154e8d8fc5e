package reports

import (
	"math"
	"time"

	"slantwise/downlink"
)

// addSky gives a fixture pass a path, exceeded for 1 % of the year, with the clear sky
// beside it, the Sun in the beam for four seconds, and no cloud. The figures are
// invented like the rest.
func addSky(p *Pass, s shape) {
	f, r := p.Profile, p.Radio
	n := len(f.Seconds)
	gas, rain, back, total := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	antenna, rise, amplifier := make([]float64, n), make([]float64, n), make([]float64, n)
	clear := *f
	clear.ReceivedPowerDBm, clear.SystemNoiseK, clear.MarginDB, clear.AchievableRateBps = make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	r.ClearLeast.Value, r.ClearGreatest.Value = math.Inf(1), math.Inf(-1)
	for i, el := range f.ElevationDeg {
		air := 1 / math.Sin(el*math.Pi/180)
		gas[i], rain[i], back[i] = 0.2*air, 0.5*air, 0.05*air
		total[i] = gas[i] + rain[i] - back[i]
		rise[i], amplifier[i] = 10*air, 82.4
		antenna[i] = f.SystemNoiseK[i] - rise[i] - amplifier[i]
		clear.ReceivedPowerDBm[i] = f.ReceivedPowerDBm[i] + total[i]
		clear.SystemNoiseK[i] = f.SystemNoiseK[i] - rise[i]
		clear.MarginDB[i] = f.MarginDB[i] + 2*total[i]
		clear.AchievableRateBps[i] = f.AchievableRateBps[i] * (1 + total[i]/4)
		at := s.aos.Add(time.Duration(i) * time.Second)
		if m := clear.MarginDB[i]; m < r.ClearLeast.Value {
			r.ClearLeast = Moment{m, at}
		} else if m > r.ClearGreatest.Value {
			r.ClearGreatest = Moment{m, at}
		}
	}
	clear.Volume.AchievableBytes *= 1.2
	clear.Volume.ModeBytes *= 1.1
	r.ClearSky, r.ClearAchievableBytes, r.ClearModeBytes = &clear, r.AchievableBytes, r.ModeBytes
	r.Path = PathInfo{ExceededPercent: 1, Missing: []string{"cloud"}, MissingText: "cloud_liquid_water_kg_m2 is not stated"}
	r.PathParts = []Contributor{{"gas attenuation", gas, 1}, {"rain attenuation", rain, 1}, {"atmospheric combination", back, -1}}
	r.PathTotalDB = total
	r.NoiseParts = []Contributor{{"antenna", antenna, 1}, {"weather above the clear sky", rise, 1}, {"low-noise amplifier", amplifier, 1}, {"Moon", make([]float64, n), 1}}
	f.SunInBeam = []downlink.Interval{{From: s.aos.Add(20 * time.Second), To: s.aos.Add(24 * time.Second)}}
	f.MoonInBeam = []downlink.Interval{}
	f.SunDeg, f.MoonDeg = constant(12.5, n), constant(60, n)
}
