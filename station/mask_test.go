package station

import (
	"math"
	"strings"
	"testing"

	"slantwise/orbit/unit"
)

func deg(pairs ...float64) []MaskPoint {
	var p []MaskPoint
	for i := 0; i < len(pairs); i += 2 {
		p = append(p, MaskPoint{unit.Angle(pairs[i]) * unit.Degree, unit.Angle(pairs[i+1]) * unit.Degree})
	}
	return p
}

func TestMaskIsLinearAndCyclic(t *testing.T) {
	m, err := NewMask(deg(10, 2, 90, 6, 180, 3, 350, 8), Apparent)
	if err != nil {
		t.Fatal(err)
	}
	// Wanted by the definition, linear between neighbours: worked by hand.
	for _, c := range []struct{ az, want float64 }{
		{10, 2}, {50, 4}, {90, 6}, {135, 4.5}, {265, 5.5}, {350, 8}, {355, 6.5}, {0, 5}, {5, 3.5}, {360, 5}, {-5, 6.5}, {725, 3.5},
	} {
		if got := m.At(unit.Angle(c.az) * unit.Degree).Degrees(); math.Abs(got-c.want) > 1e-10 {
			t.Errorf("at %g deg: got %.10f, want %g", c.az, got, c.want)
		}
	}
	if m.Kind() != Apparent || len(m.Points()) != 4 {
		t.Errorf("got %v with %d points", m.Kind(), len(m.Points()))
	}
}

func TestLevelMask(t *testing.T) {
	m, err := NewMask(deg(123, 4), Geometric)
	if err != nil {
		t.Fatal(err)
	}
	for _, az := range []float64{0, 123, 200, 359.9} {
		if got := m.At(unit.Angle(az) * unit.Degree).Degrees(); math.Abs(got-4) > 1e-12 {
			t.Errorf("at %g deg: got %g, want 4", az, got)
		}
	}
}

func TestMaskRefuses(t *testing.T) {
	for _, c := range []struct {
		name   string
		points []MaskPoint
		want   string
	}{
		{"none", nil, "horizon mask: it has no points; give at least one, or leave the mask out for a bare horizon"},
		{"unsorted", deg(0, 1, 90, 2, 45, 3), "horizon mask: entry 3: azimuth 45 deg comes after 90 deg; sort the entries by rising azimuth"},
		{"doubled", deg(0, 1, 90, 2, 90, 3), "horizon mask: entry 3: azimuth 90 deg stands in entry 2 too; give it once (for a steep edge set the second 0.001 deg on)"},
		{"full turn", deg(0, 1, 360, 1), "horizon mask: entry 2: azimuth: 360 deg is not allowed; it must be at least 0 and less than 360 deg; count clockwise from true north; the mask closes by itself"},
		{"negative", deg(-1, 1), "horizon mask: entry 1: azimuth: -1 deg is not allowed; it must be at least 0 and less than 360 deg; count clockwise from true north; the mask closes by itself"},
		{"zenith", deg(0, 90), "horizon mask: entry 1: elevation: 90 deg is not allowed; it must be at least -10 and less than 90 deg; give the elevation of the skyline"},
		{"no number", deg(0, 1, 2, math.NaN()), "horizon mask: entry 2: elevation: NaN deg is not allowed; it must be at least -10 and less than 90 deg; give the elevation of the skyline"},
		{"infinite", deg(math.Inf(1), 1), "horizon mask: entry 1: azimuth: +Inf deg is not allowed; it must be at least 0 and less than 360 deg; count clockwise from true north; the mask closes by itself"},
	} {
		if _, err := NewMask(c.points, Geometric); err == nil || err.Error() != c.want {
			t.Errorf("%s: got\n  %v\nwant\n  %s", c.name, err, c.want)
		}
	}
}

func TestReadMaskCSV(t *testing.T) {
	for name, text := range map[string]string{
		"plain":                   "azimuth_deg,elevation_deg\n0,2\n90,6.5\n",
		"mark, CRLF, blank lines": "\ufeffazimuth_deg, elevation_deg\r\n\r\n0 , 2\r\n90,6.5",
	} {
		m, err := ReadMaskCSV(strings.NewReader(text), Geometric)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if got := m.At(90 * unit.Degree).Degrees(); math.Abs(got-6.5) > 1e-12 || len(m.Points()) != 2 {
			t.Errorf("%s: got %g deg at 90 deg from %d points", name, got, len(m.Points()))
		}
	}
}

func TestReadMaskCSVRefuses(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"empty", "", "horizon mask: the text is empty; its first line must be azimuth_deg,elevation_deg"},
		{"header only", "azimuth_deg,elevation_deg\n", "horizon mask: it has no points; give at least one, or leave the mask out for a bare horizon"},
		{"no header", "0,2\n", `horizon mask: line 1: the header is "0,2"; it must be azimuth_deg,elevation_deg`},
		{"three columns", "azimuth_deg,elevation_deg\n0,2,3\n", "horizon mask: line 2: 3 columns; give two, azimuth and elevation in degrees, with decimal points"},
		{"words", "azimuth_deg,elevation_deg\n0,2\n90,high\n", `horizon mask: line 3: "high" is not a number; give degrees with a decimal point`},
		{"dash of another kind", "azimuth_deg,elevation_deg\n0,\u22122\n", `horizon mask: line 2: "−2" is not a number; give degrees with a decimal point`},
		{"not a number", "azimuth_deg,elevation_deg\n0,NaN\n", "horizon mask: entry 1: elevation: NaN deg is not allowed; it must be at least -10 and less than 90 deg; give the elevation of the skyline"},
		{"too long", "azimuth_deg,elevation_deg\n" + strings.Repeat("\n", maskFileLimit), "horizon mask: the text is over 16 MB; a mask needs a point every 0.001 deg at most"},
	} {
		if _, err := ReadMaskCSV(strings.NewReader(c.text), Geometric); err == nil || err.Error() != c.want {
			t.Errorf("%s: got\n  %v\nwant\n  %s", c.name, err, c.want)
		}
	}
}

func FuzzReadMaskCSV(f *testing.F) {
	f.Add("azimuth_deg,elevation_deg\n0,2\n90,6.5\n")              // good
	f.Add("\ufeffazimuth_deg,elevation_deg\r\n0,2\r\n")            // mark and CRLF
	f.Add("azimuth_deg,elevation_deg\n0,1e309\n")                  // too large for a float64
	f.Add("azimuth_deg,elevation_deg\n0,\"2\n3\"\n")               // a line break inside quotes
	f.Add("azimuth_deg,elevation_deg\n359.9999999999999999,1\n")   // rounds to a full turn
	f.Add("azimuth_deg,elevation_deg\n0,89.9999999999999999999\n") // rounds to the zenith
	f.Fuzz(func(t *testing.T, text string) {
		m, err := ReadMaskCSV(strings.NewReader(text), Geometric)
		if err != nil {
			if !strings.HasPrefix(err.Error(), "horizon mask: ") {
				t.Fatalf("the message does not say where: %v", err)
			}
			return
		}
		for az := 0.0; az < 360; az += 7 {
			if el := m.At(unit.Angle(az) * unit.Degree).Degrees(); !(el > -10.001 && el < 90) {
				t.Fatalf("%g deg at azimuth %g deg", el, az)
			}
		}
	})
}
