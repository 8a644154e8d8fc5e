package cli

import (
	"fmt"
	"math"
	"slices"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/mount"
	"slantwise/station/pass"
)

type followOptions struct {
	spacecraft       []string
	station, antenna string
	tiltDeg          float64
	diametersM       []float64
	format           format
}

func newFollow(env *Env) *cobra.Command {
	var o followOptions
	cmd := &cobra.Command{
		Use:   "follow",
		Short: "What an antenna's mount cannot follow of the window's passes, and what would help",
		Long: `Add up what the mount of an antenna does not follow of all passes of the window: as
planned, turning after the spacecraft without a plan, and as planned if the mount were
another: with an elevation that goes over the top to 180 deg, tilted toward the best of
twelve azimuths, as an X-Y mount with the same rates, or with axes of one and a half times
the rates. With --diameter-m, for dishes of other diameters: by the rates that the scenario's
rates_by_diameter gives them, and with the narrower beam of a larger dish.`,
		Example: `  slantwise follow --station "Tussock Bay"
  slantwise follow --station "Tussock Bay" --diameter-m 3 --diameter-m 7 --diameter-m 13 --format csv`,
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runFollow(env, &o) },
	}
	fs := cmd.Flags()
	fs.StringArrayVar(&o.spacecraft, "spacecraft", nil, "only this spacecraft, by `NAME`; may be repeated")
	fs.StringVar(&o.station, "station", "", "`NAME` of the station")
	fs.StringVar(&o.antenna, "antenna", "", "`NAME` of the antenna, of several with a mount")
	fs.Float64Var(&o.tiltDeg, "tilt-deg", 7, "tilt that is tried, in `DEG`")
	fs.Float64SliceVar(&o.diametersM, "diameter-m", nil, "another diameter in `M` (again for more)")
	addFormat(cmd, &o.format)
	return cmd
}

// followJob is the passes that a mount takes.
type followJob struct {
	antenna  *station.Antenna
	courses  []followCourse
	contactS float64
}

type followCourse struct {
	course    *mount.Course
	frequency unit.Frequency
}

// followed is what a mount does not follow of the passes.
type followed struct {
	lostS, longestS float64
	passes          int
}

func runFollow(env *Env, o *followOptions) error {
	if !(o.tiltDeg > 0 && o.tiltDeg <= 90) {
		return inputErrorf("--tilt-deg: %g deg is not allowed; it must be greater than 0 and at most 90 deg", o.tiltDeg)
	}
	for _, d := range o.diametersM {
		if !(d > 0 && d <= 1000) {
			return inputErrorf("--diameter-m: %g m is not allowed; it must be greater than 0 and at most 1000 m", d)
		}
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	craft, err := pickMany("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	st, err := pick("station", o.station, s.Stations, stationName)
	if err != nil {
		return err
	}
	var moved []station.Antenna
	for _, a := range st.Antennas {
		if a.Mount != nil {
			moved = append(moved, a)
		}
	}
	if len(moved) == 0 {
		return inputErrorf("--station: no antenna of %q has a mount; give one in the scenario's key mount", st.Site.Name)
	}
	j := &followJob{}
	if j.antenna, err = pick("antenna", o.antenna, moved, func(a *station.Antenna) string { return a.Name }); err != nil {
		return err
	}
	for i := range craft {
		if err := j.add(s, &craft[i], st); err != nil {
			return err
		}
	}
	out, err := j.sheet(env, o)
	if err != nil {
		return err
	}
	return out.write(env, o.format)
}

// add takes the passes of a spacecraft on the first frequency that the antenna takes, or
// without one where it has no transmitter.
func (j *followJob) add(s *scenario.Scenario, c *scenario.Spacecraft, st *scenario.Station) error {
	var f unit.Frequency
	for _, t := range c.Transmitters {
		if len(j.antenna.Bands) == 0 || slices.ContainsFunc(j.antenna.Bands, func(b station.Band) bool { return b.Holds(t.Frequency) }) {
			f = t.Frequency
			break
		}
	}
	if f == 0 && len(c.Transmitters) > 0 {
		return nil
	}
	eph, found, err := passesOver(s, c, st)
	if err != nil {
		return err
	}
	r, err := station.NewRefraction(st.Site.HeightAboveSea())
	if err != nil {
		return &InputError{Err: err}
	}
	for i := range found {
		if err := j.addPass(eph, st, &found[i], r, f); err != nil {
			return err
		}
	}
	return nil
}

func (j *followJob) addPass(eph *orbit.Ephemeris, st *scenario.Station, p *pass.Pass, r *station.Refraction, f unit.Frequency) error {
	if !p.LOS.After(p.AOS) {
		return nil
	}
	course, err := mount.PassCourse(st.Site.Frame(), eph, p.AOS, p.LOS, r)
	if err != nil {
		return err
	}
	j.courses = append(j.courses, followCourse{course, f})
	j.contactS += p.Duration().Seconds()
	return nil
}

// take adds up what a mount under an antenna does not follow.
func (j *followJob) take(a *station.Antenna, m *station.Mount, chasing bool) (followed, error) {
	drive, err := mount.New(m)
	if err != nil {
		return followed{}, &InputError{Err: err}
	}
	of := *a
	of.Mount = m
	var out followed
	for _, c := range j.courses {
		_, tolerance := of.FollowingError(c.frequency)
		p := drive.Plan(c.course, mount.Options{Tolerance: tolerance})
		if chasing {
			p = p.Chase(tolerance)
		}
		if lost := p.LostSeconds(); lost > 0 {
			out.lostS, out.longestS, out.passes = out.lostS+lost, max(out.longestS, lost), out.passes+1
		}
	}
	return out, nil
}

// sheet has a row a mount, then a row a diameter.
func (j *followJob) sheet(env *Env, o *followOptions) (*sheet, error) {
	out := &sheet{name: "mounts", columns: []sheetColumn{
		wordsAs("mount", "mount"), numbersAs("diameter_m", "diameter m", 3), numbersAs("passes", "passes", 0), numbersAs("contact_s", "contact s", 1),
		numbersAs("not_followed_s", "not followed s", 1), numbersAs("passes_not_followed", "in passes", 0), numbersAs("longest_s", "longest s", 1),
	}}
	bar := env.startProgress("mounts", 5+len(o.diametersM))
	defer bar.stop()
	row := func(name string, diameter float64, f followed) {
		out.rows = append(out.rows, []any{name, diameter, float64(len(j.courses)), j.contactS, f.lostS, float64(f.passes), f.longestS})
		bar.add(1)
	}
	for _, v := range j.variants(o) {
		best, name := followed{lostS: math.Inf(1)}, v.name
		for i := range v.mounts {
			f, err := j.take(j.antenna, &v.mounts[i], v.chasing)
			if err != nil {
				return nil, err
			}
			if f.lostS < best.lostS {
				best = f
				if len(v.mounts) > 1 {
					name = fmt.Sprintf("%s %g deg", v.name, math.Round(v.mounts[i].TiltAzimuth.Degrees()))
				}
			}
		}
		row(name, none, best)
	}
	for _, d := range o.diametersM {
		a := *j.antenna
		a.Diameter, a.Beamwidth = unit.Length(d), 0
		m, beyond := j.antenna.MountFor(a.Diameter)
		f, err := j.take(&a, m, false)
		if err != nil {
			return nil, err
		}
		name := "of another diameter"
		if beyond {
			name = "of another diameter, beyond rates_by_diameter"
		}
		row(name, d, f)
	}
	out.notes = []string{
		"not followed: the error on the sky is greater than following_error_deg, or a tenth of the half-power beam where that is left out; each pass is planned by itself",
		"a mount moves without warning under program control: keep people and obstacles clear, lock it out for work on it, and follow the local rules",
	}
	if len(o.diametersM) > 0 && len(j.antenna.Mount.ByDiameter) == 0 {
		out.notes = append(out.notes, "rates_by_diameter left out: mounts of other dishes turn as this one")
	}
	return out, nil
}

// followVariant is a mount to be tried, or several of which the best counts.
type followVariant struct {
	name    string
	mounts  []station.Mount
	chasing bool
}

func (j *followJob) variants(o *followOptions) []followVariant {
	own := *j.antenna.Mount
	own.Stow = nil // it need not lie within another's ranges
	faster := own
	faster.Lower.Rate, faster.Upper.Rate = 1.5*own.Lower.Rate, 1.5*own.Upper.Rate
	out := []followVariant{
		{name: "as it is, planned", mounts: []station.Mount{own}},
		{name: "as it is, without a plan", mounts: []station.Mount{own}, chasing: true},
		{name: "one and a half times the rates", mounts: []station.Mount{faster}},
	}
	if own.Kind == station.ElevationOverAzimuth {
		over := own
		over.Upper.High = 180 * unit.Degree
		out = append(out, followVariant{name: "over the top to 180 deg", mounts: []station.Mount{over}})
		xy := own
		xy.Kind, xy.TiltAngle = station.YOverX, 0
		xy.Lower.Low, xy.Lower.High, xy.Upper.Low, xy.Upper.High = -90*unit.Degree, 90*unit.Degree, -90*unit.Degree, 90*unit.Degree
		along := xy
		along.XAxisAzimuth = 90 * unit.Degree
		out = append(out, followVariant{name: "X-Y, X axis north-south", mounts: []station.Mount{xy}}, followVariant{name: "X-Y, X axis east-west", mounts: []station.Mount{along}})
	}
	tilted := followVariant{name: fmt.Sprintf("tilted by %g deg toward", o.tiltDeg)}
	for k := range 12 {
		m := own
		m.TiltAngle, m.TiltAzimuth = unit.Angle(o.tiltDeg)*unit.Degree, unit.Angle(30*k)*unit.Degree
		// The tilted axis looks under its own horizon on one side.
		m.Upper.Low = max(-90*unit.Degree, own.Upper.Low-m.TiltAngle)
		tilted.mounts = append(tilted.mounts, m)
	}
	return append(out, tilted)
}
