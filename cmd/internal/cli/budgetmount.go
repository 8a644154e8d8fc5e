package cli

import (
	"fmt"
	"time"

	"slantwise/downlink"
	"slantwise/station/pass"
)

// mountAtJSON is what a mount does at one instant of a pass.
type mountAtJSON struct {
	Follows   bool   `json:"follows"`
	LowerAxis string `json:"lower_axis"`
	UpperAxis string `json:"upper_axis"`
	LowerDeg  number `json:"lower_deg"`
	UpperDeg  number `json:"upper_deg"`
	LowerRate number `json:"lower_rate_deg_s"`
	UpperRate number `json:"upper_rate_deg_s"`
	ErrorDeg  number `json:"error_deg"` // on the sky
	Tolerance number `json:"following_error_deg"`
}

// aroundInstant is how far a pass is looked for before and after an instant; a longer one
// is planned for that part of it.
const aroundInstant = 2 * time.Hour

// followAt tells whether the mount follows at an instant: the pass that holds it is
// planned as for its volume.
func (r *budgetResult) followAt(at time.Time) error {
	if r.antenna.Mount == nil {
		return nil
	}
	eph, err := r.scenario.Ephemeris(r.spacecraft, at.Add(-aroundInstant), at.Add(aroundInstant), nil)
	if err != nil {
		r.tellMount(downlink.Assumption, "whether the mount follows is not told: the orbit is not known %v before and after the instant", aroundInstant)
		return nil
	}
	found, err := pass.Search(eph, &r.station.Site, pass.Window{From: at.Add(-aroundInstant), To: eph.Time(eph.Span())}, r.scenario.Horizon)
	if err != nil {
		return &InputError{Err: err}
	}
	for i := range found {
		if p := &found[i]; !p.AOS.After(at) && !p.LOS.Before(at) {
			return r.followIn(p, at, func(step time.Duration) (*downlink.Profile, error) { return r.link.Profile(eph, p.AOS, p.LOS, step) })
		}
	}
	r.tellMount(downlink.Assumption, "no pass is under way at this instant, so that nothing is said of the mount")
	return nil
}

// followIn tells it for the pass that holds the instant.
func (r *budgetResult) followIn(p *pass.Pass, at time.Time, profile func(time.Duration) (*downlink.Profile, error)) error {
	f, err := profile(volumeStep(p.Duration()))
	if err != nil {
		return &InputError{Err: err}
	}
	m, err := keepToMount(r.chosenLink, f)
	if err != nil || m == nil {
		return err
	}
	t := at.Sub(f.Start).Seconds()
	axes, lower, upper := m.plan.At(t)
	off := m.plan.ErrorAt(t)
	of := m.plan.Mount()
	out := &mountAtJSON{Follows: off <= m.tolerance, LowerDeg: num(axes.Lower.Degrees(), 3), UpperDeg: num(axes.Upper.Degrees(), 3),
		LowerRate: num(lower.DegreesPerSecond(), 4), UpperRate: num(upper.DegreesPerSecond(), 4), ErrorDeg: num(off.Degrees(), 4), Tolerance: num(m.tolerance.Degrees(), 4)}
	out.LowerAxis, out.UpperAxis = of.AxisNames()
	r.instant = out
	if out.Follows {
		r.tellMount(downlink.Assumption, "the mount follows at this instant: %s at %s deg/s of %s, %s at %s of %s", out.LowerAxis, fixed(lower.DegreesPerSecond(), 3),
			fixed(of.Lower.Rate.DegreesPerSecond(), 3), out.UpperAxis, fixed(upper.DegreesPerSecond(), 3), fixed(of.Upper.Rate.DegreesPerSecond(), 3))
		return nil
	}
	r.tellMount(downlink.Warning, "the mount does not follow at this instant: as the pass is planned it looks %s deg beside the spacecraft, %.2g deg count as followed; the budget is that of a beam on it",
		fixed(off.Degrees(), 2), m.tolerance.Degrees())
	return nil
}

func (r *budgetResult) tellMount(kind downlink.NoteKind, format string, args ...any) {
	r.notes = append(r.notes, downlink.Note{Kind: kind, Text: fmt.Sprintf(format, args...)})
}
