package cli

import (
	"context"
	"math"

	"slantwise/cmd/internal/web"
	"slantwise/downlink"
	"slantwise/reports"
)

// mostDrawn is how many samples a chart of the live page has, about.
const mostDrawn = 240

// Detail gives a contact along its time.
func (m *liveModel) Detail(ctx context.Context, id string) (*web.Detail, error) {
	i, ok := m.places[id]
	if !ok {
		return nil, nil
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	page := &m.plan.pages[i]
	craft, site := &m.plan.craft[page.Spacecraft], &m.plan.sites[page.Site]
	nan := web.Number(math.NaN())
	out := &web.Detail{Contact: m.contacts[i], RequiredMarginDB: nan, Bytes: nan, Modes: []string{}, DishM: nan, PowerW: nan, PointingErrorDeg: nan, ExceededPercent: nan}
	best, err := m.flight(i)
	if err != nil && !untold(err) {
		return nil, err
	}
	f := geometryProfile(craft, site, page.AOS, page.LOS, sampleStep(page.Duration()))
	if best != nil {
		f = best.profile
		m.describe(out, page, best)
	}
	every := max(1, len(f.Seconds)/mostDrawn)
	for _, c := range []struct {
		into *[]web.Number
		from []float64
	}{
		{&out.Seconds, f.Seconds}, {&out.AzimuthDeg, f.AzimuthDeg}, {&out.ElevationDeg, f.ElevationDeg}, {&out.RangeKm, f.RangeKm},
		{&out.DopplerHz, f.DopplerHz}, {&out.MarginDB, f.MarginDB}, {&out.ReceivedPowerDBm, f.ReceivedPowerDBm},
	} {
		*c.into = thinned(c.from, every)
	}
	m.mapOf(out, page, f, every)
	return out, nil
}

// mapOf adds what the map and the sky show beside the samples.
func (m *liveModel) mapOf(out *web.Detail, page *reportPage, f *downlink.Profile, every int) {
	craft, site := &m.plan.craft[page.Spacecraft], &m.plan.sites[page.Site]
	g := m.plan.ground(&reports.Pass{Profile: f, Horizon: site.horizon}, craft, site, page)
	track := outline(g.Track)
	out.LatitudeDeg, out.LongitudeDeg = thinned(track.LatitudeDeg, every), thinned(track.LongitudeDeg, every)
	out.Circle, out.Before, out.After = outline(g.Circle), outline(g.Before), outline(g.After)
	out.Horizon = web.Rim{AzimuthDeg: []web.Number{}, ElevationDeg: []web.Number{}}
	for _, d := range site.horizon {
		out.Horizon.AzimuthDeg = append(out.Horizon.AzimuthDeg, web.Number(d.AzimuthDeg))
		out.Horizon.ElevationDeg = append(out.Horizon.ElevationDeg, web.Number(d.ElevationDeg))
	}
	out.Sky = []web.Body{}
	for _, b := range g.Sky {
		out.Sky = append(out.Sky, web.Body{Name: b.Name, AzimuthDeg: web.Number(b.AzimuthDeg), ElevationDeg: web.Number(b.ElevationDeg)})
	}
}

func outline(list []reports.Place) web.Outline {
	out := web.Outline{LatitudeDeg: []web.Number{}, LongitudeDeg: []web.Number{}}
	for _, q := range list {
		out.LatitudeDeg = append(out.LatitudeDeg, web.Number(q.LatitudeDeg))
		out.LongitudeDeg = append(out.LongitudeDeg, web.Number(q.LongitudeDeg))
	}
	return out
}

// describe adds what is known of the link.
func (m *liveModel) describe(out *web.Detail, page *reportPage, best *modeOnPass) {
	out.RequiredMarginDB = web.Number(best.profile.RequiredMarginDB)
	if best.link.mode != nil {
		out.Mode, out.Bytes = best.link.mode.Name, web.Number(best.profile.Volume.ModeBytes)
	}
	for i := range page.link.modes {
		if mode := page.link.modes[i].mode; mode != nil {
			out.Modes = append(out.Modes, mode.Name)
		}
	}
	if a := page.link.antenna; a.Gain == nil && a.Diameter > 0 {
		out.DishM = web.Number(a.Diameter.Metres())
	}
	if t := page.link.transmitter; t.EIRP == nil {
		out.PowerW = web.Number(t.Power.Watts())
	}
	out.PointingErrorDeg = web.Number(page.link.antenna.PointingRMS.Degrees())
	if p := m.plan.scenario.Path; !p.ClearSky {
		out.ExceededPercent = web.Number(p.Exceedance.Percents())
	}
}

// thinned keeps every so manyth value, and the last.
func thinned[T ~float64](from []T, every int) []web.Number {
	out := []web.Number{}
	for i := 0; i < len(from); i += every {
		out = append(out, web.Number(from[i]))
	}
	if n := len(from); n > 0 && (n-1)%every != 0 {
		out = append(out, web.Number(from[n-1]))
	}
	return out
}

// outcome sums up a contact flown by a mode.
func outcome(c *chosenLink, f *downlink.Profile) web.Outcome {
	least, greatest := extremes(f)
	out := web.Outcome{
		Usable: true, Seconds: web.Number(f.Seconds[len(f.Seconds)-1]),
		LeastMarginDB: web.Number(least.Value), GreatestMarginDB: web.Number(greatest.Value), Bytes: web.Number(math.NaN()),
	}
	if c.mode != nil {
		out.Mode, out.Bytes = c.mode.Name, web.Number(f.Volume.ModeBytes)
	}
	return out
}
