package sizing

import (
	"math"
	"testing"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// circular returns a circular kept orbit.
func circular(t testing.TB, altitude unit.Length, inclination unit.Angle) *orbit.KeptOrbit {
	o := orbit.SyntheticOrbit{Name: "Circle", CatalogNumber: 99998, Epoch: caseStart, Altitude: altitude, Inclination: &inclination}
	el, err := o.Elements()
	if err != nil {
		t.Fatal(err)
	}
	k, err := orbit.KeepOrbit(el)
	if err != nil {
		t.Fatal(err)
	}
	return k
}

// swath is the Earth-central angle between a site and a spacecraft at an elevation, over
// a sphere: acos(r cos ε / a) - ε (plane triangle; any text on satellite geometry).
func swath(site, orbit, elevation float64) float64 {
	return math.Acos(site/orbit*math.Cos(elevation)) - elevation
}

// flownRadius is the mean radius at which the spacecraft was seen: the flattening lifts
// it some kilometres off its mean axis.
func flownRadius(y *SiteYear, site float64) float64 {
	sum := 0.0
	for i, el := range y.ElevationDeg {
		sin, cos := math.Sincos(el * math.Pi / 180)
		sum += math.Hypot(y.RangeKm[i]*1000*cos, site+y.RangeKm[i]*1000*sin)
	}
	return sum / float64(len(y.ElevationDeg))
}

// On the equator the Earth is round: an equatorial circular orbit passes a site there in
// the swath's two halves over the difference of the rates.
func TestLongestPassAgainstClosedForm(t *testing.T) {
	for _, altitude := range []unit.Length{400 * unit.Kilometre, 1200 * unit.Kilometre} {
		c := usualCase()
		c.clear = true
		c.orbit = circular(t, altitude, 0.02*unit.Degree)
		c.sites = []station.Site{{Name: "Equator", MinimumElevation: 10 * unit.Degree}}
		f, _ := c.fly(t)
		y := &f.Sites[0]
		rate := 2*math.Pi/c.orbit.NodalPeriod().Seconds() - 2*math.Pi/c.orbit.NodalDay().Seconds()
		radius := flownRadius(y, station.EquatorialRadius)
		want := 2 * swath(station.EquatorialRadius, radius, 10*math.Pi/180) / rate
		for _, p := range y.Passes {
			if p.Cut == 0 && math.Abs(p.Duration().Seconds()/want-1) > 1e-3 {
				t.Errorf("%g km: a pass of %.2f s, the closed form gives %.2f", altitude.Kilometres(), p.Duration().Seconds(), want)
			}
		}
		visible := y.ContactSeconds() / (f.Days * 86400)
		share := swath(station.EquatorialRadius, radius, 10*math.Pi/180) / math.Pi
		if math.Abs(visible/share-1) > 5e-3 {
			t.Errorf("%g km: visible %.5f of the time, the closed form gives %.5f", altitude.Kilometres(), visible, share)
		}
	}
}

// The share of time that a circular orbit stands above an elevation, in the mean over
// all positions of its node: the spacecraft's latitudes are spread as that of the sine
// of the argument of latitude, and at each latitude it is seen within an arc of
// longitude. Derived on the sphere; the flattened Earth and 28 days stay within 1 %.
func TestVisibilityAgainstClosedForm(t *testing.T) {
	for _, site := range []float64{0, 35, 58.4, 70} {
		const altitude, inclination, elevation = 700e3, 82.0, 10.0
		c := usualCase()
		c.clear = true
		c.orbit = circular(t, altitude, inclination*unit.Degree)
		c.sites = []station.Site{{Name: "Site", Latitude: unit.Angle(site) * unit.Degree, MinimumElevation: elevation * unit.Degree}}
		f, _ := c.fly(t)
		got := f.Sites[0].ContactSeconds() / (f.Days * 86400)
		sinI, phi := math.Sin(inclination*math.Pi/180), site*math.Pi/180
		frame := c.sites[0].Frame()
		radius := frame.Origin.Norm()
		lambda := swath(radius, flownRadius(&f.Sites[0], radius), elevation*math.Pi/180)
		want, n := 0.0, 20000
		for k := range n { // over the argument of latitude, evenly
			u := 2 * math.Pi * (float64(k) + 0.5) / float64(n)
			lat := math.Asin(sinI * math.Sin(u))
			x := (math.Cos(lambda) - math.Sin(phi)*math.Sin(lat)) / (math.Cos(phi) * math.Cos(lat))
			switch {
			case x <= -1:
				want++
			case x < 1:
				want += math.Acos(x) / math.Pi
			}
		}
		if want /= float64(n); math.Abs(got/want-1) > 0.01 {
			t.Errorf("site at %g deg: visible %.5f of the time, the closed form gives %.5f", site, got, want)
		}
	}
}

func marginAt(elevation unit.Angle, margin unit.DB) Requirements {
	r := None()
	r.Margin = &MarginAt{elevation, margin}
	return r
}

// Without errors the margin goes with the square of the diameter.
func TestGainGoesWithTheSquare(t *testing.T) {
	c := usualCase()
	c.clear, c.days = true, 7
	c.antenna.PointingRMS, c.antenna.SurfaceRMS = 0, 0
	s := c.study(t, marginAt(20*unit.Degree, 3), Family{})
	for _, d := range []unit.Length{1, 2.3, 6} {
		a, err := s.Outcome(Variant{Diameter: d})
		if err != nil {
			t.Fatal(err)
		}
		b, err := s.Outcome(Variant{Diameter: 2 * d})
		if err != nil {
			t.Fatal(err)
		}
		if got := b.MarginDB - a.MarginDB; math.Abs(got-20*math.Log10(2)) > 1e-9 {
			t.Errorf("twice %g m gains %.6f dB, want 6.0206", d.Metres(), got)
		}
	}
}

// The optimum of D² exp(-a D²) lies at 1/√a (calculus). A fixed pointing error e in a
// beam k λ/D has 10 log(e) a = 12 (e/kλ)²; a surface error of a share s of the diameter
// has a = (4π s/λ)² (Ruze). Either stops a requirement that cannot be reached right
// there.
func TestOptimumDiameters(t *testing.T) {
	lambda := (8.18 * unit.Gigahertz).Wavelength().Metres()
	for _, k := range []struct {
		name     string
		family   Family
		pointing unit.Angle
		want     float64
	}{
		{"pointing", Family{}, 0.15 * unit.Degree, 70 * lambda / 0.15 * math.Sqrt(10*math.Log10E/12)},
		{"surface", Family{SurfaceShare: 4e-4}, 0, lambda / (4 * math.Pi * 4e-4)},
	} {
		c := usualCase()
		c.clear, c.days = true, 7
		c.antenna.PointingRMS, c.antenna.SurfaceRMS = k.pointing, 0
		needs := marginAt(20*unit.Degree, 60)
		s := c.study(t, needs, k.family)
		f, err := s.Least(needs.List(), Range{Low: 1, High: 25})
		if err != nil {
			t.Fatal(err)
		}
		if f.Diameter != 0 {
			t.Fatalf("%s: a margin of 60 dB is reached at %g m", k.name, f.Diameter.Metres())
		}
		// The summit is flat: 1 % of the diameter is 0.001 dB.
		if got := f.Nearest.Variant.Diameter.Metres(); math.Abs(got/k.want-1) > 0.01 {
			t.Errorf("%s: the best diameter is %.3f m, the closed form gives %.3f", k.name, got, k.want)
		}
	}
}
