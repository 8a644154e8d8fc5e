package cli

import (
	"errors"
	"fmt"
	"math"
	"time"

	"github.com/spf13/cobra"

	"slantwise/downlink/measured"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
)

func newLogFit(env *Env) *cobra.Command {
	var in logInput
	var f format
	cmd := &cobra.Command{
		Use:   "fit FILE",
		Short: "Fit what explains the difference between measurements and prediction",
		Long: `Fit, robustly and with the interval that holds the truth in 95 % of logs like this one:
of levels an offset and, where the antenna's beamwidth is known, the square of its
azimuth error; of the frequency the transmitter's offset and drift and the time offset
of the elements (greater than 0: the spacecraft is late). The noise is taken as
correlated from sample to sample. What is left out (outliers, dropouts, a saturated
receiver, rain) is counted, and it is said what the data cannot tell apart.`,
		Example: `  slantwise log fit rehearsal.csv --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe`,
		RunE:    func(*cobra.Command, []string) error { return runLogFit(env, &in, f) },
	}
	in.addTo(cmd)
	addFormat(cmd, &f)
	return cmd
}

func runLogFit(env *Env, in *logInput, f format) error {
	o, err := in.over(env)
	if err != nil {
		return err
	}
	out := &sheet{name: "fits", columns: []sheetColumn{wordsAs("quantity", "quantity"), wordsAs("parameter", "parameter"), numbersAs("value", "value", 4),
		numbersAs("plus_minus", "± (95 %)", 4), wordsAs("unit", "unit"), numbersAs("samples", "samples", 0), numbersAs("outliers", "outliers", 0),
		numbersAs("noise", "noise of a sample", 3)}, rows: [][]any{}}
	add := func(q measured.Quantity, fit *measured.Fit, err error) {
		if err != nil {
			out.notes = append(out.notes, err.Error())
			return
		}
		for _, p := range fit.Parameters {
			out.rows = append(out.rows, []any{q.String(), p.Name, p.Value, p.Span, p.Unit, float64(fit.Used), float64(len(fit.Outliers)), fit.Scale})
		}
		for _, a := range fit.Advice {
			out.notes = append(out.notes, q.String()+": "+a)
		}
	}
	for _, q := range []measured.Quantity{measured.PowerDBm, measured.RelativePowerDB, measured.CN0DBHz, measured.EbN0DB} {
		if !o.log.Has(q) {
			continue
		}
		points := append([]measured.Point(nil), o.points...)
		how := measured.LevelOptions{Quantity: q}
		if w, ok := o.antenna.BeamwidthAt(o.transmitter.Frequency); ok {
			how.BeamDeg = w.Degrees()
		}
		fit, err := measured.FitLevel(points, how)
		add(q, fit, err)
		out.notes = append(out.notes, leftOut(q, points)...)
	}
	if o.log.Has(measured.FrequencyHz) {
		points := append([]measured.Point(nil), o.points...)
		fit, err := measured.FitFrequency(points, true)
		add(measured.FrequencyHz, fit, err)
		if err == nil {
			out.notes = append(out.notes, o.oscillatorOffer(fit))
		}
		out.notes = append(out.notes, leftOut(measured.FrequencyHz, points)...)
	}
	return out.write(env, f)
}

// oscillatorOffer says what the scenario would state for the transmitter by the fit.
func (o *overLog) oscillatorOffer(fit *measured.Fit) string {
	at := fit.Middle
	had := o.transmitter.Oscillator.OffsetAt(at).Hertz()
	return fmt.Sprintf("offered for transmitter %s: oscillator: {measured: [{at_utc: %s, offset_hz: %s}]}, a row a log; the scenario has %s Hz then", o.transmitter.Name,
		utc(at), fixed(had+fit.Parameters[0].Value, 1), fixed(had, 1))
}

// leftOut counts and names the samples that a fit did not use.
func leftOut(q measured.Quantity, points []measured.Point) []string {
	var out []string
	count := measured.Count(points)
	for s := measured.Outside; s <= measured.Wet; s++ {
		if n := count[s]; n > 0 {
			out = append(out, fmt.Sprintf("%s: %d samples left out: %s", q, n, s))
		}
	}
	for i := range points {
		if p := &points[i]; p.State == measured.Outlier {
			out = append(out, fmt.Sprintf("%s: outlier in line %d, %s: %s off the prediction", q, p.Line, utc(p.At), fixed(p.Residual(q), 2)))
		}
	}
	return out
}

type whoseOptions struct {
	in                logInput
	candidates        string
	noiseHz, offsetHz float64
	format            format
}

func newLogWhose(env *Env) *cobra.Command {
	var o whoseOptions
	cmd := &cobra.Command{
		Use:   "whose FILE",
		Short: "Which of several element sets the logged frequency belongs to",
		Long: `Rank the objects of a file of element sets by how well each explains the frequencies in
FILE, all equally likely before. The transmitter's offset is left open within
--offset-hz (one standard deviation), and --noise-hz is the standard deviation of a
sample with what the elements miss. It says that it cannot tell where no object has 95 %
or the best does not explain the log.`,
		Example: `  slantwise log whose rehearsal.csv --candidates plans/summer.tle --spacecraft "Wagtail 1" --station "Skerry Point"`,
		RunE:    func(*cobra.Command, []string) error { return runLogWhose(env, &o) },
	}
	o.in.addTo(cmd)
	fs := cmd.Flags()
	fs.StringVar(&o.candidates, "candidates", "", "`FILE` of element sets (TLE or OMM)")
	fs.Float64Var(&o.noiseHz, "noise-hz", 100, "standard deviation of a sample in `HZ`")
	fs.Float64Var(&o.offsetHz, "offset-hz", 5000, "standard deviation of the transmitter's offset in `HZ`")
	addFormat(cmd, &o.format)
	return cmd
}

func runLogWhose(env *Env, o *whoseOptions) error {
	switch {
	case o.candidates == "":
		return inputErrorf("--candidates: left out; give a file of element sets")
	case !(o.noiseHz > 0 && o.noiseHz < 1e9):
		return inputErrorf("--noise-hz: %g is not allowed; it must be greater than 0", o.noiseHz)
	case !(o.offsetHz > 0 && o.offsetHz < 1e9):
		return inputErrorf("--offset-hz: %g is not allowed; it must be greater than 0", o.offsetHz)
	}
	sets, warnings, err := elements.ReadFile(o.candidates)
	if err != nil {
		return &InputError{Err: err}
	}
	for _, w := range warnings {
		env.note("warning: %s", printable(w.String()))
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	l, _, err := o.in.readLog(env, s)
	if err != nil {
		return err
	}
	if !l.Has(measured.FrequencyHz) {
		return inputErrorf("%s: there is no frequency in it; give a column frequency_hz", o.in.file)
	}
	craft, err := pick("spacecraft", o.in.who.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	site, err := pick("station", o.in.who.station, s.Stations, stationName)
	if err != nil {
		return err
	}
	sender, err := pick("transmitter", o.in.who.transmitter, craft.Transmitters, transmitterName)
	if err != nil {
		return err
	}
	first, last := l.Samples[0].At, l.Samples[len(l.Samples)-1].At
	var candidates []measured.Candidate
	var failed []error
	for _, set := range sets {
		name := fmt.Sprintf("%s (%d, %s)", set.Name, set.CatalogNumber, utc(set.Epoch))
		eph, err := newEphemerisOf(set, first, last, s.Earth)
		if err != nil {
			env.note("%s is left out: %v", printable(name), err)
			failed = append(failed, err)
			continue
		}
		p := &measured.Prediction{Orbit: eph, Frame: site.Site.Frame(), Carrier: func(time.Time) unit.Frequency { return sender.Frequency }}
		points, err := p.Over(l.Samples)
		if err != nil {
			return err
		}
		candidates = append(candidates, measured.Candidate{Name: name, Points: points})
	}
	if len(candidates) == 0 {
		return &InputError{Err: fmt.Errorf("%s: no set can be flown: %w", o.candidates, errors.Join(failed...))}
	}
	ranked, answer := measured.Rank(candidates, measured.RankOptions{NoiseHz: o.noiseHz, OffsetHz: o.offsetHz})
	return whoseSheet(ranked, answer).write(env, o.format)
}

func whoseSheet(ranked []measured.Ranked, answer bool) *sheet {
	out := &sheet{name: "candidates", columns: []sheetColumn{wordsAs("object", "object"), numbersAs("probability", "probability", 4), numbersAs("rms_hz", "RMS Hz", 1),
		numbersAs("offset_hz", "offset Hz", 1), numbersAs("samples", "samples", 0), numbersAs("heard_below_horizon", "heard below horizon", 0), wordsAs("explains", "explains the log")}}
	for _, r := range ranked {
		says := "no"
		if r.Explains {
			says = "yes"
		}
		out.rows = append(out.rows, []any{r.Name, r.Probability, r.RMSHz, r.OffsetHz, float64(r.Samples), float64(r.Below), says})
	}
	best := ranked[0]
	switch {
	case answer:
		out.notes = append(out.notes, fmt.Sprintf("it is %s, if it is one of these and each was equally likely before", best.Name))
	case !best.Explains:
		out.notes = append(out.notes, "cannot tell: no candidate explains the log within the stated noise, so it may be none of them")
	default:
		out.notes = append(out.notes, fmt.Sprintf("cannot tell: the best has %.0f %%, and 95 %% are asked for; another pass will tell more", math.Floor(100*best.Probability)))
	}
	return out
}
