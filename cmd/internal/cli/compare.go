package cli

import (
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
)

type compareOptions struct {
	before, after        string
	spacecraft, stations []string
	transmitter, uplink  string
	apart                time.Duration
	moved                bool
	format               format
	page                 string
}

func newCompare(env *Env) *cobra.Command {
	var o compareOptions
	cmd := &cobra.Command{
		Use:   "compare BEFORE AFTER",
		Short: "What another scenario changes in the passes: times, elevation, margin, bytes",
		Long: `Hold the passes of two scenario files against each other: another element set, a later
launch, another antenna. The passes of each spacecraft over each station are paired by
their culminations, in the order of time, and a row tells what became of each:

  same  AOS and LOS are the same to the millisecond
  moved it has a partner, and the columns tell by how much it moved
  gone  only the first file has it
  new   only the second file has it

Shifts are AFTER less BEFORE. Margin and bytes are those of one transmitter: the one
named, or the only one that the spacecraft has. The margin is the greatest along the
pass in the transmitter's first mode; the bytes are those of the rate plan, within the
licences. The margin of an uplink is told alike; in tables and CSV only where --uplink
names it. Where a file states how uncertain the positions are, one standard deviation of
AOS stands behind: what lies within it was to be expected.

With --page the same stands on a page: what the second file changes in passes, bytes and
margin first, then charts, every pass, the age of the orbits, and which keys of the files
differ. All its numbers lie beside it as CSV and JSON.`,
		Example: `  slantwise compare before.yaml after.yaml --station "My station" --changed
  slantwise compare before.yaml after.yaml --format csv > changes.csv
  slantwise compare before.yaml after.yaml --page changes.html`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) != 2 {
				return inputErrorf("%s takes two scenario files, the one before and the one after; %d given", cmd.CommandPath(), len(args))
			}
			o.before, o.after = args[0], args[1]
			return nil
		},
		RunE: func(*cobra.Command, []string) error { return runCompare(env, &o) },
	}
	fs := cmd.Flags()
	fs.StringArrayVar(&o.spacecraft, "spacecraft", nil, "`NAME` of a spacecraft (again for more; left out: all that both files have)")
	fs.StringArrayVar(&o.stations, "station", nil, "`NAME` of a station (again for more; left out: all that both files have)")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the transmitter of margins and bytes")
	fs.StringVar(&o.uplink, "uplink", "", "`NAME` of the uplink whose margins stand in the table and CSV too")
	addDuration(fs, &o.apart, "apart", 45*time.Minute, "how far apart the culminations of one pass may lie in the two files")
	fs.BoolVar(&o.moved, "changed", false, "leave out passes that are the same")
	fs.StringVar(&o.page, "page", "", "write a page into this `FILE`.html, its numbers as CSV and JSON beside it")
	addFormat(cmd, &o.format)
	return cmd
}

func runCompare(env *Env, o *compareOptions) error {
	if env.Scenario != "" {
		return inputErrorf("--scenario does not go with compare; the two files stand behind the command")
	}
	if err := o.pageName(); err != nil {
		return err
	}
	c := &comparison{options: o}
	for i, file := range []string{o.before, o.after} {
		side := *env
		side.Scenario = file
		s, err := side.load(needOrbits)
		if err != nil {
			return err
		}
		c.sides[i] = s
	}
	if err := c.choose(); err != nil {
		return err
	}
	for _, craft := range c.craft {
		if err := c.add(craft); err != nil {
			return err
		}
	}
	if o.page != "" {
		return c.writePage(env)
	}
	return c.sheet(o.uplink != "").write(env, o.format)
}

// comparison is what two scenarios have in common, pass by pass.
type comparison struct {
	options  *compareOptions
	sides    [2]*scenario.Scenario
	craft    [][2]*scenario.Spacecraft
	stations [][2]*scenario.Station
	passes   []comparedPass
	notes    []string
}

// sheet lists the passes; withUplink tells whether tables and CSV have its margins.
func (c *comparison) sheet(withUplink bool) *sheet {
	out := &sheet{name: "passes", notes: c.notes, rows: [][]any{}, columns: []sheetColumn{
		wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station"), wordsAs("change", "change"),
		wordsAs("aos_before_utc", "AOS before UTC"), wordsAs("aos_after_utc", "AOS after UTC"),
		numbersAs("aos_shift_s", "AOS by s", 3), numbersAs("los_shift_s", "LOS by s", 3), numbersAs("max_elevation_before_deg", "highest before deg", 2),
		numbersAs("max_elevation_after_deg", "after deg", 2), numbersAs("margin_before_db", "margin before dB", 2), numbersAs("margin_after_db", "after dB", 2),
		numbersAs("volume_before_bytes", "volume before B", 0), numbersAs("volume_after_bytes", "after B", 0),
		numbersAs("aos_plus_minus_before_s", "AOS ± before s", 2), numbersAs("aos_plus_minus_after_s", "after s", 2),
		numbersAs("uplink_margin_before_db", "uplink margin before dB", 2), numbersAs("uplink_margin_after_db", "after dB", 2),
	}}
	for i := len(out.columns) - 2; i < len(out.columns); i++ {
		out.columns[i].onlyJSON = !withUplink
	}
	for i := range c.passes {
		if p := &c.passes[i]; !p.same() || !c.options.moved {
			out.rows = append(out.rows, p.row())
		}
	}
	return out
}
