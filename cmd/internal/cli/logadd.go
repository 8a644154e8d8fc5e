package cli

import (
	"context"
	"errors"
	"math"
	"path/filepath"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/logbook"
	"slantwise/downlink/measured"
	"slantwise/station/pass"
)

// defaultBook is the logbook where none is named.
const defaultBook = "slantwise.logbook"

func newLogAdd(env *Env) *cobra.Command {
	var in logInput
	var kept logRemarks
	var f format
	cmd := &cobra.Command{
		Use:   "add FILE",
		Short: "Put measurements over the prediction and keep both in the logbook",
		Long: `Read FILE, predict each sample with the scenario, tell the bias and the slopes of what
differs, and add all of it to the logbook (an SQLite file, made where it is not there)
with the element set used, the bytes predicted for the pass and those taken. The same
file is not added twice.`,
		Example: `  slantwise log add rehearsal.csv --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --remark "light wind" --taken-bytes 8.5e6`,
		RunE:    func(cmd *cobra.Command, _ []string) error { return runLogAdd(cmd.Context(), env, &in, &kept, f) },
	}
	in.addTo(cmd)
	cmd.Flags().StringVar(&kept.book, "book", defaultBook, "`FILE` of the logbook")
	cmd.Flags().StringVar(&kept.remark, "remark", "", "`TEXT` to keep with the pass")
	addNumber(cmd.Flags(), &kept.takenBytes, "taken-bytes", "`BYTES` of the user that were taken in the pass")
	addFormat(cmd, &f)
	return cmd
}

// logRemarks are what is kept beside measurements.
type logRemarks struct {
	book, remark string
	takenBytes   *float64 // nil: not known
}

func runLogAdd(ctx context.Context, env *Env, in *logInput, kept *logRemarks, f format) error {
	if v := kept.takenBytes; v != nil && !(*v >= 0 && *v <= 1e18) {
		return inputErrorf("--taken-bytes: %g is not allowed; it must be 0 to 1e18", *v)
	}
	o, err := in.over(env)
	if err != nil {
		return err
	}
	e := o.entry()
	e.Source, e.Note, e.Taken = tidyText(filepath.Base(in.file)), tidyText(kept.remark), env.Now()
	if kept.takenBytes != nil {
		e.TakenBytes = *kept.takenBytes
	}
	if e.PredictedBytes, err = o.predictedBytes(); err != nil {
		env.note("no volume is predicted: %v", err)
	}
	path := kept.book
	b, err := logbook.Open(ctx, path, true)
	if err != nil {
		return &InputError{Err: err}
	}
	defer b.Close()
	id, err := b.Add(ctx, e)
	if errors.Is(err, logbook.ErrTaken) {
		return &InputError{Err: err}
	}
	if err != nil {
		return err
	}
	env.note("added as number %d of %s", id, printable(path))
	return o.differences().write(env, f)
}

// entry returns what the logbook keeps of a log over its prediction.
func (o *overLog) entry() *logbook.Entry {
	e := &logbook.Entry{Spacecraft: o.spacecraft.Name, Station: o.station.Site.Name, Transmitter: o.transmitter.Name, Antenna: o.antenna.Name,
		First: o.points[0].At, Last: o.points[len(o.points)-1].At, Elements: o.elements, Digest: o.digest, PredictedBytes: math.NaN(), TakenBytes: math.NaN()}
	if o.mode != nil {
		e.Mode = o.mode.Name
	}
	for i := range o.points {
		p := &o.points[i]
		for q := range measured.All() {
			if v := p.Get(q); !math.IsNaN(v) {
				e.Values = append(e.Values, logbook.Value{At: p.At, Quantity: q.String(), State: p.State.String(), Measured: v, Predicted: p.Predicted(q),
					AzimuthDeg: p.AzimuthDeg, ElevationDeg: p.ElevationDeg})
			}
		}
	}
	return e
}

// tidyText makes a text fit for every format that the logbook is written in.
func tidyText(s string) string {
	return strings.ReplaceAll(strings.ToValidUTF8(s, "\uFFFD"), "\r\n", "\n")
}

// longestAround is how far beyond a log its pass is looked for.
const longestAround = 30 * time.Minute

// predictedBytes returns the volume, in the chosen mode, of the pass under way in the middle of
// the log; NaN without a mode or a pass. A pass longer than the log by more than longestAround
// counts as far as that.
func (o *overLog) predictedBytes() (float64, error) {
	if o.mode == nil {
		return math.NaN(), nil
	}
	first, last := o.points[0].At, o.points[len(o.points)-1].At
	from, to := first.Add(-longestAround), last.Add(longestAround)
	eph, err := o.scenario.Ephemeris(o.spacecraft, from, to, nil)
	if err != nil {
		return math.NaN(), err
	}
	found, err := pass.Search(eph, &o.station.Site, pass.Window{From: from, To: to}, o.scenario.Horizon)
	if err != nil {
		return math.NaN(), err
	}
	middle := first.Add(last.Sub(first) / 2)
	for i := range found {
		p := &found[i]
		if middle.Before(p.AOS) || middle.After(p.LOS) {
			continue
		}
		profile, err := o.link.Profile(eph, p.AOS, p.LOS, volumeStep(p.Duration()))
		if err != nil {
			return math.NaN(), err
		}
		if _, _, err := keepToLimits(o.scenario, o.chosenLink, profile); err != nil {
			return math.NaN(), err
		}
		return profile.Volume.ModeBytes, nil
	}
	return math.NaN(), nil
}
