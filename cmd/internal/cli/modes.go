package cli

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/nearest"
	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

// modesOptions are the flags of modes.
type modesOptions struct {
	format      format
	modulations []string
	codings     []string // parts of names
	errorRate   float64  // 0: that of each row's first threshold
	metric      string
	most        float64 // of the required Eb/N0, dB
	least       float64 // of the spectral efficiency, bit/symbol
	add         string

	symbolRate, rollOff float64
	pilots              bool
	bandwidthMHz        float64
}

func newModes(env *Env) *cobra.Command {
	return newModesRunning(env, runModes)
}

// newModesRunning takes the function that does the work, so that a test can look at the
// flags alone.
func newModesRunning(env *Env, run func(*Env, modesOptions) error) *cobra.Command {
	var o modesOptions
	cmd := &cobra.Command{
		Use:   "modes",
		Short: "List modulations and codings with what they require",
		Long: `List the catalogue: every coding on every modulation that carries it, with the Eb/N0
and Es/N0 that it requires, for which error rate, and where the figure comes from.

A required Eb/N0 is the code's own, per information bit, without implementation loss.
The code rate is charged to it; sync markers and frame headers are not, but in DVB-S2
and DVB-S2X, whose tables charge their headers. The net efficiency (table and JSON) has
all of them taken off.

--error-rate asks every row for another error rate, from formulas, curves and
thresholds; where a row does not know it the figures stay empty. Nothing is continued
beyond the end of a curve. With --symbol-rate the table and the JSON hold net data
rate and occupied bandwidth as well, and --bandwidth-mhz leaves out what is too wide.

--add FILE adds rows of your own, CSV with the header
` + strings.Join(modem.UserColumns, ",") + `
where the frame, the width and nothing else may be empty.`,
		Example: `  slantwise modes --modulation qpsk --error-rate 1e-6
  slantwise modes --coding dvb-s2 --max-eb-n0-db 4 --format csv
  slantwise modes --coding ldpc --symbol-rate 5e6 --roll-off 0.35 --bandwidth-mhz 8`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if err := o.check(cmd.Flags().Changed); err != nil {
				return err
			}
			return run(env, o)
		},
	}
	flags := cmd.Flags()
	addFormat(cmd, &o.format)
	flags.StringArrayVar(&o.modulations, "modulation", nil, "only this modulation, `NAME`; may be repeated")
	flags.StringArrayVar(&o.codings, "coding", nil, "only codings whose name holds this `TEXT`; may be repeated")
	flags.Float64Var(&o.errorRate, "error-rate", 0, "required Eb/N0 for this error `RATE`, in place of each row's own")
	flags.StringVar(&o.metric, "metric", "", "what the error rate counts: `bit`, codeword, frame or packet (default each row's own)")
	flags.Float64Var(&o.most, "max-eb-n0-db", 0, "only rows that require no more than this, `DB`")
	flags.Float64Var(&o.least, "min-efficiency", 0, "only rows with this many information `BITS` a symbol or more")
	flags.StringVar(&o.add, "add", "", "rows of your own from this CSV `FILE`, - for standard input")
	flags.Float64Var(&o.symbolRate, "symbol-rate", 0, "give net data rate and bandwidth at this symbol rate, `BAUD`")
	flags.Float64Var(&o.rollOff, "roll-off", modem.DefaultRollOff, "of shaped pulses, `0..1`")
	flags.BoolVar(&o.pilots, "pilots", false, "pilots are sent in codings that know them")
	flags.Float64Var(&o.bandwidthMHz, "bandwidth-mhz", 0, "only rows that fit into this bandwidth at --symbol-rate, `MHZ`")
	return cmd
}

// check finds flags that are out of range or do not go together.
func (o *modesOptions) check(given func(string) bool) error {
	inRange := func(flag string, v, low, high float64) error {
		if given(flag) && !(v > low && v <= high) {
			return inputErrorf("--%s: %g is not allowed; it must be greater than %g and at most %g", flag, v, low, high)
		}
		return nil
	}
	for _, err := range []error{
		inRange("symbol-rate", o.symbolRate, 0, 1e15), inRange("bandwidth-mhz", o.bandwidthMHz, 0, 1e9),
		inRange("max-eb-n0-db", o.most, -100, 100), inRange("min-efficiency", o.least, 0, 100),
	} {
		if err != nil {
			return err
		}
	}
	switch {
	case given("error-rate") && !(o.errorRate > 0 && o.errorRate < 1):
		return inputErrorf("--error-rate: %g is not allowed; it must be greater than 0 and less than 1", o.errorRate)
	case !(o.rollOff >= 0 && o.rollOff <= 1):
		return inputErrorf("--roll-off: %g is not allowed; it must be 0 to 1", o.rollOff)
	case given("bandwidth-mhz") && !given("symbol-rate"):
		return inputErrorf("--bandwidth-mhz needs --symbol-rate, as the width of a signal goes with it")
	}
	if !given("max-eb-n0-db") {
		o.most = 1000
	}
	if o.metric != "" {
		m, err := modem.ParseMetric(o.metric)
		if err != nil {
			return inputErrorf("--metric: %w", err)
		}
		o.metric = string(m)
	}
	return nil
}

func runModes(env *Env, o modesOptions) error {
	catalogue, err := o.catalogue(env)
	if err != nil {
		return &InputError{Err: err}
	}
	for _, name := range o.modulations {
		if _, err := catalogue.FindModulation(name); err != nil {
			return inputErrorf("--modulation: %w", err)
		}
	}
	if err := o.checkCodings(catalogue); err != nil {
		return err
	}
	rows, unknown, err := o.choose(catalogue)
	if err != nil {
		return err
	}
	if unknown > 0 {
		env.note("%d of %d rows do not know that error rate; their required Eb/N0 stays empty (--format json says what each knows)", unknown, len(rows))
	}
	switch o.format {
	case formatCSV:
		return modesCSV(env, rows)
	case formatJSON:
		return writeJSON(env.Out, o.answer(rows))
	}
	return o.table(env, rows)
}

// catalogue returns the standard catalogue with the rows of --add.
func (o *modesOptions) catalogue(env *Env) (*modem.Catalogue, error) {
	if o.add == "" {
		return modem.Standard(), nil
	}
	in := env.In
	if o.add != "-" {
		f, err := os.Open(o.add)
		if err != nil {
			return nil, cannotRead(o.add, err)
		}
		defer f.Close()
		in = f
	}
	own, err := modem.ReadRows(in)
	if err != nil {
		return nil, fmt.Errorf("--add %s: %w", o.add, err)
	}
	all, err := modem.Standard().With(own...)
	if err != nil {
		return nil, fmt.Errorf("--add %s: %w", o.add, err)
	}
	return all, nil
}

// cannotRead says why a file of rows was not opened, without the words for a file that
// is written.
func cannotRead(name string, err error) error {
	var why *fs.PathError
	if !errors.As(err, &why) {
		return fmt.Errorf("--add %s: %w", name, err)
	}
	return fmt.Errorf("--add %s: it cannot be read (%v); name a CSV file of modes, or - for standard input", name, why.Err)
}

// modeRow is a row of the catalogue at the error rate that was asked for.
type modeRow struct {
	modem.Row
	need   modem.Threshold // where known
	remark string          // why it is not known
}

func (o *modesOptions) choose(c *modem.Catalogue) (rows []modeRow, unknown int, err error) {
	for _, r := range c.Rows() {
		if !o.wants(&r) {
			continue
		}
		m := modeRow{Row: r}
		var out *modem.RateError
		if m.need, err = r.At(modem.Metric(o.metric), o.errorRate); errors.As(err, &out) {
			m.remark = err.Error()
		} else if err != nil {
			return nil, 0, err
		}
		if m.remark == "" && float64(m.need.EbN0) > o.most || m.remark != "" && o.most < 1000 {
			continue
		}
		if m.remark != "" {
			unknown++
		}
		rows = append(rows, m)
	}
	return rows, unknown, nil
}

// checkCodings finds a part of a name that no coding holds: more likely a slip than a
// question whose answer is nothing.
func (o *modesOptions) checkCodings(c *modem.Catalogue) error {
	var names, known []string // known: whole names, and what they begin with or are joined of
	for _, r := range c.Rows() {
		name := r.Coding.Name
		names, known = append(names, name), append(append(known, name), strings.Split(name, "-")...)
		for at, letter := range name {
			if letter == '-' {
				known = append(known, name[:at])
			}
		}
	}
	slices.Sort(known)
	known = slices.Compact(known)
	for _, part := range o.codings {
		if !slices.ContainsFunc(names, func(name string) bool { return strings.Contains(name, part) }) {
			near := nearest.Names(part, known, 4)
			if len(near) == 0 {
				return inputErrorf("--coding: no name in the catalogue holds %q; slantwise modes lists them all", part)
			}
			return inputErrorf("--coding: no name in the catalogue holds %q; the nearest are %s", part, strings.Join(near, ", "))
		}
	}
	return nil
}

func (o *modesOptions) wants(r *modem.Row) bool {
	if len(o.modulations) > 0 && !slices.Contains(o.modulations, r.Modulation.Name) {
		return false
	}
	holds := func(part string) bool { return strings.Contains(r.Coding.Name, part) }
	if len(o.codings) > 0 && !slices.ContainsFunc(o.codings, holds) || r.SpectralEfficiency() < o.least {
		return false
	}
	return o.bandwidthMHz == 0 || o.width(r) <= unit.Frequency(o.bandwidthMHz)*unit.Megahertz
}

// width returns the occupied bandwidth at --symbol-rate.
func (o *modesOptions) width(r *modem.Row) unit.Frequency {
	return unit.Frequency(o.symbolRate * r.Modulation.WidthFactor(o.rollOff))
}
