package cli

import (
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/orbit"
)

func newEphemerisOf(set orbit.Elements, first, last time.Time, earth orbit.EarthOrientation) (*orbit.Ephemeris, error) {
	return orbit.NewEphemeris(set, first.Add(-2*time.Second), last.Add(2*time.Second), earth)
}

// rehearsal is what an invented log differs from the prediction by.
const (
	rehearsalLevelDB, rehearsalOffsetHz, rehearsalLate = -1.5, 400.0, 500 * time.Millisecond
	rehearsalNoiseDB, rehearsalNoiseHz                 = 0.3, 30.0
)

func newLogRehearse(env *Env) *cobra.Command {
	var who linkNames
	var at time.Time
	var into string
	cmd := &cobra.Command{
		Use:   "rehearse",
		Short: "Write an invented log of a pass, to practise with",
		Long: fmt.Sprintf(`Write a log of one pass (the first of the window, or with --pass the one under way then
or next) as a receiver might have kept it. Nothing in it was measured: it is the
prediction, %g dB off, the transmitter %g Hz high and the spacecraft %v late, with noise
of %g dB and %g Hz, always the same.`, rehearsalLevelDB, rehearsalOffsetHz, rehearsalLate, rehearsalNoiseDB, rehearsalNoiseHz),
		Example: `  slantwise log rehearse --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --into practice.csv`,
		Args:    noArgs,
		RunE:    func(*cobra.Command, []string) error { return runLogRehearse(env, who, at, into) },
	}
	addLinkNames(cmd, &who)
	addTime(cmd.Flags(), &at, "pass", "the pass under way then, or the next one of the window")
	cmd.Flags().StringVar(&into, "into", "", "write into this `FILE`, which must not be there")
	return cmd
}

func runLogRehearse(env *Env, who linkNames, at time.Time, into string) error {
	if into == "" {
		return inputErrorf("--into: left out; name the file to write")
	}
	if exists(into) {
		return taken(into)
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	o := budgetOptions{pass: at}
	c, err := chooseLink(s, who, o.flight(s))
	if err != nil {
		return err
	}
	if c.uplink != nil {
		return inputErrorf("--uplink: a log is of what the station receives; leave it out")
	}
	r, err := budgetOfPass(s, c, at, 2*time.Second)
	if err != nil {
		return err
	}
	if r.pass == nil {
		return inputErrorf("there is no such pass in the window %s to %s", utc(s.Window.Start), utc(s.Window.End))
	}
	eph, err := s.EphemerisAt(c.spacecraft, r.pass.AOS.Add(-2*time.Second), r.pass.LOS.Add(2*time.Second))
	if err != nil {
		return &InputError{Err: err}
	}
	rng := rand.New(rand.NewPCG(2026, 9))
	err = atomicfile.Write(into, 0o644, func(w io.Writer) error {
		if _, err := fmt.Fprintf(w, "# An invented log to practise with, not a measurement: the prediction with known differences.\nutc,cn0_dbhz,frequency_hz\n"); err != nil {
			return err
		}
		for _, b := range r.samples {
			_, rate := c.link.GeometryOf(b.Time, eph.StateAt(eph.Seconds(b.Time.Add(-rehearsalLate))))
			f := c.transmitter.Frequency + c.transmitter.Oscillator.OffsetAt(b.Time) + c.link.Doppler(rate)
			level := math.NaN()
			if b.Usable {
				level = float64(b.CN0) + rehearsalLevelDB + rehearsalNoiseDB*rng.NormFloat64()
			}
			if _, err := fmt.Fprintf(w, "%s,%s,%s\n", utc(b.Time), fixed(level, 2), fixed(f.Hertz()+rehearsalOffsetHz+rehearsalNoiseHz*rng.NormFloat64(), 1)); err != nil {
				return err
			}
		}
		return nil
	})
	if err != nil {
		return err
	}
	env.note("an invented log of the pass from %s to %s is in %s", utc(r.pass.AOS), utc(r.pass.LOS), printable(into))
	return nil
}
