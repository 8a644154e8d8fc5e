package mount

import (
	"math"

	"slantwise/orbit"
	"slantwise/station"
)

// Demand is the most that a course asks of the axes of a mount, estimated on the safe side
// from few samples of it: what a mount gives of all of it, it follows. It hangs on how the
// mount stands, not on how fast it turns or how far.
type Demand struct {
	lowerRate, upperRate                         float64 // rad/s
	lowerAcceleration, upperAcceleration         float64 // rad/s²
	lowerLeast, lowerMost, upperLeast, upperMost float64 // rad, where the axes stand
	halfTurn                                     bool    // it may pass the pole on either side
}

// What the estimate may be wrong by: between samples a few degrees apart a target does not
// go along a great circle at one rate, refraction lifts it, and a site turns.
const (
	demandFactor = 1.25
	demandSlack  = math.Pi / 180
	unsureTurn   = 2.5 // rad; more between two samples may be either way round
)

// Demand estimates what a course through directions at rising instants asks of the axes.
// Over a stretch between two samples the target goes along a great circle at a rate ω,
// least z from the pole of the lower axis. That axis then turns at ω/sin z at most and is
// driven at (3√3/8) ω²/sin² z at most, the greatest slope of the derivative of
// atan(tan ωt/sin z) for a small z and more than that for any other; the upper one at ω and ω²/tan z.
func (d *Drive) Demand(seconds []float64, at []station.Direction) Demand {
	q := Demand{lowerLeast: math.Inf(1), lowerMost: math.Inf(-1), upperLeast: math.Inf(1), upperMost: math.Inf(-1)}
	var before orbit.Vec3
	lower := 0.0
	for i := range at {
		now := vector(at[i])
		a := d.frame.angles(now)
		if i == 0 {
			lower = float64(a.Lower)
		} else {
			turn := math.Remainder(float64(a.Lower)-lower, 2*math.Pi)
			lower += turn
			q.halfTurn = q.halfTurn || math.Abs(turn) > unsureTurn
			q.stretch(d, before, now, seconds[i]-seconds[i-1])
		}
		q.lowerLeast, q.lowerMost = min(q.lowerLeast, lower), max(q.lowerMost, lower)
		q.upperLeast, q.upperMost = min(q.upperLeast, float64(a.Upper)), max(q.upperMost, float64(a.Upper))
		before = now
	}
	return q
}

func (q *Demand) stretch(d *Drive, a, b orbit.Vec3, time float64) {
	rate := demandFactor * float64(between(a, b)) / time
	up, down := leastFromPole(d.frame.pole, a, b), leastFromPole(d.frame.pole.Scale(-1), a, b)
	q.upperMost, q.upperLeast = max(q.upperMost, math.Pi/2-up), min(q.upperLeast, down-math.Pi/2)
	sin := math.Sin(max(1e-9, min(up, down)/demandFactor))
	q.lowerRate, q.upperRate = max(q.lowerRate, rate/sin), max(q.upperRate, rate)
	q.lowerAcceleration = max(q.lowerAcceleration, 0.65*demandFactor*(rate/sin)*(rate/sin))
	q.upperAcceleration = max(q.upperAcceleration, rate*rate/sin)
}

// leastFromPole returns the least angle between a unit vector and the great circle from a to b.
func leastFromPole(pole, a, b orbit.Vec3) float64 {
	least := float64(min(between(pole, a), between(pole, b)))
	normal := a.Cross(b)
	size := normal.Norm()
	if size < 1e-12 {
		return least
	}
	normal = normal.Scale(1 / size)
	off := pole.Dot(normal)
	foot := pole.Sub(normal.Scale(off))
	if a.Cross(foot).Dot(normal) > 0 && foot.Cross(b).Dot(normal) > 0 {
		least = min(least, math.Abs(math.Asin(max(-1, min(1, off)))))
	}
	return least
}

// Certain tells that the mount follows all of a course, without a plan. False does not mean
// that it does not.
func (d *Drive) Certain(q Demand) bool {
	m := &d.mount
	if q.halfTurn || q.lowerRate > float64(m.Lower.Rate) || q.upperRate > float64(m.Upper.Rate) ||
		q.lowerAcceleration > float64(m.Lower.Acceleration) || q.upperAcceleration > float64(m.Upper.Acceleration) ||
		q.upperLeast-demandSlack < float64(m.Upper.Low) && m.Upper.Low > -math.Pi/2+1e-9 ||
		q.upperMost+demandSlack > float64(m.Upper.High) && m.Upper.High < math.Pi/2-1e-9 {
		return false
	}
	// Some turn of the cable holds all of it.
	turn := math.Ceil((float64(m.Lower.Low) + demandSlack - q.lowerLeast) / (2 * math.Pi))
	return q.lowerMost+turn*2*math.Pi+demandSlack <= float64(m.Lower.High)
}

// Resampled returns the course by a table of so many seconds between its rows, at most
// mostSamples of them: of a low orbit within 2e-5° with rows 4 s apart (TestResampled).
func (c *Course) Resampled(step float64) *Course {
	n := max(2, min(mostSamples, int(math.Ceil(c.length/step))+1))
	at, rate := make([]orbit.Vec3, n), make([]orbit.Vec3, n)
	width := c.length / float64(n-1)
	for i := range at {
		at[i], rate[i] = c.at(min(c.length, width*float64(i)))
	}
	return &Course{length: c.length, at: func(s float64) (orbit.Vec3, orbit.Vec3) {
		i := max(1, min(n-1, int(s/width)+1))
		return hermite(width*float64(i-1), width*float64(i), at[i-1], at[i], rate[i-1], rate[i], s)
	}}
}
