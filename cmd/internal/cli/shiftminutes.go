package cli

import (
	"math"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/rateplan"
	"slantwise/reports"
)

// minutes are the whole minutes of UTC in a contact, and its ends, with the budget of each.
func (j *shiftJob) minutes(c *shiftChoice) ([]reports.ShiftMinute, error) {
	at := []time.Time{c.start}
	for t := c.start.Truncate(time.Minute).Add(time.Minute); t.Before(c.end); t = t.Add(time.Minute) {
		at = append(at, t)
	}
	at = append(at, c.end)
	out := make([]reports.ShiftMinute, len(at))
	for i, t := range at {
		l := j.look(c, t)
		m := reports.ShiftMinute{Time: t, AzimuthDeg: l.Azimuth.Degrees(), ElevationDeg: l.Elevation.Degrees(), ReceivedDBm: math.NaN(), CN0DBHz: math.NaN(), MarginDB: math.NaN()}
		if len(c.links) > 0 {
			first := &c.links[0]
			b, err := first.link.budgetAt(c.craft(j), t)
			if err != nil {
				return nil, err
			}
			m.ReceivedDBm, m.CN0DBHz = b.ReceivedPowerDBm, float64(b.CN0)
			m.Mode, m.MarginDB = first.marginAt(t, b)
		}
		out[i] = m
	}
	return out, nil
}

// marginAt is the margin of the mode that the rate plan sends at an instant.
func (l *shiftLink) marginAt(t time.Time, b *downlink.Budget) (string, float64) {
	need, name := l.needAt(t)
	if name == "" || !b.Usable {
		return name, math.NaN()
	}
	return name, float64(b.CN0) - need + l.profile.RequiredMarginDB
}

// needAt is the C/N0 that the mode of an instant needs, and its name; empty where none is sent.
func (l *shiftLink) needAt(t time.Time) (float64, string) {
	if l.rated == nil {
		return math.NaN(), ""
	}
	steps := l.rated.plan.Steps
	for i := range steps {
		s := &steps[i]
		// The last instant belongs to the step that ends with it.
		if last := i == len(steps)-1 && t.Equal(s.To); s.Mode >= 0 && !t.Before(s.From) && (t.Before(s.To) || last) {
			return l.rated.needAt(s), s.Name
		}
	}
	return math.NaN(), ""
}

// steps are those of the rate plan within the contact.
func (l *shiftLink) steps(c *shiftChoice) ([]reports.PlanStep, error) {
	if l.rated == nil {
		return nil, nil
	}
	series, err := l.rated.by.Series(rateplan.FromProfile(l.profile), &l.rated.plan)
	if err != nil {
		return nil, err
	}
	var out []reports.PlanStep
	for _, s := range reportedPlan(l.rated, &series, l.profile.RequiredMarginDB).Steps {
		if s.From.Before(c.start) {
			s.From = c.start
		}
		if s.To.After(c.end) {
			s.To = c.end
		}
		if s.To.After(s.From) {
			out = append(out, s)
		}
	}
	return out, nil
}
