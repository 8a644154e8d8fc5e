package cli

import (
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/measured"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// rehearsal is what an invented log differs from the prediction by.
const (
	rehearsalLevelDB, rehearsalOffsetHz, rehearsalLate = -1.5, 400.0, 500 * time.Millisecond
	rehearsalAddedK, rehearsalHorizonDeg               = 25.0, 1.5
	rehearsalNoiseDB, rehearsalMeterDB                 = 0.3, 0.1
	rehearsalNoiseHz                                   = 30.0
	rehearsalStep, rehearsalLock                       = 2 * time.Second, 4 * time.Second
	rehearsalAround                                    = 100 * time.Second
	rehearsalLowest                                    = 0.2 * unit.Degree
	mostRehearsed                                      = 100
)

type rehearseOptions struct {
	who    linkNames
	at     time.Time
	passes *float64
	full   bool
	into   string
}

func newLogRehearse(env *Env) *cobra.Command {
	var o rehearseOptions
	cmd := &cobra.Command{
		Use:   "rehearse",
		Short: "Write an invented log of a pass, to practise with",
		Long: fmt.Sprintf(`Write a log of one pass (the first of the window, or with --pass the one under way then
or next; with --passes those after it, too) as a receiver might have kept it. Nothing in
it was measured: it is the prediction under a clear sky, %g dB off, the transmitter %g Hz
high and the spacecraft %v late, with noise of %g dB and %g Hz, always the same.

With --full it holds the received power and the lock, too, from before the pass to after
it: %g K more noise, signals heard from %g deg above the scenario's horizon on and locked
%v after that.`, rehearsalLevelDB, rehearsalOffsetHz, rehearsalLate, rehearsalNoiseDB, rehearsalNoiseHz, rehearsalAddedK, rehearsalHorizonDeg, rehearsalLock),
		Example: `  slantwise log rehearse --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --into practice.csv
  slantwise log rehearse --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --full --passes 6 --into more.csv`,
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runLogRehearse(env, &o) },
	}
	addLinkNames(cmd, &o.who)
	addTime(cmd.Flags(), &o.at, "pass", "the pass under way then, or the next one of the window")
	addNumber(cmd.Flags(), &o.passes, "passes", "`HOW MANY` passes of the window from that on (left out: 1)")
	cmd.Flags().BoolVar(&o.full, "full", false, "with received power and lock")
	cmd.Flags().StringVar(&o.into, "into", "", "write into this `FILE`, which must not be there")
	return cmd
}

func runLogRehearse(env *Env, o *rehearseOptions) error {
	if o.into == "" {
		return inputErrorf("--into: left out; name the file to write")
	}
	if exists(o.into) {
		return taken(o.into)
	}
	count := 1
	if o.passes != nil {
		if count = int(*o.passes); float64(count) != *o.passes || count < 1 || count > mostRehearsed {
			return inputErrorf("--passes: %g is not allowed; it must be a whole number from 1 to %d", *o.passes, mostRehearsed)
		}
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	budget := budgetOptions{pass: o.at}
	c, err := chooseLink(s, o.who, budget.flight(s))
	if err != nil {
		return err
	}
	if c.uplink != nil {
		return inputErrorf("--uplink: a log is of what the station receives; leave it out")
	}
	_, found, err := passesOver(s, c.spacecraft, c.station)
	if err != nil {
		return err
	}
	for len(found) > 0 && found[0].LOS.Before(o.at) {
		found = found[1:]
	}
	if found = found[:min(count, len(found))]; len(found) == 0 {
		return inputErrorf("there is no such pass in the window %s to %s", utc(s.Window.Start), utc(s.Window.End))
	}
	h := &rehearsal{chosenLink: c, link: c.link, full: o.full, rng: rand.New(rand.NewPCG(2026, 9))}
	if c.clear != nil {
		h.link = c.clear
	}
	err = atomicfile.Write(o.into, 0o644, func(w io.Writer) error {
		columns := "utc,cn0_dbhz,frequency_hz"
		if h.full {
			columns = "utc,received_power_dbm,cn0_dbhz,frequency_hz,locked"
		}
		if _, err := fmt.Fprintf(w, "# An invented log to practise with, not a measurement: the prediction with known differences.\n%s\n", columns); err != nil {
			return err
		}
		for i := range found {
			if err := h.pass(s, &found[i], w); err != nil {
				return &InputError{Err: err}
			}
		}
		return nil
	})
	if err != nil {
		return err
	}
	what := "the pass"
	if len(found) > 1 {
		what = fmt.Sprintf("%d passes", len(found))
	}
	env.note("an invented log of %s from %s to %s is in %s", what, utc(found[0].AOS), utc(found[len(found)-1].LOS), printable(o.into))
	return nil
}

// rehearsal invents what a receiver logs.
type rehearsal struct {
	*chosenLink
	link *downlink.Link
	full bool
	rng  *rand.Rand
}

// pass writes the rows of a pass, with full from before it to after it.
func (h *rehearsal) pass(s *scenario.Scenario, p *pass.Pass, w io.Writer) error {
	from, to := p.AOS, p.LOS
	if h.full {
		from, to = from.Add(-rehearsalAround), to.Add(rehearsalAround)
	}
	eph, err := s.EphemerisAt(h.spacecraft, from.Add(-time.Second), to.Add(time.Second))
	if err != nil {
		return err
	}
	var heard time.Time // since when; zero: not
	for t := from; !t.After(to); t = t.Add(rehearsalStep) {
		g, _ := h.link.GeometryOf(t, eph.StateAt(eph.Seconds(t)))
		switch high := apparentElevation(h.refraction, g.Elevation) - horizonSeen(&h.station.Site, h.refraction, g.Azimuth); {
		case h.full && g.Elevation < rehearsalLowest:
			continue
		case h.full && high < rehearsalHorizonDeg*unit.Degree:
			heard = time.Time{}
		case heard.IsZero():
			heard = t
		}
		if h.full && (heard.IsZero() || t.Sub(heard) < rehearsalLock) {
			if _, err := fmt.Fprintf(w, "%s,,,,0\n", utc(t)); err != nil {
				return err
			}
			continue
		}
		if err := h.row(g, eph, w); err != nil {
			return err
		}
	}
	return nil
}

// row writes what is heard at a geometry.
func (h *rehearsal) row(g downlink.Geometry, eph *orbit.Ephemeris, w io.Writer) error {
	b, err := h.link.At(g)
	if err != nil {
		return err
	}
	_, rate := h.link.GeometryOf(g.Time, measured.Turned(eph.StateAt(eph.Seconds(g.Time.Add(-rehearsalLate))), rehearsalLate.Seconds()))
	f := h.transmitter.Frequency + h.transmitter.Oscillator.OffsetAt(g.Time) + h.link.Doppler(rate)
	off, tone := rehearsalLevelDB+rehearsalNoiseDB*h.rng.NormFloat64(), rehearsalNoiseHz*h.rng.NormFloat64()
	hertz := fixed(f.Hertz()+rehearsalOffsetHz+tone, 1)
	if !h.full {
		ratio := float64(b.CN0) + off
		if !b.Usable {
			ratio = none
		}
		_, err = fmt.Fprintf(w, "%s,%s,%s\n", utc(g.Time), fixed(ratio, 2), hertz)
		return err
	}
	noise := 0.0
	if k := b.SystemNoise.Kelvins(); k > 0 {
		noise = 10 * math.Log10(1+rehearsalAddedK/k)
	}
	power, ratio := b.ReceivedPowerDBm+off, float64(b.CN0)+off-noise+rehearsalMeterDB*h.rng.NormFloat64()
	if !b.Usable {
		power, ratio = none, none
	}
	_, err = fmt.Fprintf(w, "%s,%s,%s,%s,1\n", utc(g.Time), fixed(power, 2), fixed(ratio, 2), hertz)
	return err
}

// apparentElevation is how high something is seen; geometric where refraction has no value.
func apparentElevation(r *station.Refraction, elevation unit.Angle) unit.Angle {
	if r != nil {
		if seen, ok := r.Apparent(elevation); ok {
			return seen
		}
	}
	return elevation
}

// horizonSeen is the apparent elevation of a site's mask, of a bare horizon without one.
func horizonSeen(site *station.Site, r *station.Refraction, azimuth unit.Angle) unit.Angle {
	switch {
	case site.Mask == nil:
		return 0
	case site.Mask.Kind() == station.Geometric:
		return apparentElevation(r, site.Mask.At(azimuth))
	}
	return site.Mask.At(azimuth)
}
