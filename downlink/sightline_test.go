package downlink

import (
	"math"
	"testing"
	"time"
)

// In the drawing's plane the angle between boresight and station is that of the budget,
// the station stands at its range on the Earth's circle, and for nadir the circle is the
// Earth itself, straight below.
func TestSightline(t *testing.T) {
	cosine := Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2, BackLobe: dbp(-20)}
	for name, spec := range map[string]LinkSpec{
		"nadir":  bodySpec(t, AttitudeNadir, Body{}, cosine),
		"offset": bodySpec(t, AttitudeNadir, Body{Boresight: BodyDirection{deg(40), deg(70)}}, cosine),
		"sun":    bodySpec(t, AttitudeSun, Body{}, cosine),
		"yaw":    bodySpec(t, AttitudeYawSteering, Body{Boresight: BodyDirection{deg(20), deg(-30)}}, cosine),
	} {
		l := mustLink(t, spec)
		for s := 0.0; s <= 600; s += 60 {
			at, state := noon.Add(time.Duration(s)*time.Second), circle{noon, 600}.StateAt(s)
			g, _ := l.GeometryOf(at, state)
			sight, ok := l.Sightline(at, state)
			if !ok {
				t.Fatalf("%s: no sight line", name)
			}
			x, y := float64(sight.StationX), float64(sight.StationY)
			near(t, name+": range", math.Hypot(x, y), g.Range.Metres(), 1e-3)
			near(t, name+": boresight's length", math.Hypot(sight.BoresightX, sight.BoresightY), 1, 1e-9)
			drawn := math.Atan2(math.Abs(x*sight.BoresightY-y*sight.BoresightX), x*sight.BoresightX+y*sight.BoresightY)
			near(t, name+": angle as drawn", drawn*180/math.Pi, g.OffBoresight.Degrees(), 1e-5)
			near(t, name+": angle as told", sight.Off.Degrees(), g.OffBoresight.Degrees(), 1e-5)
			if x < -1e-6 || float64(sight.EarthRadius) > circleSite.Origin.Norm()+1e-3 {
				t.Errorf("%s: station at x %g m, the Earth's circle of %g m is larger than the Earth", name, x, float64(sight.EarthRadius))
			}
			if name == "nadir" {
				near(t, "the Earth's circle", float64(sight.EarthRadius), circleSite.Origin.Norm(), 1e-3)
				near(t, "its centre", float64(sight.EarthY), circleRadius, 1e-3)
			}
		}
	}
	tumbling := bodySpec(t, AttitudeTumbling, Body{}, cosine)
	if _, ok := mustLink(t, tumbling).Sightline(noon, circle{noon, 600}.StateAt(0)); ok {
		t.Error("a tumbling spacecraft has a sight line")
	}
}
