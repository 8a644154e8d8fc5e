package cli

import (
	"fmt"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/fluxdensity"
	"slantwise/downlink/licence"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

type licenceOptions struct {
	spacecraft, stations []string
	format               format
}

func newLicence(env *Env) *cobra.Command {
	var o licenceOptions
	cmd := &cobra.Command{
		Use:   "licence",
		Short: "What the scenario's licences do not allow, of transmitters and of passes",
		Long: `Hold every transmitter and every pass of the window to the scenario's licences: EIRP,
bandwidth and band of each transmitter, then for each pass the rules that take time from
its downlink, each with the time. Rules that cannot be checked, since what they are
about is not known, are listed as such. Without a row all is kept to. Elevations are
geometric.`,
		Example: `  slantwise licence --spacecraft "Wagtail 1" --format csv`,
		Args:    noArgs,
		RunE:    func(*cobra.Command, []string) error { return runLicence(env, &o) },
	}
	fs := cmd.Flags()
	fs.StringArrayVar(&o.spacecraft, "spacecraft", nil, "`NAME` of a spacecraft (again for more; left out: all)")
	fs.StringArrayVar(&o.stations, "station", nil, "`NAME` of a station (again for more; left out: all)")
	addFormat(cmd, &o.format)
	return cmd
}

func runLicence(env *Env, o *licenceOptions) error {
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	craft, err := pickMany("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	stations, err := pickMany("station", o.stations, s.Stations, stationName)
	if err != nil {
		return err
	}
	out := &sheet{name: "rules", columns: []sheetColumn{
		wordsAs("kind", "kind"), wordsAs("licence", "licence"), wordsAs("rule", "rule"), wordsAs("spacecraft", "spacecraft"), wordsAs("transmitter", "transmitter"),
		wordsAs("station", "station"), wordsAs("aos_utc", "AOS UTC"), wordsAs("from_utc", "from UTC"), wordsAs("to_utc", "to UTC"), numbersAs("seconds", "s", 3), wordsAs("found", "found"),
	}}
	if len(s.Licences) == 0 {
		env.note("the scenario holds no licence; see the key licence")
	}
	for i := range craft {
		for t := range craft[i].Transmitters {
			addBreaches(out, s, &craft[i], &craft[i].Transmitters[t])
		}
		addUplinkBreaches(out, s, &craft[i], stations)
		for k := range stations {
			if err := addBindings(out, s, &craft[i], &stations[k]); err != nil {
				return err
			}
		}
	}
	return out.write(env, o.format)
}

// licencesFor returns the licences that are about a transmitter.
func licencesFor(s *scenario.Scenario, craft, transmitter string) []licence.Licence {
	var out []licence.Licence
	for _, l := range s.Licences {
		if l.For(craft, transmitter) {
			out = append(out, l)
		}
	}
	return out
}

// keepToLicences keeps the volume of a pass to what the licences allow and returns what
// they take or what of the transmitter they do not allow.
func keepToLicences(s *scenario.Scenario, c *chosenLink, f *downlink.Profile) ([]downlink.Note, error) {
	licences := licencesFor(s, c.spacecraft.Name, c.transmitter.Name)
	if len(licences) == 0 {
		return nil, nil
	}
	course := licence.Course{Start: f.Start, Seconds: f.Seconds, AzimuthDeg: f.AzimuthDeg, ElevationDeg: f.ElevationDeg}
	kept, err := licence.Keep(licences, c.station.Site.Name, course, c.use())
	if err != nil {
		return nil, err
	}
	var spans []downlink.Interval
	for _, k := range kept.Spans {
		spans = append(spans, downlink.Interval{From: after(f.Start, k.From), To: after(f.Start, k.To)})
	}
	f.Permit(spans)
	var out []downlink.Note
	for _, b := range kept.Bindings {
		out = append(out, downlink.Note{Kind: downlink.Warning, Text: b.String() + " of the pass; volumes are without it"})
	}
	return append(out, breachNotes(licences, c.emissions())...), nil
}

// licensedAt returns what the licences do not allow at one instant: the rules that bind
// at the first of two geometries so many seconds apart, and what of the transmitter
// they do not allow.
func licensedAt(s *scenario.Scenario, c *chosenLink, g, later downlink.Geometry, seconds float64) ([]downlink.Note, error) {
	licences := licencesFor(s, c.spacecraft.Name, c.transmitter.Name)
	if len(licences) == 0 {
		return nil, nil
	}
	if seconds == 0 { // the orbit ends here: where it stands says enough
		later, seconds = g, 1
	}
	course := licence.Course{
		Start: g.Time, Seconds: []float64{0, seconds},
		AzimuthDeg:   []float64{g.Azimuth.Degrees(), later.Azimuth.Degrees()},
		ElevationDeg: []float64{g.Elevation.Degrees(), later.Elevation.Degrees()},
	}
	kept, err := licence.Keep(licences, c.station.Site.Name, course, c.use())
	if err != nil {
		return nil, err
	}
	var out []downlink.Note
	for _, b := range kept.Bindings {
		if b.Spans[0].From == 0 {
			out = append(out, downlink.Note{Kind: downlink.Warning, Text: fmt.Sprintf("licence %q does not allow this instant: %s", b.Licence, b.Rule)})
		}
	}
	return append(out, breachNotes(licences, c.emissions())...), nil
}

// breachNotes tells, each once, what of a transmitter its licences do not allow.
func breachNotes(licences []licence.Licence, emissions []licence.Emission) []downlink.Note {
	var out []downlink.Note
	told := map[string]bool{}
	for _, l := range licences {
		for _, e := range emissions {
			for _, b := range l.Breaches(e) {
				if !told[b.String()] {
					told[b.String()] = true
					out = append(out, downlink.Note{Kind: downlink.Warning, Text: b.String()})
				}
			}
		}
	}
	return out
}

// addBreaches holds a transmitter to its licences, once for all its modes: the rule is
// broken if one mode breaks it.
func addBreaches(out *sheet, s *scenario.Scenario, c *scenario.Spacecraft, t *downlink.Transmitter) {
	told := map[string]bool{}
	for _, l := range licencesFor(s, c.Name, t.Name) {
		for _, e := range licensedEmissions(t, greatestEIRP(t)) {
			for _, b := range l.Breaches(e) {
				kind := "breach"
				if b.Unknown {
					kind = "not checked"
				}
				if key := l.Name + b.String(); !told[key] {
					told[key] = true
					out.rows = append(out.rows, []any{kind, l.Name, b.Rule, c.Name, t.Name, "", "", "", "", none, b.Found})
				}
			}
		}
	}
}

// licensedEmissions returns what a licence asks of each mode, or of the carrier where
// there is none.
func licensedEmissions(t *downlink.Transmitter, greatest *unit.Level) []licence.Emission {
	base := licence.Emission{EIRP: greatest, Centre: t.Frequency}
	if len(t.Modes) == 0 {
		return []licence.Emission{base}
	}
	var out []licence.Emission
	for _, m := range t.Modes {
		r, err := m.Resolve()
		if err != nil {
			continue // the scenario was checked: all modes resolve
		}
		e := base
		e.Width = fluxdensity.FromTransmitter(t, &r).Width
		out = append(out, e)
	}
	return out
}

// use is what a licence asks of the link.
func (c *chosenLink) use() licence.Use {
	if c.uplink != nil {
		return licence.Uplink
	}
	return licence.Downlink
}

// emissions are those of the end of the link that sends.
func (c *chosenLink) emissions() []licence.Emission {
	if rad, ok := c.radiation(); ok {
		return licensedEmissions(c.transmitter, &rad.EIRP)
	}
	return licensedEmissions(c.transmitter, greatestEIRP(c.transmitter))
}

// greatestEIRP returns the greatest EIRP in any direction that is known; nil where an
// EIRP holds toward the station alone.
func greatestEIRP(t *downlink.Transmitter) *unit.Level {
	if t.EIRP != nil {
		if t.EIRPIsGreatest {
			return t.EIRP
		}
		return nil
	}
	peak := t.Pattern.PeakGain
	switch t.Pattern.Kind {
	case downlink.CosinePower:
		if b := t.Pattern.BackLobe; b != nil {
			peak = max(peak, *b)
		}
	case downlink.GainTable:
		peak = t.Pattern.Table[0].Gain
		for _, p := range t.Pattern.Table {
			peak = max(peak, p.Gain)
		}
	}
	level := t.Power.Minus(t.LineLoss).Plus(peak)
	return &level
}

// addBindings lists what licences take from the passes of a spacecraft over a station.
func addBindings(out *sheet, s *scenario.Scenario, c *scenario.Spacecraft, st *scenario.Station) error {
	if len(s.Licences) == 0 || len(c.Transmitters)+len(c.Uplinks) == 0 {
		return nil
	}
	eph, found, err := passesOver(s, c, st)
	if err != nil {
		return err
	}
	for i := range found {
		p := &found[i]
		for _, end := range endsOver(c, st) {
			name := end.name
			kept, err := licence.Keep(licencesFor(s, c.Name, name), st.Site.Name, passCourse(eph, st, p), end.use)
			if err != nil {
				return err
			}
			for _, b := range kept.Bindings {
				for _, span := range b.Spans {
					out.rows = append(out.rows, []any{"binds", b.Licence, b.Rule, c.Name, name, st.Site.Name, utc(p.AOS),
						utc(after(p.AOS, span.From)), utc(after(p.AOS, span.To)), span.To - span.From, ""})
				}
			}
		}
	}
	return nil
}

func after(t time.Time, seconds float64) time.Time {
	return t.Add(time.Duration(seconds * float64(time.Second)))
}

// passCourse is where the spacecraft stands during a pass, a sample a second, by its
// geometric elevation.
func passCourse(eph *orbit.Ephemeris, st *scenario.Station, p *pass.Pass) licence.Course {
	frame := st.Site.Frame()
	c := licence.Course{Start: p.AOS}
	first, length := eph.Seconds(p.AOS), p.Duration().Seconds()
	step := sampleStep(p.Duration()).Seconds()
	for k := 0; ; k++ {
		at := min(float64(k)*step, length)
		look := frame.Look(eph.StateAt(max(0, min(first+at, eph.Span()))))
		c.Seconds = append(c.Seconds, at)
		c.AzimuthDeg = append(c.AzimuthDeg, look.Azimuth.Degrees())
		c.ElevationDeg = append(c.ElevationDeg, look.Elevation.Degrees())
		if at >= length {
			return c
		}
	}
}
