package cli

import (
	"fmt"
	"slices"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/tuning"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

type tuningOptions struct {
	spacecraft, station, transmitter, uplink string
	locked                                   string
	pass                                     time.Time
	residualHz, quantumHz                    float64
	every, listEvery                         time.Duration
	format                                   format
}

func newTuning(env *Env) *cobra.Command {
	var o tuningOptions
	cmd := &cobra.Command{
		Use:   "tuning",
		Short: "Frequency steps by which a receiver or a transmitter follows the Doppler shift of a pass",
		Long: `Write the fewest settings of a receiver that keep what is left of the Doppler shift
under a stated value: at which instant to set which frequency. With --uplink they are
those of the station's transmitter, so that the spacecraft receives its own frequency.
With --list-every both frequencies are listed at even steps instead.

--locked takes a transmitter as locked to its uplink, by the turnaround ratio of the
scenario: following for an uplink that is tuned so that the spacecraft hears its nominal
frequency, steady for one that stays at its nominal frequency, where the shift counts
both ways.

The pass is the first of the window, or with --pass UTC the one under way then or the
next. The error of the orbit, and what is not known of the oscillators, comes on top.`,
		Example: `  slantwise tuning --spacecraft "Wagtail 1" --station "Skerry Point" --transmitter X-band --residual-hz 5000
  slantwise tuning --spacecraft "Wagtail 1" --station "Skerry Point" --transmitter X-band --residual-hz 20000 --quantum-hz 1000 --every 5s
  slantwise tuning --spacecraft "Wagtail 1" --station "Skerry Point" --uplink command --residual-hz 500
  slantwise tuning --spacecraft "Wagtail 1" --station "Skerry Point" --transmitter X-band --uplink command --list-every 30s`,
		Args: noArgs,
	}
	fs := cmd.Flags()
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft")
	fs.StringVar(&o.station, "station", "", "`NAME` of the station")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the transmitter")
	fs.StringVar(&o.uplink, "uplink", "", "`NAME` of the uplink, in place of --transmitter or with --list-every beside it")
	fs.StringVar(&o.locked, "locked", "", "the transmitter is locked to its uplink, which is following or steady (a `WORD`; left out: its own oscillator)")
	addTime(fs, &o.pass, "pass", "the pass under way then, or the next one of the window")
	fs.Float64Var(&o.residualHz, "residual-hz", 0, "greatest difference in `HZ` between shift and setting")
	fs.Float64Var(&o.quantumHz, "quantum-hz", 0, "settings are whole multiples of so many `HZ` (left out: any setting)")
	fs.DurationVar(&o.every, "every", 0, "settings change on whole multiples of this `TIME`, UTC (left out: on any second of the pass)")
	fs.DurationVar(&o.listEvery, "list-every", 0, "in place of settings list the frequencies every so much `TIME` from AOS, and at LOS")
	addFormat(cmd, &o.format)
	cmd.RunE = func(cmd *cobra.Command, _ []string) error { return runTuning(env, &o) }
	return cmd
}

// check refuses flags that contradict each other.
func (o *tuningOptions) check() error {
	listed := o.listEvery != 0
	switch {
	case o.listEvery < 0 || listed && o.listEvery < time.Millisecond:
		return inputErrorf("--list-every: %v is not allowed; it must be at least 1ms", o.listEvery)
	case listed && (o.residualHz != 0 || o.quantumHz != 0 || o.every != 0):
		return inputErrorf("--list-every lists frequencies, --residual-hz, --quantum-hz and --every make settings; give one of the two")
	case !listed && o.residualHz == 0:
		return inputErrorf("--residual-hz: left out or 0; give the difference in Hz that the receiver bears, greater than 0")
	case !listed && o.transmitter != "" && o.uplink != "":
		return inputErrorf("settings are of a receiver or of a transmitter: give --transmitter or --uplink, or --list-every for both")
	case o.locked != "" && !slices.Contains(lockedWords, o.locked):
		return inputErrorf("--locked: %q is not allowed; it must be following or steady", o.locked)
	case o.locked != "" && o.uplink != "" && o.transmitter == "":
		return inputErrorf("--locked says what a transmitter is locked to; it has no effect on an uplink, so leave it out")
	}
	return nil
}

func runTuning(env *Env, o *tuningOptions) error {
	if err := o.check(); err != nil {
		return err
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	craft, err := pick("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	st, err := pick("station", o.station, s.Stations, stationName)
	if err != nil {
		return err
	}
	receive, send, err := o.carriers(craft)
	if err != nil {
		return err
	}
	eph, found, err := passesOver(s, craft, st)
	if err != nil {
		return err
	}
	i := slices.IndexFunc(found, func(p pass.Pass) bool { return !p.LOS.Before(o.pass) })
	if i < 0 {
		env.note("there is no such pass in the window %s to %s", utc(s.Window.Start), utc(s.Window.End))
	}
	var out *sheet
	switch {
	case o.listEvery > 0:
		out = frequencySheet(eph, st, receive, send, found, i, o.listEvery)
	case send != nil:
		out, err = settingSheet(eph, st, send, "sent", found, i, o)
	default:
		out, err = settingSheet(eph, st, receive, "received", found, i, o)
	}
	if err != nil {
		return &InputError{Err: err}
	}
	for _, c := range []*tunedCarrier{receive, send} {
		if c != nil {
			out.notes = append(out.notes, c.notes...)
		}
	}
	return out.write(env, o.format)
}

// carriers finds what is received and what is sent; one of them may be nil.
func (o *tuningOptions) carriers(craft *scenario.Spacecraft) (receive, send *tunedCarrier, err error) {
	if o.uplink != "" {
		u, err := pick("uplink", o.uplink, craft.Uplinks, uplinkName)
		if err != nil {
			return nil, nil, err
		}
		if send = sentCarrier(u); o.transmitter == "" {
			return nil, send, nil
		}
	}
	tx, err := pick("transmitter", o.transmitter, craft.Transmitters, transmitterName)
	if err != nil {
		return nil, nil, err
	}
	receive, err = receivedCarrier(craft, tx, o.locked)
	return receive, send, err
}

// settingSheet is the table of the fewest settings for pass i; without one it is empty.
func settingSheet(eph *orbit.Ephemeris, st *scenario.Station, c *tunedCarrier, what string, found []pass.Pass, i int, o *tuningOptions) (*sheet, error) {
	out := &sheet{name: "steps", columns: []sheetColumn{
		wordsAs("from_utc", "from UTC"), wordsAs("to_utc", "to UTC"), numbersAs("shift_hz", "shift Hz", 3),
		numbersAs(what+"_frequency_hz", what+" Hz", 3), numbersAs("residual_hz", "residual Hz", 3),
	}}
	if i < 0 {
		return out, nil
	}
	table, err := tuning.Table(shiftCourse(eph, st, c, &found[i]), tuning.Rule{
		Residual: unit.Frequency(o.residualHz), Quantum: unit.Frequency(o.quantumHz), Every: o.every,
	})
	for _, t := range table {
		out.rows = append(out.rows, []any{utc(t.From), utc(t.To), t.ShiftHz, c.nominal.Hertz() + t.ShiftHz, t.ResidualHz})
	}
	return out, err
}

// frequencySheet lists what is received and what is sent at even steps of pass i.
func frequencySheet(eph *orbit.Ephemeris, st *scenario.Station, receive, send *tunedCarrier, found []pass.Pass, i int, step time.Duration) *sheet {
	out := &sheet{name: "frequencies", columns: []sheetColumn{
		wordsAs("utc", "UTC"), numbersAs("elevation_deg", "elevation deg", 4), numbersAs("range_rate_km_s", "range rate km/s", 6),
		numbersAs("received_shift_hz", "received shift Hz", 3), numbersAs("received_frequency_hz", "received Hz", 3),
		numbersAs("sent_shift_hz", "sent shift Hz", 3), numbersAs("sent_frequency_hz", "sent Hz", 3),
	}}
	if i < 0 {
		return out
	}
	frame, p := st.Site.Frame(), &found[i]
	for t := p.AOS; ; t = t.Add(step) {
		if t.After(p.LOS) {
			t = p.LOS
		}
		look := frame.Look(eph.StateAt(max(0, min(eph.Seconds(t), eph.Span()))))
		row := []any{utc(t), look.Elevation.Degrees(), look.RangeRate.KilometresPerSecond()}
		for _, c := range []*tunedCarrier{receive, send} {
			if c == nil {
				row = append(row, none, none)
				continue
			}
			f := c.at(t, look.RangeRate)
			row = append(row, (f - c.nominal).Hertz(), f.Hertz())
		}
		if out.rows = append(out.rows, row); !t.Before(p.LOS) {
			return out
		}
	}
}

// shiftCourse is how far a carrier is off its nominal frequency along a pass, a sample a
// second.
func shiftCourse(eph *orbit.Ephemeris, st *scenario.Station, carrier *tunedCarrier, p *pass.Pass) tuning.Course {
	frame := st.Site.Frame()
	c := tuning.Course{Start: p.AOS}
	first, length := eph.Seconds(p.AOS), p.Duration().Seconds()
	step := sampleStep(p.Duration()).Seconds()
	for k := 0; ; k++ {
		at := min(float64(k)*step, length)
		look := frame.Look(eph.StateAt(max(0, min(first+at, eph.Span()))))
		c.Seconds = append(c.Seconds, at)
		c.ShiftHz = append(c.ShiftHz, (carrier.at(after(p.AOS, at), look.RangeRate) - carrier.nominal).Hertz())
		if at >= length {
			return c
		}
	}
}

// passesOver flies a spacecraft through the window and finds its passes over a station.
func passesOver(s *scenario.Scenario, craft *scenario.Spacecraft, st *scenario.Station) (*orbit.Ephemeris, []pass.Pass, error) {
	eph, err := s.Ephemeris(craft, s.Window.Start, s.Window.End, nil)
	if ended(err) {
		return nil, nil, nil // no passes, and the scenario's warning says why
	}
	if err != nil {
		return nil, nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", craft.Name, err)}
	}
	found, err := pass.Search(eph, &st.Site, pass.Window{From: s.Window.Start, To: s.Window.End}, s.Horizon)
	if err != nil {
		return nil, nil, &InputError{Err: err}
	}
	return eph, found, nil
}
