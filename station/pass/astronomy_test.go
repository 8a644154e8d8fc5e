package pass

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

const astronomy = "../../testdata/astronomy/"

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

func (r row) time(t *testing.T, column string) time.Time {
	t.Helper()
	v, err := time.Parse(time.RFC3339, r[column])
	if err != nil {
		t.Fatalf("%s: %v", column, err)
	}
	return v
}

func rows(t *testing.T, name string) []row {
	t.Helper()
	f, err := os.Open(astronomy + name)
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

// world is what the reference searches are about.
type world struct {
	sets  map[string]orbit.Elements
	sites map[string]row
	found map[string][]row // passes by case
}

func readWorld(t *testing.T) world {
	t.Helper()
	sets, _, err := elements.ReadFile(astronomy + "elements.tle")
	if err != nil {
		t.Fatal(err)
	}
	w := world{map[string]orbit.Elements{}, map[string]row{}, map[string][]row{}}
	for _, el := range sets {
		w.sets[el.Name] = el
	}
	for _, r := range rows(t, "sites.csv") {
		w.sites[r["site"]] = r
	}
	for _, r := range rows(t, "passes.csv") {
		w.found[r["case"]] = append(w.found[r["case"]], r)
	}
	return w
}

func (w world) search(t *testing.T, c row) []Pass {
	t.Helper()
	window := Window{c.time(t, "window_start_utc"), c.time(t, "window_end_utc")}
	earth := orbit.EarthOrientation{
		UT1MinusUTC:  time.Duration(math.Round(c.number(t, "ut1_minus_utc_s") * 1e9)),
		PolarMotionX: unit.Angle(c.number(t, "polar_x_arcsec")) * unit.Arcsecond,
		PolarMotionY: unit.Angle(c.number(t, "polar_y_arcsec")) * unit.Arcsecond,
	}
	e, err := orbit.NewEphemeris(w.sets[c["element_set"]], window.From, window.To, earth)
	if err != nil {
		t.Fatalf("case %s: %v", c["case"], err)
	}
	site := w.sites[c["site"]]
	s := &station.Site{
		Name:             c["site"],
		Latitude:         unit.Angle(site.number(t, "latitude_deg")) * unit.Degree,
		Longitude:        unit.Angle(site.number(t, "longitude_deg")) * unit.Degree,
		Altitude:         unit.Length(site.number(t, "altitude_m")),
		MinimumElevation: unit.Angle(c.number(t, "minimum_elevation_deg")) * unit.Degree,
	}
	got, err := Search(e, s, window, station.Geometric)
	if err != nil {
		t.Fatalf("case %s: %v", c["case"], err)
	}
	return got
}

// Passes by bisection on the altitude of skyfield 1.45 over sgp4 2.15, to 1e-6 s
// (testdata/SOURCES.md): none missed, none invented, AOS and LOS within 0.05 s as the
// project promises. Measured: 0.5 ms, the rounding of the times.
func TestPassesAgainstAstronomyLibrary(t *testing.T) {
	w := readWorld(t)
	worst, compared := 0.0, 0
	for _, c := range rows(t, "pass_cases.csv") {
		got, want := w.search(t, c), w.found[c["case"]]
		if len(got) != len(want) {
			t.Errorf("case %s, %s over %s: %d passes, want %d", c["case"], c["element_set"], c["site"], len(got), len(want))
			continue
		}
		for i, r := range want {
			p := &got[i]
			if p.Cut.String() != r["cut"] {
				t.Errorf("case %s pass %d: cut %q, want %q", c["case"], i, p.Cut, r["cut"])
			}
			for _, e := range []struct {
				name      string
				got, want float64
				tol       float64
			}{
				{"AOS", p.AOS.Sub(r.time(t, "aos_utc")).Seconds(), 0, 0.05},
				{"LOS", p.LOS.Sub(r.time(t, "los_utc")).Seconds(), 0, 0.05},
				{"maximum elevation", p.MaxElevation.Degrees(), r.number(t, "max_elevation_deg"), 0.002},
				{"least range", p.MinRange.Metres(), r.number(t, "min_range_m"), 20},
				{"AOS azimuth", math.Remainder(p.AOSAzimuth.Degrees()-r.number(t, "aos_azimuth_deg"), 360), 0, 0.002},
				{"LOS azimuth", math.Remainder(p.LOSAzimuth.Degrees()-r.number(t, "los_azimuth_deg"), 360), 0, 0.002},
			} {
				d := math.Abs(e.got - e.want)
				if e.name == "AOS" || e.name == "LOS" {
					worst = max(worst, d)
				}
				if !(d <= e.tol) {
					t.Errorf("case %s (%s over %s) pass %d at %s: %s is %.4g off, allowed %g", c["case"], c["element_set"], c["site"], i, r["aos_utc"], e.name, d, e.tol)
				}
			}
			compared++
		}
	}
	if compared < 300 {
		t.Errorf("only %d passes compared", compared)
	}
	t.Logf("%d passes, worst AOS or LOS %.4f s", compared, worst)
}
