package elements

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
)

// wagtail is an invented spacecraft.
const (
	wagtailOne = "1 99001U 26001A   26069.50000000  .00001234  00000-0  84553-4 0  9995"
	wagtailTwo = "2 99001  97.4012 120.3456 0012345  85.6789 274.5432 15.21987654 12348"
)

func mustRead(t *testing.T, text string) []orbit.Elements {
	t.Helper()
	sets, _, err := Read(strings.NewReader(text), "test")
	if err != nil {
		t.Fatalf("%v\nin\n%s", err, text)
	}
	return sets
}

func writtenTLE(t *testing.T, sets []orbit.Elements) string {
	t.Helper()
	var b bytes.Buffer
	warnings, err := WriteTLE(&b, sets)
	if err != nil {
		t.Fatal(err)
	}
	for _, w := range warnings {
		t.Errorf("unexpected warning: %s", w)
	}
	return b.String()
}

// mended returns the verification file with right checksums: three of its sets were
// changed by hand to provoke errors, and five of their lines have the checksum of
// before.
func mended(t *testing.T) string {
	t.Helper()
	raw, err := os.ReadFile("testdata/verification.tle")
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimRight(string(raw), "\n"), "\n")
	var kept []string
	for _, l := range lines {
		if l[0] != '#' {
			kept = append(kept, fmt.Sprintf("%s%d", l[:68], checksum(l)))
		}
	}
	return strings.Join(kept, "\n") + "\n"
}

func TestVerificationChecksums(t *testing.T) {
	_, _, err := ReadFile("testdata/verification.tle")
	if err == nil {
		t.Fatal("the wrong checksums were not found")
	}
	// Sums worked out by hand from the published rule (digits, and 1 for a minus).
	want := []string{":62:69: checksum \"4\"", ":63:69: checksum \"8\"", ":64:69: checksum \"9\"", ":66:69: checksum \"0\"", ":67:69: checksum \"1\""}
	lines := strings.Split(err.Error(), "\n")
	if len(lines) != len(want) {
		t.Fatalf("%d faults, want %d:\n%v", len(lines), len(want), err)
	}
	for i, w := range want {
		if !strings.Contains(lines[i], w) {
			t.Errorf("fault %d is %s, want %s in it", i, lines[i], w)
		}
	}
}

// TestVerificationRoundTrip writes the 33 published sets and compares the text with
// what was read; the two lines that are not canonical are stated.
func TestVerificationRoundTrip(t *testing.T) {
	text := mended(t)
	sets := mustRead(t, text)
	if len(sets) != 33 {
		t.Fatalf("%d sets, want 33", len(sets))
	}
	text = strings.NewReplacer(
		// A blank ephemeris type becomes 0, which adds nothing to the checksum.
		"14311-1      13", "14311-1 0    13",
		// A B* of zero is written +0 (as in the other sets), one minus less.
		"00000-0  00000-0 0  6847", "00000-0  00000+0 0  6846",
	).Replace(text)
	if got := writtenTLE(t, sets); got != text {
		t.Errorf("written text differs\n got\n%s\nwant\n%s", got, text)
	}
}

// TestAgainstReferenceLibrary compares with python-sgp4 2.15 (testdata/reference.py).
// The tolerance is a few roundings of a float64: both read the same decimals, but
// scale them in another order.
func TestAgainstReferenceLibrary(t *testing.T) {
	sets := mustRead(t, mended(t))
	f, err := os.Open("testdata/reference.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	rows = rows[1:]
	if len(rows) != len(sets) {
		t.Fatalf("%d rows for %d sets", len(rows), len(sets))
	}
	const tolerance = 1e-15 * 4
	perDay := 2 * math.Pi / 1440 // rev/day to rad/min
	for i, row := range rows {
		el := sets[i]
		if row[0] != strconv.Itoa(el.CatalogNumber) {
			t.Errorf("set %d is of object %d, want %s", i, el.CatalogNumber, row[0])
		}
		if short, _ := shortForm(el.InternationalDesignator); short != row[1] {
			t.Errorf("%s: designator %q, want %q", row[0], short, row[1])
		}
		year, day := el.Epoch.Year(), float64(el.Epoch.YearDay())+el.Epoch.Sub(el.Epoch.Truncate(24*time.Hour)).Hours()/24
		got := []float64{float64(year), day, el.Inclination.Radians(), el.RAAN.Radians(), el.Eccentricity, el.ArgPerigee.Radians(),
			el.MeanAnomaly.Radians(), el.MeanMotion * perDay, el.BStar, el.MeanMotionDot * perDay / 1440, el.MeanMotionDDot * perDay / 1440 / 1440}
		for j, g := range got {
			want, err := strconv.ParseFloat(row[j+2], 64)
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(g-want) > tolerance*math.Abs(want) {
				t.Errorf("%s column %d: got %v, want %v, difference %g", row[0], j+2, g, want, g-want)
			}
		}
	}
}

func TestAcceptedForms(t *testing.T) {
	want := mustRead(t, wagtailOne+"\n"+wagtailTwo+"\n")[0]
	plain := func(old, new string) string {
		one := strings.Replace(wagtailOne, old, new, 1)
		two := strings.Replace(wagtailTwo, old, new, 1)
		return fmt.Sprintf("%s%d\n%s%d\n", one[:68], checksum(one), two[:68], checksum(two))
	}
	for name, c := range map[string]struct {
		text, name string
		line       int
	}{
		"CRLF":                       {wagtailOne + "\r\n" + wagtailTwo + "\r\n", "", 1},
		"no line end at the end":     {wagtailOne + "\n" + wagtailTwo, "", 1},
		"byte order mark":            {"\ufeff" + wagtailOne + "\n" + wagtailTwo, "", 1},
		"blank lines":                {"\n\n" + wagtailOne + "\n   \n" + wagtailTwo + "\n\n", "", 3},
		"blanks behind":              {wagtailOne + "   \n" + wagtailTwo + "  \n", "", 1},
		"blanks in front":            {"  " + wagtailOne + "\n  " + wagtailTwo + "\n", "", 1},
		"remark":                     {"# made up\n" + wagtailOne + "\n" + wagtailTwo + "\n", "", 2},
		"name":                       {"WAGTAIL 1\n" + wagtailOne + "\n" + wagtailTwo + "\n", "WAGTAIL 1", 1},
		"padded name":                {"WAGTAIL 1               \r\n" + wagtailOne + "\r\n" + wagtailTwo + "\r\n", "WAGTAIL 1", 1},
		"name with 0":                {"0 WAGTAIL 1\n" + wagtailOne + "\n" + wagtailTwo + "\n", "WAGTAIL 1", 1},
		"name is a bare 0":           {"0\n" + wagtailOne + "\n" + wagtailTwo + "\n", "", 1},
		"name begins with 1":         {"1 WAGTAIL\n" + wagtailOne + "\n" + wagtailTwo + "\n", "1 WAGTAIL", 1},
		"name outside ASCII":         {"BACHSTELZE Ü\n" + wagtailOne + "\n" + wagtailTwo + "\n", "BACHSTELZE Ü", 1},
		"zeros in front of an angle": {plain(" 85.6789", "085.6789"), "", 1},
		"plus signs":                 {plain("  .00001234  00000-0  84553-4", " +.00001234 +00000+0 +84553-4"), "", 1},
		"blank exponent sign":        {plain(" 00000-0", " 00000 0"), "", 1},
		"blanks for leading zeros":   {plain("0012345", "  12345"), "", 1},
		"blank ephemeris type":       {plain("84553-4 0", "84553-4  "), "", 1},
		"blank day digits":           {plain("26069.50000000", "26 69.5       "), "", 1},
	} {
		t.Run(name, func(t *testing.T) {
			sets := mustRead(t, c.text)
			if len(sets) != 1 {
				t.Fatalf("%d sets, want 1", len(sets))
			}
			w := want
			w.Name, w.Source.Line = c.name, c.line
			if sets[0] != w {
				t.Errorf("\n got %+v\nwant %+v", sets[0], w)
			}
		})
	}
}

func TestTLEWarnings(t *testing.T) {
	fix := func(old, new string) string {
		one := strings.Replace(wagtailOne, old, new, 1)
		return fmt.Sprintf("%s%d\n%s\n", one[:68], checksum(one), wagtailTwo)
	}
	for name, c := range map[string]struct{ text, want string }{
		"blank drag":       {fix(" 84553-4", "        "), "test:1: line 1, B*: is blank; taken as 0"},
		"blank derivative": {fix(" .00001234", "          "), "test:1: line 1, first derivative of mean motion: is blank; taken as 0"},
		"type 2":           {fix("-4 0", "-4 2"), "test:1: ephemeris type 2 says SGP4 outright; it is read as type 0, the published kind"},
		"designator":       {fix("26001A", "26-1  "), `test:1: international designator "26-1" is not two digits of the year, three of the launch and a piece (26001A); kept as it is`},
	} {
		t.Run(name, func(t *testing.T) {
			_, warnings, err := Read(strings.NewReader(c.text), "test")
			if err != nil {
				t.Fatal(err)
			}
			var got string
			for _, w := range warnings {
				got += w.String()
			}
			if got != c.want {
				t.Errorf("\n got %s\nwant %s", got, c.want)
			}
		})
	}
}

// TestEpochYears: 57 to 99 are 19xx, 00 to 56 are 20xx (the published rule).
func TestEpochYears(t *testing.T) {
	for two, want := range map[string]int{"57": 1957, "58": 1958, "99": 1999, "00": 2000, "24": 2024, "56": 2056} {
		one := wagtailOne[:18] + two + wagtailOne[20:]
		el := mustRead(t, fmt.Sprintf("%s%d\n%s\n", one[:68], checksum(one), wagtailTwo))[0]
		if el.Epoch.Year() != want {
			t.Errorf("epoch year %s is read as %d, want %d", two, el.Epoch.Year(), want)
		}
	}
	fine := strings.Replace(wagtailOne, "26069.50000000", "261.0000000001", 1)
	el := mustRead(t, fmt.Sprintf("%s%d\n%s\n", fine[:68], checksum(fine), wagtailTwo))[0]
	if want := time.Date(2026, 1, 1, 0, 0, 0, 8640, time.UTC); !el.Epoch.Equal(want) {
		t.Errorf("1e-10 day is %v, want %v", el.Epoch, want)
	}
	leap := strings.Replace(wagtailOne, "26069.50000000", "24366.99999999", 1)
	el = mustRead(t, fmt.Sprintf("%s%d\n%s\n", leap[:68], checksum(leap), wagtailTwo))[0]
	// 0.99999999 day is 86399.999136 s, worked out by hand.
	if want := time.Date(2024, 12, 31, 23, 59, 59, 999136000, time.UTC); !el.Epoch.Equal(want) {
		t.Errorf("last instant of a leap year is %v, want %v", el.Epoch, want)
	}
}

// TestAlpha5 compares with the published pairs and the rule (letters without I and
// O), as python-sgp4 2.15's tests quote them.
func TestAlpha5(t *testing.T) {
	for field, number := range map[string]int{
		"00000": 0, "00005": 5, "25544": 25544, "99999": 99999, "A0000": 100000, "A9999": 109999, "B0000": 110000,
		"E8493": 148493, "H9999": 179999, "J0000": 180000, "J2931": 182931, "J9999": 189999, "K0000": 190000, "M9999": 219999,
		"N0000": 220000, "N9999": 229999, "P0000": 230000, "P4018": 234018, "W1928": 301928, "Z9999": 339999,
	} {
		if got, err := parseAlpha5(field); err != nil || got != number {
			t.Errorf("%s is read as %d (%v), want %d", field, got, err, number)
		}
		if got, ok := formatAlpha5(number); !ok || got != field {
			t.Errorf("%d is written as %s, want %s", number, got, field)
		}
	}
	for _, n := range []int{-1, 340000, 999_999_999} {
		if s, ok := formatAlpha5(n); ok {
			t.Errorf("%d is written as %s, want a refusal", n, s)
		}
	}
	for _, s := range []string{"", "A", "A123", "I0000", "O0000", "a0000", "A00B0", "123456", "-0001", "1 234"} {
		if n, err := parseAlpha5(s); err == nil {
			t.Errorf("%q is read as %d, want a refusal", s, n)
		}
	}
}
