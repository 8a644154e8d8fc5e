package cli

import (
	"fmt"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/tuning"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

type tuningOptions struct {
	spacecraft, station, transmitter string
	pass                             time.Time
	residualHz, quantumHz            float64
	every                            time.Duration
	format                           format
}

func newTuning(env *Env) *cobra.Command {
	var o tuningOptions
	cmd := &cobra.Command{
		Use:   "tuning",
		Short: "Frequency steps by which a receiver follows the Doppler shift of a pass",
		Long: `Write the fewest settings of a receiver that keep what is left of the Doppler shift
under a stated value: at which instant to set which frequency. The pass is the first of
the window, or with --pass UTC the one under way then or the next. The error of the
orbit and of the oscillators comes on top.`,
		Example: `  slantwise tuning --spacecraft "Wagtail 1" --station "Skerry Point" --transmitter X-band --residual-hz 5000
  slantwise tuning --spacecraft "Wagtail 1" --station "Skerry Point" --transmitter X-band --residual-hz 20000 --quantum-hz 1000 --every 5s`,
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runTuning(env, &o) },
	}
	fs := cmd.Flags()
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft")
	fs.StringVar(&o.station, "station", "", "`NAME` of the station")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the transmitter")
	addTime(fs, &o.pass, "pass", "the pass under way then, or the next one of the window")
	fs.Float64Var(&o.residualHz, "residual-hz", 0, "greatest difference in `HZ` between shift and setting")
	fs.Float64Var(&o.quantumHz, "quantum-hz", 0, "settings are whole multiples of so many `HZ` (left out: any setting)")
	fs.DurationVar(&o.every, "every", 0, "settings change on whole multiples of this `TIME`, UTC (left out: on any second of the pass)")
	addFormat(cmd, &o.format)
	return cmd
}

func runTuning(env *Env, o *tuningOptions) error {
	if o.residualHz == 0 {
		return inputErrorf("--residual-hz: left out or 0; give the difference in Hz that the receiver bears, greater than 0")
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
	tx, err := pick("transmitter", o.transmitter, craft.Transmitters, transmitterName)
	if err != nil {
		return err
	}
	out := &sheet{name: "steps", columns: []sheetColumn{
		wordsAs("from_utc", "from UTC"), wordsAs("to_utc", "to UTC"), numbersAs("shift_hz", "shift Hz", 3),
		numbersAs("received_frequency_hz", "received Hz", 3), numbersAs("residual_hz", "residual Hz", 3),
	}}
	table, err := tuningTable(s, craft, st, tx, o)
	if err != nil {
		return err
	}
	if table == nil {
		env.note("there is no such pass in the window %s to %s", utc(s.Window.Start), utc(s.Window.End))
	}
	for _, t := range table {
		out.rows = append(out.rows, []any{utc(t.From), utc(t.To), t.ShiftHz, tx.Frequency.Hertz() + t.ShiftHz, t.ResidualHz})
	}
	return out.write(env, o.format)
}

// tuningTable flies the pass and tunes it; nil: there is no pass.
func tuningTable(s *scenario.Scenario, craft *scenario.Spacecraft, st *scenario.Station, tx *downlink.Transmitter, o *tuningOptions) ([]tuning.Step, error) {
	eph, found, err := passesOver(s, craft, st)
	if err != nil {
		return nil, err
	}
	for i := range found {
		if found[i].LOS.Before(o.pass) {
			continue
		}
		table, err := tuning.Table(shiftCourse(eph, st, tx, &found[i]), tuning.Rule{
			Residual: unit.Frequency(o.residualHz), Quantum: unit.Frequency(o.quantumHz), Every: o.every,
		})
		if err != nil {
			return nil, &InputError{Err: err}
		}
		return table, nil
	}
	return nil, nil
}

// shiftCourse is the Doppler shift of a pass, a sample a second.
func shiftCourse(eph *orbit.Ephemeris, st *scenario.Station, tx *downlink.Transmitter, p *pass.Pass) tuning.Course {
	frame := st.Site.Frame()
	c := tuning.Course{Start: p.AOS}
	first, length := eph.Seconds(p.AOS), p.Duration().Seconds()
	step := sampleStep(p.Duration()).Seconds()
	for k := 0; ; k++ {
		at := min(float64(k)*step, length)
		look := frame.Look(eph.StateAt(max(0, min(first+at, eph.Span()))))
		c.Seconds = append(c.Seconds, at)
		c.ShiftHz = append(c.ShiftHz, -tx.Frequency.Hertz()*float64(look.RangeRate)/unit.SpeedOfLight)
		if at >= length {
			return c
		}
	}
}

// passesOver flies a spacecraft through the window and finds its passes over a station.
func passesOver(s *scenario.Scenario, craft *scenario.Spacecraft, st *scenario.Station) (*orbit.Ephemeris, []pass.Pass, error) {
	eph, err := s.Ephemeris(craft, s.Window.Start, s.Window.End, nil)
	if err != nil {
		return nil, nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", craft.Name, err)}
	}
	found, err := pass.Search(eph, &st.Site, pass.Window{From: s.Window.Start, To: s.Window.End}, s.Horizon)
	if err != nil {
		return nil, nil, &InputError{Err: err}
	}
	return eph, found, nil
}
