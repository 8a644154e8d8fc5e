package measured

import (
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Late predicts the frequencies of samples as if the spacecraft came by late seconds later on its
// own orbit, which stands still in space while the Earth turns below it. Levels are not predicted.
// It returns nil where the orbit does not cover every instant.
func (p *Prediction) Late(samples []Sample, late float64) []Point {
	out := make([]Point, len(samples))
	for i := range samples {
		pt := &out[i]
		none := math.NaN()
		*pt = Point{Sample: samples[i], AzimuthDeg: none, ElevationDeg: none, PowerDBm: none, CN0DBHz: none, EbN0DB: none}
		const half = 0.5
		before, _, ok0 := p.lateAt(pt.At, late+half)
		now, up, ok1 := p.lateAt(pt.At, late)
		after, _, ok2 := p.lateAt(pt.At, late-half)
		if !ok0 || !ok1 || !ok2 {
			return nil
		}
		pt.PredictedFrequencyHz, pt.FrequencyRateHzS = now, after-before
		switch {
		case !up:
			pt.State = Outside
		case pt.Get(Locked) == 0:
			pt.State = Dropout
		}
	}
	return out
}

// lateAt returns the frequency received at an instant from an orbit that is late, and whether the
// spacecraft is above the horizon; ok is false where the orbit does not cover it.
func (p *Prediction) lateAt(t time.Time, late float64) (f float64, up, ok bool) {
	s, err := p.Orbit.At(t.Add(-time.Duration(late * float64(time.Second))))
	if err != nil {
		return 0, false, false
	}
	look := p.Frame.Look(Turned(s, late))
	return p.Carrier(t).Hertz() * (1 - float64(look.RangeRate)/unit.SpeedOfLight), look.Elevation >= 0, true
}

// Turned returns a state in Earth-fixed axes as it stands in those of so many seconds later (less
// than 0: earlier), the orbit at rest in space. Velocities stay relative to the turning Earth.
func Turned(s orbit.State, seconds float64) orbit.State {
	sin, cos := math.Sincos(earthRate * seconds)
	turn := func(v orbit.Vec3) orbit.Vec3 { return orbit.Vec3{X: v.X*cos + v.Y*sin, Y: v.Y*cos - v.X*sin, Z: v.Z} }
	return orbit.State{Position: turn(s.Position), Velocity: turn(s.Velocity)}
}

// earthRate is how fast the Earth turns against the stars, rad/s: IERS Conventions 2010, table 1.1.
const earthRate = 7.292115e-5
