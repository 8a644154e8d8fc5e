package scenario_test

import (
	"math"
	"reflect"
	"strings"
	"testing"
	"time"

	"slantwise/cmd/internal/planfiles"
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/licence"
	"slantwise/downlink/linkset"
	tables "slantwise/downlink/measured"
	"slantwise/downlink/propagation"
	"slantwise/downlink/rateplan"
	"slantwise/downlink/recorder"
	"slantwise/downlink/tolerance"
	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func loadGood(t *testing.T, file string) *scenario.Scenario {
	t.Helper()
	s, err := scenario.Load(scenario.Request{Path: file})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// TestEverything holds the values to those that stand in the file.
func TestEverything(t *testing.T) {
	s := loadGood(t, "testdata/good/everything.yaml")
	craft, site := s.Spacecraft[0], s.Stations[0].Site
	x, uhf := craft.Transmitters[0], s.Spacecraft[1].Transmitters[0]
	dish, measured, single, roof := s.Stations[0].Antennas[0], s.Stations[0].Antennas[1], s.Stations[0].Antennas[2], s.Stations[0].Antennas[3]
	back, eirp, ratio := unit.DB(-12), unit.LevelDBW(-6), unit.DB(1.5)
	for _, tt := range []struct {
		what      string
		got, want any
	}{
		{"start", s.Window.Start, time.Date(2026, 9, 15, 0, 0, 0, 0, time.UTC)},
		{"length", s.Window.Length(), 12*time.Hour + 30*time.Minute},
		{"UT1-UTC", s.Earth.UT1MinusUTC, -125 * time.Millisecond},
		{"polar motion y", s.Earth.PolarMotionY, 0.5 * unit.Arcsecond},
		{"choice", s.Choice, elements.Nearest},
		{"horizon", s.Horizon, station.Apparent},
		{"sets", len(s.Sets), 4},
		{"catalogue number without quotes", craft.Elements.CatalogNumber, 99001},
		{"set by name", s.Spacecraft[1].Elements.CatalogNumber, 99002},
		{"frequency", x.Frequency, 8180 * unit.Megahertz},
		{"back lobe", x.Pattern, downlink.Pattern{Kind: downlink.CosinePower, PeakGain: 6, Exponent: 2, BackLobe: &back}},
		{"attitude", x.Attitude, downlink.AttitudeNadir},
		{"underscores", x.Modes[1].SymbolRate, unit.Frequency(1e6)},
		{"own threshold", *x.Modes[1].RequiredEbN0, unit.DB(4.5)},
		{"roll-off", *x.Modes[0].RollOff, 0.5},
		{"highest rate", x.HighestRate, unit.BitRate(1.2e7)},
		{"allotted bandwidth", x.AllottedBandwidth, 60 * unit.Megahertz},
		{"extra loss", x.ExtraLosses, []downlink.Loss{{Name: "spacecraft pointing", Loss: 0.5}}},
		{"EIRP", *craft.Transmitters[1].EIRP, eirp},
		{"pattern of a file", [...]any{s.Spacecraft[1].Transmitters[2].Pattern.Kind, s.Spacecraft[1].Transmitters[2].Pattern.Grid.Gain[1][1]}, [...]any{downlink.GainGrid, unit.DB(0)}},
		{"spin", s.Spacecraft[1].Transmitters[2].Body.SpinGain, downlink.SpinMean},
		{"spin axis", math.Round(s.Spacecraft[1].Transmitters[2].Body.SpinAxis.Z * 1e6), -171657.0}, // 40, -10 deg of J2000 in September 2026: erfa 2.0.0.1, pn06a
		{"boresight by a vector", math.Round(s.Spacecraft[1].Transmitters[2].Body.Boresight.OffZ.Degrees() * 1e6), 36869898.0},
		{"turn", s.Spacecraft[1].Transmitters[2].Body.Turn, 30 * unit.Degree},
		{"boresight by angles", s.Spacecraft[1].Transmitters[3].Body.Boresight, downlink.BodyDirection{OffZ: 25 * unit.Degree, AroundZ: -90 * unit.Degree}},
		{"attitude history", s.Spacecraft[1].Transmitters[4].Body.History.Object, "Pipit 2"},
		{"EIRP in dBm", *s.Spacecraft[1].Transmitters[5].EIRP, unit.LevelDBW(6)},
		{"licensed EIRP in dBm", *s.Licences[1].HighestEIRP, unit.LevelDBW(10)},
		{"latitude in minutes", math.Round(s.Stations[3].Site.Latitude.Degrees() * 1e9), -54.51e9},
		{"longitude in minutes", s.Stations[3].Site.Longitude, -3.25 * unit.Degree},
		{"locator", [...]float64{math.Round(s.Stations[2].Site.Latitude.Degrees() * 1e6), math.Round(s.Stations[2].Site.Longitude.Degrees() * 1e6)},
			[...]float64{52e6 + 2.5e6/60 + 1.25e6/60, math.Round(4e6 + 2.5e6/60)}}, // second row up, first column: the middle of 5' by 2.5'
		{"tilt", *craft.Transmitters[1].Polarization.Tilt, 45 * unit.Degree},
		{"power", uhf.Power, unit.LevelDBm(30)},
		{"table", uhf.Pattern.Table[1], downlink.PatternPoint{OffBoresight: 90 * unit.Degree, Gain: -1}},
		{"probability", uhf.AttitudeProbability, 0.5},
		{"vertical", *uhf.Polarization.Tilt, 90 * unit.Degree},
		{"latitude", site.Latitude, 58.4 * unit.Degree},
		{"longitude", site.Longitude, -6.1 * unit.Degree},
		{"geoid", site.GeoidHeight, 55.5 * unit.Metre},
		{"zone", site.TimeZone.String(), "Europe/London"},
		{"merge gap", site.MergeGap, 7500 * time.Millisecond},
		{"mask kind", site.Mask.Kind(), station.Apparent},
		{"mask", site.Mask.Points()[1], station.MaskPoint{Azimuth: 90 * unit.Degree, Elevation: 6.5 * unit.Degree}},
		{"mask file", len(s.Stations[1].Site.Mask.Points()), 2},
		{"no antennas", len(s.Stations[1].Antennas), 0},
		{"exceeded", s.Path.Exceedance, 0.5 * propagation.Percent},
		{"models", [...]bool{s.Path.Gas, s.Path.Cloud, s.Path.Rain, s.Path.Scintillation, s.Path.Ionosphere, s.Path.Sun, s.Path.Moon}, [...]bool{true, true, true, true, true, true, false}},
		{"stated ionosphere", *s.Path.IonosphericScintillation + *s.Path.IonosphericRotation, unit.DB(2)},
		{"content and field", [...]float64{float64(s.Path.ElectronContent), s.Path.MagneticField}, [...]float64{1e17, 45e-6}},
		{"Sun's flux", [...]float64{s.Path.SunFlux[1].Frequency.Gigahertz(), math.Round(s.Path.SunFlux[1].Flux / 1e-22)}, [...]float64{8, 320}},
		{"other polarisation", x.OtherPolarization, true},
		{"latitude of the climate", s.Stations[0].Climate.Latitude, 58.4 * unit.Degree},
		{"height above the sea", s.Stations[0].Climate.Height, (42 - 55.5) * unit.Metre},
		{"surface temperature", *s.Stations[0].Climate.Surface.Temperature, unit.Temperature(281.5)},
		{"surface pressure", *s.Stations[0].Climate.Surface.Pressure, 1008 * propagation.Hectopascal},
		{"surface vapour", *s.Stations[0].Climate.Surface.Vapour, 8.5 * propagation.GramPerCubicMetre},
		{"season", s.Stations[0].Climate.Season, propagation.Winter},
		{"rain rate", *s.Stations[0].Climate.Rate001, 28 * propagation.MillimetrePerHour},
		{"rain height", *s.Stations[0].Climate.RainHeight, 2.1 * unit.Kilometre},
		{"cloud", at(t, s.Stations[0].Climate.CloudWater), 0.45},
		{"vapour", at(t, s.Stations[0].Climate.Vapour), 27.0},
		{"refractivity", *s.Stations[0].Climate.WetRefractivity, 45.0},
		{"low path", *s.Stations[0].Climate.LowPath, propagation.LowPath{GradientExceeded: 8 * propagation.Percent, WaterFraction: 0.5, WorstMonth: true}},
		{"environment", *s.Stations[0].Environment, propagation.QuietRural},
		{"environment of the path", *s.Stations[1].Environment, propagation.Rural},
		{"months", s.Stations[1].Climate.Months[11], propagation.Month{Temperature: 274.15, Rainfall: 75}},
		{"0 deg C isotherm", s.Stations[1].Climate.RainHeight.Kilometres(), 2.6 + 0.36}, // P.839-4
		{"log-normal cloud", *s.Stations[1].Climate.CloudLogNormal, propagation.CloudLogNormal{Mean: -1.6, Sigma: 1.1, Probability: 60 * propagation.Percent}},
		{"profile", s.Stations[1].Climate.Atmosphere.Name(), "measured profile of 2 levels, 0 km to 3 km"},
		{"spill-over", s.Stations[0].Antennas[4].Noise.SpillOver.Value(5 * unit.Degree), 0.12},
		{"ground", s.Stations[0].Antennas[4].Noise.Ground(), unit.Temperature(280)},
		{"surface", dish.SurfaceRMS, 0.5 * unit.Millimetre},
		{"beamwidth factor", dish.BeamwidthFactor, 65 * unit.Degree},
		{"band", dish.Bands[1], station.Band{Low: 8025 * unit.Megahertz, High: 8400 * unit.Megahertz}},
		{"dissipative", dish.ExtraLosses, []station.Loss{{Name: "radome", Loss: 0.25, Dissipative: true}}},
		{"passive stage", dish.Noise.Chain[1], station.Stage{Name: "cable", Gain: -6}},
		{"measurement", *measured.Measurement, station.Measurement{Date: "2026-02-14", Weather: "clear"}},
		{"G/T elevation", *single.GOverTElevation, 30 * unit.Degree},
		{"spectrum", *x.SpectrumPeak, unit.DB(-62.5)},
		{"greatest EIRP", craft.Transmitters[1].EIRPIsGreatest, true},
		{"recorder", *craft.Recorder, scenario.Recorder{
			Capacity: 64e9, WhenFull: recorder.Overwrite, Copies: 2, Housekeeping: 0.05,
			Acknowledge: recorder.Acknowledge{Every: 15, Delay: 0.5}, LockOn: 4, FrameLoss: 0.001,
			Data: []scenario.RecorderData{
				{Name: "telemetry", BytesPerSecond: 250, OnBoard: 1e6, OnBoardAge: 600},
				{Name: "images", BytesPerOrbit: 1.5 * (1 << 30), AfterNode: 600, Lasting: 900},
			},
		}},
		{"rate plan", craft.RatePlan, scenario.RatePlan{
			Choice: scenario.Changing, Low: 0.5e6, High: 2e6, Steps: 8,
			Rules: rateplan.Rules{Changes: 6, LeastStay: 20 * time.Second, Relock: 4 * time.Second, Guard: 0.5, GuardTime: 2 * time.Second, Silent: true},
		}},
		{"rate plan with a list", s.Spacecraft[1].RatePlan, scenario.RatePlan{
			Choice: scenario.OneForAll, Rates: []unit.Frequency{9600, 19200}, Steps: scenario.DefaultSymbolRateSteps,
			Rules: rateplan.Rules{Relock: 1500 * time.Millisecond},
		}},
		{"uplinks", []string{craft.Uplinks[0].Name, craft.Uplinks[1].Name, craft.Uplinks[2].Name}, []string{"command", "spare command", "stated"}},
		{"sensitivity", *craft.Uplinks[0].Sensitivity, downlink.Sensitivity{Power: unit.LevelDBm(-112), Rate: 4000, Mode: "slow"}},
		{"noise of the spacecraft", craft.Uplinks[1].Noise.AntennaTemperature.Value(0), 250.0},
		{"G/T of the spacecraft", *craft.Uplinks[2].GOverT, unit.DB(-24.5)},
		{"no receive antenna", craft.Uplinks[2].AntennaUnknown, true},
		{"link set", craft.LinkSets[2], scenario.LinkSet{Name: "half duplex", Links: []string{"S-band", "command"}, Rule: linkset.Rule{Order: linkset.InTurns, Change: 0.25, Turn: 10, UpShare: 0.2}}},
		{"load first", craft.LinkSets[1].Rule, linkset.Rule{Order: linkset.UpFirst, Change: 1, UpBytes: 2e5}},
		{"oscillator", *x.Oscillator, downlink.Oscillator{Offset: 850, Drift: -12.0 / 86400, Epoch: time.Date(2026, 9, 10, 0, 0, 0, 0, time.UTC)}},
		{"ppm", math.Round(craft.Transmitters[1].Oscillator.Offset.Hertz()*1e6) / 1e6, -343.75},
		{"fitted drift", math.Round(craft.Uplinks[0].Oscillator.Drift*2*86400*1e6) / 1e6, 13.0},
		{"turnaround", *craft.Transmitters[2].Turnaround, downlink.Turnaround{Uplink: "command", Down: 240, Up: 221}},
		{"transmit power", single.Transmit.Power, unit.LevelDBm(43)},
		{"transmit side", *dish.Transmit, station.Transmit{
			Power: watts(t, 5), LineLoss: 1.2, Bands: []station.Band{{Low: 2025 * unit.Megahertz, High: 2110 * unit.Megahertz}},
			Gain: dish.Transmit.Gain, Beamwidth: 2.6 * unit.Degree,
			Polarization: &station.Polarization{Kind: station.LeftHandCircular, AxialRatio: &ratio},
		}},
		{"transmit gain", dish.Transmit.Gain.Value(90 * unit.Degree), 35.5},
		{"probability of the pointing loss", craft.Uncertainty.Probability, 0.75},
		{"covariance", craft.Uncertainty.Covariances[0].Covariance[1][0], -2400.0},
		{"uncertainty across, from the scenario's own", s.Spacecraft[1].Uncertainty.Rule.Across, orbit.Growth{AtEpoch: 250, PerDay: 62.5}},
		{"uncertainty along, its own", s.Spacecraft[1].Uncertainty.Rule.Along, orbit.Growth{AtEpoch: 2000, PerDay: 3000}},
		{"follows", dish.Follows, station.FollowsSignal},
		{"uplink", s.Stations[0].Uplink, true},
		{"no uplink", s.Stations[1].Uplink, false},
		{"ground line", s.Stations[0].Line, unit.BitRate(8e6)},
		{"licensed stations", s.Licences[0].Stations, []string{"Skerry Point", "Reedmere"}},
		{"least elevation to receive", *s.Licences[0].LeastToReceive, 5.5 * unit.Degree},
		{"sector", s.Licences[0].Sectors[0], licence.Sector{From: 350 * unit.Degree, To: 20 * unit.Degree, Below: 12 * unit.Degree}},
		{"hours", s.Licences[0].Hours[0], licence.Hours{From: 6*time.Hour + 30*time.Minute, To: 24 * time.Hour, Days: []time.Weekday{time.Monday, time.Friday}}},
		{"licensed band", s.Licences[0].High, 8190 * unit.Megahertz},
		{"tolerance", s.Control.Spreads[0], tolerance.Spread{Term: "free-space loss", Favourable: 0.1, Adverse: -0.2, Law: tolerance.Uniform, Source: "orbit"}},
		{"criterion", s.Control.Criteria[0], tolerance.Criterion{Name: "own", Statement: tolerance.MeanLessSigmas, Sigmas: 3, Least: 1, Source: "project"}},
		{"mount", *dish.Mount, station.Mount{
			Lower:       station.Axis{Low: -270 * unit.Degree, High: 280 * unit.Degree, Rate: degrees(10), Acceleration: unit.AngularAcceleration(degrees(4))},
			Upper:       station.Axis{Low: 2 * unit.Degree, High: 178 * unit.Degree, Rate: degrees(5), Acceleration: unit.AngularAcceleration(degrees(3))},
			TiltAzimuth: 45 * unit.Degree, TiltAngle: 7.5 * unit.Degree, Settle: 1.5, Tolerance: 0.05 * unit.Degree,
			Stow:       &station.AxisAngles{Lower: 180 * unit.Degree, Upper: 88 * unit.Degree},
			ByDiameter: []station.MountRates{{Diameter: 3.7, Lower: degrees(10), Upper: degrees(5)}, {Diameter: 11, Lower: degrees(3), Upper: degrees(2)}},
		}},
		{"X-Y mount", *measured.Mount, station.Mount{
			Kind: station.YOverX, XAxisAzimuth: 90 * unit.Degree,
			Lower: station.Axis{Low: -85 * unit.Degree, High: 85 * unit.Degree, Rate: degrees(3), Acceleration: unit.AngularAcceleration(degrees(2))},
			Upper: station.Axis{Low: -80 * unit.Degree, High: 80 * unit.Degree, Rate: degrees(4), Acceleration: unit.AngularAcceleration(degrees(2.5))},
		}},
		{"no mount", single.Mount, (*station.Mount)(nil)},
		{"shift", s.ContactPlan.Stations[0].Shifts, []scenario.Shift{{Days: []time.Weekday{time.Monday, time.Friday}, From: 22 * time.Hour, To: 6*time.Hour + 30*time.Minute}}},
		{"antenna of the plan", s.ContactPlan.Stations[0].Antennas[0], scenario.PlanAntenna{Name: "dish", Contract: "north", PerContact: 10, PerMinute: 1.5, SetUp: 3 * time.Minute, TearDown: 20 * time.Second}},
		{"spacecraft of the plan", s.ContactPlan.Spacecraft[0], scenario.PlanSpacecraft{
			Name: "Wagtail 1", Contract: "north", Transmitters: []string{"X-band"}, AtOnce: 2, Between: 20 * time.Second, Repoint: time.Minute,
			Overlap: [2]time.Duration{10 * time.Second, time.Minute}, SameData: true, UplinkShare: 0.05, PerOrbit: 15 * time.Minute, Share: 1e9, ValuePerByte: 2,
			Data:     []scenario.PlanData{{Name: "images", ValuePerByte: 3, Due: 6 * time.Hour, Fade: 12 * time.Hour}},
			Commands: &scenario.PlanCommands{Lead: 10 * time.Minute, Valid: 24 * time.Hour, Loaded: []time.Time{time.Date(2026, 9, 14, 22, 0, 0, 0, time.UTC)}},
		}},
		{"budget", *s.ContactPlan.Limits[1].Price, 500.0},
		{"local day", s.ContactPlan.Limits[0].Zone.String(), "Europe/London"},
		{"shared", s.ContactPlan.Shared[0], scenario.PlanShared{Name: "front end", Station: "Skerry Point", Antennas: []string{"dish", "measured"}, AtOnce: 1, FromSetUp: true}},
		{"closed, from a file", s.ContactPlan.Closed[3], planfiles.Outage{Place: "closed.csv: line 3", Spacecraft: "Pipit", Reason: "manoeuvre",
			Start: time.Date(2026, 9, 15, 5, 0, 0, 0, time.UTC), End: time.Date(2026, 9, 15, 5, 30, 0, 0, time.UTC)}},
		{"a kind of table", s.Measurements[0], tables.Layout{Name: "receiver log", Separator: ';', TimeColumn: "When", Times: tables.TimePlain, ClockAhead: 250 * time.Millisecond, Missing: []string{"n/a", "-999"},
			Columns: []tables.LayoutColumn{{Column: "AGC", Holds: "relative_power_db", Scale: -0.5, Add: 12}, {Column: "State", Holds: "locked", Scale: 1, Yes: "LOCK"}, {Holds: "rain_mm_h", Scale: 1}}}},
		{"boresight", roof.Boresight, station.Direction{Azimuth: 10 * unit.Degree, Elevation: 90 * unit.Degree}},
	} {
		if !reflect.DeepEqual(tt.got, tt.want) {
			t.Errorf("%s: got %v, want %v", tt.what, tt.got, tt.want)
		}
	}
}

func watts(t *testing.T, w float64) unit.Level {
	t.Helper()
	l, err := unit.LevelWatts(w)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// degrees returns a rate of degrees a second.
func degrees(v float64) unit.AngularRate { return unit.AngularRate(v * unit.Degree.Radians()) }

// at returns the value of a curve at 5 %.
func at(t *testing.T, c propagation.Curve) float64 {
	t.Helper()
	v, err := c.At(5 * propagation.Percent)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// TestNotationsAgree reads the same scenario as YAML, TOML and JSON.
func TestNotationsAgree(t *testing.T) {
	want := loadGood(t, "testdata/good/everything.yaml")
	for _, file := range []string{"testdata/good/everything.toml", "testdata/good/everything.json"} {
		got := loadGood(t, file)
		got.Label = want.Label
		// Functions cannot be compared.
		if a, b := got.Stations[1].Climate.Atmosphere, want.Stations[1].Climate.Atmosphere; a.Name() != b.Name() {
			t.Errorf("%s: atmosphere %q, want %q", file, a.Name(), b.Name())
		}
		got.Stations[1].Climate.Atmosphere = want.Stations[1].Climate.Atmosphere
		if d := scenario.Differences(want, got); len(d) > 0 {
			t.Errorf("%s: keys differ: %q", file, d)
		}
		scenario.ShareTree(got, want) // the notations stand in it
		if !reflect.DeepEqual(got, want) {
			t.Errorf("%s differs from everything.yaml:\n got %+v\nwant %+v", file, got, want)
		}
	}
}

// TestSpacecraftLeftOut takes every element set, names unchanged, no transmitter.
func TestSpacecraftLeftOut(t *testing.T) {
	s := loadGood(t, "testdata/good/no-spacecraft.yaml")
	var names []string
	for _, c := range s.Spacecraft {
		names = append(names, c.Name)
		if len(c.Transmitters) != 0 || c.Elements.CatalogNumber == 0 {
			t.Errorf("%s: got %d transmitters and catalogue number %d", c.Name, len(c.Transmitters), c.Elements.CatalogNumber)
		}
	}
	if want := []string{"Wagtail 1", "Pipit 2", "Dunlin 1", "Fulmar 1"}; !reflect.DeepEqual(names, want) {
		t.Errorf("names %q, want %q", names, want)
	}
}

// TestOldElementsWarn: ten days at 512 km are more than the three that are common
// practice; the same set on its own day gives no warning.
func TestOldElementsWarn(t *testing.T) {
	s := loadGood(t, "testdata/good/no-spacecraft.yaml")
	// Fulmar 1 flies above 1000 km.
	if len(s.Warnings) != 3 || s.Warnings[0].About != "spacecraft Wagtail 1" || !strings.Contains(s.Warnings[0].Text, "10.5 days old at 2026-09-25T00:00:00Z") {
		t.Errorf("warnings %q, want one each for the three below 1000 km", s.Warnings)
	}
	t.Setenv("SLANTWISE_WINDOW_START_UTC", "2026-09-14T12:00:00Z")
	if s = loadGood(t, "testdata/good/no-spacecraft.yaml"); len(s.Warnings) != 0 {
		t.Errorf("warnings of fresh sets: %q", s.Warnings)
	}
}

// TestChoice picks among two sets of one object, for the window and for an instant.
func TestChoice(t *testing.T) {
	s := loadGood(t, "testdata/good/two-sets.yaml")
	first, second := time.Date(2026, 9, 14, 12, 0, 0, 0, time.UTC), time.Date(2026, 9, 16, 12, 0, 0, 0, time.UTC)
	c := &s.Spacecraft[0]
	if !c.Elements.Epoch.Equal(second) || c.Elements.Among != 2 || len(c.Candidates) != 2 {
		t.Errorf("newest: epoch %v of %d sets", c.Elements.Epoch, c.Elements.Among)
	}
	t.Setenv("SLANTWISE_ELEMENT_CHOICE", "nearest")
	s = loadGood(t, "testdata/good/two-sets.yaml")
	c = &s.Spacecraft[0]
	if !c.Elements.Epoch.Equal(first) {
		t.Errorf("nearest to the middle of the window: epoch %v, want %v", c.Elements.Epoch, first)
	}
	if at := c.ElementsAt(second.Add(-time.Hour)); !at.Epoch.Equal(second) || at.Age != -time.Hour {
		t.Errorf("nearest to an instant: epoch %v, age %v", at.Epoch, at.Age)
	}
}

// TestStatedGeometry needs no element file, window, element set or attitude.
func TestStatedGeometry(t *testing.T) {
	s, err := scenario.Load(scenario.Request{Path: "testdata/good/stated-geometry.yaml", Need: scenario.NeedRadio})
	if err != nil {
		t.Fatal(err)
	}
	if got := s.Spacecraft[0].Transmitters[0].Attitude; got != downlink.AttitudeUnstated {
		t.Errorf("attitude %v, want unstated", got)
	}
	if _, err := scenario.Load(scenario.Request{Path: "testdata/good/stated-geometry.yaml"}); err == nil {
		t.Error("the same file was accepted for orbits, without element files")
	}
}

func TestDemo(t *testing.T) {
	t.Chdir(t.TempDir())
	s, err := scenario.Load(scenario.Request{})
	if err != nil {
		t.Fatal(err)
	}
	if !s.Demo || len(s.Warnings) != 0 {
		t.Errorf("demo %v with warnings %v, want the demo without warnings", s.Demo, s.Warnings)
	}
}

func TestStart(t *testing.T) {
	const awkward = "o'clock: #1.tle"
	text, sets, err := scenario.Start(awkward)
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	writeFile(t, scenario.DefaultFile, text)
	writeFile(t, awkward, sets)
	s, err := scenario.Load(scenario.Request{})
	if err != nil {
		t.Fatal(err)
	}
	if s.Demo || s.Label != scenario.DefaultFile || len(s.Warnings) != 0 {
		t.Errorf("read %q (demo %v) with warnings %v", s.Label, s.Demo, s.Warnings)
	}
}
