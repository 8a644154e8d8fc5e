package sizing

import (
	"math"
	"slices"
	"sort"

	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/mount"
)

// turning is what the mounts of a flight's sites cannot follow. Which passes of a site come
// near the limits of a mount is found once for all, a mount's plan of such a pass once for every
// set of rates; how narrow a beam is then decides how much of the slews is lost.
//
// A pass is planned as for no tolerance; of its slews counts as lost where the error is greater
// than the tolerance. A plan made for the tolerance loses a little less
// (TestOutageAgainstPlans: 8 % of the time at most).
type turning struct {
	flight *Flight
	sites  map[turningSite]*siteTurning
}

// turningSite is a site with the mount of its template, which stands as it stands for all
// diameters.
type turningSite struct {
	site int
	of   *station.Mount
}

type siteTurning struct {
	year    *SiteYear
	of      *station.Mount
	demands []mount.Demand        // by pass
	courses map[int]*mount.Course // by pass
	known   map[axisRates]*slewing
}

type axisRates struct{ lower, upper unit.AngularRate }

// slewing is how a mount with given rates takes the passes that it does not follow
// exactly.
type slewing struct {
	passes []int              // rising
	errors [][]mount.ErrorRun // while it does not follow them
}

// outage is what an antenna does not follow of the passes of a site, in seconds after the
// flight's start.
type outage struct {
	passes []int // rising
	lost   [][]mount.Span
}

// of returns the spans of a pass that are lost; nil: none.
func (o *outage) of(pass int) []mount.Span {
	if o == nil {
		return nil
	}
	if i, found := slices.BinarySearch(o.passes, pass); found {
		return o.lost[i]
	}
	return nil
}

func newTurning(f *Flight) *turning { return &turning{f, map[turningSite]*siteTurning{}} }

// outage returns what an antenna does not follow at a site, nil without a mount; template is the
// antenna of the site whose family it is of.
func (t *turning) outage(site int, template, a *station.Antenna, f unit.Frequency) (*outage, error) {
	if a.Mount == nil {
		return nil, nil
	}
	s, err := t.site(site, template.Mount)
	if err != nil {
		return nil, err
	}
	_, tolerance := a.FollowingError(f)
	low, high, share := rungs(template.Mount, a.Diameter)
	if high == low || a.Mount == template.Mount {
		k, err := s.slewing(t.flight, a.Mount)
		if err != nil {
			return nil, err
		}
		return k.outage(s.year, tolerance), nil
	}
	var ends [2]*outage
	for i, d := range [...]unit.Length{low, high} {
		m, _ := template.Mount.ForDiameter(d)
		k, err := s.slewing(t.flight, &m)
		if err != nil {
			return nil, err
		}
		ends[i] = k.outage(s.year, tolerance)
	}
	return between(ends[0], ends[1], share), nil
}

// rungRatio is how far apart the rates are, at most, at which plans are made where they change with the
// diameter.
const rungRatio = 1.25

// rungs returns the diameters around another between whose mounts its own is taken, and its
// share of the way, by the inverse of the rate: the time that a slew takes. Both are the same
// where the rates do not change there.
func rungs(m *station.Mount, d unit.Length) (low, high unit.Length, share float64) {
	rows := m.ByDiameter
	i := sort.Search(len(rows), func(i int) bool { return rows[i].Diameter >= d })
	if i == 0 || i == len(rows) || rows[i-1].Lower == rows[i].Lower && rows[i-1].Upper == rows[i].Upper {
		return d, d, 0
	}
	from, to := rows[i-1], rows[i]
	a, b := float64(from.Lower), float64(to.Lower)
	if math.Abs(math.Log(float64(to.Upper/from.Upper))) > math.Abs(math.Log(b/a)) { // the axis that changes more
		a, b = float64(from.Upper), float64(to.Upper)
	}
	rate := a + (b-a)*float64((d-from.Diameter)/(to.Diameter-from.Diameter))
	n := math.Ceil(math.Abs(math.Log(b/a)) / math.Log(rungRatio))
	at := func(k float64) float64 { return a * math.Pow(b/a, k/n) }
	k := max(0, min(n-1, math.Floor(n*math.Log(rate/a)/math.Log(b/a))))
	where := func(rate float64) unit.Length {
		return from.Diameter + (to.Diameter-from.Diameter)*unit.Length((rate-a)/(b-a))
	}
	share = (1/rate - 1/at(k)) / (1/at(k+1) - 1/at(k))
	return where(at(k)), where(at(k + 1)), max(0, min(1, share))
}

func (t *turning) site(site int, of *station.Mount) (*siteTurning, error) {
	key := turningSite{site, of}
	if s := t.sites[key]; s != nil {
		return s, nil
	}
	d, err := mount.New(of)
	if err != nil {
		return nil, err
	}
	y := &t.flight.Sites[site]
	s := &siteTurning{year: y, of: of, demands: make([]mount.Demand, len(y.Passes)), courses: map[int]*mount.Course{}, known: map[axisRates]*slewing{}}
	var at []station.Direction
	for p := range y.Passes {
		from, to := y.Samples(p)
		at = at[:0]
		for i := from; i < to; i++ {
			at = append(at, station.Direction{Azimuth: unit.Angle(y.AzimuthDeg[i]) * unit.Degree, Elevation: unit.Angle(y.ElevationDeg[i]) * unit.Degree})
		}
		s.demands[p] = d.Demand(y.Seconds[from:to], at)
	}
	t.sites[key] = s
	return s, nil
}

// planStep is the step of the plans near the limits of a mount, s.
const planStep = 0.5

// courseStep is how far apart the rows of a course's table are, s.
const courseStep = 4

// course returns where a pass leads in the apparent sky.
func (s *siteTurning) course(f *Flight, pass int) (*mount.Course, error) {
	if c := s.courses[pass]; c != nil {
		return c, nil
	}
	bending, err := station.NewRefraction(s.year.Site.HeightAboveSea())
	if err != nil {
		return nil, err
	}
	p := &s.year.Passes[pass]
	c, err := mount.PassCourse(s.year.Site.Frame(), f.ephemeris, p.AOS, p.LOS, bending)
	if err != nil {
		return nil, err
	}
	s.courses[pass] = c.Resampled(courseStep)
	return s.courses[pass], nil
}

// slewing plans the passes that a mount may not follow.
func (s *siteTurning) slewing(f *Flight, m *station.Mount) (*slewing, error) {
	key := axisRates{m.Lower.Rate, m.Upper.Rate}
	if k := s.known[key]; k != nil {
		return k, nil
	}
	d, err := mount.New(m)
	if err != nil {
		return nil, err
	}
	k := &slewing{}
	for p := range s.demands {
		if from, to := s.year.Samples(p); to-from < 2 || d.Certain(s.demands[p]) {
			continue
		}
		c, err := s.course(f, p)
		if err != nil {
			return nil, err
		}
		if plan := d.Plan(c, mount.Options{Fine: planStep}); len(plan.Lost) > 0 {
			k.passes, k.errors = append(k.passes, p), append(k.errors, plan.Errors())
		}
	}
	s.known[key] = k
	return k, nil
}

// outage is what is lost with a tolerance.
func (k *slewing) outage(y *SiteYear, tolerance unit.Angle) *outage {
	out := &outage{}
	for i, p := range k.passes {
		lost := mount.Over(k.errors[i], tolerance)
		if len(lost) == 0 {
			continue
		}
		from, _ := y.Samples(p)
		for n := range lost {
			lost[n].From += y.Seconds[from]
			lost[n].To += y.Seconds[from]
		}
		out.passes, out.lost = append(out.passes, p), append(out.lost, lost)
	}
	return out
}

// between goes straight from the spans of one outage to those of another. Where a pass is lost
// otherwise in the two, the spans of the one shrink about their middles and those of the
// other grow.
func between(a, b *outage, share float64) *outage {
	out := &outage{}
	for _, p := range slices.Compact(slices.Sorted(slices.Values(slices.Concat(a.passes, b.passes)))) {
		x, y := a.of(p), b.of(p)
		var lost []mount.Span
		if len(x) == len(y) {
			for i := range x {
				lost = append(lost, mount.Span{From: x[i].From + share*(y[i].From-x[i].From), To: x[i].To + share*(y[i].To-x[i].To)})
			}
		} else {
			lost = apart(shrunk(x, 1-share), shrunk(y, share))
		}
		out.passes, out.lost = append(out.passes, p), append(out.lost, lost)
	}
	return out
}

// shrunk leaves a share of each span about its middle.
func shrunk(spans []mount.Span, share float64) []mount.Span {
	var out []mount.Span
	for _, s := range spans {
		middle, half := (s.From+s.To)/2, share*s.Seconds()/2
		out = append(out, mount.Span{From: middle - half, To: middle + half})
	}
	return out
}

// apart joins spans that overlap, in order.
func apart(a, b []mount.Span) []mount.Span {
	all := slices.SortedFunc(slices.Values(slices.Concat(a, b)), func(x, y mount.Span) int {
		if x.From < y.From {
			return -1
		}
		return 1
	})
	var out []mount.Span
	for _, s := range all {
		if n := len(out); n > 0 && s.From <= out[n-1].To {
			out[n-1].To = max(out[n-1].To, s.To)
		} else {
			out = append(out, s)
		}
	}
	return out
}
