package cli

import (
	"context"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/downlink/rateplan"
	"slantwise/downlink/sizing"
	"slantwise/orbit"
	"slantwise/station"
)

// dishStudy is the question of the scenario's sizing block, ready to be answered.
type dishStudy struct {
	scenario    *scenario.Scenario
	sizing      *scenario.Sizing
	spacecraft  *scenario.Spacecraft
	transmitter *downlink.Transmitter
	mode        *modem.Mode // whose margin and availability are meant
	kept        *orbit.KeptOrbit
	links       []chosenLink // by site, with the antenna of the site
	flight      *sizing.Flight
	places      []sizing.Place
	spec        sizing.Spec
	study       *sizing.Study
	notes       []downlink.Note
	step        time.Duration          // between samples; 0: the usual
	altitudes   map[float64]*dishStudy // the same for other altitudes in km, as far as they were asked for
}

func (d *dishStudy) note(kind downlink.NoteKind, format string, args ...any) {
	d.keep(downlink.Note{Kind: kind, Text: fmt.Sprintf(format, args...)})
}

// keep keeps a note once: sites take much for granted alike.
func (d *dishStudy) keep(n downlink.Note) {
	if !slices.Contains(d.notes, n) {
		d.notes = append(d.notes, n)
	}
}

// newDishStudy finds what the block names, flies the year and prepares the study.
func newDishStudy(ctx context.Context, env *Env, s *scenario.Scenario) (*dishStudy, error) {
	if s.Sizing == nil {
		return nil, inputErrorf("sizing: the scenario holds no such block; add one that names what is required, see slantwise dish --help")
	}
	d := &dishStudy{scenario: s, sizing: s.Sizing}
	if err := d.choose(); err != nil {
		return nil, err
	}
	var err error
	if d.kept, err = d.spacecraft.Kept(); err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", d.spacecraft.Name, err)}
	}
	if err := d.prepareSites(); err != nil {
		return nil, &InputError{Err: err}
	}
	if err := d.fly(ctx, env, d.kept); err != nil {
		return nil, err
	}
	return d, d.prepare()
}

// choose finds spacecraft, transmitter, mode, sites and antennas.
func (d *dishStudy) choose() error {
	s, z := d.scenario, d.sizing
	var err error
	if d.spacecraft, err = pick("sizing.spacecraft", z.Spacecraft, s.Spacecraft, spacecraftName); err != nil {
		return err
	}
	if d.transmitter, err = pick("sizing.transmitter", z.Transmitter, d.spacecraft.Transmitters, transmitterName); err != nil {
		return err
	}
	if len(d.transmitter.Modes) == 0 {
		return inputErrorf("transmitter %s: it has no mode, so that nothing comes down; give it one", d.transmitter.Name)
	}
	if err := d.chooseMode(); err != nil {
		return err
	}
	stations, err := pickMany("sizing.sites", z.Sites, s.Stations, stationName)
	if err != nil {
		return err
	}
	var template *station.Antenna
	for i := range stations {
		if a := antennaNamed(&stations[i], z.Antenna); a != nil && template == nil {
			template = a
		}
	}
	if template == nil {
		return inputErrorf("sizing.antenna: none of the sites has an antenna to be sized; name one in sizing.antenna")
	}
	for i := range stations {
		a := antennaNamed(&stations[i], z.Antenna)
		switch {
		case a == nil && len(z.Sites) == 0:
			continue // not meant
		case a == nil:
			d.note(downlink.Assumption, "station %s has no antenna %q: one like that of the first site that has it stands there", stations[i].Site.Name, template.Name)
			a = template
		}
		d.links = append(d.links, chosenLink{spacecraft: d.spacecraft, station: &stations[i], transmitter: d.transmitter, antenna: a, mode: d.mode})
	}
	return nil
}

// antennaNamed returns the antenna of a name, the only one for an empty name.
func antennaNamed(st *scenario.Station, name string) *station.Antenna {
	if name == "" && len(st.Antennas) == 1 {
		return &st.Antennas[0]
	}
	for i := range st.Antennas {
		if st.Antennas[i].Name == name {
			return &st.Antennas[i]
		}
	}
	return nil
}

// chooseMode takes the mode that is named, or the one that closes first.
func (d *dishStudy) chooseMode() error {
	if d.sizing.Mode != "" {
		var err error
		d.mode, err = pick("sizing.mode", d.sizing.Mode, d.transmitter.Modes, func(m *modem.Mode) string { return m.Name })
		return err
	}
	least := math.Inf(1)
	for i := range d.transmitter.Modes {
		m, err := d.need(&d.transmitter.Modes[i])
		if err != nil {
			return &InputError{Err: err}
		}
		if m.NeedDBHz < least {
			d.mode, least = &d.transmitter.Modes[i], m.NeedDBHz
		}
	}
	if n := len(d.transmitter.Modes); n > 1 {
		d.note(downlink.Assumption, "sizing.mode left out: margin and availability are those of mode %s, which closes first of %d", d.mode.Name, n)
	}
	return nil
}

func (d *dishStudy) need(m *modem.Mode) (rateplan.Mode, error) {
	r, err := m.Resolve()
	if err != nil {
		return rateplan.Mode{}, fmt.Errorf("mode %s: %w", m.Name, err)
	}
	return rateplan.NewMode(r, d.transmitter.ImplementationLoss, d.transmitter.RequiredMargin)
}

// prepareSites makes the link of each site under a clear sky and its path, for the
// smallest aperture of the range.
func (d *dishStudy) prepareSites() error {
	sky := newSkies(d.scenario)
	for i := range d.links {
		c := &d.links[i]
		p, err := d.place(sky, c, c.transmitter)
		if err != nil {
			return fmt.Errorf("station %s: %w", c.station.Site.Name, err)
		}
		d.places = append(d.places, p)
	}
	return nil
}

// place makes what a site's links are made of, for a transmitter that may differ from
// the scenario's.
func (d *dishStudy) place(sky *skies, c *chosenLink, tx *downlink.Transmitter) (sizing.Place, error) {
	smallest := *c.antenna
	if low := d.sizing.Range.Low; smallest.Diameter > low {
		smallest.Diameter = low
	}
	link := *c
	link.antenna, link.transmitter = &smallest, tx
	spec, err := link.bareSpec()
	if err != nil {
		return sizing.Place{}, err
	}
	c.refraction = link.refraction
	fine, err := sky.between(c.station, tx, &smallest, true)
	if err != nil {
		return sizing.Place{}, err
	}
	spec.Antenna, spec.PathModels, spec.NoiseModels, spec.ClearSky = c.antenna, fine.paths, fine.noise, true
	out := sizing.Place{Clear: spec}
	c.sky = fine
	if d.scenario.Path.ClearSky {
		return out, nil
	}
	under, err := sky.between(c.station, tx, &smallest, false)
	if err != nil {
		return sizing.Place{}, err
	}
	c.sky = under
	out.Weather, out.Statistics = under.path, &under.spec
	return out, nil
}

// fly flies the year on a kept orbit.
func (d *dishStudy) fly(ctx context.Context, env *Env, kept *orbit.KeptOrbit) error {
	s := d.scenario
	spec := sizing.FlightSpec{Orbit: kept, Earth: s.Earth, Start: s.Window.Start, Days: d.sizing.Days, Horizon: s.Horizon, Step: d.step}
	for i := range d.links {
		c := &d.links[i]
		link, err := downlink.NewLink(d.places[i].Clear)
		if err != nil {
			return &InputError{Err: fmt.Errorf("station %s: %w", c.station.Site.Name, err)}
		}
		c.link = link
		spec.Sites = append(spec.Sites, sizing.FlightSite{Site: &c.station.Site, Link: link, Keep: func(p *downlink.Profile) error {
			_, err := keepToLicences(s, c, p)
			return err
		}})
	}
	bar := env.startShares("flying the year")
	defer bar.stop()
	spec.Progress = bar.tell
	var err error
	if d.flight, err = sizing.Fly(ctx, spec); err != nil {
		if ctx.Err() != nil {
			return err
		}
		return &InputError{Err: fmt.Errorf("spacecraft %s: %w", d.spacecraft.Name, err)}
	}
	return nil
}

// prepare makes the study.
func (d *dishStudy) prepare() error {
	rates, err := newYearRates(d.transmitter, &d.spacecraft.RatePlan)
	if err != nil {
		return err
	}
	mode, err := d.need(d.mode)
	if err != nil {
		return &InputError{Err: err}
	}
	d.spec = sizing.Spec{Flight: d.flight, Places: d.places, Family: d.sizing.Family, Rates: rates, Settles: rates.settles(),
		Mode: mode, Margin: d.transmitter.RequiredMargin, Needs: d.sizing.Needs}
	if !math.IsNaN(d.sizing.Needs.Latency) {
		if d.spacecraft.Recorder == nil {
			return inputErrorf("sizing.requirements.latency_p95_h: spacecraft %s has no recorder, and without one nothing tells how old its data are; add the key recorder to it", d.spacecraft.Name)
		}
		d.spec.Latency = d.latency
	}
	if d.study, err = sizing.NewStudy(d.spec); err != nil {
		return &InputError{Err: err}
	}
	d.tell()
	return nil
}
