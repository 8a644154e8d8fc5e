package cli

import (
	"context"
	"fmt"
	"math"
	"path/filepath"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/reports"
)

// load works out one page.
func (p *reportPlan) load(ctx context.Context, i int) (*reports.Pass, error) {
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	page := &p.pages[i]
	craft, site := &p.craft[page.Spacecraft], &p.sites[page.Site]
	el := craft.Elements
	out := &reports.Pass{
		Spacecraft: craft.Name, Site: &site.Site, Horizon: site.horizon, Pass: page.Pass,
		Elements: reports.Elements{
			Name: el.Name, CatalogNumber: el.CatalogNumber, Epoch: el.Epoch, Age: el.Elements.Age(page.AOS), Source: el.Source,
		},
	}
	if !craft.Orbit.HasNumber() {
		out.Elements.InPlace, out.Elements.NoEpoch = newOrbitHead(craft.Spacecraft, el, page.AOS).String(), !craft.Orbit.HasEpoch()
	}
	// Only the file's name: where it lies on this machine is nobody's business.
	if out.Elements.Source.File != "" {
		out.Elements.Source.File = filepath.Base(out.Elements.Source.File)
	}
	p.addMeasured(out, craft, site, page)
	out.LinkSets = p.linkSets(page)
	step := sampleStep(page.Duration())
	if page.link == nil {
		return out, p.addGeometry(out, craft, site, page)
	}
	best, err := page.bestMode(p.scenario, craft, step)
	if untold(err) {
		about := fmt.Sprintf("transmitter %s, antenna %s", page.link.transmitter.Name, page.link.antenna.Name)
		out.Notes = []reports.Note{{Kind: reports.Warning, About: about, Text: "no budget: " + err.Error()}}
		return out, p.addGeometry(out, craft, site, page)
	}
	if err != nil {
		return nil, fmt.Errorf("%s over %s: %w", craft.Name, site.Site.Name, err)
	}
	out.Profile, out.Notes = best.profile, p.pageNotes(page, best.link)
	out.Ground = p.ground(out, craft, site, page)
	if out.Surety, err = p.surety(craft, site, page, best); err != nil {
		return nil, fmt.Errorf("%s over %s: %w", craft.Name, site.Site.Name, err)
	}
	for _, n := range best.limits {
		out.Notes = append(out.Notes, reports.Note{Kind: noteKinds[n.Kind], About: "limits", Text: n.Text})
	}
	if out.Radio, err = reportRadio(p.scenario, craft, page, best); err != nil {
		return nil, fmt.Errorf("%s over %s: %w", craft.Name, site.Site.Name, err)
	}
	out.Radio.Mount = reportMount(best.mount, best.profile)
	if err := p.addRates(out, craft, page, best); err != nil {
		return nil, fmt.Errorf("%s over %s: %w", craft.Name, site.Site.Name, err)
	}
	if err := p.addUplinks(out, craft, page); err != nil {
		return nil, fmt.Errorf("%s over %s, uplink: %w", craft.Name, site.Site.Name, err)
	}
	return out, nil
}

// addGeometry fills a page that has no budget of a downlink.
func (p *reportPlan) addGeometry(out *reports.Pass, craft *reportCraft, site *reportSite, page *reportPage) error {
	var err error
	if out.Surety, err = p.surety(craft, site, page, nil); untold(err) {
		out.Notes = append(out.Notes, reports.Note{Kind: reports.Warning, About: "plus-minus", Text: err.Error()})
	} else if err != nil {
		return fmt.Errorf("%s over %s: %w", craft.Name, site.Site.Name, err)
	}
	out.Profile = geometryProfile(craft, site, page.AOS, page.LOS, sampleStep(page.Duration()))
	out.Ground = p.ground(out, craft, site, page)
	out.Notes = append(out.Notes, p.pageNotes(page, nil)...)
	if err := p.addUplinks(out, craft, page); err != nil {
		return fmt.Errorf("%s over %s, uplink: %w", craft.Name, site.Site.Name, err)
	}
	return nil
}

// mostReportSamples is how many samples a page has, about: a second apart up to two
// hours, so that a page over days stays a page.
const mostReportSamples = 7200

// sampleStep returns the whole seconds between the samples of a pass.
func sampleStep(length time.Duration) time.Duration {
	return max(time.Second, time.Duration(math.Ceil(length.Seconds()/mostReportSamples))*time.Second)
}

// geometryProfile fills the columns that need no radio.
func geometryProfile(craft *reportCraft, site *reportSite, aos, los time.Time, step time.Duration) *downlink.Profile {
	f := &downlink.Profile{Start: aos}
	length := los.Sub(aos).Seconds()
	first := craft.ephemeris.Seconds(aos)
	for k := 0; ; k++ {
		s := min(float64(k)*step.Seconds(), length)
		look := site.frame.Look(craft.ephemeris.StateAt(min(first+s, craft.ephemeris.Span())))
		apparent := math.NaN()
		if a, ok := site.refraction.Apparent(look.Elevation); ok {
			apparent = a.Degrees()
		}
		f.Seconds = append(f.Seconds, s)
		f.AzimuthDeg = append(f.AzimuthDeg, look.Azimuth.Degrees())
		f.ElevationDeg = append(f.ElevationDeg, look.Elevation.Degrees())
		f.ApparentElevationDeg = append(f.ApparentElevationDeg, apparent)
		f.RangeKm = append(f.RangeKm, look.Range.Kilometres())
		f.RangeRateKmS = append(f.RangeRateKmS, look.RangeRate.KilometresPerSecond())
		if s >= length {
			return f
		}
	}
}

// reportRadio works out what the page says of the link beside the profile.
func reportRadio(s *scenario.Scenario, craft *reportCraft, page *reportPage, best *modeOnPass) (*reports.Radio, error) {
	c, f := best.link, best.profile
	r := &reports.Radio{Transmitter: c.transmitter.Name, Antenna: c.antenna.Name, Frequency: c.link.Frequency(), Modes: best.results}
	if c.mode != nil {
		r.Mode, r.ModeText = c.mode.Name, c.mode.Modulation+", "+c.mode.Coding
	}
	r.Least, r.Greatest = extremes(f)
	r.AchievableBytes, r.ModeBytes = f.VolumeSoFar()
	for _, at := range []struct {
		time time.Time
		into *downlink.Budget
	}{{page.AOS, &r.AOS}, {page.Culmination, &r.Culmination}, {r.Least.Time, &r.LeastMargin}} {
		if at.time.IsZero() {
			continue
		}
		b, err := c.budgetAt(craft, at.time)
		if err != nil {
			return nil, err
		}
		*at.into = *b
	}
	r.Sights = sightsOf(c.link, craft, page)
	return r, addPath(r, s, craft, page, best)
}

// sightsOf tells how the antenna sees the station at AOS, culmination and LOS.
func sightsOf(l *downlink.Link, craft *reportCraft, page *reportPage) []reports.Sight {
	var out []reports.Sight
	e := craft.ephemeris
	for _, at := range []struct {
		name string
		time time.Time
	}{{"AOS", page.AOS}, {"culmination", page.Culmination}, {"LOS", page.LOS}} {
		if s, ok := l.Sightline(at.time, e.StateAt(max(0, min(e.Seconds(at.time), e.Span())))); ok {
			out = append(out, reports.Sight{Name: at.name, Sightline: s})
		}
	}
	return out
}

// extremes returns the least and the greatest margin of a profile; NaN and no time
// where it has none.
func extremes(f *downlink.Profile) (least, greatest reports.Moment) {
	least.Value, greatest.Value = math.NaN(), math.NaN()
	for i, m := range f.MarginDB {
		if math.IsNaN(m) || math.IsInf(m, 0) {
			continue
		}
		at := f.Start.Add(time.Duration(f.Seconds[i] * float64(time.Second)))
		if !(m >= least.Value) {
			least = reports.Moment{Value: m, Time: at}
		}
		if !(m <= greatest.Value) {
			greatest = reports.Moment{Value: m, Time: at}
		}
	}
	return least, greatest
}
