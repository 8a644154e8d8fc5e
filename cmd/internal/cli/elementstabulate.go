package cli

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"math"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/scenario"
	"slantwise/orbit"
	"slantwise/orbit/oem"
)

// tabulateOptions are the flags of elements tabulate.
type tabulateOptions struct {
	spacecraft, frame, notation, into string
	objectID                          string
	from, to                          time.Time
	step                              time.Duration
}

func newElementsTabulate(env *Env) *cobra.Command {
	var o tabulateOptions
	cmd := &cobra.Command{
		Use:   "tabulate",
		Short: "Write a spacecraft's orbit as an OEM, for others to read",
		Long: `Write the orbit of a spacecraft of the scenario, whatever it flies on, as an orbit
ephemeris message (CCSDS 502.0-B, version 2.0, UTC): a state every step, with the
interpolation to be used between them. Shifts in time are in it; where the spacecraft has
no orbit, there is a gap between segments.

What is written is read back and compared before it goes out: the greatest difference is
told, and over 1 m it is refused, for a shorter step. FRAME is one of
` + oem.FrameNames + `.`,
		Example: `  slantwise elements tabulate --spacecraft "Wagtail 1"
  slantwise elements tabulate --spacecraft "Wagtail 1" --from 2026-09-15T00:00:00Z --to 2026-09-15T06:00:00Z --frame ITRF --notation xml --into wagtail-1.xml`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runElementsTabulate(cmd.Context(), env, &o) },
	}
	fs := cmd.Flags()
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft")
	addTime(fs, &o.from, "from", "first instant (left out: the start of the window)")
	addTime(fs, &o.to, "to", "last instant (left out: a day from the first, or the end of the window)")
	addDuration(fs, &o.step, "step", time.Minute, "between states")
	fs.StringVar(&o.frame, "frame", "EME2000", "`FRAME` of the states")
	fs.StringVar(&o.notation, "notation", "kvn", "kvn or xml")
	fs.StringVar(&o.objectID, "object-id", "", "`ID` of the object in the message (left out: its international designator)")
	fs.StringVar(&o.into, "into", "", "write into this `FILE`, whole or not at all")
	return cmd
}

func runElementsTabulate(_ context.Context, env *Env, o *tabulateOptions) error {
	frame, ok := oem.ParseFrame(o.frame)
	if !ok {
		return inputErrorf("--frame: %q is not allowed; it must be one of %s", o.frame, oem.FrameNames)
	}
	notation, err := oem.ParseNotation(o.notation)
	if err != nil {
		return inputErrorf("--notation: %w", err)
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	craft, err := pick("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	if err := o.settleSpan(s); err != nil {
		return err
	}
	eph, err := s.Ephemeris(craft, o.from, o.to, nil)
	if err != nil {
		return &InputError{Err: fmt.Errorf("spacecraft %s: %w", craft.Name, err)}
	}
	if cut := eph.Truncated(); cut != nil {
		env.note("warning: the table ends where the orbit does: %s", printable(cut.Error()))
	}
	for _, g := range eph.Gaps() {
		env.note("warning: no states from %s", printable(g.String()))
	}
	text, err := o.message(env, s, craft, eph, frame, notation)
	if err != nil {
		return err
	}
	if o.into == "" {
		if _, err := env.Out.Write(text); err != nil {
			return fmt.Errorf("write the message: %w", err)
		}
		return nil
	}
	err = atomicfile.Write(o.into, 0o644, func(w io.Writer) error {
		_, err := w.Write(text)
		return err
	})
	if err != nil {
		return err
	}
	env.note("%s: written", o.into)
	return nil
}

func (o *tabulateOptions) settleSpan(s *scenario.Scenario) error {
	if o.from.IsZero() {
		o.from = s.Window.Start
	}
	if o.to.IsZero() {
		o.to = o.from.Add(24 * time.Hour)
		if s.Window.End.After(o.from) && s.Window.End.Before(o.to) {
			o.to = s.Window.End
		}
	}
	if !o.to.After(o.from) {
		return inputErrorf("--to: %s is not after --from, %s", utc(o.to), utc(o.from))
	}
	return nil
}

// mostTabulated is how far a message may be from the orbit that it tells, in m.
const mostTabulated = 1.0

// message writes the message, reads it back and compares.
func (o *tabulateOptions) message(env *Env, s *scenario.Scenario, craft *scenario.Spacecraft, eph *orbit.Ephemeris, f orbit.Frame, n oem.Notation) ([]byte, error) {
	id := o.objectID
	if id == "" && craft.Trajectory != nil {
		id = craft.Trajectory.ID
	}
	if id == "" {
		id = craft.Elements.InternationalDesignator
	}
	tr, err := oem.Sample(eph, craft.Name, id, f, o.step, s.Earth)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	var text bytes.Buffer
	if err := oem.Write(&text, tr, n, oem.Header{Created: env.Now().Truncate(time.Second)}); err != nil {
		return nil, &InputError{Err: err}
	}
	back, err := oem.Read(bytes.NewReader(text.Bytes()), "the message", s.Earth)
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("what would be written cannot be read back: %w", err)}
	}
	var again orbit.Ephemeris
	if err := again.Follow(&back.Trajectories[0], orbit.Shift{}, o.from, o.to, s.Earth); err != nil {
		return nil, &InputError{Err: fmt.Errorf("what would be written cannot be flown: %w", err)}
	}
	apart := farthestApart(eph, &again, o.step.Seconds()/4.3) // not on the states themselves
	if apart > mostTabulated {
		return nil, inputErrorf("--step: with a state every %v, what is read back is up to %.3g m from the orbit, more than %g m; take a shorter step", o.step, apart, mostTabulated)
	}
	env.note("read back, positions are within %.2g m of the orbit", math.Max(apart, 0.001))
	return text.Bytes(), nil
}

// farthestApart is the greatest distance between two ephemerides where both have states.
func farthestApart(a, b *orbit.Ephemeris, step float64) float64 {
	worst := 0.0
	for _, span := range a.Spans() {
		for t := span.From; t <= span.To; t += step {
			if u := b.Seconds(a.Time(t)); b.Covers(u) {
				worst = math.Max(worst, a.PositionAt(t).Sub(b.PositionAt(u)).Norm())
			}
		}
	}
	return worst
}
