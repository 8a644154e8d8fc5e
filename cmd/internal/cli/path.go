package cli

import (
	"context"

	"github.com/spf13/cobra"
)

// pathOptions is what the command line says.
type pathOptions struct {
	spacecraft, station, transmitter, antenna string
	frequencyMHz, elevationDeg, tiltDeg       *float64
	diameterM, efficiency                     *float64

	sweep sweepOptions
	year  yearOptions
	batch batchOptions

	format format
}

func newPath(env *Env) *cobra.Command {
	var o pathOptions
	cmd := &cobra.Command{
		Use:   "path",
		Short: "What the air takes on a path: gas, cloud, rain, scintillation, and the sky's noise",
		Long: `Answer for the path alone, by the Recommendations of ITU-R, without a budget:

  --elevation-deg E             the terms at a station, for a frequency and a percentage
  --sweep elevation             the terms over elevation, frequency or percentage, as
                                table, CSV, JSON, and with --into FILE as a chart page
  --year                        how often in a year a spacecraft's contacts suffer how
                                much, with the margin, the rate and the bytes that result
  --model M --batch FILE        one model for every row of a table in CSV

The station's climate stands in the scenario; what it leaves out is filled by a rule
that is told, and rain and cloud that it does not state are missing. The frequency is
--frequency-mhz, or that of a transmitter. Percentages are shares of an average year.

A batch reads the columns that its model names, passes the others through and appends
the result. A bad row stops it before anything is written; with --keep-going its result
stays empty. Values outside the range that a Recommendation states come with a warning.`,
		Example: `  slantwise path --station "Tussock Bay" --frequency-mhz 26250 --elevation-deg 20
  slantwise path --station "Tussock Bay" --frequency-mhz 26250 --sweep elevation --into path.html
  slantwise path --spacecraft "Fulmar 1" --station "Tussock Bay" --mode steady --year
  slantwise path --model rain-specific --batch in.csv --format csv`,
		Args: noArgs,
	}
	fs := cmd.Flags()
	fs.StringVar(&o.station, "station", "", "`NAME` of the station")
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft whose transmitter gives frequency and polarisation")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the spacecraft's transmitter")
	fs.StringVar(&o.antenna, "antenna", "", "`NAME` of the station's antenna, whose size scintillation needs")
	numbers := []optional{
		{"frequency-mhz", "frequency in `MHZ`, in place of a transmitter's", &o.frequencyMHz},
		{"elevation-deg", "geometric elevation in `DEG`", &o.elevationDeg},
		{"tilt-deg", "tilt of the polarisation in `DEG` against the horizontal (left out: the transmitter's, else 45 for circular)", &o.tiltDeg},
		{"diameter-m", "diameter of the antenna in `M`, in place of an antenna of the station", &o.diameterM},
		{"efficiency", "efficiency of that antenna, a `FRACTION` (left out: 0.5)", &o.efficiency},
	}
	numbers = append(numbers, o.sweep.flags(fs)...)
	numbers = append(numbers, o.year.flags(fs)...)
	o.batch.flags(fs)
	set := addOptional(fs, numbers)
	addFormat(cmd, &o.format)
	cmd.RunE = func(cmd *cobra.Command, _ []string) error {
		set(cmd.Flags())
		return runPath(cmd.Context(), env, &o)
	}
	return cmd
}

func runPath(ctx context.Context, env *Env, o *pathOptions) error {
	if err := o.check(); err != nil {
		return err
	}
	switch {
	case o.batch.given():
		return runPathBatch(env, o)
	case o.year.year:
		return runPathYear(ctx, env, o)
	case o.sweep.over != "":
		return runPathSweep(env, o)
	}
	return runPathStated(env, o)
}

// check refuses flags that contradict each other.
func (o *pathOptions) check() error {
	ways := 0
	for _, given := range []bool{o.batch.given(), o.year.year, o.sweep.over != ""} {
		if given {
			ways++
		}
	}
	switch {
	case ways > 1:
		return inputErrorf("--batch, --year and --sweep ask for different answers; give one of them")
	case o.batch.given():
		return o.batch.check(o.format)
	case o.batch.edition != nil || o.batch.lognormal || o.batch.keepGoing:
		return inputErrorf("--edition, --lognormal and --keep-going go with --model and --batch")
	case o.sweep.over == "" && !o.sweep.alone():
		return inputErrorf("--from, --to, --points and --into go with --sweep")
	case o.sweep.static && o.sweep.into == "":
		return inputErrorf("--static goes with --into")
	case !o.year.year && o.year.more():
		return inputErrorf("--days, --mode and --step go with --year")
	case o.efficiency != nil && o.diameterM == nil:
		return inputErrorf("--efficiency goes with --diameter-m")
	case ways == 0 && o.elevationDeg == nil:
		return inputErrorf("give --elevation-deg for the path at one elevation, --sweep, --year, or --model with --batch")
	}
	return nil
}
