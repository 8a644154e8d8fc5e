package downlink

import (
	"math"
	"slices"
	"strings"
	"testing"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func kaWeather(t testing.TB, frequency unit.Frequency) (*Weather, *propagation.Path) {
	t.Helper()
	rate, rainHeight := 42*propagation.MillimetrePerHour, 4*unit.Kilometre
	cloud, err := propagation.NewCurve("cloud", "kg/m2", propagation.Exceeded{P: 5 * propagation.Percent, Value: 0.5})
	if err != nil {
		t.Fatal(err)
	}
	path, err := propagation.NewPath(propagation.PathSpec{Frequency: frequency, Exceedance: 1 * propagation.Percent, Tilt: 45 * unit.Degree,
		Aperture: &propagation.Aperture{Diameter: 3.7, Efficiency: 0.6},
		Climate:  propagation.Climate{Latitude: 48 * unit.Degree, Rate001: &rate, RainHeight: &rainHeight, CloudWater: cloud}})
	if err != nil {
		t.Fatal(err)
	}
	return NewWeather(path), path
}

// The terms add up to the path's own total, and the noise is what the path says that
// the sky gains.
func TestWeatherCarriesThePath(t *testing.T) {
	var _ PathModel = (*Weather)(nil)
	var _ NoiseModel = (*WeatherNoise)(nil)
	w, path := kaWeather(t, 26.25*unit.Gigahertz)
	noise := NewWeatherNoise(path)
	terms := w.Terms()
	values, kelvins := make([]float64, len(terms)), make([]float64, len(noise.Parts()))
	for _, el := range []float64{-0.3, 2, 5, 30, 90} {
		g := Geometry{Elevation: unit.Angle(el) * unit.Degree}
		if err := w.Losses(&g, values); err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for i, term := range terms {
			sum -= float64(term.Sign) * values[i]
		}
		s, err := path.At(g.Elevation)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(sum-float64(s.Total)) > 1e-12 {
			t.Errorf("%g deg: the terms take %.9f dB, the path %.9f dB", el, sum, s.Total)
		}
		if err := noise.Kelvins(&g, kelvins); err != nil {
			t.Fatal(err)
		}
		sky, err := path.Sky(g.Elevation)
		if err != nil || math.Abs(kelvins[0]-sky.Increase().Kelvins()) > 1e-9 || !(kelvins[0] > 0) {
			t.Errorf("%g deg: %g K, the path's sky gains %v, %v", el, kelvins[0], sky.Increase(), err)
		}
	}
	if err := w.Losses(&Geometry{Elevation: -3 * unit.Degree}, values); err == nil {
		t.Error("under the horizon: no error")
	}
	if len(w.Notes()) != len(path.Notes()) {
		t.Errorf("%d notes, the path has %d", len(w.Notes()), len(path.Notes()))
	}
}

// A clear sky has the gas of the ordinary air and nothing else; what is not known has
// no term.
func TestWeatherHasTheTermsThatAreKnown(t *testing.T) {
	_, path := kaWeather(t, 26.25*unit.Gigahertz)
	dry, err := propagation.NewPath(propagation.PathSpec{Frequency: 8 * unit.Gigahertz, Exceedance: propagation.Percent, Climate: propagation.Climate{Latitude: 0.8}})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		what string
		w    *Weather
		want []string
	}{
		{"all", NewWeather(path), []string{"gas attenuation", "cloud attenuation", "rain attenuation", "scintillation", "atmospheric combination"}},
		{"clear sky", NewClearSky(path), []string{"gas attenuation"}},
		{"nothing stated", NewWeather(dry), []string{"gas attenuation"}},
	} {
		var got []string
		for _, term := range c.w.Terms() {
			got = append(got, term.Name)
		}
		if !slices.Equal(got, c.want) {
			t.Errorf("%s: terms %q, want %q", c.what, got, c.want)
		}
	}
	g := Geometry{Elevation: 10 * unit.Degree}
	gas := []float64{0}
	s, err := path.Direct(g.Elevation)
	if err != nil {
		t.Fatal(err)
	}
	if err := NewClearSky(path).Losses(&g, gas); err != nil || math.Abs(gas[0]-float64(s.ClearGas)) > 1e-4 {
		t.Errorf("clear sky: %g dB, %v, want %g", gas[0], err, s.ClearGas)
	}
}

// At VHF the galaxy is hotter than the air: weather does not lower the noise told, and
// a note says so.
func TestWeatherNeverTellsNoiseTooLow(t *testing.T) {
	_, path := kaWeather(t, 137*unit.Megahertz)
	noise := NewWeatherNoise(path)
	g := Geometry{Elevation: 5 * unit.Degree}
	sky, err := path.Sky(g.Elevation)
	if err != nil || !(sky.Increase() <= 0) {
		t.Fatalf("the sky gains %v, %v: not the case that is meant", sky.Increase(), err)
	}
	kelvins := []float64{-1}
	if err := noise.Kelvins(&g, kelvins); err != nil || kelvins[0] != 0 {
		t.Errorf("got %g K, %v, want 0", kelvins[0], err)
	}
	if len(noise.Notes()) != 2 {
		t.Errorf("notes %q, want one on the hot sky", noise.Notes())
	}
}

func BenchmarkWeatherSample(b *testing.B) {
	w, path := kaWeather(b, 26.25*unit.Gigahertz)
	noise := NewWeatherNoise(path)
	values, kelvins := make([]float64, 5), make([]float64, 1)
	var g Geometry
	b.ReportAllocs()
	for b.Loop() {
		g = Geometry{Elevation: 20 * unit.Degree}
		if err := w.Losses(&g, values); err != nil {
			b.Fatal(err)
		}
		if err := noise.Kelvins(&g, kelvins); err != nil {
			b.Fatal(err)
		}
	}
}

// A measured G/T stays as it is in all weather where the gain is not known; where it
// is, the weather's noise comes on top, and the notes say which.
func TestMeasuredGOverTUnderWeather(t *testing.T) {
	w, path := kaWeather(t, 26.25*unit.Gigahertz)
	noise := NewWeatherNoise(path)
	g := Geometry{Range: 1e6, Elevation: 20 * unit.Degree}
	at := func(a *station.Antenna) (*Budget, string) {
		l, err := NewLink(LinkSpec{Transmitter: Transmitter{Name: "beacon", Frequency: 26.25 * unit.Gigahertz, EIRP: levelp(10)},
			Antenna: a, PathModels: []PathModel{w}, NoiseModels: []NoiseModel{noise}})
		if err != nil {
			t.Fatal(err)
		}
		b, err := l.At(g)
		if err != nil {
			t.Fatal(err)
		}
		var told []string
		for _, n := range l.Notes() {
			told = append(told, n.Text)
		}
		return b, strings.Join(told, "\n")
	}
	b, told := at(&station.Antenna{Name: "dish", Kind: station.Directive, GOverT: station.Constant(30), FeedLoss: 0.5})
	if float64(b.GOverT) != 30 || !strings.Contains(told, "in all weather") || !strings.Contains(told, "noise of the weather, the Sun and the Moon is left out") {
		t.Errorf("without gain: G/T %g dB/K, notes %s", b.GOverT, told)
	}
	b, told = at(&station.Antenna{Name: "dish", Kind: station.Directive, Gain: station.Constant(55), GOverT: station.Constant(30), FeedLoss: 0.5})
	sky, err := path.Sky(g.Elevation)
	if err != nil {
		t.Fatal(err)
	}
	implied := math.Pow(10, (55-0.5-30)/10)
	want := 55 - 0.5 - 10*math.Log10(implied+sky.Increase().Kelvins()*math.Pow(10, -0.05))
	if math.Abs(float64(b.GOverT)-want) > 1e-9 || !strings.Contains(told, "and to it is added: weather above the clear sky") {
		t.Errorf("with gain: G/T %.6f dB/K, want %.6f; notes %s", b.GOverT, want, told)
	}
}
