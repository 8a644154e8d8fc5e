package cli

import (
	"errors"
	"fmt"
	"slices"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/linkset"
	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

// budgetResult is what the command shows, in whatever format.
type budgetResult struct {
	*chosenLink
	scenario *scenario.Scenario
	flown    *orbitHead       // nil for a stated geometry
	pass     *pass.Pass       // nil for one instant or a stated geometry
	volume   *downlink.Volume // of the pass
	// clearVolume is the pass under a clear sky; nil where volume is that already.
	clearVolume *downlink.Volume
	sunInBeam   []downlink.Interval
	surety      *surety      // of the pass; nil: the position is taken as exact
	mount       *mountOnPass // nil where nothing is said of the mount
	instant     *mountAtJSON // likewise, at one instant; nil out of a pass, too
	samples     []*downlink.Budget
	notes       []downlink.Note
}

func newBudgetResult(s *scenario.Scenario, c *chosenLink, flown bool) *budgetResult {
	return &budgetResult{chosenLink: c, scenario: s, notes: c.notes(s, flown)}
}

func (r *budgetResult) warn(format string, args ...any) {
	r.notes = append(r.notes, downlink.Note{Kind: downlink.Warning, Text: fmt.Sprintf(format, args...)})
}

// statedBudget is the budget of a geometry given by hand.
func statedBudget(s *scenario.Scenario, c *chosenLink, o *statedOptions) (*budgetResult, error) {
	r := newBudgetResult(s, c, false)
	g, err := c.link.StatedGeometry(unit.Length(*o.rangeKm)*unit.Kilometre, unit.Angle(*o.elevationDeg)*unit.Degree, angleOf(o.azimuthDeg), angleOf(o.offBoresightDeg))
	if err != nil {
		return nil, &InputError{Err: err}
	}
	if a := o.aroundBoresightDeg; a != nil {
		if !(*a >= -360 && *a <= 360) {
			return nil, &InputError{Err: &unit.RangeError{Quantity: "angle around the boresight", Value: *a, Unit: "deg", Allowed: "-360 to 360 deg"}}
		}
		g.AroundBoresight = (unit.Angle(*a) * unit.Degree).Wrapped()
	}
	if t := c.transmitter; o.offBoresightDeg == nil && (t.Attitude == downlink.AttitudeNadir || t.Attitude == downlink.AttitudeYawSteering) && t.Body.Boresight.OffZ == 0 {
		r.notes = append(r.notes, downlink.Note{Kind: downlink.Assumption, Text: "off-boresight angle left out: worked out from range and elevation over a sphere through the site"})
	}
	if r.scenario.Path.Sun || r.scenario.Path.Moon {
		r.notes = append(r.notes, downlink.Note{Kind: downlink.Assumption, Text: "a stated geometry has no time: neither the Sun nor the Moon is in the beam"})
	}
	return r, r.add(g)
}

// add evaluates the budget at a geometry.
func (r *budgetResult) add(g downlink.Geometry) error {
	b, err := r.link.At(g)
	var blocked *propagation.BlockedRayError
	if errors.As(err, &blocked) {
		b, err = r.underTheHorizon(g, blocked)
	}
	if err != nil {
		return &InputError{Err: err}
	}
	r.samples = append(r.samples, b)
	return nil
}

// underTheHorizon is the budget in free space where the ground blocks the ray; the
// models of the air have no value there.
func (r *budgetResult) underTheHorizon(g downlink.Geometry, blocked error) (*downlink.Budget, error) {
	spec, err := r.bareSpec()
	if err != nil {
		return nil, err
	}
	if r.link.HasBodyAngles() {
		spec.Bodies = newSkies(r.scenario).bodies
	}
	link, err := downlink.NewLink(spec)
	if err != nil {
		return nil, blocked // the antenna's noise needs the sky
	}
	b, err := link.At(g)
	if err != nil {
		return nil, err
	}
	b.Cautions = append(b.Cautions, "the terms of the air are left out: "+blocked.Error())
	return b, nil
}

// budgetAt is the budget at one instant.
func budgetAt(s *scenario.Scenario, c *chosenLink, at time.Time) (*budgetResult, error) {
	r := newBudgetResult(s, c, true)
	end := at.Add(time.Second)
	r.setOrbit(s.ElementsOver(c.spacecraft, at, end), at)
	eph, err := s.EphemerisAt(c.spacecraft, at, at)
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.spacecraft.Name, err)}
	}
	g, _ := c.link.GeometryOf(at, eph.StateAt(0))
	later, _ := c.link.GeometryOf(eph.Time(eph.Span()), eph.StateAt(eph.Span()))
	told, err := licensedAt(s, c, g, later, eph.Span())
	if err != nil {
		return nil, err
	}
	r.notes = append(r.notes, told...)
	if err := r.followAt(at); err != nil {
		return nil, err
	}
	return r, r.add(g)
}

// mostBudgets is how many budgets a pass may have: each holds all its terms.
const mostBudgets = 200_000

// budgetOfPass is the budget along a pass: the one under way at the instant or the
// next, the first of the window for the zero time. Without one there are no samples.
func budgetOfPass(s *scenario.Scenario, c *chosenLink, at time.Time, step time.Duration) (*budgetResult, error) {
	r := newBudgetResult(s, c, true)
	eph, err := s.Ephemeris(c.spacecraft, s.Window.Start, s.Window.End, nil)
	if ended(err) {
		return r, nil // no passes, and the scenario's warning says why
	}
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.spacecraft.Name, err)}
	}
	if cut := eph.Truncated(); cut != nil {
		r.warn("elements: passes end where the orbit does: %v", cut)
	}
	found, err := pass.Search(eph, &c.station.Site, pass.Window{From: s.Window.Start, To: s.Window.End}, s.Horizon)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	for i := range found {
		if !found[i].LOS.Before(at) {
			r.pass = &found[i]
			break
		}
	}
	if r.pass == nil {
		return r, nil
	}
	r.setOrbit(c.spacecraft.Elements, r.pass.AOS)
	r.tellSets()
	return r, r.fly(eph, step)
}

// tellSets says which link sets leave the link less of the pass than its volume here.
func (r *budgetResult) tellSets() {
	for i := range r.spacecraft.LinkSets {
		set := &r.spacecraft.LinkSets[i]
		if slices.Contains(set.Links, r.transmitter.Name) && set.Rule.Order != linkset.Together {
			r.notes = append(r.notes, downlink.Note{Kind: downlink.Assumption,
				Text: fmt.Sprintf("the volume is that of %s alone; in the link set %s it has a share of the pass: slantwise rates --set %q", r.transmitter.Name, set.Name, set.Name)})
		}
	}
}

func (r *budgetResult) fly(eph *orbit.Ephemeris, step time.Duration) error {
	p := r.pass
	if n := p.Duration() / step; n > mostBudgets {
		return inputErrorf("--step: %v gives %d budgets for the pass from %s to %s, more than %d; take a longer step", step, n, utc(p.AOS), utc(p.LOS), mostBudgets)
	}
	profile, err := r.link.Profile(eph, p.AOS, p.LOS, volumeStep(p.Duration()))
	if err != nil {
		return &InputError{Err: err}
	}
	told, turned, err := keepToLimits(r.scenario, r.chosenLink, profile)
	if err != nil {
		return err
	}
	r.notes = append(r.notes, told...)
	r.mount = turned
	r.volume, r.sunInBeam = &profile.Volume, profile.SunInBeam
	if r.surety, err = r.judge(r.scenario, eph, p, profile); err != nil {
		return &InputError{Err: err}
	}
	if r.clear != nil {
		fine, err := r.clear.Profile(eph, p.AOS, p.LOS, volumeStep(p.Duration()))
		if err != nil {
			return &InputError{Err: err}
		}
		if _, _, err := keepToLimits(r.scenario, r.chosenLink, fine); err != nil { // told above
			return err
		}
		r.clearVolume = &fine.Volume
	}
	for t := p.AOS; t.Before(p.LOS); t = t.Add(step) {
		if err := r.addAt(eph, t); err != nil {
			return err
		}
	}
	return r.addAt(eph, p.LOS)
}

func (r *budgetResult) addAt(eph *orbit.Ephemeris, t time.Time) error {
	g, _ := r.link.GeometryOf(t, eph.StateAt(min(eph.Seconds(t), eph.Span())))
	return r.add(g)
}

// volumeStep is the step of the volume's integral, whatever step is shown: a second,
// or more where a pass of days would need too many.
func volumeStep(pass time.Duration) time.Duration {
	const most = 100_000
	return max(time.Second, pass/most).Round(time.Millisecond)
}

// setOrbit keeps what is flown, its age told at an instant.
func (r *budgetResult) setOrbit(c elements.Chosen, at time.Time) {
	r.flown = newOrbitHead(r.spacecraft, c, at)
	if c.Caution != "" {
		r.warn("elements: %s", c.Caution)
	}
}
