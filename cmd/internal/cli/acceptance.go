package cli

import (
	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/acceptance"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station/pass"
)

type acceptanceOptions struct {
	who linkNames

	yDB                                []float64
	ySigmaDB                           float64
	fluxSFU, fluxJy                    *float64
	fluxSigmaPercent                   *float64
	diameterDeg                        *float64
	diameterSigmaDeg, beamSigmaPercent float64
	elevationDeg, attenuationDB        *float64
	attenuationSigmaDB                 float64
	pointingDB, pointingSigmaDB        float64
	promisedDBK                        *float64
	format                             format
}

func newAcceptance(env *Env) *cobra.Command {
	var o acceptanceOptions
	cmd := &cobra.Command{
		Use:   "acceptance",
		Short: "The G/T of a bought station by the Sun or a radio star, its uncertainty, and the bytes that follow",
		Long: `Work out a station's G/T from the ratio of the noise on a source of known flux to that of
the cold sky beside it at the same elevation (ITU-R S.733-2), with every term of its
uncertainty, combined as the root of the sum of squares. Then compare it with what was
promised, or else with what the scenario makes of the antenna at that elevation under a
clear sky, and fly the window's passes with the difference: the bytes that come down if
all of C/N0 is off by as much at every elevation.

Uncertainties are standard ones (one sigma); the expanded one is twice that. The flux is
that of both polarisations together, at the frequency and the day of the measurement, as
an observatory gives it. The frequency is the transmitter's.`,
		Example: `  slantwise acceptance --spacecraft "Wagtail 1" --station "Skerry Point" --elevation-deg 40 \
    --y-db 15.4 --y-db 15.6 --y-db 15.5 --y-uncertainty-db 0.1 --flux-sfu 280 --flux-uncertainty-percent 5`,
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runAcceptance(env, &o) },
	}
	fs := cmd.Flags()
	addLinkNames(cmd, &o.who)
	fs.Float64SliceVar(&o.yDB, "y-db", nil, "noise on the source over that of the cold sky, in `DB` (again for more readings)")
	fs.Float64Var(&o.ySigmaDB, "y-uncertainty-db", 0, "standard uncertainty in `DB` that all readings share")
	addNumber(fs, &o.fluxSFU, "flux-sfu", "flux of the source in `SFU`, 1e-22 W/(m2 Hz), both polarisations")
	addNumber(fs, &o.fluxJy, "flux-jy", "in its place the flux in `JY`, 1e-26 W/(m2 Hz)")
	addNumber(fs, &o.fluxSigmaPercent, "flux-uncertainty-percent", "standard uncertainty of the flux in `PERCENT` of it")
	addNumber(fs, &o.diameterDeg, "source-diameter-deg", "diameter in `DEG` of the evenly bright source, 0 for a point (left out: the visible Sun)")
	fs.Float64Var(&o.diameterSigmaDeg, "source-diameter-uncertainty-deg", 0, "its standard uncertainty in `DEG`")
	fs.Float64Var(&o.beamSigmaPercent, "beam-uncertainty-percent", 0, "standard uncertainty of the antenna's half-power beamwidth in `PERCENT`")
	addNumber(fs, &o.elevationDeg, "elevation-deg", "elevation of the source in `DEG`")
	addNumber(fs, &o.attenuationDB, "attenuation-db", "attenuation of the air in front of the source in `DB` (left out: gas of the ordinary air, ITU-R P.676)")
	fs.Float64Var(&o.attenuationSigmaDB, "attenuation-uncertainty-db", 0, "its standard uncertainty in `DB`")
	fs.Float64Var(&o.pointingDB, "pointing-loss-db", 0, "loss in `DB` by not pointing at the middle of the source")
	fs.Float64Var(&o.pointingSigmaDB, "pointing-loss-uncertainty-db", 0, "its standard uncertainty in `DB`")
	addNumber(fs, &o.promisedDBK, "promised-g-over-t-db-k", "G/T that was promised at this elevation, in `DB`/K (left out: as the scenario has it)")
	addFormat(cmd, &o.format)
	return cmd
}

func (o *acceptanceOptions) check() error {
	switch {
	case len(o.yDB) == 0:
		return inputErrorf("--y-db: left out; give the noise on the source over that of the cold sky, once for each reading")
	case (o.fluxSFU == nil) == (o.fluxJy == nil):
		return inputErrorf("--flux-sfu: give the flux of the source, by --flux-sfu or by --flux-jy")
	case o.fluxSigmaPercent == nil || !(*o.fluxSigmaPercent >= 0 && *o.fluxSigmaPercent < 100):
		return inputErrorf("--flux-uncertainty-percent: left out or not allowed; give 0 or more and less than 100 %%, as the observatory states it")
	case !(o.beamSigmaPercent >= 0 && o.beamSigmaPercent < 100):
		return inputErrorf("--beam-uncertainty-percent: %g %% is not allowed; it must be 0 or more and less than 100 %%", o.beamSigmaPercent)
	case o.elevationDeg == nil || !(*o.elevationDeg > 0 && *o.elevationDeg <= 90):
		return inputErrorf("--elevation-deg: left out or not allowed; give the elevation of the source, greater than 0 and at most 90 deg")
	}
	return nil
}

// acceptanceJob is what a measurement is held against.
type acceptanceJob struct {
	scenario  *scenario.Scenario
	link      *chosenLink
	elevation unit.Angle
	result    *acceptance.Result
	designDBK float64 // as the scenario has it
	promised  float64
	bytes     acceptanceBytes
	passes    int
	notes     []string
}

func runAcceptance(env *Env, o *acceptanceOptions) error {
	if err := o.check(); err != nil {
		return err
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	if o.who.mode == "" { // C/N0 is the same for each
		o.who.mode = firstMode(s, o.who)
	}
	j := &acceptanceJob{scenario: s, elevation: unit.Angle(*o.elevationDeg) * unit.Degree}
	if j.link, err = chooseLink(s, o.who, pass.Window{From: s.Window.Start, To: s.Window.End}); err != nil {
		return err
	}
	if err := j.measure(o); err != nil {
		return err
	}
	if err := j.fly(); err != nil {
		return err
	}
	return j.sheet().write(env, o.format)
}

// firstMode names the first mode of the transmitter that is meant, if that is clear.
func firstMode(s *scenario.Scenario, n linkNames) string {
	c, err := pick("spacecraft", n.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return ""
	}
	t, err := pick("transmitter", n.transmitter, c.Transmitters, transmitterName)
	if err != nil || len(t.Modes) == 0 {
		return ""
	}
	return t.Modes[0].Name
}

// measure works out the G/T, and what the scenario makes of it.
func (j *acceptanceJob) measure(o *acceptanceOptions) error {
	f := j.link.transmitter.Frequency
	beam, known := j.link.antenna.BeamwidthAt(f)
	if !known {
		return inputErrorf("antenna %q: the beamwidth is not known; give beamwidth_deg or diameter_m in the scenario", j.link.antenna.Name)
	}
	m := &acceptance.Readings{Frequency: f, YDB: o.yDB, YSigmaDB: o.ySigmaDB,
		BeamDeg:     acceptance.Quantity{Value: beam.Degrees(), Sigma: beam.Degrees() * o.beamSigmaPercent / 100},
		DiameterDeg: acceptance.Quantity{Value: propagation.SunDiameter.Degrees(), Sigma: o.diameterSigmaDeg},
		PointingDB:  acceptance.Quantity{Value: o.pointingDB, Sigma: o.pointingSigmaDB}}
	if o.fluxSFU != nil {
		m.Flux.Value = *o.fluxSFU * propagation.SolarFluxUnit
	} else {
		m.Flux.Value = *o.fluxJy * 1e-26
	}
	m.Flux.Sigma = m.Flux.Value * *o.fluxSigmaPercent / 100
	if o.diameterDeg != nil {
		m.DiameterDeg.Value = *o.diameterDeg
	} else {
		j.notes = append(j.notes, "the source is taken as wide as the visible Sun, 0.533 deg; at decimetre waves the Sun is up to twice as wide")
	}
	m.Attenuation = acceptance.Quantity{Sigma: o.attenuationSigmaDB}
	if o.attenuationDB != nil {
		m.Attenuation.Value = *o.attenuationDB
	} else {
		gas, err := j.clearAir()
		if err != nil {
			return err
		}
		m.Attenuation.Value = gas
		j.notes = append(j.notes, "attenuation of the air: the gas of the ordinary air, ITU-R P.676")
	}
	var err error
	if j.result, err = acceptance.Measure(m); err != nil {
		return &InputError{Err: err}
	}
	return j.promise(o)
}

// clearAir is the gas in front of the source, dB.
func (j *acceptanceJob) clearAir() (float64, error) {
	spec := newSkies(j.scenario).spec(j.link.station, j.link.transmitter.Frequency)
	spec.ClearSky, spec.WithoutGas = true, false
	path, err := propagation.NewPath(spec)
	if err != nil {
		return 0, &InputError{Err: err}
	}
	at, err := path.At(j.elevation)
	if err != nil {
		return 0, &InputError{Err: err}
	}
	return float64(at.Gas), nil
}

// promise is what the measurement is held against.
func (j *acceptanceJob) promise(o *acceptanceOptions) error {
	clear := j.link.clear
	if clear == nil {
		clear = j.link.link
	}
	const anyRange = 1000 * unit.Kilometre // G/T does not hang on it
	g, err := clear.StatedGeometry(anyRange, j.elevation, nil, nil)
	if err != nil {
		return &InputError{Err: err}
	}
	var b *downlink.Budget
	if b, err = clear.At(g); err != nil {
		return &InputError{Err: err}
	}
	j.designDBK = float64(b.GOverT)
	j.promised = j.designDBK
	if o.promisedDBK != nil {
		j.promised = *o.promisedDBK
	}
	return nil
}
