package sizing

import (
	"context"
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// FlightSpec says what is to be flown.
type FlightSpec struct {
	Orbit   *orbit.KeptOrbit
	Earth   orbit.EarthOrientation
	Start   time.Time
	Days    float64               // LeastDays to MostDays
	Horizon station.ElevationKind // decides AOS and LOS
	Step    time.Duration         // between samples; 0: DefaultStep
	Sites   []FlightSite
	// Progress is told how many of all passes are sampled; nil: nobody asks.
	Progress func(done, total int)
}

// FlightSite is a site with a link that tells what the spacecraft lays on it.
type FlightSite struct {
	Site *station.Site
	Link *downlink.Link // with the site's frame; its flux density counts, and nothing of its antenna
	// Keep limits a profile to what may be used of it (Profile.Permit); nil: all.
	Keep func(*downlink.Profile) error
}

// Bounds of a flight.
const (
	LeastDays   = 7.0
	MostDays    = 1100.0
	DefaultStep = 10 * time.Second // a low orbit moves half a degree in elevation
)

// Flight is a spacecraft's passes over sites through a year. It is immutable.
type Flight struct {
	Orbit *orbit.KeptOrbit
	Start time.Time
	Days  float64
	Step  time.Duration
	Sites []SiteYear // as in the spec

	ephemeris *orbit.Ephemeris
}

// SiteYear holds the passes over one site and, in columns, their samples.
type SiteYear struct {
	Site   *station.Site
	Passes []pass.Pass

	first []int // sample at which a pass begins, and one more for the end

	Seconds      []float64 // after the flight's start
	AzimuthDeg   []float64
	ElevationDeg []float64
	RangeKm      []float64
	FluxDB       []float64 // dB(W/m²) in free space; NaN where the ground blocks the ray
	Open         []bool    // may be used
}

// Samples returns the samples of pass i as a half-open span of the columns.
func (y *SiteYear) Samples(i int) (from, to int) { return y.first[i], y.first[i+1] }

// ContactSeconds returns the time of all passes.
func (y *SiteYear) ContactSeconds() float64 {
	sum := 0.0
	for i := range y.Passes {
		from, to := y.Samples(i)
		sum += y.Seconds[to-1] - y.Seconds[from]
	}
	return sum
}

// Fly finds every pass and samples it. It fails with ctx's error, with that of the
// orbit, a site or a link, and with a *unit.RangeError for the days.
func Fly(ctx context.Context, spec FlightSpec) (*Flight, error) {
	if !(spec.Days >= LeastDays && spec.Days <= MostDays) {
		return nil, &unit.RangeError{Quantity: "days", Value: spec.Days, Unit: "d", Allowed: fmt.Sprintf("%g to %g d", LeastDays, MostDays)}
	}
	if len(spec.Sites) == 0 {
		return nil, errors.New("no site to fly over; give one or more")
	}
	if spec.Step == 0 {
		spec.Step = DefaultStep
	}
	end := spec.Start.Add(time.Duration(spec.Days * 24 * float64(time.Hour)))
	eph, err := spec.Orbit.Ephemeris(spec.Start, end, spec.Earth, nil)
	if err != nil {
		return nil, err
	}
	f := &Flight{Orbit: spec.Orbit, Start: spec.Start, Days: spec.Days, Step: spec.Step, Sites: make([]SiteYear, len(spec.Sites)), ephemeris: eph}
	total := 0
	for i, s := range spec.Sites {
		if f.Sites[i].Passes, err = pass.Search(eph, s.Site, pass.Window{From: spec.Start, To: end}, spec.Horizon); err != nil {
			return nil, err
		}
		total += len(f.Sites[i].Passes)
	}
	done := 0
	for i := range spec.Sites {
		y := &f.Sites[i]
		y.Site = spec.Sites[i].Site
		y.first = append(make([]int, 0, len(y.Passes)+1), 0)
		for k := range y.Passes {
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			if err := y.sample(&spec, &spec.Sites[i], eph, k); err != nil {
				return nil, fmt.Errorf("station %s: %w", y.Site.Name, err)
			}
			if done++; spec.Progress != nil {
				spec.Progress(done, total)
			}
		}
	}
	return f, nil
}

// sample adds the samples of pass k, a millisecond apart at least.
func (y *SiteYear) sample(spec *FlightSpec, site *FlightSite, eph *orbit.Ephemeris, k int) error {
	p := &y.Passes[k]
	profile, err := site.Link.Profile(eph, p.AOS, p.LOS, spec.Step)
	if err != nil {
		return err
	}
	if site.Keep != nil {
		if err := site.Keep(profile); err != nil {
			return err
		}
	}
	begin := p.AOS.Sub(spec.Start).Seconds()
	for i, s := range profile.Seconds {
		y.Seconds = append(y.Seconds, begin+s)
		y.Open = append(y.Open, profile.Permits(s) && !math.IsNaN(profile.FluxDensityDBWM2[i]))
	}
	y.AzimuthDeg = append(y.AzimuthDeg, profile.AzimuthDeg...)
	y.ElevationDeg = append(y.ElevationDeg, profile.ElevationDeg...)
	y.RangeKm = append(y.RangeKm, profile.RangeKm...)
	y.FluxDB = append(y.FluxDB, profile.FluxDensityDBWM2...)
	y.first = append(y.first, len(y.Seconds))
	return nil
}

// At returns the mean range and flux density with which the spacecraft stands at an
// elevation, over all the times of the year at which it passes through it; ok is false
// where it never does.
func (y *SiteYear) At(elevation unit.Angle) (slant unit.Length, fluxDB float64, ok bool) {
	el := elevation.Degrees()
	n := 0.0
	for p := range y.Passes {
		from, to := y.Samples(p)
		for i := from + 1; i < to; i++ {
			a, b := y.ElevationDeg[i-1], y.ElevationDeg[i]
			if (a < el) == (b < el) || math.IsNaN(y.FluxDB[i-1]+y.FluxDB[i]) {
				continue
			}
			w := (el - a) / (b - a)
			slant += unit.Length(1000 * (y.RangeKm[i-1] + w*(y.RangeKm[i]-y.RangeKm[i-1])))
			fluxDB += y.FluxDB[i-1] + w*(y.FluxDB[i]-y.FluxDB[i-1])
			n++
		}
	}
	if n == 0 {
		return 0, math.NaN(), false
	}
	return slant / unit.Length(n), fluxDB / n, true
}

// slantAt returns the distance at an elevation of a spacecraft at the mean radius at
// which it is seen, over a sphere through the site.
func (y *SiteYear) slantAt(elevation unit.Angle) unit.Length {
	frame := y.Site.Frame()
	site, radius := frame.Origin.Norm(), 0.0
	for i, el := range y.ElevationDeg {
		sin, cos := math.Sincos(el * math.Pi / 180)
		radius += math.Hypot(y.RangeKm[i]*1000*cos, site+y.RangeKm[i]*1000*sin) / float64(len(y.ElevationDeg))
	}
	sin, cos := math.Sincos(elevation.Radians())
	return unit.Length(math.Sqrt(radius*radius-site*site*cos*cos) - site*sin)
}
