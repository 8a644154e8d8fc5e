package cli

import (
	"fmt"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/measured"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

func newLog(env *Env) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "log",
		Short: "What was measured during passes: over the prediction, fitted, and kept in a logbook",
		Long: `Read what a receiver logged (a table in CSV, or a CCSDS tracking data message, KVN or
XML), put it over the prediction, fit what explains the difference, and keep passes in a
logbook.

A table has a column utc (ISO 8601 ending in Z) and any of
  ` + strings.Join(measured.ColumnNames(), ", ") + `
in any order; --column OURS=THEIRS maps other names, and the scenario's measurements tell
what other tables hold. Unknown columns and keywords are told and not used. The same
quantity in two units is refused.`,
		Example: `  slantwise log rehearse --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --into rehearsal.csv`,
		Args:    noArgs,
		RunE:    func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
	}
	cmd.AddCommand(newLogAdd(env), newLogShow(env), newLogExport(env), newLogImport(env), newLogFit(env), newLogWhose(env), newLogRehearse(env))
	return cmd
}

// logInput is what the commands on a file of measurements share.
type logInput struct {
	file    string
	columns []string
	table   string
	who     linkNames
}

func (in *logInput) addTo(cmd *cobra.Command) {
	addLinkNames(cmd, &in.who)
	cmd.Flags().StringArrayVar(&in.columns, "column", nil, "`OURS=THEIRS`: the table calls the column OURS THEIRS; may be repeated")
	cmd.Flags().StringVar(&in.table, "table", "", "`NAME` of the kind of table in the scenario's measurements (left out: the one whose columns it has)")
	cmd.Args = func(cmd *cobra.Command, args []string) error {
		if len(args) != 1 {
			return inputErrorf("%s takes one FILE of measurements, %d are given", cmd.CommandPath(), len(args))
		}
		in.file = args[0]
		return nil
	}
}

// overLog is a log over its prediction.
type overLog struct {
	*chosenLink
	scenario *scenario.Scenario
	log      *measured.Log
	digest   string
	points   []measured.Point
	elements string
}

func (in *logInput) over(env *Env) (*overLog, error) {
	s, err := env.load(needOrbits)
	if err != nil {
		return nil, err
	}
	l, digest, err := in.readLog(env, s)
	if err != nil {
		return nil, err
	}
	o, err := overSamples(env, s, in.who, l)
	if err != nil {
		return nil, err
	}
	o.digest = digest
	return o, nil
}

// overSamples puts a log over the prediction for the link that is named, under a clear sky
// whatever the scenario asks for: what rain takes is a matter of the day.
func overSamples(env *Env, s *scenario.Scenario, who linkNames, l *measured.Log) (*overLog, error) {
	first, last := l.Samples[0].At, l.Samples[len(l.Samples)-1].At
	o := &overLog{scenario: s, log: l}
	var err error
	if o.chosenLink, err = chooseLink(s, who, pass.Window{From: first, To: last.Add(time.Second)}); err != nil {
		return nil, err
	}
	if o.uplink != nil {
		return nil, inputErrorf("--uplink: what the spacecraft measures is not read; leave it out")
	}
	eph, err := s.EphemerisAt(o.spacecraft, first.Add(-time.Second), last.Add(time.Second))
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", o.spacecraft.Name, err)}
	}
	flown := s.ElementsOver(o.spacecraft, first, last.Add(time.Second))
	o.elements = newOrbitHead(o.spacecraft, flown, first.Add(last.Sub(first)/2)).String()
	by := o.prediction(eph)
	if o.clear != nil {
		by.Link = o.clear
	}
	if o.points, err = by.Over(l.Samples); err != nil {
		return nil, &InputError{Err: err}
	}
	if n := measured.Count(o.points)[measured.Outside]; n > 0 {
		env.note("%d of %d samples lie outside any pass: check the clock of the log, the station and the spacecraft", n, len(o.points))
	}
	return o, nil
}

func (c *chosenLink) prediction(eph *orbit.Ephemeris) *measured.Prediction {
	t := c.transmitter
	return &measured.Prediction{Link: c.link, Orbit: eph, Frame: c.station.Site.Frame(), Refraction: c.refraction,
		Carrier: func(at time.Time) unit.Frequency { return t.Frequency + t.Oscillator.OffsetAt(at) }}
}

// differences has a row for each bias and slope that the log can carry.
func (o *overLog) differences() *sheet {
	out := &sheet{name: "differences", columns: []sheetColumn{wordsAs("quantity", "quantity"), wordsAs("by", "by"), wordsAs("parameter", "parameter"),
		numbersAs("value", "value", 3), numbersAs("plus_minus", "± (95 %)", 3), wordsAs("unit", "unit"), numbersAs("samples", "samples", 0), numbersAs("outliers", "outliers", 0)}, rows: [][]any{}}
	for _, q := range measured.Compared() {
		if !o.log.Has(q) {
			continue
		}
		for _, tr := range measured.Trends(o.points, q) {
			if tr.Fit == nil {
				out.notes = append(out.notes, fmt.Sprintf("%s by %s: too few samples within a pass, or they do not vary", q, tr.By))
				continue
			}
			for i, p := range tr.Fit.Parameters {
				if i == 0 && tr.By != "alone" {
					continue
				}
				out.rows = append(out.rows, []any{q.String(), tr.By, p.Name, p.Value, p.Span, p.Unit, float64(tr.Fit.Used), float64(len(tr.Fit.Outliers))})
			}
			out.notes = append(out.notes, tr.Fit.Advice...)
		}
	}
	return out
}
