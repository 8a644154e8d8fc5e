package pass

import (
	"fmt"
	"math"
	"sort"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// skyline is the least geometric elevation that counts as visible, by azimuth: the
// higher of the minimum elevation and the horizon mask, each taken from the kind of
// elevation that it was given in. Prepared once for a site, immutable.
type skyline struct {
	site      *station.Site
	frame     station.Frame
	floor     float64 // the minimum elevation, geometric, rad
	low, high float64 // least and greatest value over all azimuths, rad

	az, el     []float64 // the mask, in its own kind, rad; empty where the skyline is level
	refraction *station.Refraction
	steep      float64 // greatest slope of geometric against the mask's kind of elevation
}

// newSkyline prepares a site. It fails with what Site.Validate finds, and where an
// apparent elevation lies below the sea horizon, which no ray comes from.
func newSkyline(site *station.Site, decides station.ElevationKind) (*skyline, error) {
	if err := site.Validate(); err != nil {
		return nil, err
	}
	k := &skyline{site: site, frame: site.Frame(), floor: site.MinimumElevation.Radians(), steep: 1}
	masked := site.Mask != nil && site.Mask.Kind() == station.Apparent
	if masked || decides == station.Apparent {
		r, err := station.NewRefraction(site.HeightAboveSea())
		if err != nil {
			return nil, fmt.Errorf("station %q: %w", site.Name, err)
		}
		k.refraction = r
	}
	if decides == station.Apparent {
		g, ok := k.refraction.Geometric(site.MinimumElevation)
		if !ok {
			return nil, k.hidden("minimum elevation", site.MinimumElevation)
		}
		k.floor = g.Radians()
	}
	if !masked {
		k.refraction = nil
	}
	k.low, k.high = k.floor, k.floor
	if site.Mask == nil {
		return k, nil
	}
	return k, k.setMask(site.Mask)
}

func (k *skyline) setMask(m *station.Mask) error {
	if k.refraction != nil {
		k.steep = k.refraction.Steepest()
	}
	points := m.Points()
	least, most := math.Inf(1), math.Inf(-1)
	for i, p := range points {
		g := p.Elevation
		if k.refraction != nil {
			var ok bool
			if g, ok = k.refraction.Geometric(p.Elevation); !ok {
				return k.hidden(fmt.Sprintf("horizon mask, entry %d: elevation", i+1), p.Elevation)
			}
		}
		least, most = math.Min(least, g.Radians()), math.Max(most, g.Radians())
		k.az = append(k.az, p.Azimuth.Radians())
		k.el = append(k.el, p.Elevation.Radians())
	}
	k.low, k.high = math.Max(k.floor, least), math.Max(k.floor, most)
	if k.low == k.high {
		k.az, k.el = nil, nil
	}
	return nil
}

func (k *skyline) hidden(what string, v unit.Angle) error {
	return fmt.Errorf("station %q: %w", k.site.Name, &unit.RangeError{
		Quantity: what, Value: math.Round(v.Degrees()*1e9) / 1e9, Unit: "deg",
		Allowed: fmt.Sprintf("at least %.3f deg as apparent elevation, the sea horizon from %.0f m", k.refraction.Horizon().Degrees(), k.site.HeightAboveSea().Metres()),
		Next:    "raise it, or give it as geometric elevation",
	})
}

// level tells whether the skyline is the same in all directions.
func (k *skyline) level() bool { return len(k.az) == 0 }

// at returns the skyline at an azimuth in rad.
func (k *skyline) at(az float64) float64 {
	if k.level() {
		return k.floor
	}
	return math.Max(k.floor, k.geometric(k.maskAt(az)))
}

// maskAt returns the mask at an azimuth, of its own kind.
func (k *skyline) maskAt(az float64) float64 {
	az = turn(az)
	i := k.after(az)
	return k.along(i, az)
}

// along returns the mask at an azimuth in [0, 2π) on the edge that ends at point i;
// the edge over north ends at point 0 (or len).
func (k *skyline) along(i int, az float64) float64 {
	n := len(k.az)
	a, b := (i+n-1)%n, i%n
	width := turn(k.az[b] - k.az[a])
	return k.el[a] + (k.el[b]-k.el[a])*(turn(az-k.az[a])/width)
}

// after returns the index of the first point past az, which may be len.
func (k *skyline) after(az float64) int {
	return sort.SearchFloat64s(k.az, math.Nextafter(az, 7))
}

func (k *skyline) geometric(el float64) float64 {
	if k.refraction == nil {
		return el
	}
	g, ok := k.refraction.Geometric(unit.Angle(el))
	if !ok {
		// Points of the mask were checked, and between two of them no value is lower;
		// what is left is the rounding at the horizon itself.
		g, _ = k.refraction.Geometric(k.refraction.Horizon())
	}
	return g.Radians()
}

// span bounds the skyline over the azimuths from az going clockwise by width, in rad:
// its values and its slopes.
type span struct{ low, high, slopeLow, slopeHigh float64 }

// over returns the bounds over [az, az+width]; a width of a full turn or more is the
// whole skyline.
func (k *skyline) over(az, width float64) span {
	if !(width < 2*math.Pi) {
		return span{k.low, k.high, math.Inf(-1), math.Inf(1)}
	}
	az = turn(az)
	n := len(k.az)
	i := k.after(az)
	least := k.along(i, az)
	most := least
	slopeLow, slopeHigh := math.Inf(1), math.Inf(-1)
	for left := width; ; i++ {
		a, b := (i+n-1)%n, i%n
		edge := turn(k.az[b] - k.az[a])
		slope := (k.el[b] - k.el[a]) / edge
		slopeLow, slopeHigh = math.Min(slopeLow, slope), math.Max(slopeHigh, slope)
		to := turn(k.az[b] - az)
		if to > left {
			end := k.along(i, turn(az+left))
			least, most = math.Min(least, end), math.Max(most, end)
			break
		}
		least, most = math.Min(least, k.el[b]), math.Max(most, k.el[b])
		left -= to
		az = k.az[b]
	}
	return k.sealed(least, most, slopeLow, slopeHigh)
}

// sealed turns bounds of the mask, in its own kind, into bounds of the skyline.
func (k *skyline) sealed(least, most, slopeLow, slopeHigh float64) span {
	low, high := k.geometric(least), k.geometric(most)
	// The slope of geometric against apparent elevation lies between 1 and steep.
	s := span{math.Max(low, k.floor), math.Max(high, k.floor), math.Min(slopeLow, slopeLow*k.steep), math.Max(slopeHigh, slopeHigh*k.steep)}
	if low < k.floor { // the level floor shows somewhere
		s.slopeLow, s.slopeHigh = math.Min(s.slopeLow, 0), math.Max(s.slopeHigh, 0)
	}
	return s
}

// turn brings an angle into [0, 2π).
func turn(a float64) float64 {
	if a >= 0 && a < 2*math.Pi {
		return a
	}
	return unit.Angle(a).Wrapped().Radians()
}
