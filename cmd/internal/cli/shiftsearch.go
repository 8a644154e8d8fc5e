package cli

import (
	"math"
	"time"

	"slantwise/orbit/unit"
	"slantwise/reports"
	"slantwise/station"
	"slantwise/station/pass"
)

// shiftSigmas is how many standard deviations are worth looking at: beyond three lie 0.3 % of
// what is normal.
const shiftSigmas = 3

// search tells how late or early the spacecraft may be, and how to look for it.
func (j *shiftJob) search(c *shiftChoice, k *reports.ShiftContact) reports.ShiftSearch {
	nan := math.NaN()
	none3 := [3]float64{nan, nan, nan}
	out := reports.ShiftSearch{AOSSeconds: nan, LOSSeconds: nan, Existence: nan, TrackSeconds: nan, AlongDeg: none3, TotalDeg: none3,
		BeamDeg: c.beamOf().Degrees(), MostSeconds: nan, StepSeconds: nan, LateHzPerS: j.lateHz(c, k), ShortestSeconds: j.scenario.ContactPlan.Least.Seconds()}
	out.Until = c.end.Add(-j.scenario.ContactPlan.Least)
	craft, w := c.craft(j), j.scenario.Window
	u, assumed, err := j.scenario.AssumedUncertainty(craft.Spacecraft, w.Start, w.End)
	if err != nil {
		out.Unknown = err.Error()
		return out
	}
	out.Basis, out.Assumed = u.Basis(), assumed
	gauge, err := pass.NewGauge(&j.station.Site, j.scenario.Horizon)
	if err != nil {
		out.Unknown = err.Error()
		return out
	}
	m, err := gauge.PlusMinus(craft.ephemeris, &c.page.Pass, u)
	if err != nil {
		out.Unknown = err.Error()
		return out
	}
	out.AOSSeconds, out.LOSSeconds, out.Existence, out.MayVanish = m.AOS, m.LOS, m.Existence(), m.MayVanish()
	fastest := 0.0
	frame := &j.report.sites[c.page.Site].frame
	for i := range k.Events {
		at := k.Events[i].Time
		e := craft.ephemeris
		state := e.StateAt(max(0, min(e.Seconds(at), e.Span())))
		spread, err := u.At(at)
		if err != nil {
			out.Unknown = err.Error()
			return out
		}
		look := frame.LookSpread(state, spread)
		out.AlongDeg[i], out.TotalDeg[i] = look.Along.Degrees(), look.Total().Degrees()
		axes := state.Axes()
		out.TrackSeconds = greater(out.TrackSeconds, spread.Along.Metres()/axes.Inertial.Norm())
		fastest = max(fastest, skyRate(frame.Look(state)))
	}
	out.MostSeconds = shiftSigmas * out.TrackSeconds
	if beam := c.beamOf().Radians(); beam > 0 && fastest > 0 {
		out.StepSeconds = beam / 2 / fastest
		// Offsets of whole steps overlap by half: that of number k holds what is k+1 steps off.
		out.Steps = int(max(0, math.Ceil(out.MostSeconds/out.StepSeconds)-1))
	}
	return out
}

// greater returns the greater of two, the other where one is NaN.
func greater(a, b float64) float64 {
	if math.IsNaN(a) || b > a {
		return b
	}
	return a
}

// skyRate is how fast a direction moves on the sky, rad/s.
func skyRate(l station.Look) float64 {
	return math.Hypot(float64(l.AzimuthRate)*math.Cos(l.Elevation.Radians()), float64(l.ElevationRate))
}

// lateHz is how much higher the main carrier is received for each second that the spacecraft is
// late, at most: the steepest fall of the shift, over a second at the highest point.
func (j *shiftJob) lateHz(c *shiftChoice, k *reports.ShiftContact) float64 {
	if len(c.links) == 0 {
		return math.NaN()
	}
	mid := k.Events[1].Time
	rate := j.look(c, mid.Add(time.Second/2)).RangeRate - j.look(c, mid.Add(-time.Second/2)).RangeRate
	return c.links[0].link.link.Frequency().Hertz() * float64(rate) / unit.SpeedOfLight
}
