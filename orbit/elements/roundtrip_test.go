package elements

import (
	"bytes"
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

var created = Header{Created: time.Date(2026, 3, 10, 6, 0, 0, 0, time.UTC)}

// decimal draws a number of the given decimals in [low, high].
func decimal(t *rapid.T, label string, low, high int64, decimals int) float64 {
	return float64(rapid.Int64Range(low, high).Draw(t, label)) / math.Pow10(decimals)
}

// drawName draws what a name may be: any letters, marks that formats use for
// themselves, heads that look like element lines. UNKNOWN is what an OMM has for no
// name.
func drawName(t *rapid.T) string {
	name := rapid.OneOf(
		rapid.SampledFrom([]string{"", "WAGTAIL 1", "1 WAGTAIL", "2 99001", "0 ZERO", "# REMARK", "A,B;\"C\"", "A = B [deg]", "<omm>&amp;", "Ü 鳥", "</script>", "'", "1", "0", "a  b"}),
		rapid.StringMatching(`[!-~]([ -~]{0,22}[!-~])?`),
	).Draw(t, "name")
	if name == unknownText {
		return ""
	}
	return name
}

// drawTLESet draws a set whose numbers have just the digits that a TLE holds.
func drawTLESet(t *rapid.T) orbit.Elements {
	ticks := rapid.Int64Range(0, 36524*100_000_000).Draw(t, "ticks") // 1957 to 2056
	designator := ""
	if rapid.Bool().Draw(t, "designated") {
		designator = fmt.Sprintf("%d-%s", rapid.IntRange(firstYear, lastYear).Draw(t, "year"), rapid.StringMatching(`[0-9]{3}[A-Z]{1,3}`).Draw(t, "piece"))
	}
	small := func(label string, most int) float64 {
		v := float64(rapid.IntRange(10_000, 99_999).Draw(t, label)) * rapid.SampledFrom([]float64{1, -1, 0}).Draw(t, label+" sign")
		return parsed(fmt.Sprintf("%ge%d", v, rapid.IntRange(-9, most).Draw(t, label+" power")-5))
	}
	return orbit.Elements{
		Name: drawName(t), CatalogNumber: rapid.IntRange(0, maxAlpha5).Draw(t, "number"), InternationalDesignator: designator,
		Classification: rapid.SampledFrom([]string{"", "U", "C", "S"}).Draw(t, "class"),
		Epoch:          time.Date(1957, 1, 1, 0, 0, 0, 0, time.UTC).AddDate(0, 0, int(ticks/1e8)).Add(time.Duration(ticks%1e8) * tleTick),
		MeanMotion:     decimal(t, "motion", 1_000_000, 17_00000000, 8),
		Eccentricity:   decimal(t, "eccentricity", 0, 9_999_999, 7),
		Inclination:    unit.Angle(decimal(t, "inclination", 0, 180_0000, 4)) * unit.Degree,
		RAAN:           unit.Angle(decimal(t, "node", 0, 359_9999, 4)) * unit.Degree,
		ArgPerigee:     unit.Angle(decimal(t, "perigee", 0, 359_9999, 4)) * unit.Degree,
		MeanAnomaly:    unit.Angle(decimal(t, "anomaly", 0, 359_9999, 4)) * unit.Degree,
		BStar:          small("drag", 1), MeanMotionDDot: small("second derivative", 9),
		MeanMotionDot: decimal(t, "first derivative", -99_999_999, 99_999_999, 8),
		ElementSetNo:  rapid.IntRange(0, 9999).Draw(t, "set"), RevolutionAtEpoch: rapid.IntRange(0, 99_999).Draw(t, "revolution"),
	}
}

func parsed(s string) float64 {
	v, problem, _ := parseNumber(s)
	if problem != "" {
		panic(s + " " + problem)
	}
	return v
}

// unsourced takes the places off, which differ between formats.
func unsourced(sets []orbit.Elements) []orbit.Elements {
	out := append([]orbit.Elements(nil), sets...)
	for i := range out {
		out[i].Source = orbit.Source{}
	}
	return out
}

func same(t *rapid.T, what string, got, want []orbit.Elements) {
	got = unsourced(got)
	if len(got) != len(want) {
		t.Fatalf("%s: %d sets, want %d", what, len(got), len(want))
	}
	for i := range want {
		if got[i] != want[i] {
			t.Fatalf("%s, set %d:\n got %+v\nwant %+v", what, i, got[i], want[i])
		}
	}
}

// TestRoundTrips: what a TLE can hold goes through all formats without a change, and
// the TLE text comes back byte for byte.
func TestRoundTrips(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		sets := rapid.SliceOfN(rapid.Custom(drawTLESet), 1, 4).Draw(t, "sets")
		var first bytes.Buffer
		warnings, err := WriteTLE(&first, sets)
		if err != nil || len(warnings) > 0 {
			t.Fatalf("%v %v", err, warnings)
		}
		for l := range strings.Lines(first.String()) {
			if k := tleKind(strings.TrimSpace(l)); k != lineName && len(l) != tleColumns+1 {
				t.Fatalf("line has %d columns: %q", len(l)-1, l)
			}
		}
		for f := TLE; f <= OMMCSV; f++ {
			var text bytes.Buffer
			if _, err := Write(&text, sets, f, created); err != nil {
				t.Fatal(err)
			}
			back, warnings, err := Read(bytes.NewReader(text.Bytes()), "test")
			if err != nil || len(warnings) > 0 {
				t.Fatalf("%s: %v %v in\n%s", f, err, warnings, text.String())
			}
			same(t, f.String(), back, sets)
			var again bytes.Buffer
			if _, err := WriteTLE(&again, back); err != nil || again.String() != first.String() {
				t.Fatalf("by way of %s: %v\n%s\nwant\n%s", f, err, again.String(), first.String())
			}
		}
	})
}

// TestFineDigits: numbers of up to 15 digits, nanoseconds and catalogue numbers of
// nine digits go through the OMM formats without a change.
func TestFineDigits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		el := drawTLESet(t)
		el.CatalogNumber = rapid.IntRange(0, 999_999_999).Draw(t, "number")
		el.Epoch = el.Epoch.Add(time.Duration(rapid.IntRange(0, 863_999).Draw(t, "ns")))
		el.MeanMotion = rapid.Float64Range(0.01, 17).Draw(t, "motion")
		el.Eccentricity = rapid.Float64Range(0, 0.99).Draw(t, "eccentricity")
		el.BStar = rapid.Float64Range(-1, 1).Draw(t, "drag")
		degrees := rapid.StringMatching(`[0-9]{1,2}\.[0-9]{1,13}`).Draw(t, "degrees")
		el.Inclination = unit.Angle(parsed(degrees)) * unit.Degree
		if got := shortestDegrees(el.Inclination); parsed(got) != parsed(degrees) {
			t.Fatalf("%s deg is written as %s", degrees, got)
		}
		for f := OMMKVN; f <= OMMCSV; f++ {
			var text bytes.Buffer
			if err := WriteOMM(&text, []orbit.Elements{el}, f, created); err != nil {
				t.Fatal(err)
			}
			back, _, err := Read(bytes.NewReader(text.Bytes()), "test")
			if err != nil {
				t.Fatalf("%v in\n%s", err, text.String())
			}
			same(t, f.String(), back, []orbit.Elements{el})
		}
	})
}

// TestRoundingIsSmallAndTold: a set with more digits than a TLE holds is written
// within half a last digit, and a warning comes with it.
func TestRoundingIsSmallAndTold(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		el := drawTLESet(t)
		el.Epoch = time.Date(2026, 12, 31, 23, 59, 59, 0, time.UTC).Add(time.Duration(rapid.Int64Range(0, 2e9).Draw(t, "ns")))
		el.MeanMotion = rapid.Float64Range(0.01, 17).Draw(t, "motion")
		el.MeanAnomaly = unit.Angle(rapid.Float64Range(0, 360).Draw(t, "anomaly")) * unit.Degree
		el.BStar = rapid.Float64Range(-0.01, 0.01).Draw(t, "drag")
		var text bytes.Buffer
		warnings, err := WriteTLE(&text, []orbit.Elements{el})
		if err != nil {
			t.Fatal(err)
		}
		back, _, err := Read(bytes.NewReader(text.Bytes()), "test")
		if err != nil {
			t.Fatalf("%v in\n%s", err, text.String())
		}
		got := back[0]
		if d := got.Epoch.Sub(el.Epoch).Abs(); d > tleTick/2 {
			t.Errorf("epoch off by %v", d)
		}
		if d := math.Abs(got.MeanMotion - el.MeanMotion); d > 0.5001e-8 {
			t.Errorf("mean motion off by %g", d)
		}
		if d := math.Abs((got.MeanAnomaly - el.MeanAnomaly).Degrees()); d > 0.5001e-4 {
			t.Errorf("mean anomaly off by %g deg", d)
		}
		if d := math.Abs(got.BStar - el.BStar); d > max(0.5001e-4*math.Abs(el.BStar), 0.5001e-14) {
			t.Errorf("B* %g off by %g", el.BStar, d)
		}
		if changed := got.Epoch != el.Epoch || got.MeanMotion != el.MeanMotion || got.BStar != el.BStar; changed && len(warnings) != 1 {
			t.Errorf("rounding gave %d warnings", len(warnings))
		}
	})
}
