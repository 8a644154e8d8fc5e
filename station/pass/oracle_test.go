package pass

import (
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// oracle finds arcs by the plainest means: a scan in small steps of what is visible
// by the definitions of Site and Mask, and bisection of each change. What is shorter
// than a step it may miss.
type oracle struct {
	m       motion
	site    *station.Site
	frame   station.Frame
	decides station.ElevationKind
	refract *station.Refraction
}

func newOracle(m motion, site *station.Site, decides station.ElevationKind) *oracle {
	r, err := station.NewRefraction(site.HeightAboveSea())
	if err != nil {
		panic(err)
	}
	return &oracle{m: m, site: site, frame: site.Frame(), decides: decides, refract: r}
}

// times is a time above the horizon, in s.
type times struct{ from, to float64 }

// direction returns azimuth, elevation and range.
func (o *oracle) direction(t float64) (az, el unit.Angle, d unit.Length) {
	p, _ := o.m.TrackAt(t)
	return o.frame.Direction(p)
}

// clear returns how far, in rad, the spacecraft stands over the horizon: the least of
// the differences to the mask and to the minimum elevation, each in its own kind.
func (o *oracle) clear(t float64) float64 {
	az, el, _ := o.direction(t)
	in := func(kind station.ElevationKind) unit.Angle {
		if kind == station.Geometric {
			return el
		}
		a, ok := o.refract.Apparent(el)
		if !ok {
			return -1
		}
		return a
	}
	d := in(o.decides) - o.site.MinimumElevation
	if m := o.site.Mask; m != nil {
		d = min(d, in(m.Kind())-m.At(az))
	}
	return d.Radians()
}

func (o *oracle) arcs(from, to, step float64) []times {
	var toggles []float64
	before, fb := from, o.clear(from)
	above := fb >= 0
	for i := 1; before < to; i++ {
		t := math.Min(from+float64(i)*step, to)
		f := o.clear(t)
		if (f >= 0) != (fb >= 0) {
			a, b := before, t
			for b-a > 1e-7 {
				mid := (a + b) / 2
				if (o.clear(mid) >= 0) == (fb >= 0) {
					a = mid
				} else {
					b = mid
				}
			}
			toggles = append(toggles, (a+b)/2)
		}
		before, fb = t, f
	}
	var found []times
	for _, t := range toggles {
		if above {
			found = append(found, times{from, t})
		}
		above, from = !above, t
	}
	if above {
		found = append(found, times{from, to})
	}
	return found
}

// culmination returns the greatest elevation in rad over an arc, on a grid.
func (o *oracle) culmination(a times, step float64) (top, el float64) {
	el = math.Inf(-1)
	for t := a.from; ; t = math.Min(t+step, a.to) {
		_, e, _ := o.direction(t)
		if e.Radians() > el {
			top, el = t, e.Radians()
		}
		if t >= a.to {
			return top, el
		}
	}
}

// nearest returns the least range in m over an arc, on a grid.
func (o *oracle) nearest(a times, step float64) float64 {
	near := math.Inf(1)
	for t := a.from; ; t = math.Min(t+step, a.to) {
		_, _, d := o.direction(t)
		near = math.Min(near, d.Metres())
		if t >= a.to {
			return near
		}
	}
}
