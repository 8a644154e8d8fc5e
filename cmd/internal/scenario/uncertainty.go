package scenario

import (
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/orbit/unit"
)

var (
	uncertaintyKeys = []string{
		"along_km", "along_km_per_day", "along_km_per_day2", "across_km", "across_km_per_day", "across_km_per_day2",
		"radial_km", "radial_km_per_day", "radial_km_per_day2", "pointing_probability",
	}
	craftUncertaintyKeys = append([]string{"covariances"}, uncertaintyKeys...)
	covarianceKeys       = []string{"utc", "lower_triangle_km_s"}
)

// Uncertainty is how uncertain a spacecraft's position is by the scenario.
type Uncertainty struct {
	Rule        orbit.AgeRule
	Covariances []orbit.CovarianceAt // in place of the rule where there are any; the spacecraft's shift is not in their instants
	Source      string               // where the covariances stand
	Probability float64              // of the pointing loss; 0: the mean
}

// defaultUncertainty is what stands where a key is left out.
func defaultUncertainty() Uncertainty { return Uncertainty{Rule: orbit.DefaultAgeRule()} }

// UncertaintyOver returns how uncertain the position of a spacecraft is over [from, to],
// by the element set that Ephemeris flies there; nil where the scenario states nothing.
func (s *Scenario) UncertaintyOver(c *Spacecraft, from, to time.Time) (orbit.Uncertainty, error) {
	if c.Uncertainty == nil {
		return nil, nil
	}
	return s.uncertaintyOver(c, c.Uncertainty, from, to)
}

// AssumedUncertainty is UncertaintyOver with the default rule where the scenario states
// nothing; assumed tells that it was taken.
func (s *Scenario) AssumedUncertainty(c *Spacecraft, from, to time.Time) (u orbit.Uncertainty, assumed bool, err error) {
	if c.Uncertainty != nil {
		u, err = s.UncertaintyOver(c, from, to)
		return u, false, err
	}
	standard := defaultUncertainty()
	u, err = s.uncertaintyOver(c, &standard, from, to)
	return u, true, err
}

func (s *Scenario) uncertaintyOver(c *Spacecraft, stated *Uncertainty, from, to time.Time) (orbit.Uncertainty, error) {
	el := s.ElementsOver(c, from, to).Elements
	shift := c.Shift.Late + c.Shift.Slip
	if len(stated.Covariances) == 0 {
		u := orbit.AgeUncertainty{Rule: stated.Rule, Epoch: el.Epoch}
		switch {
		case c.Trajectory != nil: // the mean elements stand somewhere in it
			u.Epoch, u.Of = c.Trajectory.Spans()[0].From.Add(shift), "the ephemeris, counted from its beginning,"
		case c.Orbit != OnElementSet:
			u.Of = "the " + c.Orbit.String()
		}
		return u, nil
	}
	points := slices.Clone(stated.Covariances)
	for i := range points {
		points[i].Time = points[i].Time.Add(shift)
	}
	f, err := el.Facts()
	if err != nil {
		return nil, err
	}
	motion := 2 * math.Pi / f.Period.Seconds()
	u, err := orbit.NewCovarianceUncertainty(points, motion, el.Eccentricity, from, to, stated.Source)
	if err != nil {
		return nil, fmt.Errorf("spacecraft %s: %w", c.Name, err)
	}
	return u, nil
}

// uncertainty reads the scenario's own group; nil: there is none.
func (o object) uncertainty() *Uncertainty {
	g := o.child("position_uncertainty", uncertaintyKeys)
	if g.node == nil {
		return nil
	}
	g.about = "position uncertainty"
	u := defaultUncertainty()
	g.growth(&u)
	return &u
}

// craftUncertainty reads a spacecraft's group; what it leaves out is the scenario's.
func (o object) craftUncertainty(all *Uncertainty) *Uncertainty {
	g := o.child("position_uncertainty", craftUncertaintyKeys)
	if g.node == nil {
		return all
	}
	g.about = o.about + ", position uncertainty"
	u := defaultUncertainty()
	if all != nil {
		u = *all
	}
	if g.has("covariances") {
		g.useless("beside covariances, which tell it", uncertaintyKeys[:len(uncertaintyKeys)-1]...)
		g.probability(&u)
		u.Covariances, u.Source = g.covariances(), "scenario"
		return &u
	}
	if all == nil {
		g.growth(&u)
		return &u
	}
	g.stated(&u)
	g.probability(&u)
	return &u
}

// growth reads the rule and tells what was taken by default.
func (o object) growth(u *Uncertainty) {
	for _, left := range o.stated(u) {
		o.assume("%s left out: %s, one standard deviation (common practice for element sets of low orbits, no measurement)", left.key, grown(*left.growth))
	}
	o.probability(u)
	if !o.has("pointing_probability") {
		o.assume("pointing_probability left out: budgets hold the mean pointing loss over the orbit's error")
	}
}

func grown(g orbit.Growth) string {
	return fmt.Sprintf("%g km at the epoch, %g km a day, %g km a day²", g.AtEpoch.Kilometres(), g.PerDay.Kilometres(), g.PerDay2.Kilometres())
}

// growthAxis is one axis of the rule with the key of its first figure.
type growthAxis struct {
	key    string
	growth *orbit.Growth
}

// stated reads the figures of the rule into u and returns the axes without any. An axis
// that is stated is stated whole: its other figures are 0.
func (o object) stated(u *Uncertainty) (left []growthAxis) {
	const next = "give one standard deviation; what is known of an orbit does not get better with age"
	for _, a := range []growthAxis{{"along_km", &u.Rule.Along}, {"across_km", &u.Rule.Across}, {"radial_km", &u.Rule.Radial}} {
		keys := []string{a.key, a.key + "_per_day", a.key + "_per_day2"}
		if len(o.present(keys...)) == 0 {
			left = append(left, a)
			continue
		}
		figures := [3]unit.Length{}
		for i, name := range [3]string{"km", "km/day", "km/day²"} {
			figures[i] = unit.Length(o.numberOr(keys[i], span{low: 0, high: 10_000, unit: name, next: next}, 0)) * unit.Kilometre
		}
		*a.growth = orbit.Growth{AtEpoch: figures[0], PerDay: figures[1], PerDay2: figures[2]}
	}
	return left
}

func (o object) probability(u *Uncertainty) {
	if v, ok := o.number("pointing_probability", span{low: downlink.LeastProbability, high: 1, highOpen: true, next: "leave it out for the mean loss"}); ok {
		u.Probability = v
	}
}

// covariances reads the list; each matrix must be positive.
func (o object) covariances() []orbit.CovarianceAt {
	items := o.objects("covariances", "covariances, each with its utc", maxParts, covarianceKeys)
	var out []orbit.CovarianceAt
	seen := map[time.Time]bool{}
	for _, it := range items {
		at, ok := it.instant("utc")
		if !it.has("utc") {
			it.missing("utc", "the instant of the covariance")
		}
		if ok && seen[at] {
			it.fault(it.get("utc"), "utc", "two covariances have the instant %s", "give one for each instant", at.Format(time.RFC3339))
		}
		seen[at] = true
		if !it.has("lower_triangle_km_s") {
			it.missing("lower_triangle_km_s", "six rows of one to six numbers: radial, along and across, then the velocities; km², km²/s, km²/s²")
			continue
		}
		if c, good := it.triangle("lower_triangle_km_s"); good && ok {
			out = append(out, orbit.CovarianceAt{Time: at, Covariance: c})
		}
	}
	return out
}

// triangle reads the lower triangle of a covariance in km², km²/s and km²/s².
func (o object) triangle(key string) (c orbit.Covariance, ok bool) {
	rows := o.get(key)
	before := o.r.faults.count()
	if rows.Kind != tree.List || len(rows.Items) != 6 {
		o.fault(rows, key, "%s is not allowed; it must be a list of six rows, of one to six numbers", "", showRow(rows))
		return c, false
	}
	for i, row := range rows.Items {
		name := fmt.Sprintf("%s[%d]", key, i)
		if row.Kind != tree.List || len(row.Items) != i+1 {
			o.fault(row, name, "%s is not allowed; row %d of a lower triangle has %d numbers", "", showRow(row), i+1, i+1)
			continue
		}
		for j, n := range row.Items {
			v, good := o.numberAt(n, fmt.Sprintf("%s[%d]", name, j), span{low: -1e12, high: 1e12})
			if good {
				c[i][j] = v * 1e6
			}
		}
	}
	if o.r.faults.count() != before {
		return c, false
	}
	if err := c.Validate(); err != nil {
		o.fault(rows, key, "%s", "", err)
		return c, false
	}
	return c, true
}
