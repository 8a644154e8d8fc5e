package station_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// row is a line of a CSV file by column.
type row map[string]string

func (r row) number(t *testing.T, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[column], 64)
	if err != nil {
		t.Fatalf("%s: %v", column, err)
	}
	return v
}

func rows(t *testing.T, path string) []row {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []row
	for _, line := range all[1:] {
		r := row{}
		for i, name := range all[0] {
			r[name] = line[i]
		}
		out = append(out, r)
	}
	return out
}

func orientation(t *testing.T, r row) orbit.EarthOrientation {
	t.Helper()
	return orbit.EarthOrientation{
		UT1MinusUTC:  time.Duration(math.Round(r.number(t, "ut1_minus_utc_s") * 1e9)),
		PolarMotionX: unit.Angle(r.number(t, "polar_x_arcsec")) * unit.Arcsecond,
		PolarMotionY: unit.Angle(r.number(t, "polar_y_arcsec")) * unit.Arcsecond,
	}
}

// Look angles by skyfield 1.45 and astropy 5.2.1 over sgp4 2.15 (testdata/SOURCES.md).
// The tolerances are the accuracy that the project promises. The range rate of
// astropy is taken: skyfield's is off by up to 1 mm/s where a pole is given.
func TestLookAgainstAstronomyLibraries(t *testing.T) {
	const folder = "../testdata/astronomy/"
	sets, _, err := elements.ReadFile(folder + "elements.tle")
	if err != nil {
		t.Fatal(err)
	}
	byName := map[string]orbit.Elements{}
	for _, el := range sets {
		byName[el.Name] = el
	}
	frames := map[string]station.Frame{}
	for _, r := range rows(t, folder+"sites.csv") {
		s := station.Site{
			Latitude:  unit.Angle(r.number(t, "latitude_deg")) * unit.Degree,
			Longitude: unit.Angle(r.number(t, "longitude_deg")) * unit.Degree,
			Altitude:  unit.Length(r.number(t, "altitude_m")),
		}
		frames[r["site"]] = s.Frame()
	}
	var worst [4]float64 // deg, deg, m, m/s
	compared := 0
	for _, r := range rows(t, folder+"look_angles.csv") {
		at, err := time.Parse(time.RFC3339, r["utc"])
		if err != nil {
			t.Fatal(err)
		}
		e, err := orbit.NewEphemeris(byName[r["element_set"]], at.Add(-time.Second), at.Add(time.Second), orientation(t, r))
		if err != nil {
			t.Fatalf("%s at %s: %v", r["element_set"], r["utc"], err)
		}
		state, err := e.At(at)
		if err != nil {
			t.Fatal(err)
		}
		f := frames[r["site"]]
		l := f.Look(state)
		d := [4]float64{
			math.Remainder(l.Azimuth.Degrees()-r.number(t, "astropy_azimuth_deg"), 360) * math.Cos(l.Elevation.Radians()),
			l.Elevation.Degrees() - r.number(t, "astropy_elevation_deg"),
			l.Range.Metres() - r.number(t, "astropy_range_m"),
			float64(l.RangeRate) - r.number(t, "astropy_range_rate_m_s"),
		}
		for i, tol := range [4]float64{0.002, 0.002, 20, 0.02} {
			worst[i] = max(worst[i], math.Abs(d[i]))
			if !(math.Abs(d[i]) <= tol) {
				t.Errorf("%s over %s at %s: differences %.2g (deg, deg, m, m/s) in place %d", r["element_set"], r["site"], r["utc"], d, i)
			}
		}
		compared++
	}
	if compared < 50 {
		t.Errorf("only %d rows compared", compared)
	}
	t.Logf("%d looks: worst azimuth (on the sky) %.2g deg, elevation %.2g deg, range %.2g m, range rate %.2g m/s", compared, worst[0], worst[1], worst[2], worst[3])
}
