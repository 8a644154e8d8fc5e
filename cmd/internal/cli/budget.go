package cli

import (
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

// budgetOptions is what the command line says.
type budgetOptions struct {
	who    linkNames
	at     time.Time // one instant
	pass   time.Time // the pass under way then, or the next
	step   time.Duration
	paced  bool // --step was given
	stated statedOptions
	format format
}

// linkNames chooses a link of the scenario; an empty name picks the only one.
type linkNames struct{ spacecraft, station, transmitter, uplink, antenna, mode string }

// statedOptions is a geometry given by hand; nil: not given.
type statedOptions struct {
	rangeKm, elevationDeg, azimuthDeg, offBoresightDeg, aroundBoresightDeg *float64
}

func (o *statedOptions) given() bool {
	return o.rangeKm != nil || o.elevationDeg != nil || o.azimuthDeg != nil || o.offBoresightDeg != nil || o.aroundBoresightDeg != nil
}

func newBudget(env *Env) *cobra.Command {
	var o budgetOptions
	cmd := &cobra.Command{
		Use:   "budget",
		Short: "The link budget at an instant, along a pass, or for a stated geometry",
		Long: `Give the link budget of one transmitter (or one uplink), antenna and mode, term by term: every term
with its value, the sum so far and where it comes from, then the noise, then C/N0,
Eb/N0, margin and the achievable rate, then what was assumed. With --uplink the station
sends and the spacecraft receives, by the same terms; then follows how much the antenna
radiates, with the caution that belongs to it.

  --at UTC                        at one instant, whether a pass is under way or not
  --range-km R --elevation-deg E  for a stated geometry; no element set is needed
  neither                         every --step of a pass: the first of the window, or
                                  with --pass UTC the one under way then or the next

What the scenario holds several of must be named.`,
		Example: `  slantwise budget --spacecraft "Wagtail 1" --station "Skerry Point" --mode fast
  slantwise budget --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --at 2026-09-15T00:55:00Z
  slantwise budget --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --range-km 1200 --elevation-deg 20 --format json
  slantwise budget --spacecraft "Wagtail 1" --station "Skerry Point" --uplink command --mode quick`,
		Args: noArgs,
	}
	fs := cmd.Flags()
	addLinkNames(cmd, &o.who)
	addTime(fs, &o.at, "at", "one instant")
	addTime(fs, &o.pass, "pass", "the pass under way then, or the next one of the window")
	addDuration(fs, &o.step, "step", 10*time.Second, "between two samples of a pass")
	addNumber(fs, &o.stated.rangeKm, "range-km", "stated slant range in `KM`, with --elevation-deg")
	addNumber(fs, &o.stated.elevationDeg, "elevation-deg", "stated elevation in `DEG`, with --range-km")
	addNumber(fs, &o.stated.azimuthDeg, "azimuth-deg", "stated azimuth in `DEG`, which a fixed antenna needs")
	addNumber(fs, &o.stated.offBoresightDeg, "off-boresight-deg", "stated angle in `DEG` off the spacecraft antenna's boresight (left out: from the attitude over a sphere), or off its spin axis")
	addNumber(fs, &o.stated.aroundBoresightDeg, "around-boresight-deg", "stated angle in `DEG` around that boresight, for a pattern in two angles")
	addFormat(cmd, &o.format)
	cmd.RunE = func(cmd *cobra.Command, _ []string) error {
		o.paced = cmd.Flags().Changed("step")
		return runBudget(env, &o)
	}
	return cmd
}

// addLinkNames adds the flags that choose a link.
func addLinkNames(cmd *cobra.Command, n *linkNames) {
	fs := cmd.Flags()
	fs.StringVar(&n.spacecraft, "spacecraft", "", "`NAME` of the spacecraft")
	fs.StringVar(&n.station, "station", "", "`NAME` of the station")
	fs.StringVar(&n.transmitter, "transmitter", "", "`NAME` of the spacecraft's transmitter")
	fs.StringVar(&n.uplink, "uplink", "", "`NAME` of the spacecraft's uplink, in place of --transmitter")
	fs.StringVar(&n.antenna, "antenna", "", "`NAME` of the station's antenna")
	fs.StringVar(&n.mode, "mode", "", "`NAME` of the transmitter's or the uplink's mode")
}

func runBudget(env *Env, o *budgetOptions) error {
	if err := o.check(); err != nil {
		return err
	}
	need := needOrbits
	if o.stated.given() {
		need = needRadio
	}
	s, err := env.load(need)
	if err != nil {
		return err
	}
	c, err := chooseLink(s, o.who, o.flight(s))
	if err != nil {
		return err
	}
	var r *budgetResult
	switch {
	case o.stated.given():
		r, err = statedBudget(s, c, &o.stated)
	case !o.at.IsZero():
		r, err = budgetAt(s, c, o.at)
	default:
		r, err = budgetOfPass(s, c, o.pass, o.step)
	}
	if err != nil {
		return err
	}
	if len(r.samples) == 0 {
		env.note("there is no such pass in the window %s to %s", utc(s.Window.Start), utc(s.Window.End))
	}
	if len(r.sky.missing) > 0 && o.format != formatTable {
		env.note("warning: %s", missingText(r.sky.missing))
	}
	switch o.format {
	case formatCSV:
		return writeBudgetCSV(env.Out, r)
	case formatJSON:
		return writeJSON(env.Out, budgetOut(r))
	}
	return writeBudgetTable(env, r)
}

// flight is when the orbit is flown; zero for a stated geometry.
func (o *budgetOptions) flight(s *scenario.Scenario) pass.Window {
	switch {
	case o.stated.given():
		return pass.Window{}
	case !o.at.IsZero():
		return flightAt(o.at)
	}
	return pass.Window{From: s.Window.Start, To: s.Window.End}
}

// flightAt is the flight for a budget at one instant.
func flightAt(at time.Time) pass.Window { return pass.Window{From: at, To: at.Add(time.Second)} }

// check refuses flags that contradict each other.
func (o *budgetOptions) check() error {
	switch st := &o.stated; {
	case st.given() && (!o.at.IsZero() || !o.pass.IsZero()):
		return inputErrorf("--at and --pass go with a flown orbit, --range-km and its like with a stated geometry; give one of the two")
	case st.given() && (st.rangeKm == nil || st.elevationDeg == nil):
		return inputErrorf("a stated geometry needs --range-km and --elevation-deg, both")
	case !o.at.IsZero() && !o.pass.IsZero():
		return inputErrorf("--at asks for one instant, --pass for a whole pass; give one of the two")
	case o.paced && (st.given() || !o.at.IsZero()):
		return inputErrorf("--step goes along a pass; it has no effect at one instant or with a stated geometry, so leave it out")
	}
	return nil
}

// angleOf returns a flag's degrees, nil where it was not given.
func angleOf(deg *float64) *unit.Angle {
	if deg == nil {
		return nil
	}
	a := unit.Angle(*deg) * unit.Degree
	return &a
}
