package cli

import (
	"fmt"
	"time"

	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/mount"
)

// axisColumns are the columns that --axes adds at the end.
var axisColumns = []string{"lower_axis_deg", "upper_axis_deg", "lower_axis_rate_deg_s", "upper_axis_rate_deg_s", "following_error_deg"}

// axisDecimals are the decimals of axisColumns: as those of azimuth and its rate.
var axisDecimals = [...]int{6, 6, 9, 9, 6}

// longestAxes is the longest span that axis angles are planned for: a mount's turns are
// planned as a whole, a sample a second and fewer in a longer span.
const longestAxes = 6 * time.Hour

// pointingAxes are the commanded axes of a mount over the span.
type pointingAxes struct {
	plan *mount.Plan
	from time.Time
}

// axesOf plans the mount over the span.
func (p *pointing) axesOf(env *Env, o *pointingOptions) error {
	if !o.axes {
		if o.antenna != "" {
			return inputErrorf("--antenna: it has no effect without --axes; leave it out")
		}
		return nil
	}
	if n := o.to.Sub(o.from); n > longestAxes || n <= 0 {
		return inputErrorf("--axes: the span of %v is not allowed; it must be longer than 0 and at most %v, so ask for a pass at a time", n, longestAxes)
	}
	var moved []station.Antenna
	for _, a := range p.station.Antennas {
		if a.Mount != nil {
			moved = append(moved, a)
		}
	}
	if len(moved) == 0 {
		return inputErrorf("--axes: no antenna of station %q has a mount; give one in the scenario's key mount", p.station.Site.Name)
	}
	a, err := pick("antenna", o.antenna, moved, func(a *station.Antenna) string { return a.Name })
	if err != nil {
		return err
	}
	drive, err := mount.New(a.Mount)
	if err != nil {
		return &InputError{Err: err}
	}
	course, err := mount.PassCourse(p.frame, p.ephemeris, o.from, o.to, p.refraction)
	if err != nil {
		return &InputError{Err: err}
	}
	var f unit.Frequency
	if p.transmitter != nil {
		f = p.transmitter.Frequency
	}
	_, tolerance := a.FollowingError(f)
	p.axes = &pointingAxes{plan: drive.Plan(course, mount.Options{Tolerance: tolerance}), from: o.from}
	p.axes.tell(env, a, tolerance)
	return nil
}

// tell says how the mount takes the span.
func (x *pointingAxes) tell(env *Env, a *station.Antenna, tolerance unit.Angle) {
	lower, upper := a.Mount.AxisNames()
	env.note("the axes of %s in the apparent sky: the lower one is %s, the upper one %s, angles as the cable counts them", printable(a.Name), lower, upper)
	if !x.plan.Reached {
		env.note("warning: the mount never reaches the spacecraft in this span")
		return
	}
	for _, s := range x.plan.Slews {
		what := "it slews through the keyhole"
		if s.TurnOver {
			what = "it turns over"
		}
		env.note("%s from %s to %s", what, utc(after(x.from, s.From)), laterUTC(after(x.from, s.To), after(x.from, s.From)))
	}
	env.note("not followed within %.2g deg: %s s of the span; before and after it stands still", tolerance.Degrees(), fixed(x.plan.LostSeconds(), 1))
	env.note("a mount moves without warning: keep people and obstacles clear, lock it out for work on it, and follow the local rules")
}

func (x *pointingAxes) numbers(r *pointingRow) [5]float64 {
	t := r.at.Sub(x.from).Seconds()
	at, lower, upper := x.plan.At(t)
	return [...]float64{at.Lower.Degrees(), at.Upper.Degrees(), lower.DegreesPerSecond(), upper.DegreesPerSecond(), x.plan.ErrorAt(t).Degrees()}
}

func (x *pointingAxes) appendCSV(b []byte, r *pointingRow) []byte {
	for i, v := range x.numbers(r) {
		b = appendFixed(append(b, ','), v, axisDecimals[i])
	}
	return b
}

func (x *pointingAxes) appendJSON(b []byte, r *pointingRow) []byte {
	for i, v := range x.numbers(r) {
		b = appendFixed(fmt.Appendf(b, `, "%s": `, axisColumns[i]), v, axisDecimals[i])
	}
	return b
}
