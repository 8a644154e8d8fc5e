package measured

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// Horizon is what the instants at which signals appear and vanish tell of a station's skyline.
type Horizon struct {
	// Fit has the skyline's elevation over Had at each knot in deg, then the delay of the lock in s.
	Fit   *Fit
	Knots []Knot
	Step  unit.Angle // between neighbours
	had   func(azimuth unit.Angle) unit.Angle
	// Seen counts the instants that were used or are outliers. Left out are Weak ones, whose
	// predicted margin was too low to say that the skyline hid the signal, and those Alone, with too few near them.
	Seen, Weak, Alone int
}

// Knot is by how much a skyline stands over the one that was had, linear between neighbours.
type Knot struct {
	Azimuth    unit.Angle
	Over, Span unit.Angle // half the 95 % interval
}

// HorizonOptions say what is known of the link.
type HorizonOptions struct {
	// LevelDB is how much stronger than predicted the signal is, as it was fitted.
	LevelDB float64
	// Had is the skyline as it is known, apparent where the prediction has refraction; nil: a bare horizon.
	Had func(azimuth unit.Angle) unit.Angle
	// Knots is how many there are around; 0: as many of 1 to 36 as the edges carry.
	Knots int
}

// edge is where a signal appeared or vanished.
type edge struct {
	at        time.Time
	azimuth   float64 // deg
	elevation float64
	rate      float64 // of the elevation, deg/s, greater than 0: it rose
	turn      float64 // of the azimuth, deg/s
	blur      float64 // standard deviation of the elevation by the time between the samples, deg
	margin    float64 // dB
	appeared  bool
}

// How edges are judged: two samples may be so far apart for the change to lie between
// them, a pass ends with so long a pause, and with less margin than this the signal may
// have been too weak.
const adjacent, pause, weakMargin = 30 * time.Second, 20 * time.Minute, 1.0

// leastWeight is how many edges a knot needs, each by how near it is.
const leastWeight = 1.5

// errNoEdges says that a log cannot tell the skyline.
var errNoEdges = errors.New("too few signals appear or vanish in the log to tell a horizon mask; log locked (1 and 0) from before a pass to after it, over some passes in every direction")

// FitHorizon fits a skyline to where signals appear and vanish by the samples' lock. Points
// are of one station, one group a spacecraft, each by time. A signal appears the later by
// the receiver's time to lock, which is fitted with it. Knots are evenly spaced, as many as
// the edges carry; where there are no edges there are no knots.
func FitHorizon(groups [][]Point, o HorizonOptions) (*Horizon, error) {
	out := &Horizon{had: o.Had}
	if out.had == nil {
		out.had = func(unit.Angle) unit.Angle { return 0 }
	}
	var edges []edge
	for _, g := range groups {
		for _, e := range edgesOf(g) {
			if e.margin+o.LevelDB < weakMargin { // false without a margin
				out.Weak++
				continue
			}
			edges = append(edges, e)
		}
	}
	slices.SortStableFunc(edges, func(a, b edge) int { return a.at.Compare(b.at) })
	tried := []int{36, 24, 18, 12, 8, 6, 4, 2, 1}
	if o.Knots > 0 {
		tried = []int{o.Knots}
	}
	for _, n := range tried {
		knots, near := knotsOf(edges, n)
		if k := len(knots); k > 0 && len(near) >= max(least(k+1), 4*k) {
			out.Seen, out.Alone, out.Step = len(near), len(edges)-len(near), unit.Angle(360/float64(n))*unit.Degree
			return out, out.fit(near, knots)
		}
	}
	return nil, errNoEdges
}

// knotsOf lists the azimuths, of n evenly spaced ones, that have edges enough near them, and
// the edges between two of these.
func knotsOf(edges []edge, n int) (knots []float64, near []edge) {
	cell := func(e *edge) (i, j int, part float64) {
		at := e.azimuth / 360 * float64(n)
		i = int(at) % n
		return i, (i + 1) % n, at - math.Floor(at)
	}
	good := make([]bool, n)
	for i := range good {
		good[i] = true
	}
	for range n + 1 {
		weight := make([]float64, n)
		near = near[:0:0]
		for _, e := range edges {
			if i, j, part := cell(&e); good[i] && good[j] {
				weight[i] += 1 - part
				weight[j] += part
				near = append(near, e)
			}
		}
		same := true
		for i := range good {
			if good[i] && weight[i] < leastWeight {
				good[i], same = false, false
			}
		}
		if same {
			break
		}
	}
	for i, ok := range good {
		if ok {
			knots = append(knots, float64(i)*360/float64(n))
		}
	}
	return knots, near
}

// hats are the weights of the knots at an azimuth, linear between neighbours and cyclic.
func hats(knots []float64, azimuth float64, into []float64) {
	after, _ := slices.BinarySearch(knots, azimuth)
	n := len(knots)
	a, b := (after+n-1)%n, after%n
	if a == b {
		into[a] = 1
		return
	}
	width := math.Mod(knots[b]-knots[a]+360, 360)
	part := math.Mod(azimuth-knots[a]+360, 360) / width
	into[a] += 1 - part
	into[b] += part
}

// laps is how often the fit is made: where the signal appeared, the azimuth was that of the
// time to lock before, and an edge weighs the less the more its elevation is blurred.
const laps = 4

func (h *Horizon) fit(edges []edge, knots []float64) error {
	k := len(knots)
	var names []Parameter
	for _, a := range knots {
		names = append(names, Parameter{Name: fmt.Sprintf("skyline over the known one at %.0f deg", a), Unit: "deg"})
	}
	names = append(names, Parameter{Name: "time to lock", Unit: "s"})
	lock, rough := 0.0, math.Inf(1)
	for range laps {
		d := &series{independent: true}
		for _, e := range edges {
			row := make([]float64, k+1)
			azimuth := e.azimuth
			if e.appeared {
				row[k] = e.rate
				azimuth = math.Mod(azimuth-e.turn*lock+720, 360)
			}
			hats(knots, azimuth, row[:k])
			over := e.elevation - h.had(unit.Angle(azimuth)*unit.Degree).Degrees()
			weight := 1 / math.Hypot(1, e.blur/rough)
			for j := range row {
				row[j] *= weight
			}
			d.t, d.y, d.x = append(d.t, e.at.Sub(edges[0].at).Seconds()), append(d.y, over*weight), append(d.x, row)
		}
		stay, told := leaveOut(d.x, names)
		var left []Parameter
		for _, j := range stay {
			left = append(left, names[j])
		}
		d.x = columnsOf(d.x, stay)
		fit, err := d.solve(left)
		if err != nil {
			return fmt.Errorf("fit of the horizon mask: %w", err)
		}
		fit.Advice = append(fit.Advice, told...)
		h.Fit, h.Knots, lock, rough = fit, nil, 0, fit.Scale
		for i, j := range stay {
			p := fit.Parameters[i]
			if j == k {
				lock = min(max(p.Value, 0), mostLock)
				continue
			}
			h.Knots = append(h.Knots, Knot{unit.Angle(knots[j]) * unit.Degree, unit.Angle(p.Value) * unit.Degree, unit.Angle(p.Span) * unit.Degree})
		}
	}
	return nil
}

// mostLock is how long a receiver may take to lock, s, where the azimuth is followed back.
const mostLock = 60

// edgesOf finds where the signal of each pass first appears and last vanishes.
func edgesOf(points []Point) []edge {
	var out []edge
	var rise, set *edge
	finish := func() {
		if rise != nil {
			out = append(out, *rise)
		}
		if set != nil {
			out = append(out, *set)
		}
		rise, set = nil, nil
	}
	last := -1
	for i := range points {
		p := &points[i]
		if math.IsNaN(p.Get(Locked)) || math.IsNaN(p.ElevationRateDegS) {
			continue
		}
		if last >= 0 && p.At.Sub(points[last].At) > pause {
			finish()
		}
		if last >= 0 && p.Get(Locked) != points[last].Get(Locked) {
			e := edgeBetween(&points[last], p)
			switch {
			case e.appeared && rise == nil && set == nil && e.rate > 0:
				rise = &e
			case !e.appeared && e.rate < 0:
				set = &e
			}
		}
		last = i
	}
	finish()
	return out
}

// edgeBetween is where the lock changed: between two samples near in time, else at the second.
func edgeBetween(a, b *Point) edge {
	e := edge{at: b.At, azimuth: b.AzimuthDeg, elevation: b.ElevationDeg, rate: b.ElevationRateDegS, turn: b.AzimuthRateDegS, margin: b.MarginDB, appeared: b.Get(Locked) == 1}
	if gap := b.At.Sub(a.At); gap <= adjacent {
		e.at = a.At.Add(gap / 2)
		e.azimuth = math.Mod(a.AzimuthDeg+math.Remainder(b.AzimuthDeg-a.AzimuthDeg, 360)/2+360, 360)
		e.elevation = (a.ElevationDeg + b.ElevationDeg) / 2
		e.blur = math.Abs(b.ElevationDeg-a.ElevationDeg) / math.Sqrt(12) // of an even law
		if !e.appeared {
			e.margin = a.MarginDB
		}
	}
	return e
}

// wellKnown is how well a knot must be known to be offered.
const wellKnown = 3 * unit.Degree

// Mask is the skyline at the azimuths of more and of the knots, for a mask of a station: what was had
// with the knots over it that are known to within 3 deg; toward the others, of which kept counts, that fades.
func (h *Horizon) Mask(more []unit.Angle) (points []station.MaskPoint, kept int) {
	n := int(math.Round(360 / h.Step.Degrees()))
	over := make([]float64, n)
	kept = n
	azimuths := slices.Clone(more)
	for _, k := range h.Knots {
		if k.Span <= wellKnown {
			over[int(math.Round(k.Azimuth.Degrees()/h.Step.Degrees()))%n] = k.Over.Degrees()
			kept--
		}
	}
	every := make([]float64, n)
	for i := range n {
		every[i] = float64(i) * 360 / float64(n)
		azimuths = append(azimuths, unit.Angle(every[i])*unit.Degree)
	}
	slices.Sort(azimuths)
	azimuths = slices.CompactFunc(azimuths, func(a, b unit.Angle) bool { return math.Abs((b - a).Degrees()) < leastApart })
	for _, a := range azimuths {
		weight := make([]float64, n)
		hats(every, a.Degrees(), weight)
		el := h.had(a).Degrees()
		for i, w := range weight {
			el += w * over[i]
		}
		points = append(points, station.MaskPoint{Azimuth: a, Elevation: unit.Angle(min(max(el, -10), 89)) * unit.Degree})
	}
	return points, kept
}

// leastApart is how far apart points of a mask are, deg.
const leastApart = 1e-4
