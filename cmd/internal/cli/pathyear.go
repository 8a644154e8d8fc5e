package cli

import (
	"context"
	"fmt"
	"math"
	"slices"
	"time"

	"github.com/spf13/pflag"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

// yearOptions asks for the statistics of a spacecraft's contacts.
type yearOptions struct {
	year bool
	days *float64
	mode string
	step time.Duration
}

// yearStep is the step between the samples of a contact: a low orbit moves half a
// degree in elevation.
const yearStep = 10 * time.Second

func (o *yearOptions) flags(fs *pflag.FlagSet) []optional {
	fs.BoolVar(&o.year, "year", false, "how often contacts suffer how much over an average year")
	fs.StringVar(&o.mode, "mode", "", "`NAME` of the transmitter's mode, with --year")
	addDuration(fs, &o.step, "step", yearStep, "between two samples of a contact, with --year")
	return []optional{{"days", "how many `DAYS` of contacts are flown, with --year (left out: 365)", &o.days}}
}

func (o *yearOptions) more() bool { return o.days != nil || o.mode != "" || o.step != yearStep }

// yearAnswer is what the statistics tell.
type yearAnswer struct {
	link   *chosenLink
	year   *downlink.Year
	days   float64
	passes int
	notes  []downlink.Note
}

func runPathYear(ctx context.Context, env *Env, o *pathOptions) error {
	if o.frequencyMHz != nil || o.elevationDeg != nil || o.tiltDeg != nil || o.diameterM != nil {
		return inputErrorf("--year takes frequency, polarisation and antenna from the scenario; give --spacecraft and --station")
	}
	days := 365.0
	if o.year.days != nil {
		if days = *o.year.days; !(days >= 1 && days <= 3600) {
			return inputErrorf("--days: %g d is not allowed; it must be 1 to 3600 d", days)
		}
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	if s.Path.ClearSky {
		return inputErrorf("path.clear_sky: a sky that is always clear has no statistics; leave it out")
	}
	s.Window.End = s.Window.Start.Add(time.Duration(days * 24 * float64(time.Hour))) // Sun and Moon are prepared for it, too
	// A year's statistics do not age with an element set: no flight, no error of the orbit.
	c, err := chooseLink(s, linkNames{spacecraft: o.spacecraft, station: o.station, transmitter: o.transmitter, antenna: o.antenna, mode: o.year.mode}, pass.Window{})
	if err != nil {
		return err
	}
	a := &yearAnswer{link: c, days: days}
	if err := a.fly(ctx, env, s, o.year.step); err != nil {
		return err
	}
	return a.write(env, o.format)
}

// chunk is how much of the year is flown at a time.
const chunk = 10 * 24 * time.Hour

// fly gathers the contacts and makes the statistics, on the kept orbit.
func (a *yearAnswer) fly(ctx context.Context, env *Env, s *scenario.Scenario, step time.Duration) error {
	kept, err := a.link.spacecraft.Kept()
	if err != nil {
		return &InputError{Err: fmt.Errorf("spacecraft %s: %w", a.link.spacecraft.Name, err)}
	}
	var contacts downlink.ContactCells
	var eph *orbit.Ephemeris
	from, end := s.Window.Start, s.Window.End
	bar := env.startProgress("days", int(a.days))
	defer bar.stop()
	for ; from.Before(end); from = from.Add(chunk) {
		if err := ctx.Err(); err != nil {
			return err
		}
		to := from.Add(chunk)
		if to.After(end) {
			to = end
		}
		if eph, err = kept.Ephemeris(from, to, s.Earth, eph); err != nil {
			return &InputError{Err: fmt.Errorf("spacecraft %s: %w", a.link.spacecraft.Name, err)}
		}
		if err := a.gather(&contacts, eph, s, step); err != nil {
			return err
		}
		bar.add(int(to.Sub(from).Hours() / 24))
	}
	if a.year, err = downlink.NewYear(a.link.clear, a.link.sky.spec, &contacts); err != nil {
		return &InputError{Err: err}
	}
	for _, n := range a.year.Notes() {
		if n.Kind != downlink.Default { // the scenario's come with their keys
			a.note(n)
		}
	}
	if f := a.link.transmitter.Frequency; s.Path.Ionosphere && s.Path.IonosphericScintillation == nil && f <= unit.Gigahertz {
		a.note(downlink.Note{Kind: downlink.Warning, Text: "ionospheric scintillation is not in the statistics: its table holds 0.1 to 1 % of the year alone; state a loss, and it counts all year"})
	}
	a.note(downlink.Note{Kind: downlink.Assumption, Text: keptText(kept) + fmt.Sprintf("; from %s for %g days", utc(s.Window.Start), a.days)})
	for _, n := range a.link.notes(s, true) {
		if n.Kind != downlink.Assumption {
			a.note(n)
		}
	}
	return nil
}

// keptText says what orbit a long statistic is flown on, and what that means.
func keptText(k *orbit.KeptOrbit) string {
	el := k.Elements()
	held := "node and perigee turn by the Earth's flattening"
	if k.SunSynchronous() {
		held = fmt.Sprintf("the node's mean local time is held at %.2f h (flattening alone would move it by %.1f min a year)",
			k.LocalTimeOfNode(el.Epoch).Degrees()/15, k.NodeDrift().DegreesPerSecond()*4*86400*365.25)
	}
	return fmt.Sprintf("orbit: element set %d of %s as a kept orbit, as one set does not carry SGP4 through a year: no drag, height and eccentricity held, %s; shares of time hold, the instants of single passes are no predictions",
		el.CatalogNumber, utc(el.Epoch), held)
}

// note keeps a note once: the path of the year and that of the link take much for
// granted alike.
func (a *yearAnswer) note(n downlink.Note) {
	if !slices.Contains(a.notes, n) {
		a.notes = append(a.notes, n)
	}
}

// gather adds the contacts of one chunk; a contact over its edge comes in two pieces.
func (a *yearAnswer) gather(into *downlink.ContactCells, eph *orbit.Ephemeris, s *scenario.Scenario, step time.Duration) error {
	w := pass.Window{From: eph.Reference(), To: eph.Time(eph.Span())}
	found, err := pass.Search(eph, &a.link.station.Site, w, s.Horizon)
	if err != nil {
		return &InputError{Err: err}
	}
	for i := range found {
		p := &found[i]
		if p.AOS.After(w.From) { // else its beginning was counted in the chunk before
			a.passes++
		}
		profile, err := a.link.clear.Profile(eph, p.AOS, p.LOS, step)
		if err != nil {
			return &InputError{Err: err}
		}
		into.Add(profile)
	}
	return nil
}

// scaled turns seconds or bytes of the days flown into those of a year.
func (a *yearAnswer) scaled(v float64) float64 { return v * 365.25 / a.days }

// yearFractions are the fractions of contact time that are told, in percent.
var yearFractions = []float64{50, 20, 10, 5, 3, 2, 1, 0.5, 0.3, 0.2, 0.1, 0.05, 0.03, 0.02, 0.01}

// yearMargins are the margins over the required one that are told, in dB.
var yearMargins = []float64{-3, -2, -1, 0, 1, 2, 3, 4, 6, 8, 10}

// attenuations returns the attenuation that is exceeded during each fraction; NaN
// where the percentages cannot tell.
func (a *yearAnswer) attenuations() []float64 {
	out := make([]float64, len(yearFractions))
	for i, p := range yearFractions {
		v, err := a.year.Attenuation(p / 100)
		out[i] = float64(v)
		if err != nil {
			out[i] = math.NaN()
		}
	}
	return out
}

// marginRow is how much of the contact time the margin is less than a value.
type marginRow struct {
	margin      float64
	year, month propagation.Span
	clear       float64
}

func (a *yearAnswer) margins() []marginRow {
	if a.link.mode == nil {
		return nil
	}
	out := make([]marginRow, len(yearMargins))
	for i, m := range yearMargins {
		year, month := a.year.UnderMargin(unit.DB(m))
		out[i] = marginRow{m, year, month, a.year.ClearUnderMargin(unit.DB(m))}
	}
	return out
}
