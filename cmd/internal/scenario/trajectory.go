package scenario

import (
	"fmt"
	"io"
	"math"
	"regexp"
	"strings"
	"time"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/oem"
)

var stateKeys = []string{"epoch_utc", "frame", "position_km", "velocity_km_s", "b_star"}

// mostShift bounds shifts in time: what is later than a day is another plan.
const mostShift = 86400 // s

// trajectories reads a file as an ephemeris where it is one; false where it is none, or
// cannot be read.
func (s *source) trajectories(name string, earth orbit.EarthOrientation) (*oem.File, bool, error) {
	if s.files == nil {
		if place := s.told(name); oem.LooksFile(place) {
			f, err := oem.ReadFile(place, earth)
			return f, true, err
		}
		return nil, false, nil
	}
	f, err := s.files.Open(s.place(name))
	if err != nil {
		return nil, false, nil // told where it is read as element sets
	}
	defer f.Close()
	text, err := io.ReadAll(f)
	if err != nil || !oem.Looks(text) {
		return nil, false, nil
	}
	file, err := oem.Read(strings.NewReader(string(text)), name, earth)
	return file, true, err
}

// matchTrajectory returns the ephemeris of the object that ref names by OBJECT_ID or
// OBJECT_NAME, exactly or in any case; of several files the one created last.
func matchTrajectory(all []TrajectoryFile, ref string) (found *TrajectoryFile, among int) {
	ref = strings.TrimSpace(ref)
	tests := []func(*orbit.Trajectory) bool{
		func(t *orbit.Trajectory) bool { return t.ID == ref || t.Name == ref },
		func(t *orbit.Trajectory) bool { return strings.EqualFold(t.ID, ref) || strings.EqualFold(t.Name, ref) },
	}
	for _, test := range tests {
		for i := range all {
			if ref == "" || !test(&all[i].Trajectory) {
				continue
			}
			among++
			if found == nil || !all[i].Created.Before(found.Created) {
				found = &all[i]
			}
		}
		if found != nil {
			return found, among
		}
	}
	return nil, 0
}

// TrajectoryFile is an ephemeris with when it was made.
type TrajectoryFile struct {
	orbit.Trajectory
	Created time.Time
}

// orbitOf settles what a spacecraft flies on: a state of its own, an ephemeris, or
// element sets.
func (o object) orbitOf(c *Spacecraft, s *Scenario, middle time.Time) {
	o.shifts(c)
	ref, at := o.elementSetName()
	if at == nil {
		ref = c.Name
	}
	switch {
	case o.has("state"):
		if at != nil {
			o.fault(at, "element_set", "it stands beside state, which gives the orbit, too", "keep one of the two")
		}
		if el, ok := o.state(c.Name, s.Earth); ok {
			c.Candidates, c.Orbit = []orbit.Elements{el}, OnState
		}
		o.useless("beside state, which gives the orbit", "synthetic_orbit")
	case o.has("synthetic_orbit"):
		if at != nil {
			o.fault(at, "element_set", "it stands beside synthetic_orbit, which gives the orbit, too", "keep one of the two")
		}
		if el, ok := o.syntheticOrbit(c.Name, s.Window.Start); ok {
			c.Candidates, c.Orbit = []orbit.Elements{el}, OnSyntheticOrbit
		}
	default:
		if t, among := matchTrajectory(s.Trajectories, ref); t != nil {
			o.follow(c, t, among, s)
			return
		}
		if len(s.Sets) == 0 && len(s.Trajectories) > 0 && ref != "" {
			o.fault(o.node, "element_set", "no ephemeris has the OBJECT_ID or OBJECT_NAME %s", "there are %s", quote(ref), trajectoryNames(s.Trajectories))
			return
		}
		c.Candidates = o.candidates(c.Name, s.Sets)
	}
	for i := range c.Candidates {
		c.Candidates[i] = c.Shift.Of(c.Candidates[i], s.Earth)
	}
	if len(c.Candidates) > 0 {
		c.Elements = c.ElementsAt(middle)
		o.tellAge(c.Elements)
	}
	o.tellGaps(c, s.Window)
}

func trajectoryNames(all []TrajectoryFile) string {
	var out []string
	for i := range all {
		const most = 8
		if i == most {
			out = append(out, fmt.Sprintf("%d more", len(all)-i))
			break
		}
		out = append(out, quote(all[i].Name)+" ("+all[i].ID+")")
	}
	return strings.Join(out, ", ")
}

// shifts reads what moves the orbit in time and where it ends.
func (o object) shifts(c *Spacecraft) {
	read := func(key string) time.Duration {
		v, ok := o.number(key, span{low: -mostShift, high: mostShift, unit: "s", next: "a shift of more than a day is another plan: give new elements"})
		if !ok {
			return 0
		}
		return time.Duration(math.Round(v * 1e9))
	}
	c.Shift = orbit.Shift{Late: read("time_offset_s"), Slip: read("launch_slip_s")}
	if d := c.Shift.Late; d != 0 {
		o.warn("time_offset_s: the spacecraft is taken %s along its orbit", lateness(d))
	}
	if d := c.Shift.Slip; d != 0 {
		o.warn("launch_slip_s: the launch is taken %s; the orbit is turned with the Earth, its track over the ground is the same", lateness(d))
	}
	if o.has("valid_until_utc") {
		c.ValidUntil, _ = o.instant("valid_until_utc")
	}
}

// lateness says a shift in words.
func lateness(d time.Duration) string {
	if d < 0 {
		return fmt.Sprintf("%g s early", -d.Seconds())
	}
	return fmt.Sprintf("%g s late", d.Seconds())
}

// state reads a state vector and turns it into mean elements.
func (o object) state(name string, earth orbit.EarthOrientation) (el orbit.Elements, ok bool) {
	g := o.child("state", stateKeys)
	g.about = o.about + ", state"
	for _, k := range stateKeys[:4] {
		if !g.has(k) {
			g.missing(k, map[string]string{"epoch_utc": "the instant of the state, as 2026-03-10T14:05:00Z", "frame": oem.FrameNames,
				"position_km": "three numbers", "velocity_km_s": "three numbers"}[k])
		}
	}
	epoch, okEpoch := g.instant("epoch_utc")
	word, okFrame := g.text("frame")
	frame := orbit.TEME
	if okFrame {
		if frame, okFrame = oem.ParseFrame(word); !okFrame {
			g.fault(g.get("frame"), "frame", "%s is not allowed; it must be one of %s", "", quote(word), oem.FrameNames)
		}
	}
	p, okP := g.vector("position_km", span{low: -5e6, high: 5e6, unit: "km"})
	v, okV := g.vector("velocity_km_s", span{low: -50, high: 50, unit: "km/s"})
	drag := g.numberOr("b_star", span{low: -10, high: 10, unit: "per Earth radius"}, 0)
	if !g.has("b_star") && g.node != nil {
		g.assume("b_star left out: no drag is in the orbit")
	}
	turner, err := orbit.NewTurner(earth)
	if err != nil || !okEpoch || !okFrame || !okP || !okV {
		return el, false
	}
	p, v = turner.Between(frame, orbit.TEME, p.Scale(1000), v.Scale(1000), epoch)
	if el, err = orbit.ElementsFromState(p, v, epoch, drag); err != nil {
		g.fault(g.node, "position_km", "%s", "", err)
		return el, false
	}
	el.Name = name
	g.assume("SGP4 mean elements are made of the state, and give it back at its epoch; one state tells no drag and no error of its own")
	return el, true
}

// vector reads a list of three numbers.
func (o object) vector(key string, in span) (v orbit.Vec3, ok bool) {
	n := o.get(key)
	if n == nil {
		return v, false
	}
	if n.Kind != tree.List || len(n.Items) != 3 {
		o.fault(n, key, "%s is not allowed; it must be a list of three numbers", "", showRow(n))
		return v, false
	}
	ok = true
	for i, into := range [3]*float64{&v.X, &v.Y, &v.Z} {
		x, good := o.numberAt(n.Items[i], fmt.Sprintf("%s[%d]", key, i), in)
		*into, ok = x, ok && good
	}
	return v, ok
}

// follow makes a spacecraft fly on an ephemeris.
func (o object) follow(c *Spacecraft, t *TrajectoryFile, among int, s *Scenario) {
	c.Trajectory, c.Orbit = &t.Trajectory, OnEphemeris
	spans := t.Spans()
	o.assume("the ephemeris of %s (%s) is flown, segments: %d, from %s to %s", t.Name, t.ID, len(t.Segments), stampOf(spans[0].From), stampOf(spans[len(spans)-1].To))
	if among > 1 {
		o.assume("of %d ephemerides of the object the one created last is used, of %s", among, stampOf(t.Created))
	}
	if sets, err := elements.Match(s.Sets, t.Name); err == nil {
		o.assume("the ephemeris is used in place of %d element sets of that name; give element_set the catalogue number %d to use those", len(sets), sets[0].CatalogNumber)
	}
	c.meanElements(s)
	if len(t.Covariance) > 0 && (c.Uncertainty == nil || len(c.Uncertainty.Covariances) == 0) {
		u := defaultUncertainty()
		if c.Uncertainty != nil {
			u = *c.Uncertainty
		}
		u.Covariances, u.Source = t.Covariance, "ephemeris"
		c.Uncertainty = &u
		o.assume("the position is taken as uncertain as the %d covariances of the ephemeris say", len(t.Covariance))
	}
	o.tellGaps(c, s.Window)
}

func stampOf(t time.Time) string { return t.UTC().Format("2006-01-02T15:04:05Z") }

// designator is an international designator, as OBJECT_ID should be one.
var designator = regexp.MustCompile(`^[0-9]{4}-[0-9]{3}[A-Z]{1,3}$`)

// meanElements gives the spacecraft SGP4 elements of its trajectory's state in the
// middle of what it covers of the window: for the heights and nodes of its orbit alone.
func (c *Spacecraft) meanElements(s *Scenario) {
	moved := c.Shift.Late + c.Shift.Slip
	spans := c.Trajectory.Spans()
	best := spans[0]
	for _, sp := range spans { // the one that reaches into the window
		if sp.To.Add(moved).After(s.Window.Start) && sp.From.Add(moved).Before(s.Window.End) {
			best = sp
			break
		}
	}
	at := best.From.Add(best.To.Sub(best.From) / 2)
	p, v, err := c.Trajectory.StateAt(at, s.Earth)
	if err != nil {
		return
	}
	el, err := orbit.ElementsFromState(p, v, at, 0)
	if err != nil {
		return
	}
	el.Name, el.Source = "ephemeris of "+c.Trajectory.Name, c.Trajectory.Source
	if designator.MatchString(c.Trajectory.ID) {
		el.InternationalDesignator = c.Trajectory.ID
	}
	el = c.Shift.Of(el, s.Earth)
	c.Candidates = []orbit.Elements{el}
	c.Elements = elements.Chosen{Elements: el, Among: 1}
}

// tellGaps says where in the window there are no passes.
func (o object) tellGaps(c *Spacecraft, w Window) {
	for _, g := range c.gaps(w.Start, w.End) {
		o.warn("no passes from %s to %s: %s; one under way there is cut", stampOf(g.From), stampOf(g.To), g.Reason)
	}
}

// gaps returns where in [from, to] the spacecraft is not to be flown.
func (c *Spacecraft) gaps(from, to time.Time) []orbit.Gap {
	var out []orbit.Gap
	if c.Trajectory != nil {
		out = c.Trajectory.Gaps(c.Shift, from, to)
	}
	if u := c.ValidUntil; !u.IsZero() && u.Before(to) {
		kept := out[:0]
		for _, g := range out {
			if g.From.Before(u) {
				kept = append(kept, g)
			}
		}
		start := u
		if start.Before(from) {
			start = from
		}
		out = append(kept, orbit.Gap{From: start, To: to, Reason: c.afterwards()})
	}
	return out
}

func (c *Spacecraft) afterwards() string {
	return "valid_until_utc, " + stampOf(c.ValidUntil) + ": after it the orbit is another"
}
