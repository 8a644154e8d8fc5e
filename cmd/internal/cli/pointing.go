package cli

import (
	"context"
	"fmt"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
	"slantwise/station"
)

type pointingOptions struct {
	spacecraft, station, transmitter string
	antenna                          string
	axes                             bool
	from, to                         time.Time
	step                             time.Duration
	plusMinus                        bool
	format                           format
}

func newPointing(env *Env) *cobra.Command {
	var o pointingOptions
	cmd := &cobra.Command{
		Use:   "pointing",
		Short: "Write where an antenna must point, instant by instant",
		Long: `Write azimuth, elevation, range and their rates for every step from one instant to
another, both included (the last step may be shorter), also below the horizon and
outside the scenario's window. Rates come from the orbit's own velocity. Azimuth
counts from true north; apparent elevation is that of the refracted ray (ITU-R P.834),
and is empty where no ray arrives. Doppler shift and received frequency are those of
the transmitter's carrier, to first order, and empty where there is no transmitter.

Where the scenario states position_uncertainty, the table and the JSON tell what the
orbit's error does to the direction and the frequency; --plus-minus asks for it in the
CSV, too, and takes a rule by the age of the element set where none is stated.

--axes adds where the axes of the antenna's mount are commanded, continuous in the
range of its cable and within its rates: turns that the mount cannot follow are slewed
ahead where that loses least. The span is planned as a whole, so ask for a pass.`,
		Example: `  slantwise pointing --spacecraft "Wagtail 1" --station "Skerry Point" \
    --from 2026-09-15T00:50:00Z --to 2026-09-15T01:00:00Z --step 500ms --format csv
  slantwise pointing --spacecraft "Wagtail 1" --station "Skerry Point" \
    --from 2026-09-15T00:50:00Z --to 2026-09-15T01:00:00Z --step 60s --plus-minus
  slantwise pointing --spacecraft "Fulmar 1" --station "Tussock Bay" --axes \
    --from 2026-09-15T07:04:02Z --to 2026-09-15T07:18:00Z --step 10s`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runPointing(cmd.Context(), env, o) },
	}
	fs := cmd.Flags()
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft")
	fs.StringVar(&o.station, "station", "", "`NAME` of the station")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the transmitter whose carrier is received")
	addTime(fs, &o.from, "from", "first instant")
	addTime(fs, &o.to, "to", "last instant")
	addDuration(fs, &o.step, "step", time.Second, "between two rows, whole milliseconds")
	fs.BoolVar(&o.plusMinus, "plus-minus", false, "with the plus-minus by the orbit's error, in three more columns")
	fs.BoolVar(&o.axes, "axes", false, "with the angles of the axes of the antenna's mount, in five more columns")
	fs.StringVar(&o.antenna, "antenna", "", "`NAME` of the antenna whose mount it is, with --axes")
	addFormat(cmd, &o.format)
	return cmd
}

// mostTableRows is how many rows a table may have, which is laid out in memory.
const mostTableRows = 200_000

func (o *pointingOptions) check() error {
	switch {
	case o.from.IsZero():
		return inputErrorf("--from: left out; give the first instant in UTC, as in 2026-03-10T14:05:00Z")
	case o.to.IsZero():
		return inputErrorf("--to: left out; give the last instant in UTC, as in 2026-03-10T14:05:00Z")
	case o.to.Before(o.from):
		return inputErrorf("--to: %s lies before --from, %s; give the earlier instant first", utc(o.to), utc(o.from))
	}
	for name, v := range map[string]time.Duration{
		"from": time.Duration(o.from.Nanosecond()), "to": time.Duration(o.to.Nanosecond()), "step": o.step,
	} {
		if v%time.Millisecond != 0 {
			return inputErrorf("--%s: there is a fraction of a millisecond in it; instants are written to the millisecond, so give whole ones", name)
		}
	}
	if n := o.to.Sub(o.from) / o.step; o.format == formatTable && n > mostTableRows {
		return inputErrorf("--step: %v gives a table of %d rows, more than %d; take a longer step, or --format csv", o.step, n, mostTableRows)
	}
	return nil
}

// pointing computes the rows.
type pointing struct {
	spacecraft  *scenario.Spacecraft
	station     *scenario.Station
	transmitter *downlink.Transmitter // nil: none
	elements    elements.Chosen
	flown       *orbitHead
	frame       station.Frame
	refraction  *station.Refraction
	ephemeris   *orbit.Ephemeris
	from, to    time.Time
	step        time.Duration
	sure        *pointingSure // nil: nothing is known of it
	axes        *pointingAxes // nil: not asked for
}

// pointingRow is where the antenna points at one instant.
type pointingRow struct {
	at   time.Time
	look station.Look
	// What does not exist is not ok.
	apparent   unit.Angle
	apparentOK bool
	light      orbit.Light
	state      orbit.State
}

func runPointing(ctx context.Context, env *Env, o pointingOptions) error {
	if err := o.check(); err != nil {
		return err
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	p, err := newPointingRows(s, o)
	if err != nil {
		return err
	}
	if err := p.sureOf(env, s, &o); err != nil {
		return err
	}
	if err := p.axesOf(env, &o); err != nil {
		return err
	}
	middle := o.from.Add(o.to.Sub(o.from) / 2)
	p.flown = newOrbitHead(p.spacecraft, p.elements, middle)
	if p.flown.kind.HasEpoch() {
		age, side := p.flown.elements.Age, "before"
		if age < 0 {
			side = "after"
		}
		env.note("the %s of %s has the epoch %s, %s days %s the middle of the span", p.flown.kind, printable(p.spacecraft.Name),
			utc(p.elements.Epoch), fixed(age.Abs().Hours()/24, 2), side)
	} else {
		env.note("%s flies on the %s", printable(p.spacecraft.Name), printable(p.flown.String()))
	}
	if p.elements.Caution != "" {
		env.note("warning: %s", printable(p.elements.Caution))
	}
	switch o.format {
	case formatCSV:
		return p.writeCSV(ctx, env.Out, o.plusMinus)
	case formatJSON:
		return p.writeJSON(ctx, env.Out)
	}
	return p.writeTable(ctx, env)
}

// newPointingRows picks what is named and propagates the orbit.
func newPointingRows(s *scenario.Scenario, o pointingOptions) (*pointing, error) {
	p := &pointing{from: o.from, to: o.to, step: o.step}
	var err error
	if p.spacecraft, err = pick("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName); err != nil {
		return nil, err
	}
	if p.station, err = pick("station", o.station, s.Stations, stationName); err != nil {
		return nil, err
	}
	if o.transmitter != "" || len(p.spacecraft.Transmitters) > 0 {
		if p.transmitter, err = pick("transmitter", o.transmitter, p.spacecraft.Transmitters, transmitterName); err != nil {
			return nil, err
		}
	}
	p.frame = p.station.Site.Frame()
	if p.refraction, err = station.NewRefraction(p.station.Site.HeightAboveSea()); err != nil {
		return nil, &InputError{Err: err}
	}
	end := o.to.Add(time.Second) // a span of no length has no knots to look between
	p.elements = s.ElementsOver(p.spacecraft, o.from, end)
	if p.ephemeris, err = s.EphemerisAt(p.spacecraft, o.from, o.to); err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", p.spacecraft.Name, err)}
	}
	return p, nil
}

// rows calls do for every instant, in order, until it fails or ctx ends.
func (p *pointing) rows(ctx context.Context, do func(r *pointingRow) error) error {
	for i := 0; ; i++ {
		if i%1000 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		at := p.from.Add(time.Duration(i) * p.step)
		last := !at.Before(p.to)
		if last {
			at = p.to
		}
		r := p.row(at)
		if err := do(&r); err != nil || last {
			return err
		}
	}
}

func (p *pointing) row(at time.Time) pointingRow {
	s := p.ephemeris.Seconds(at)
	state := p.ephemeris.StateAt(s)
	r := pointingRow{at: at, state: state, look: p.frame.Look(state), light: p.ephemeris.LightAt(s)}
	r.apparent, r.apparentOK = p.refraction.Apparent(r.look.Elevation)
	return r
}

// shift returns the Doppler shift and the frequency that is received, in Hz, to first
// order: f - f ṙ/c, and where the transmitter's oscillator is off, by that more.
func (p *pointing) shift(r *pointingRow) (shift, received float64) {
	f := p.transmitter.Frequency.Hertz()
	shift = -f * float64(r.look.RangeRate) / unit.SpeedOfLight
	return shift, f + p.transmitter.Oscillator.OffsetAt(r.at).Hertz() + shift
}
