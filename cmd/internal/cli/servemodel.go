package cli

import (
	"context"
	"fmt"
	"html/template"
	"math"
	"path/filepath"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/cmd/internal/web"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// mostNext is how many contacts to come the page shows.
const mostNext = 12

// liveModel answers the live page for one reading of the scenario.
type liveModel struct {
	request  scenario.Request // that the scenario was read by
	plan     *reportPlan
	contacts []web.Contact // as plan.pages
	places   map[string]int
	flights  liveFlights
	foot     template.HTML
}

func newLiveModel(ctx context.Context, request scenario.Request, s *scenario.Scenario) (*liveModel, error) {
	plan, err := planReport(ctx, s, reportOptions{})
	if err != nil {
		return nil, err
	}
	m := &liveModel{request: request, plan: plan, contacts: []web.Contact{}, places: map[string]int{}}
	if m.foot, err = liveFoot(plan); err != nil {
		return nil, err
	}
	for i := range plan.pages {
		p := &plan.pages[i]
		c := web.Contact{
			ID:         fmt.Sprintf("%d-%d-%d", p.Spacecraft, p.Site, p.AOS.UnixMilli()),
			Spacecraft: plan.craft[p.Spacecraft].Name, Station: plan.sites[p.Site].Site.Name,
			AOS: p.AOS, Culmination: p.Culmination, LOS: p.LOS,
			AOSAzimuthDeg: web.Number(p.AOSAzimuth.Degrees()), LOSAzimuthDeg: web.Number(p.LOSAzimuth.Degrees()),
			MaxElevationDeg: web.Number(p.MaxElevation.Degrees()), MinimumRangeKm: web.Number(p.MinRange.Kilometres()),
			MinimumElevation: web.Number(plan.sites[p.Site].Site.MinimumElevation.Degrees()),
		}
		if p.link != nil {
			c.Transmitter, c.Antenna = p.link.transmitter.Name, p.link.antenna.Name
		}
		for n := 1; ; n++ { // a pass has a contact for each of its links
			id := fmt.Sprintf("%s-%d", c.ID, n)
			if _, taken := m.places[id]; !taken {
				c.ID, m.places[id] = id, i
				break
			}
		}
		m.contacts = append(m.contacts, c)
	}
	return m, nil
}

// Contacts lists those of the window, by AOS.
func (m *liveModel) Contacts() []web.Contact { return m.contacts }

// At tells what is at an instant.
func (m *liveModel) At(t time.Time) (*web.State, error) {
	s := m.plan.scenario
	out := &web.State{
		Scenario: filepath.Base(s.Label), WindowFrom: s.Window.Start, WindowTo: s.Window.End, CanSave: !s.Demo,
		Spacecraft: []web.Craft{}, Stations: []web.Place{}, Next: []web.Contact{}, Signals: []web.Signal{},
	}
	sun := directionPlace(orbit.SunPosition(t, s.Earth).Unit())
	out.SunLatitudeDeg, out.SunLongitudeDeg = web.Number(sun.LatitudeDeg), web.Number(sun.LongitudeDeg)
	for i := range m.plan.craft {
		out.Spacecraft = append(out.Spacecraft, craftAt(&m.plan.craft[i], t))
	}
	for i := range m.plan.sites {
		site := &m.plan.sites[i].Site
		out.Stations = append(out.Stations, web.Place{Name: site.Name, LatitudeDeg: web.Number(site.Latitude.Degrees()), LongitudeDeg: web.Number(site.Longitude.Degrees())})
	}
	for i := range m.contacts {
		c := &m.contacts[i]
		if !c.LOS.After(t) {
			continue
		}
		if c.AOS.After(t) {
			if len(out.Next) < mostNext {
				out.Next = append(out.Next, *c)
			}
			continue
		}
		out.Next = append(out.Next, *c)
		signal, err := m.signal(i, t)
		if err != nil {
			return nil, err
		}
		out.Signals = append(out.Signals, *signal)
	}
	return out, nil
}

// craftAt tells where a spacecraft stands over the Earth.
func craftAt(c *reportCraft, t time.Time) web.Craft {
	nan := web.Number(math.NaN())
	out := web.Craft{
		Name: c.Name, Epoch: c.Elements.Epoch, AgeDays: web.Number(c.Elements.Elements.Age(t).Hours() / 24),
		LatitudeDeg: nan, LongitudeDeg: nan, RadiusKm: nan,
	}
	if c.ephemeris == nil {
		return out
	}
	state, err := c.ephemeris.At(t)
	if err != nil { // the orbit is not known then
		return out
	}
	below := station.PlaceBelow(state.Position)
	out.LatitudeDeg, out.LongitudeDeg = web.Number(below.Latitude.Degrees()), web.Number(below.Longitude.Degrees())
	out.RadiusKm = web.Number(unit.Length(state.Position.Norm()).Kilometres())
	out.Light = c.ephemeris.LightAt(c.ephemeris.Seconds(t)).String()
	return out
}

// flight flies a contact by the mode that brings the most.
func (m *liveModel) flight(i int) (*modeOnPass, error) {
	page := &m.plan.pages[i]
	if page.link == nil {
		return nil, nil
	}
	f := m.flights.of(i)
	f.once.Do(func() {
		f.best, f.err = page.bestMode(m.plan.scenario, &m.plan.craft[page.Spacecraft], sampleStep(page.Duration()))
	})
	return f.best, f.err
}

// signal tells what is expected of a contact under way.
func (m *liveModel) signal(i int, t time.Time) (*web.Signal, error) {
	page := &m.plan.pages[i]
	craft, site := &m.plan.craft[page.Spacecraft], &m.plan.sites[page.Site]
	e := craft.ephemeris
	look := site.frame.Look(e.StateAt(max(0, min(e.Seconds(t), e.Span()))))
	nan := web.Number(math.NaN())
	out := &web.Signal{
		ID: m.contacts[i].ID, AzimuthDeg: web.Number(look.Azimuth.Degrees()), ElevationDeg: web.Number(look.Elevation.Degrees()),
		RangeKm: web.Number(look.Range.Kilometres()), RangeRateKmS: web.Number(look.RangeRate.KilometresPerSecond()),
		DopplerHz: nan, ReceivedPowerDBm: nan, CN0DBHz: nan, EbN0DB: nan, MarginDB: nan, MarginOverDB: nan, Notes: []string{},
	}
	best, err := m.flight(i)
	if untold(err) {
		out.Notes = append(out.Notes, "no budget: "+err.Error())
		return out, nil
	}
	if err != nil || best == nil {
		return out, err
	}
	b, err := best.link.budgetAt(craft, t)
	if err != nil {
		return nil, err
	}
	if best.link.mode != nil {
		out.Mode = best.link.mode.Name
	}
	out.DopplerHz = web.Number(best.link.link.Doppler(look.RangeRate).Hertz())
	out.ReceivedPowerDBm, out.CN0DBHz, out.EbN0DB = web.Number(b.ReceivedPowerDBm), web.Number(b.CN0), web.Number(b.EbN0)
	out.MarginDB, out.MarginOverDB = web.Number(b.Margin), web.Number(b.MarginOver)
	out.Notes = append(out.Notes, b.Cautions...)
	for _, n := range best.limits {
		out.Notes = append(out.Notes, n.Text)
	}
	return out, nil
}
