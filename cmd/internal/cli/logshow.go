package cli

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/logbook"
	"slantwise/downlink/measured"
)

func newLogShow(env *Env) *cobra.Command {
	var book string
	var number *float64
	var trend bool
	var f format
	cmd := &cobra.Command{
		Use:   "show",
		Short: "List the passes of the logbook, the measurements of one, or the trend over all",
		Long: `List the passes of the logbook by spacecraft and station: bytes predicted and taken, the
bias of the level and of the frequency with its interval of 95 %, remarks, and the element
set that was flown. With --trend a row for each spacecraft, station and quantity: the mean
over the passes, how much they differ from each other, the slope by elevation, and the
trend over the days. With --number the measurements of one pass.

Of a damaged file what can be read is shown, it is said what is missing, and the exit code
is 1.`,
		Example: `  slantwise log show
  slantwise log show --trend
  slantwise log show --number 1 --format csv`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if trend && number != nil {
				return inputErrorf("--trend is of all passes and --number of one; give one of them")
			}
			return runLogShow(cmd.Context(), env, book, number, trend, f)
		},
	}
	cmd.Flags().StringVar(&book, "book", defaultBook, "`FILE` of the logbook")
	addNumber(cmd.Flags(), &number, "number", "the measurements of the pass of this `NUMBER`")
	cmd.Flags().BoolVar(&trend, "trend", false, "what differs over the passes, by spacecraft and station")
	addFormat(cmd, &f)
	return cmd
}

// runLogShow writes what can be read, and fails after it where that is not all.
func runLogShow(ctx context.Context, env *Env, path string, number *float64, trend bool, f format) error {
	book, err := readBook(ctx, path)
	if err != nil {
		return &InputError{Err: err}
	}
	defer book.close()
	if number != nil {
		return showPass(ctx, env, book, *number, f)
	}
	list, faults := bookFigures(ctx, book)
	out := bookSheet(list)
	if trend {
		out = trendSheet(list)
	}
	return errors.Join(append([]error{out.write(env, f), book.fault}, faults...)...)
}

func showPass(ctx context.Context, env *Env, book *readableBook, number float64, f format) error {
	for i := range book.entries {
		if e := &book.entries[i]; float64(e.ID) == number {
			fault := book.fill(ctx, e)
			return errors.Join(valueSheet(e).write(env, f), book.fault, fault)
		}
	}
	return errors.Join(inputErrorf("--number: there is no pass %g in %s, which holds %d", number, book.path, len(book.entries)), book.fault)
}

// entryFigures is an entry without its measurements, and what they say.
type entryFigures struct {
	logbook.Entry
	count     int // measurements
	biases    map[measured.Quantity]measured.PassFigure
	elevation map[measured.Quantity]measured.PassFigure // slope per 10 deg
}

// bookFigures works out every pass, one held at a time, by spacecraft, station and time.
func bookFigures(ctx context.Context, book *readableBook) (list []entryFigures, faults []error) {
	for i := range book.entries {
		e := &book.entries[i]
		if err := book.fill(ctx, e); err != nil {
			faults = append(faults, err)
		}
		list = append(list, figuresOf(e))
		e.Values = nil
	}
	slices.SortStableFunc(list, func(a, b entryFigures) int {
		return cmp.Or(cmp.Compare(a.Spacecraft, b.Spacecraft), cmp.Compare(a.Station, b.Station), a.First.Compare(b.First))
	})
	return list, faults
}

func figuresOf(e *logbook.Entry) entryFigures {
	out := entryFigures{Entry: *e, count: len(e.Values), biases: map[measured.Quantity]measured.PassFigure{}, elevation: map[measured.Quantity]measured.PassFigure{}}
	out.Values = nil
	points := pointsOf(e)
	middle := e.First.Add(e.Last.Sub(e.First) / 2)
	for _, q := range measured.Compared() {
		if q == measured.RelativePowerDB { // its level tells nothing
			continue
		}
		for _, tr := range measured.Trends(points, q) {
			if tr.Fit == nil {
				continue
			}
			switch p := tr.Fit.Parameters; {
			case tr.By == "alone":
				out.biases[q] = measured.PassFigure{At: middle, Value: p[0].Value, Sigma: p[0].Sigma, Span: p[0].Span}
			case tr.By == "elevation" && len(p) == 2 && !math.IsNaN(p[1].Value):
				out.elevation[q] = measured.PassFigure{At: middle, Value: p[1].Value, Sigma: p[1].Sigma, Span: p[1].Span}
			}
		}
	}
	return out
}

// levels are the quantities that tell how strong the signal was, the most telling first.
var levels = []measured.Quantity{measured.CN0DBHz, measured.PowerDBm, measured.EbN0DB}

// bias returns the bias of the first of some quantities that a pass has, with half its interval.
func (e *entryFigures) bias(of ...measured.Quantity) (name string, value, span float64) {
	for _, q := range of {
		if b, ok := e.biases[q]; ok {
			return q.String(), b.Value, b.Span
		}
	}
	return "", math.NaN(), math.NaN()
}

func bookSheet(list []entryFigures) *sheet {
	out := &sheet{name: "passes", columns: []sheetColumn{numbersAs("number", "number", 0), wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station"),
		wordsAs("first_utc", "first"), wordsAs("last_utc", "last"), wordsAs("source", "source"), wordsAs("elements", "elements"), wordsAs("remark", "remark"), wordsAs("added_utc", "added"),
		wordsAs("link", "link"), numbersAs("measurements", "measurements", 0), numbersAs("predicted_bytes", "predicted B", 0), numbersAs("taken_bytes", "taken B", 0), numbersAs("taken_percent", "taken %", 1),
		wordsAs("level", "level"), numbersAs("level_bias_db", "bias dB", 2), numbersAs("level_plus_minus_db", "±", 2), numbersAs("frequency_bias_hz", "bias Hz", 1), numbersAs("frequency_plus_minus_hz", "±", 1)}, rows: [][]any{}}
	for i := range list {
		e := &list[i]
		level, bias, span := e.bias(levels...)
		_, tone, toneSpan := e.bias(measured.FrequencyHz)
		out.rows = append(out.rows, []any{float64(e.ID), e.Spacecraft, e.Station, utc(e.First), utc(e.Last), e.Source, e.Elements, e.Note, utc(e.Taken),
			linkOf(&e.Entry), float64(e.count), e.PredictedBytes, e.TakenBytes, 100 * e.TakenBytes / e.PredictedBytes, level, bias, span, tone, toneSpan})
	}
	if len(list) == 0 {
		out.notes = append(out.notes, "there is no pass in the logbook")
	}
	return out
}

// linkOf says what an entry was predicted for; empty before version 3 of the logbook.
func linkOf(e *logbook.Entry) string {
	if e.Transmitter == "" {
		return ""
	}
	text := e.Transmitter + " to " + e.Antenna
	if e.Mode != "" {
		text += ", mode " + e.Mode
	}
	return text
}

// trendSheet has a row a spacecraft, station and quantity; list is in their order.
func trendSheet(list []entryFigures) *sheet {
	out := &sheet{name: "trends", columns: []sheetColumn{wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station"), wordsAs("quantity", "quantity"), numbersAs("passes", "passes", 0),
		numbersAs("bias", "bias", 3), numbersAs("plus_minus", "± (95 %)", 3), numbersAs("between_passes", "pass to pass", 3), wordsAs("unit", "unit"),
		numbersAs("slope_per_10_deg", "by 10 deg up", 3), numbersAs("slope_plus_minus", "± (95 %)", 3),
		numbersAs("per_day", "per day", 3), numbersAs("per_day_plus_minus", "± (95 %)", 3),
		numbersAs("predicted_bytes", "predicted B", 0), numbersAs("taken_bytes", "taken B", 0), wordsAs("from_utc", "from"), wordsAs("to_utc", "to")}, rows: [][]any{}}
	for len(list) > 0 {
		n := 1
		for n < len(list) && list[n].Spacecraft == list[0].Spacecraft && list[n].Station == list[0].Station {
			n++
		}
		out.rows = append(out.rows, groupRows(list[:n])...)
		list = list[n:]
	}
	out.notes = append(out.notes, "bytes are summed over the passes that have both figures; a trend needs three passes")
	return out
}

func groupRows(group []entryFigures) [][]any {
	predicted, taken := 0.0, 0.0
	both := false
	from, to := group[0].First, group[0].Last
	for i := range group {
		e := &group[i]
		if !math.IsNaN(e.PredictedBytes) && !math.IsNaN(e.TakenBytes) {
			predicted, taken, both = predicted+e.PredictedBytes, taken+e.TakenBytes, true
		}
		to = laterOf(to, e.Last)
	}
	if !both {
		predicted, taken = math.NaN(), math.NaN()
	}
	var rows [][]any
	for _, q := range measured.Compared() {
		var biases, slopes []measured.PassFigure
		for i := range group {
			if b, ok := group[i].biases[q]; ok {
				biases = append(biases, b)
			}
			if s, ok := group[i].elevation[q]; ok {
				slopes = append(slopes, s)
			}
		}
		if len(biases) == 0 {
			continue
		}
		a, s := measured.AcrossPasses(biases), measured.AcrossPasses(slopes)
		rows = append(rows, []any{group[0].Spacecraft, group[0].Station, q.String(), float64(a.Passes), a.Mean, a.MeanSpan, a.Between, measured.Unit(q), s.Mean, s.MeanSpan, a.PerDay, a.PerDaySpan,
			predicted, taken, utc(from), utc(to)})
	}
	if len(rows) == 0 {
		none := math.NaN()
		rows = [][]any{{group[0].Spacecraft, group[0].Station, "", float64(len(group)), none, none, none, "", none, none, none, none, predicted, taken, utc(from), utc(to)}}
	}
	return rows
}

func laterOf(a, b time.Time) time.Time {
	if b.After(a) {
		return b
	}
	return a
}

func valueSheet(e *logbook.Entry) *sheet {
	out := &sheet{name: "measurements", columns: []sheetColumn{wordsAs("utc", "utc"), wordsAs("quantity", "quantity"), numbersAs("measured", "measured", 3),
		numbersAs("predicted", "predicted", 3), numbersAs("difference", "difference", 3), wordsAs("state", "state")}, rows: [][]any{}}
	for _, v := range e.Values {
		difference := v.Measured - v.Predicted
		if v.Quantity == measured.AzimuthDeg.String() {
			difference = math.Remainder(difference, 360)
		}
		out.rows = append(out.rows, []any{utc(v.At), v.Quantity, v.Measured, v.Predicted, difference, v.State})
	}
	if e.Note != "" {
		out.notes = append(out.notes, fmt.Sprintf("remark: %s", e.Note))
	}
	return out
}
