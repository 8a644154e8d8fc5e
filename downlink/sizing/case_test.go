package sizing

import (
	"context"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/downlink/propagation"
	"slantwise/downlink/rateplan"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

var caseStart = time.Date(2026, 9, 15, 0, 0, 0, 0, time.UTC)

// testCase is a spacecraft in X band and its sites.
type testCase struct {
	orbit   *orbit.KeptOrbit
	days    float64
	step    time.Duration
	sites   []station.Site
	antenna station.Antenna
	clear   bool // no weather
	power   unit.DB
	keep    func(*downlink.Profile) error
	isotrop bool // the transmit antenna is the same in every direction
}

func usualCase() testCase {
	at := 10.5 * 15 * unit.Degree
	o := orbit.SyntheticOrbit{Name: "Case", CatalogNumber: 99999, Epoch: caseStart, Altitude: 520 * unit.Kilometre, Eccentricity: 0.001, LocalTime: &at}
	el, err := o.Elements()
	if err != nil {
		panic(err)
	}
	k, err := orbit.KeepOrbit(el)
	if err != nil {
		panic(err)
	}
	amplifier := unit.Temperature(55)
	sky, err := station.TabulateElevation([][2]float64{{5, 110}, {10, 75}, {30, 45}, {90, 30}})
	if err != nil {
		panic(err)
	}
	return testCase{orbit: k, days: 28,
		sites: []station.Site{{Name: "North", Latitude: 58.4 * unit.Degree, Longitude: -6.1 * unit.Degree, MinimumElevation: 5 * unit.Degree}},
		antenna: station.Antenna{Name: "dish", Kind: station.Dish, Diameter: 3.7, Efficiency: 0.6, SurfaceRMS: 0.0005, PointingRMS: 0.1 * unit.Degree, FeedLoss: 0.4,
			Noise: &station.Noise{AntennaTemperature: sky,
				Chain: []station.Stage{{Name: "amplifier", Gain: 45, NoiseTemperature: &amplifier}}}},
	}
}

var backLobe = unit.DB(-15)

func (c *testCase) transmitter() downlink.Transmitter {
	t := downlink.Transmitter{Name: "X-band", Frequency: 8.18 * unit.Gigahertz, Power: unit.LevelDBW(3.0103).Plus(c.power), LineLoss: 0.8,
		Pattern:  downlink.Pattern{Kind: downlink.CosinePower, PeakGain: 6, Exponent: 2, BackLobe: &backLobe},
		Attitude: downlink.AttitudeNadir, ImplementationLoss: 1.5, RequiredMargin: 3}
	if c.isotrop {
		t.Pattern = downlink.Pattern{Kind: downlink.Isotropic, PeakGain: 6}
	}
	return t
}

var caseModes = []rateplan.Mode{
	{Name: "safe", InformationRate: 2e6, NetRate: 1.9e6, NeedDBHz: 63.0103 + 2.5 + 4.5},
	{Name: "middle", InformationRate: 1e7, NetRate: 0.97e7, NeedDBHz: 70 + 1.2 + 4.5},
	{Name: "fast", InformationRate: 4e7, NetRate: 3.9e7, NeedDBHz: 76 + 4.4 + 4.5},
}

// planner plans every pass by itself.
type planner struct{ *rateplan.Planner }

func newPlanner(t testing.TB, rules rateplan.Rules) planner {
	p, err := rateplan.NewPlanner(caseModes, rules)
	if err != nil {
		t.Fatal(err)
	}
	return planner{p}
}

func (p planner) Rules() rateplan.Rules { return rateplan.Rules{Relock: 4 * time.Second} }

func (p planner) Settle([]rateplan.Track) error { return nil }

func (p planner) Plan(t rateplan.Track) (rateplan.Plan, []rateplan.Mode, error) {
	out, err := p.Planner.Plan(t)
	return out, caseModes, err
}

func (p planner) Pattern(t *rateplan.Track, b []byte) ([]byte, bool, error) {
	b, err := p.Planner.Pattern(t, b)
	return b, true, err
}

var caseRules = rateplan.Rules{Changes: 4, LeastStay: 20 * time.Second, Relock: 4 * time.Second}

func caseSpec(t testing.TB, site *station.Site, a station.Antenna) propagation.PathSpec {
	const pc = propagation.Percent
	cloud, err := propagation.NewCurve("cloud", "kg/m2", propagation.Exceeded{P: 0.1 * pc, Value: 1.6}, propagation.Exceeded{P: 1 * pc, Value: 0.95},
		propagation.Exceeded{P: 5 * pc, Value: 0.5}, propagation.Exceeded{P: 50 * pc, Value: 0.02})
	if err != nil {
		t.Fatal(err)
	}
	rate, height := 26*propagation.MillimetrePerHour, 2*unit.Kilometre
	return propagation.PathSpec{Frequency: 8.18 * unit.Gigahertz, Exceedance: 1 * pc, Tilt: 45 * unit.Degree,
		Aperture: &propagation.Aperture{Diameter: a.Diameter, Efficiency: a.Efficiency},
		Climate:  propagation.Climate{Latitude: site.Latitude, Rate001: &rate, RainHeight: &height, CloudWater: cloud}}
}

// links makes the place of a site, the antenna of the smallest diameter, and the link
// under the planned weather with an antenna.
func (c *testCase) place(t testing.TB, i int) Place {
	site := &c.sites[i]
	frame := site.Frame()
	a := c.antenna
	p := Place{Clear: downlink.LinkSpec{Transmitter: c.transmitter(), Frame: &frame, Antenna: &a}}
	if c.clear {
		return p
	}
	smallest := a
	smallest.Diameter = 0.5
	spec := caseSpec(t, site, smallest)
	path, err := propagation.NewPath(spec)
	if err != nil {
		t.Fatal(err)
	}
	p.Weather, p.Statistics = path, &spec
	p.Clear.PathModels = []downlink.PathModel{downlink.NewClearSky(path)}
	return p
}

// weather is the budget's own link under the planned weather, for a diameter.
func (c *testCase) weather(t testing.TB, i int, a station.Antenna) *downlink.Link {
	site := &c.sites[i]
	frame := site.Frame()
	path, err := propagation.NewPath(caseSpec(t, site, a))
	if err != nil {
		t.Fatal(err)
	}
	l, err := downlink.NewLink(downlink.LinkSpec{Transmitter: c.transmitter(), Frame: &frame, Antenna: &a,
		PathModels: []downlink.PathModel{downlink.NewWeather(path)}, NoiseModels: []downlink.NoiseModel{downlink.NewWeatherNoise(path)}})
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func (c *testCase) earth() orbit.EarthOrientation { return orbit.EarthOrientation{} }

// fly flies the case.
func (c *testCase) fly(t testing.TB) (*Flight, []Place) {
	spec := FlightSpec{Orbit: c.orbit, Start: caseStart, Days: c.days, Step: c.step}
	var places []Place
	for i := range c.sites {
		p := c.place(t, i)
		link, err := downlink.NewLink(p.Clear)
		if err != nil {
			t.Fatal(err)
		}
		spec.Sites = append(spec.Sites, FlightSite{Site: &c.sites[i], Link: link, Keep: c.keep})
		places = append(places, p)
	}
	f, err := Fly(context.Background(), spec)
	if err != nil {
		t.Fatal(err)
	}
	return f, places
}

// study flies the case and prepares the study of some needs.
func (c *testCase) study(t testing.TB, needs Requirements, family Family) *Study {
	f, places := c.fly(t)
	s, err := NewStudy(Spec{Flight: f, Places: places, Family: family, Rates: newPlanner(t, caseRules), Mode: caseModes[0], Margin: 3, Needs: needs})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// downlinkMode is the first of the modes as a link takes it.
func downlinkMode() modem.Mode {
	required := unit.DB(2.5)
	return modem.Mode{Name: "safe", Modulation: "qpsk", Coding: "ccsds-conv-1-2+rs-255-223", DataRate: 2e6, RequiredEbN0: &required}
}
