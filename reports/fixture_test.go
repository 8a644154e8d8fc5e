package reports

import (
	"context"
	"math"
	"strconv"
	"time"

	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

// The figures of this fixture are invented; they only have to look like a pass. A
// circular orbit 550 km up flies by on a straight line over a flat Earth.

var firstAOS = time.Date(2026, 3, 10, 10, 42, 31, 250e6, time.UTC)

// shape says what a fixture pass is like.
type shape struct {
	spacecraft string
	site       *station.Site
	aos        time.Time
	half       float64 // seconds from AOS to culmination
	miss       float64 // km from the station to the ground track
	power      float64 // dBm at 1000 km
	noRadio    bool
	sky        bool // a path, see addSky
	cut        pass.Cut
}

func skerry() *station.Site {
	zone := time.FixedZone("WET", 0)
	return &station.Site{
		Name: "Skerry Point", Latitude: 58.4 * unit.Degree, Longitude: -6.1 * unit.Degree,
		Altitude: 42 * unit.Metre, TimeZone: zone, MinimumElevation: 5 * unit.Degree,
	}
}

func plateau() *station.Site {
	return &station.Site{
		Name: "High Plateau", Latitude: -23.2 * unit.Degree, Longitude: 17.1 * unit.Degree, Altitude: 1650 * unit.Metre,
		TimeZone: time.FixedZone("CAT", 2*3600), MinimumElevation: 5 * unit.Degree,
	}
}

func basicShape() shape {
	return shape{spacecraft: "Wagtail 1", site: skerry(), aos: firstAOS, half: 300, miss: 400, power: -100}
}

// fixturePass makes a pass of a shape with a sample a second.
func fixturePass(s shape) *Pass {
	n := int(2*s.half) + 1
	f := &downlink.Profile{Start: s.aos, DataRate: 4e6, RequiredMarginDB: 3}
	p := &Pass{
		Spacecraft: s.spacecraft, Site: s.site, Profile: f,
		Elements: Elements{Name: s.spacecraft, CatalogNumber: 99001, Epoch: s.aos.Add(-31 * time.Hour), Age: 31 * time.Hour, Source: orbit.Source{File: "elements.tle", Line: 1}},
		Pass: pass.Pass{
			AOS: s.aos, Culmination: s.aos.Add(time.Duration(s.half * float64(time.Second))),
			LOS: s.aos.Add(time.Duration(2 * s.half * float64(time.Second))), Cut: s.cut,
		},
		Notes: []Note{{Kind: Warning, About: "Wagtail 1", Text: "The element set is 4.2 days old in the middle of the window; order a fresh one."},
			{Kind: Default, About: "earth", Text: "UT1 is taken as UTC.", Source: "up to 0.9 s, ITU-R TF.460"},
			{Kind: Assumption, About: "attitude", Text: "The spacecraft keeps its antenna at nadir.", Source: "scenario"}},
	}
	for az := 0.0; az < 360; az += 15 {
		p.Horizon = append(p.Horizon, Direction{az, 4 + 5*math.Abs(math.Sin(az/50))})
	}
	for i := range n {
		fillGeometry(p, s, float64(i))
	}
	q := &p.Pass
	mid := n / 2
	q.MaxElevation, q.MinRange = unit.Angle(f.ElevationDeg[mid])*unit.Degree, unit.Length(f.RangeKm[mid])*unit.Kilometre
	q.AOSAzimuth, q.CulminationAzimuth, q.LOSAzimuth = at(f.AzimuthDeg[0]), at(f.AzimuthDeg[mid]), at(f.AzimuthDeg[n-1])
	q.AOSElevation, q.LOSElevation = at(f.ElevationDeg[0]), at(f.ElevationDeg[n-1])
	if !s.noRadio {
		fillRadio(p, s)
		if s.sky {
			addSky(p, s)
		}
	}
	return p
}

func at(deg float64) unit.Angle { return unit.Angle(deg) * unit.Degree }

func fillGeometry(p *Pass, s shape, t float64) {
	f := p.Profile
	along := 7.1 * (t - s.half)
	slant := math.Sqrt(along*along + s.miss*s.miss + 550*550)
	f.Seconds = append(f.Seconds, t)
	f.AzimuthDeg = append(f.AzimuthDeg, math.Mod(200+math.Atan2(along, s.miss)*180/math.Pi+360, 360))
	el := math.Asin(550/slant)*180/math.Pi - 9*(1-550/slant)
	f.ElevationDeg = append(f.ElevationDeg, el)
	f.ApparentElevationDeg = append(f.ApparentElevationDeg, el+0.1)
	f.RangeKm = append(f.RangeKm, slant)
	f.RangeRateKmS = append(f.RangeRateKmS, 7.1*along/slant)
}

var fixtureTerms = []downlink.TermInfo{
	{Name: "transmit power", Sign: 1, Unit: "dBm", Source: "scenario"},
	{Name: "line loss", Sign: -1, Unit: "dB", Source: "scenario"},
	{Name: "transmit antenna gain", Sign: 1, Unit: "dBi", Source: "cosine power, exponent 2"},
	{Name: "free-space loss", Sign: -1, Unit: "dB", Source: "Rec. ITU-R P.525"},
	{Name: "polarisation mismatch", Sign: -1, Unit: "dB", Source: "worst case of both axial ratios"},
	{Name: "station antenna gain", Sign: 1, Unit: "dBi", Source: "diameter and efficiency"},
	{Name: "pointing loss", Sign: -1, Unit: "dB", Source: "0.10 deg root mean square over both axes"},
	{Name: "feed loss", Sign: -1, Unit: "dB", Source: "scenario"},
}

func fillRadio(p *Pass, s shape) {
	f := p.Profile
	r := &Radio{
		Transmitter: "X-band", Antenna: "dish", Mode: "fast", ModeText: "QPSK, LDPC 4/5", Frequency: 8180 * unit.Megahertz,
		Least: Moment{Value: math.Inf(1)}, Greatest: Moment{Value: math.Inf(-1)},
	}
	p.Radio = r
	for i, name := range []string{"AOS", "culmination", "LOS"} {
		// 550 km up over a plane site: off nadir toward the station, which stands 400 km below it.
		r.Sights = append(r.Sights, Sight{name, downlink.Sightline{Time: s.aos.Add(time.Duration(i) * time.Minute),
			Off: 45 * unit.Degree, OffNadir: 45 * unit.Degree, StationX: 400 * unit.Kilometre, StationY: 400 * unit.Kilometre,
			EarthY: 6921 * unit.Kilometre, EarthRadius: 6533 * unit.Kilometre, BoresightY: 1, OnAxis: i == 2}})
	}
	f.Terms, f.TermValues = fixtureTerms, make([][]float64, len(fixtureTerms))
	var best, chosen float64
	var open time.Time
	for i, t := range f.Seconds {
		b := fixtureBudget(f, s, i)
		for k := range b.Terms {
			f.TermValues[k] = append(f.TermValues[k], b.Terms[k].Value)
		}
		f.OffBoresightDeg = append(f.OffBoresightDeg, b.OffBoresight.Degrees())
		f.DopplerHz = append(f.DopplerHz, -f.RangeRateKmS[i]/299792.458*8180e6)
		f.ReceivedPowerDBm = append(f.ReceivedPowerDBm, b.ReceivedPowerDBm)
		f.FluxDensityDBWM2 = append(f.FluxDensityDBWM2, b.PowerFluxDensity)
		f.SystemNoiseK = append(f.SystemNoiseK, b.SystemNoise.Kelvins())
		f.GOverTDBK = append(f.GOverTDBK, float64(b.GOverT))
		f.CN0DBHz = append(f.CN0DBHz, float64(b.CN0))
		f.EbN0DB = append(f.EbN0DB, float64(b.EbN0))
		margin := float64(b.Margin)
		f.MarginDB = append(f.MarginDB, margin)
		f.MarginOverDB = append(f.MarginOverDB, margin-3)
		f.AchievableRateBps = append(f.AchievableRateBps, b.AchievableRate.BitsPerSecond())
		f.AchievableLimit = append(f.AchievableLimit, b.AchievableLimit)
		f.Usable = append(f.Usable, true)
		now := s.aos.Add(time.Duration(t * float64(time.Second)))
		if margin < r.Least.Value {
			r.Least, r.LeastMargin = Moment{margin, now}, b
		}
		if margin > r.Greatest.Value {
			r.Greatest = Moment{margin, now}
		}
		if i > 0 {
			best += b.AchievableRate.BitsPerSecond() / 8
		}
		switch {
		case margin >= 3 && open.IsZero():
			open = now
		case margin < 3 && !open.IsZero():
			f.Volume.Closes = append(f.Volume.Closes, downlink.Interval{From: open, To: now})
			open = time.Time{}
		}
		if margin >= 3 && i > 0 {
			chosen += 4e6 / 8
		}
		r.AchievableBytes, r.ModeBytes = append(r.AchievableBytes, best), append(r.ModeBytes, chosen)
		switch i {
		case 0:
			r.AOS = b
		case len(f.Seconds) / 2:
			r.Culmination = b
		}
	}
	if !open.IsZero() {
		f.Volume.Closes = append(f.Volume.Closes, downlink.Interval{From: open, To: p.Pass.LOS})
	}
	f.Volume.AchievableBytes, f.Volume.ModeBytes = best, chosen
	r.Modes = []ModeResult{
		{Name: "safe", Text: "qpsk, ccsds-conv-1-2+rs-255-223", Rate: 1e6, Closed: p.Pass.Duration(), Bytes: p.Pass.Duration().Seconds() * 1e6 / 8, LeastMarginDB: r.Least.Value + 8, GreatestMarginDB: r.Greatest.Value + 8},
		{Name: "fast", Text: r.ModeText, Rate: 4e6, Bytes: chosen, LeastMarginDB: r.Least.Value, GreatestMarginDB: r.Greatest.Value, Chosen: true},
	}
}

func fixtureBudget(f *downlink.Profile, s shape, i int) downlink.Budget {
	loss := 20*math.Log10(f.RangeKm[i]) + 110.7
	gain := 6 - 0.05*(90-f.ElevationDeg[i])
	values := []float64{s.power + 133.8, 0.8, gain, loss, 0.2, 48.2, 0.31, 0.4}
	b := downlink.Budget{
		Time: s.aos.Add(time.Duration(f.Seconds[i] * float64(time.Second))), Azimuth: at(f.AzimuthDeg[i]), Elevation: at(f.ElevationDeg[i]),
		Range: unit.Length(f.RangeKm[i]) * unit.Kilometre, OffBoresight: at(60 - 0.6*f.ElevationDeg[i]), Usable: true,
	}
	sum := 0.0
	for k, v := range values {
		b.Terms = append(b.Terms, downlink.Term{TermInfo: fixtureTerms[k], Value: v})
		sum += float64(fixtureTerms[k].Sign) * v
	}
	sky := 30 + 400/f.ElevationDeg[i]
	b.ReceivedPowerDBm, b.PowerFluxDensity = sum, sum-150
	b.NoiseParts = []downlink.NoisePart{
		{Name: "antenna", Temperature: unit.Temperature(sky), Source: "scenario, clear sky and spill-over in it"},
		{Name: "feed loss", Temperature: 25.5, Source: "0.4 dB at 290 K"},
		{Name: "low-noise amplifier", Temperature: 55, Source: "scenario"},
		{Name: "receiver", Temperature: 1.9, Source: "8.0 dB noise figure behind 39.0 dB"},
	}
	b.SystemNoise = unit.Temperature(sky + 82.4)
	b.GOverT = unit.DB(47.8 - 10*math.Log10(sky+82.4))
	b.CN0 = unit.DB(sum - 30 - 10*math.Log10(sky+82.4) + 228.6)
	b.EbN0, b.RequiredEbN0 = b.CN0-66.02, 4.5
	b.Margin = b.EbN0 - 1.5 - b.RequiredEbN0
	b.MarginOver = b.Margin - 3
	b.DataRate = 4e6
	b.AchievableRate = unit.BitRate(4e6 * (b.MarginOver).Ratio())
	if b.AchievableRate > 25e6 {
		b.AchievableRate, b.AchievableLimit = 25e6, downlink.LimitBandwidth
	}
	return b
}

// fixtureReport makes a report of n passes with every kind of answer in it.
func fixtureReport(n int) *Report {
	r := &Report{
		Title: "Field trial", Basis: basisFixture(), From: firstAOS.Truncate(time.Hour), To: firstAOS.Truncate(time.Hour).Add(72 * time.Hour),
		Notes: []Note{
			{Kind: Warning, About: "Wagtail 1", Text: "The element set is 4.2 days old in the middle of the window; order a fresh one."},
			{Kind: Assumption, Text: "Azimuth counts clockwise from true north."},
			{Kind: Default, About: "earth", Text: "UT1 is taken as UTC.", Source: "up to 0.9 s, ITU-R TF.460"},
		},
	}
	shapes := make([]shape, n)
	for i := range shapes {
		s := basicShape()
		s.aos = firstAOS.Add(time.Duration(i) * (72*time.Hour/time.Duration(n) - 20*time.Second))
		s.spacecraft = "Wagtail " + strconv.Itoa(1+i%3)
		s.miss = 60 + float64(i*397%1900)
		s.half = 350 - s.miss/10
		if i%2 == 1 {
			s.site = plateau()
		}
		s.power = -100 - float64(i%4)*2.5
		s.noRadio = i%7 == 6
		s.sky = i%2 == 0
		shapes[i] = s
		r.Keys = append(r.Keys, Key{Spacecraft: s.spacecraft, Station: s.site.Name, AOS: s.aos})
	}
	r.Load = func(_ context.Context, i int) (*Pass, error) { return fixturePass(shapes[i]), nil }
	return r
}
