package cli

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/measured"
	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/oem"
	"slantwise/orbit/unit"
)

type whoseOptions struct {
	in                       logInput
	candidates               []string
	noiseHz, offsetHz, lateS float64
	format                   format
}

func newLogWhose(env *Env) *cobra.Command {
	var o whoseOptions
	cmd := &cobra.Command{
		Use:   "whose FILE",
		Short: "Which of several orbits the logged frequency belongs to",
		Long: `Rank the objects of files of element sets (TLE or OMM) and ephemerides (OEM) by how well
each explains the frequencies in FILE, all equally likely before. Left open are the
transmitter's offset, within --offset-hz, and how late or early each object is on its
orbit, within --late-s, as after a launch (one standard deviation each); --noise-hz is the
standard deviation of a sample with what the orbits miss beside the time. It says that it
cannot tell where no object has 95 % or the best does not explain the log.`,
		Example: `  slantwise log whose rehearsal.csv --candidates plans/summer.tle --spacecraft "Wagtail 1" --station "Skerry Point"
  slantwise log whose rehearsal.csv --candidates plans/summer.tle --candidates weather.tle --late-s 20 --spacecraft "Wagtail 1" --station "Skerry Point"`,
		RunE: func(*cobra.Command, []string) error { return runLogWhose(env, &o) },
	}
	o.in.addTo(cmd)
	fs := cmd.Flags()
	fs.StringArrayVar(&o.candidates, "candidates", nil, "`FILE` of element sets (TLE or OMM) or ephemerides (OEM); may be repeated")
	fs.Float64Var(&o.noiseHz, "noise-hz", 100, "standard deviation of a sample in `HZ`")
	fs.Float64Var(&o.offsetHz, "offset-hz", 5000, "standard deviation of the transmitter's offset in `HZ`")
	fs.Float64Var(&o.lateS, "late-s", 5, "standard deviation of how late an object is on its orbit in `SECONDS`; 0: none is late")
	addFormat(cmd, &o.format)
	return cmd
}

func (o *whoseOptions) check() error {
	switch {
	case len(o.candidates) == 0:
		return inputErrorf("--candidates: left out; give a file of element sets or an ephemeris")
	case !(o.noiseHz > 0 && o.noiseHz < 1e9):
		return inputErrorf("--noise-hz: %g is not allowed; it must be greater than 0", o.noiseHz)
	case !(o.offsetHz > 0 && o.offsetHz < 1e9):
		return inputErrorf("--offset-hz: %g is not allowed; it must be greater than 0", o.offsetHz)
	case !(o.lateS >= 0 && o.lateS <= 3600):
		return inputErrorf("--late-s: %g is not allowed; it must be 0 to 3600", o.lateS)
	}
	return nil
}

func runLogWhose(env *Env, o *whoseOptions) error {
	if err := o.check(); err != nil {
		return err
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
	orbits, err := o.orbits(env, s, l.Samples[0].At, l.Samples[len(l.Samples)-1].At)
	if err != nil {
		return err
	}
	var candidates []measured.Candidate
	for _, c := range orbits {
		p := &measured.Prediction{Orbit: c.eph, Frame: site.Site.Frame(), Carrier: func(time.Time) unit.Frequency { return sender.Frequency }}
		one := measured.Candidate{Name: c.name, Points: p.Late(l.Samples, 0)}
		if one.Points == nil {
			env.note("%s is left out: it does not cover the whole log, %s to %s", printable(c.name), utc(l.Samples[0].At), utc(l.Samples[len(l.Samples)-1].At))
			continue
		}
		if o.lateS > 0 {
			one.Late = func(seconds float64) []measured.Point { return p.Late(l.Samples, seconds) }
		}
		candidates = append(candidates, one)
	}
	if len(candidates) == 0 {
		return inputErrorf("no candidate covers the log, %s to %s; give orbits of that time", utc(l.Samples[0].At), utc(l.Samples[len(l.Samples)-1].At))
	}
	ranked, answer := measured.Rank(candidates, measured.RankOptions{NoiseHz: o.noiseHz, OffsetHz: o.offsetHz, LateS: o.lateS})
	return whoseSheet(ranked, answer, o.lateS).write(env, o.format)
}

// candidateOrbit is an orbit that may be the one heard.
type candidateOrbit struct {
	name string
	eph  *orbit.Ephemeris
}

// orbits flies every candidate over the log and as far around it as its lateness is searched.
func (o *whoseOptions) orbits(env *Env, s *scenario.Scenario, first, last time.Time) ([]candidateOrbit, error) {
	around := time.Duration((3*o.lateS + 2) * float64(time.Second))
	from, to := first.Add(-around), last.Add(around)
	var out []candidateOrbit
	var failed []error
	for _, file := range o.candidates {
		list, err := candidatesIn(env, s, file, from, to)
		out, failed = append(out, list...), append(failed, err)
	}
	if err := errors.Join(failed...); err != nil && len(out) == 0 {
		return nil, err
	} else if err != nil {
		env.note("%v", err)
	}
	return out, nil
}

// candidatesIn reads a file of element sets or an ephemeris, told apart by content. What cannot be
// flown is told and left out; the error is that of a file that cannot be read or has nothing left.
func candidatesIn(env *Env, s *scenario.Scenario, file string, from, to time.Time) ([]candidateOrbit, error) {
	f, err := os.Open(file)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	defer f.Close()
	text, err := io.ReadAll(io.LimitReader(f, oem.MaxSize+1))
	if err != nil {
		return nil, inputErrorf("%s: %w", file, err)
	}
	var out []candidateOrbit
	var failed []error
	add := func(name string, eph *orbit.Ephemeris, err error) {
		if err != nil {
			env.note("%s is left out: %v", printable(name), err)
			failed = append(failed, err)
			return
		}
		out = append(out, candidateOrbit{name, eph})
	}
	if oem.Looks(text) {
		message, err := oem.Read(bytes.NewReader(text), file, s.Earth)
		if err != nil {
			return nil, &InputError{Err: err}
		}
		tellWarnings(env, message.Warnings)
		for i := range message.Trajectories {
			tr := &message.Trajectories[i]
			eph := &orbit.Ephemeris{}
			add(tr.Name+" (ephemeris)", eph, eph.Follow(tr, orbit.Shift{}, from, to, s.Earth))
		}
	} else {
		sets, warnings, err := elements.ReadFile(file)
		if err != nil {
			return nil, &InputError{Err: err}
		}
		tellWarnings(env, warnings)
		for _, set := range sets {
			eph, err := orbit.NewEphemeris(set, from, to, s.Earth)
			add(fmt.Sprintf("%s (%d, %s)", set.Name, set.CatalogNumber, utc(set.Epoch)), eph, err)
		}
	}
	if len(out) == 0 {
		return nil, inputErrorf("%s: no orbit in it can be flown: %w", file, errors.Join(failed...))
	}
	return out, nil
}

func tellWarnings(env *Env, list []elements.Warning) {
	for _, w := range list {
		env.note("warning: %s", printable(w.String()))
	}
}

func whoseSheet(ranked []measured.Ranked, answer bool, lateS float64) *sheet {
	out := &sheet{name: "candidates", columns: []sheetColumn{wordsAs("object", "object"), numbersAs("probability", "probability", 4), numbersAs("rms_hz", "RMS Hz", 1),
		numbersAs("offset_hz", "offset Hz", 1), numbersAs("samples", "samples", 0), numbersAs("heard_below_horizon", "heard below horizon", 0), wordsAs("explains", "explains the log"),
		numbersAs("late_s", "late s", 2)}}
	for _, r := range ranked {
		says := "no"
		if r.Explains {
			says = "yes"
		}
		out.rows = append(out.rows, []any{r.Name, r.Probability, r.RMSHz, r.OffsetHz, float64(r.Samples), float64(r.Below), says, r.LateS})
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
	if lateS > 0 && math.Abs(best.LateS) > 2.5*lateS {
		out.notes = append(out.notes, fmt.Sprintf("%s is %s s late, as far as --late-s %g lets it be; try a greater one", best.Name, fixed(best.LateS, 1), lateS))
	}
	return out
}
