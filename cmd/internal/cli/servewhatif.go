package cli

import (
	"context"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/cmd/internal/web"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// aroundPass is how far before AOS and after LOS a pass may grow by a lower least elevation.
const aroundPass = 30 * time.Minute

// longestAsked is the longest contact that a question may be about, and mostAsked how
// many samples, one a second for each mode, an answer may cost: some 7 us each on one
// core of 2 GHz, so at the most about a second.
const (
	longestAsked = 2 * time.Hour
	mostAsked    = 150_000
)

// affordable refuses a question that would cost too much.
func affordable(length time.Duration, modes int, q *web.Question) error {
	if length > longestAsked {
		return &web.RefusedError{Text: fmt.Sprintf("the contact lasts longer than %v, too long for an answer at once; change a copy of the scenario and compare the two", longestAsked)}
	}
	if q.Mode == "" && length.Seconds()*float64(modes) > mostAsked {
		return &web.RefusedError{Text: fmt.Sprintf("%d modes over %v are too much for an answer at once; name a mode", modes, length.Round(time.Second))}
	}
	return nil
}

// asked are the numbers of a question with their ranges, those of the scenario's keys
// or narrower.
func asked(q *web.Question) error {
	for _, n := range []struct {
		key       string
		value     *float64
		low, high float64
		unit      string
	}{
		{"dish_m", q.DishM, 0.1, 100, "m"},
		{"power_w", q.PowerW, 0.001, 1000, "W"},
		{"least_elevation_deg", q.LeastElevationDeg, -5, 89, "deg"},
		{"pointing_error_deg", q.PointingErrorDeg, 0, 90, "deg"},
		{"exceeded_percent", q.ExceededPercent, 0.001, 50, "%"},
	} {
		if n.value != nil && !(*n.value >= n.low && *n.value <= n.high) {
			return &web.RefusedError{Text: fmt.Sprintf("%s: %g is not allowed; it must be %g to %g %s", n.key, *n.value, n.low, n.high, n.unit)}
		}
	}
	return nil
}

// WhatIf flies a contact with what a question changes.
func (m *liveModel) WhatIf(ctx context.Context, q *web.Question) (*web.Answer, error) {
	i, ok := m.places[q.Contact]
	if !ok {
		return nil, nil
	}
	if err := asked(q); err != nil {
		return nil, err
	}
	page := &m.plan.pages[i]
	modes := 0
	if page.link != nil {
		modes = len(page.link.modes)
	}
	if err := affordable(page.Duration(), modes, q); err != nil {
		return nil, err
	}
	best, err := m.flight(i)
	if untold(err) {
		return nil, &web.RefusedError{Text: "there is no budget: " + err.Error()}
	}
	if err != nil {
		return nil, err
	}
	if best == nil {
		return nil, &web.RefusedError{Text: "the contact has no link; its station and spacecraft share no band"}
	}
	out := &web.Answer{Contact: q.Contact, Before: outcome(best.link, best.profile)}
	changed, err := m.changed(q, page)
	if err != nil {
		return nil, err
	}
	span, err := m.span(q, page)
	if err != nil {
		return nil, err
	}
	if span == nil {
		nan := web.Number(math.NaN())
		out.After = web.Outcome{LeastMarginDB: nan, GreatestMarginDB: nan}
		return out, nil
	}
	if err := affordable(span.Duration(), modes, q); err != nil { // a lower least elevation may have made it longer
		return nil, err
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	page = &reportPage{Found: pass.Found{Pass: *span, Spacecraft: page.Spacecraft, Site: page.Site}, link: changed}
	after, err := page.bestMode(m.plan.scenario, &m.plan.craft[page.Spacecraft], sampleStep(span.Duration()))
	if err != nil {
		return nil, err
	}
	out.After = outcome(after.link, after.profile)
	return out, nil
}

// span returns the part of the pass over the least elevation asked for, nil where the
// pass never stands that high.
func (m *liveModel) span(q *web.Question, page *reportPage) (*pass.Pass, error) {
	if q.LeastElevationDeg == nil {
		return &page.Pass, nil
	}
	site := m.plan.sites[page.Site].Site
	site.MinimumElevation = unit.Angle(*q.LeastElevationDeg) * unit.Degree
	w := m.plan.scenario.Window
	from, to := page.AOS.Add(-aroundPass), page.LOS.Add(aroundPass)
	if from.Before(w.Start) {
		from = w.Start
	}
	if to.After(w.End) {
		to = w.End
	}
	found, err := pass.Search(m.plan.craft[page.Spacecraft].ephemeris, &site, pass.Window{From: from, To: to}, m.plan.scenario.Horizon)
	if err != nil {
		return nil, err
	}
	for i := range found {
		if !found[i].AOS.After(page.Culmination) && !found[i].LOS.Before(page.Culmination) {
			return &found[i], nil
		}
	}
	return nil, nil
}

// changed prepares the link of a page with what the question changes.
func (m *liveModel) changed(q *web.Question, page *reportPage) (*reportLink, error) {
	s := *m.plan.scenario
	if q.ExceededPercent != nil {
		if s.Path.ClearSky {
			return nil, &web.RefusedError{Text: "exceeded_percent: the scenario asks for a clear sky (path.clear_sky), which no percentage changes"}
		}
		s.Path.Exceedance = propagation.Exceedance(*q.ExceededPercent) * propagation.Percent
	}
	antenna, transmitter := *page.link.antenna, *page.link.transmitter
	if err := changeEnds(q, &antenna); err != nil {
		return nil, err
	}
	if q.PowerW != nil {
		if transmitter.EIRP != nil {
			return nil, &web.RefusedError{Text: "power_w: the scenario gives the transmitter's EIRP, not its power"}
		}
		var err error
		if transmitter.Power, err = unit.LevelWatts(*q.PowerW); err != nil {
			return nil, &web.RefusedError{Text: "power_w: " + err.Error()}
		}
	}
	out := &reportLink{transmitter: &transmitter, antenna: &antenna}
	sky := newSkies(&s)
	var names []string
	for i := range page.link.modes {
		one := page.link.modes[i]
		if one.mode != nil {
			names = append(names, one.mode.Name)
		}
		if q.Mode != "" && (one.mode == nil || one.mode.Name != q.Mode) {
			continue
		}
		next := chosenLink{spacecraft: one.spacecraft, station: one.station, refraction: one.refraction, transmitter: &transmitter, antenna: &antenna, mode: one.mode}
		if err := next.prepare(sky); err != nil {
			return nil, &web.RefusedError{Text: err.Error()}
		}
		out.modes = append(out.modes, next)
	}
	if q.Mode != "" && !slices.Contains(names, q.Mode) {
		return nil, &web.RefusedError{Text: fmt.Sprintf("mode: the transmitter has no %q%s; it has %s", q.Mode, meant(q.Mode, names), quotedList(names))}
	}
	return out, nil
}

// changeEnds changes the station's antenna.
func changeEnds(q *web.Question, a *station.Antenna) error {
	if q.DishM != nil {
		if a.Gain != nil || a.GOverT != nil || a.Beamwidth > 0 || a.Diameter == 0 {
			return &web.RefusedError{Text: "dish_m: the antenna's gain, beamwidth or G/T is as measured, which no diameter changes"}
		}
		a.Diameter = unit.Length(*q.DishM)
	}
	if q.PointingErrorDeg != nil {
		a.PointingRMS = unit.Angle(*q.PointingErrorDeg) * unit.Degree
	}
	return nil
}
