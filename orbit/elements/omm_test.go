package elements

import (
	"bytes"
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// The check pair: object 45018 as TLE and as OMM, from the sample files of
// python-sgp4 2.15.
const (
	pairTLE = `1 45018U 20003C   20364.16527091  .00002241  00000-0  84553-4 0  9997
2 45018  97.2970  66.4161 0013356 110.6345 334.7107 15.27989249 53274
`
	pairKeywords = `EPOCH = 2020-12-29T03:57:59.406624
MEAN_MOTION = 15.27989249
ECCENTRICITY = 0.00133560
INCLINATION = 97.2970
RA_OF_ASC_NODE = 66.4161
ARG_OF_PERICENTER = 110.6345
MEAN_ANOMALY = 334.7107
NORAD_CAT_ID = 45018
ELEMENT_SET_NO = 999
REV_AT_EPOCH = 5327
BSTAR = 0.000084553
MEAN_MOTION_DOT = 0.00002241
MEAN_MOTION_DDOT = 0
`
	header = `CCSDS_OMM_VERS = 2.0
CREATION_DATE = 2026-03-10T06:00:00
ORIGINATOR = FICTION
`
	metadata = `OBJECT_NAME = UNKNOWN
OBJECT_ID = 2020-003C
CENTER_NAME = EARTH
REF_FRAME = TEME
TIME_SYSTEM = UTC
MEAN_ELEMENT_THEORY = SGP4
CLASSIFICATION_TYPE = U
`
	pairKVN = header + metadata + pairKeywords
)

func TestCheckPair(t *testing.T) {
	want := mustRead(t, pairTLE)[0]
	csvText := strings.Join(csvHeads(), ",") + "\nUNKNOWN,2020-003C,EARTH,TEME,UTC,SGP4,2020-12-29T03:57:59.406624,15.27989249,0.00133560,97.2970,66.4161,110.6345,334.7107,0,U,45018,999,5327,0.000084553,0.00002241,0\n"
	for name, text := range map[string]string{
		"KVN":           pairKVN,
		"JSON numbers":  asJSON(pairKVN, false),
		"JSON strings":  asJSON(pairKVN, true),
		"single object": strings.Trim(asJSON(pairKVN, false), "[]\n"),
		"XML in ndm":    "<ndm>" + asXML(pairKVN) + "</ndm>",
		"XML alone":     "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n" + asXML(pairKVN),
		"CSV":           csvText,
	} {
		t.Run(name, func(t *testing.T) {
			sets, warnings, err := Read(strings.NewReader(text), "test")
			if err != nil {
				t.Fatalf("%v\nin %s", err, text)
			}
			if len(warnings) > 0 {
				t.Errorf("unexpected warnings %v", warnings)
			}
			w := want
			w.Source = sets[0].Source
			if len(sets) != 1 || sets[0] != w {
				t.Errorf("\n got %+v\nwant %+v", sets[0], w)
			}
			if got := writtenTLE(t, sets); got != pairTLE {
				t.Errorf("written as\n%s", got)
			}
		})
	}
}

// pairs splits KVN into keywords and values.
func pairs(kvn string) [][2]string {
	var out [][2]string
	for l := range strings.Lines(kvn) {
		k, v, _ := strings.Cut(strings.TrimSpace(l), " = ")
		out = append(out, [2]string{k, v})
	}
	return out
}

func asJSON(kvn string, quote bool) string {
	var fields []string
	for _, p := range pairs(kvn) {
		value := p[1]
		if _, problem, _ := parseNumber(value); problem != "" || quote {
			value = fmt.Sprintf("%q", value)
		}
		fields = append(fields, fmt.Sprintf("%q: %s", p[0], value))
	}
	return "[{" + strings.Join(fields, ",\n") + "}]\n"
}

func asXML(kvn string) string {
	b := strings.Builder{}
	b.WriteString("<omm id=\"CCSDS_OMM_VERS\" version=\"2.0\"><header></header><body><segment><metadata/><data><meanElements>\n")
	for _, p := range pairs(kvn)[1:] {
		fmt.Fprintf(&b, "<%s>%s</%s>\n", p[0], p[1], p[0])
	}
	return b.String() + "</meanElements></data></segment></body></omm>"
}

// TestSampleForms reads what the sample files of python-sgp4 2.15 do beyond the
// standard: numbers without a zero before the point, exponents, empty header values,
// rows without the fixed keywords.
func TestSampleForms(t *testing.T) {
	text := strings.Join([]string{
		"OBJECT_NAME,OBJECT_ID,EPOCH,MEAN_MOTION,ECCENTRICITY,INCLINATION,RA_OF_ASC_NODE,ARG_OF_PERICENTER,MEAN_ANOMALY,EPHEMERIS_TYPE,CLASSIFICATION_TYPE,NORAD_CAT_ID,ELEMENT_SET_NO,REV_AT_EPOCH,BSTAR,MEAN_MOTION_DOT,MEAN_MOTION_DDOT",
		"WAGTAIL 0,1958-002B,2020-10-13T04:52:48.472320,10.84869164,.1845686,34.2443,225.5254,162.2516,205.2356,0,U,5,999,21814,-.22483E-4,-1.6E-7,0",
	}, "\r\n")
	sets, warnings, err := Read(strings.NewReader(text), "test")
	if err != nil {
		t.Fatal(err)
	}
	if len(warnings) != 1 || warnings[0].String() != "test: not given, assumed: CENTER_NAME = EARTH, REF_FRAME = TEME, TIME_SYSTEM = UTC, MEAN_ELEMENT_THEORY = SGP4" {
		t.Errorf("warnings %v", warnings)
	}
	// 04:52:48.472320 is 17568.47232 s, 0.203338800 day, on day 287; checksums
	// and fraction were worked out apart from this code.
	want := "WAGTAIL 0\n" +
		"1 00005U 58002B   20287.20333880 -.00000016  00000-0 -22483-4 0  9998\n" +
		"2 00005  34.2443 225.5254 1845686 162.2516 205.2356 10.84869164218149\n"
	if got := writtenTLE(t, sets); got != want {
		t.Errorf("\n got %s\nwant %s", got, want)
	}
}

func TestOMMWarnings(t *testing.T) {
	for name, c := range map[string]struct {
		extra string
		want  []string
	}{
		"comments": {"COMMENT invented\nCOMMENT\n", nil},
		"passed over": {"MASS = 12 [kg]\nCX_X = 1e-3 [km**2]\nCZ_DOT_Z_DOT = 1\nUSER_DEFINED_COLOUR = red\nCOV_REF_FRAME = RTN\n",
			[]string{"test:24: passed over, since SGP4 does not use it: MASS, CX_X, CZ_DOT_Z_DOT, USER_DEFINED_COLOUR, COV_REF_FRAME"}},
		"unknown": {"MEAN_MOTIN = 3\nTLE_LINE1 = 1 2\nepoch = now\n",
			[]string{"test:24: no keyword of an OMM, passed over: MEAN_MOTIN (MEAN_MOTION?), TLE_LINE1, epoch (EPOCH?)"}},
		"type 2": {"EPHEMERIS_TYPE = 2\n", []string{"test:24: EPHEMERIS_TYPE 2 says SGP4 outright; it is read as type 0, the published kind"}},
		"gm":     {"GM = 398600.4415 [km**3/s**2]\n", nil},
	} {
		t.Run(name, func(t *testing.T) {
			_, warnings, err := Read(strings.NewReader(pairKVN+c.extra), "test")
			if err != nil {
				t.Fatal(err)
			}
			var got []string
			for _, w := range warnings {
				got = append(got, w.String())
			}
			if strings.Join(got, "\n") != strings.Join(c.want, "\n") {
				t.Errorf("\n got %q\nwant %q", got, c.want)
			}
		})
	}
}

func TestUnitsAndSpellings(t *testing.T) {
	want := mustRead(t, pairKVN)[0]
	text := pairKVN
	for old, new := range map[string]string{
		"97.2970\n": "97.2970 [deg]\n", "66.4161\n": "66.4161[deg]\n", "15.27989249\n": "15.27989249 [rev/day]\n", "0.000084553\n": "8.4553D-05 [1/ER]\n",
		"0.00002241\n": "+2.241e-5 [rev/day**2]\n", "DDOT = 0\n": "DDOT = -0.0 [REV/DAY**3]\n", "EARTH": "Earth", "= SGP4": "= SGP/SGP4", "45018\n": "000045018\n",
		"2020-12-29T03:57:59.406624": "2020-364T03:57:59.406624000Z", "UNKNOWN": "",
	} {
		if !strings.Contains(text, old) {
			t.Fatalf("%q is not in the text", old)
		}
		text = strings.Replace(text, old, new, 1)
	}
	// A name without a value is missing, a name of its own brackets is kept.
	text = strings.Replace(text, "OBJECT_NAME = \n", "OBJECT_NAME = WAGTAIL [1]\n", 1)
	sets := mustRead(t, strings.ReplaceAll(text, "\n", "\r\n"))
	want.Name = "WAGTAIL [1]"
	if sets[0] != want {
		t.Errorf("\n got %+v\nwant %+v", sets[0], want)
	}
	if math.Signbit(sets[0].MeanMotionDDot) {
		t.Error("-0.0 was kept as minus zero")
	}
}

// TestSemiMajorAxis: a geostationary orbit, n = 1.002738347 rev/day at a = 42164.17 km
// with GM = 398600.8 km³/s² (Kepler's third law, worked out apart to ten digits).
func TestSemiMajorAxis(t *testing.T) {
	text := strings.Replace(pairKVN, "MEAN_MOTION = 15.27989249\n", "SEMI_MAJOR_AXIS = 42164.17 [km]\n", 1)
	sets, warnings, err := Read(strings.NewReader(text), "test")
	if err != nil {
		t.Fatal(err)
	}
	if got, want := sets[0].MeanMotion, 1.0027383469; math.Abs(got-want) > 1e-10 {
		t.Errorf("mean motion %v, want %v within 1e-10", got, want)
	}
	if len(warnings) != 1 || !strings.HasPrefix(warnings[0].Text, "SEMI_MAJOR_AXIS 42164.17 km taken as a mean motion of 1.0027") ||
		!strings.HasSuffix(warnings[0].Text, "GM = 398600.8 km³/s²") {
		t.Errorf("warnings %v", warnings)
	}
	own, _, err := Read(strings.NewReader(text+"GM = 398600.4418 [km**3/s**2]\n"), "test")
	if err != nil {
		t.Fatal(err)
	}
	// n goes with the square root of GM.
	if got, want := own[0].MeanMotion/sets[0].MeanMotion, math.Sqrt(398600.4418/398600.8); math.Abs(got-want) > 1e-12 {
		t.Errorf("ratio of mean motions with another GM %v, want %v", got, want)
	}
}

func TestManySets(t *testing.T) {
	second := strings.NewReplacer("45018", "45019", "UNKNOWN", "WAGTAIL 2").Replace(pairKVN)
	array := strings.TrimSuffix(asJSON(pairKVN, false), "]\n") + "," + strings.TrimPrefix(asJSON(second, true), "[")
	for name, text := range map[string]string{
		"TLE": pairTLE + "WAGTAIL 2\n" + strings.NewReplacer("45018U", "45019U", "9997\n2 45018", "9998\n2 45019", "53274", "53275").Replace(pairTLE),
		"KVN": pairKVN + "\n" + second, "JSON": array, "XML": "<ndm>" + asXML(pairKVN) + asXML(second) + "</ndm>",
	} {
		t.Run(name, func(t *testing.T) {
			sets := mustRead(t, text)
			if len(sets) != 2 || sets[0].CatalogNumber != 45018 || sets[0].Name != "" || sets[1].CatalogNumber != 45019 || sets[1].Name != "WAGTAIL 2" {
				t.Errorf("got %+v", sets)
			}
			if sets[0].Source.Line >= sets[1].Source.Line && name != "XML" {
				t.Errorf("lines %d and %d", sets[0].Source.Line, sets[1].Source.Line)
			}
		})
	}
}

func TestEpochForms(t *testing.T) {
	base := time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC)
	for s, c := range map[string]struct {
		want  time.Time
		exact bool
	}{
		"2026-03-10T12:00:00":                {base, true},
		"2026-03-10T12:00:00Z":               {base, true},
		"2026-069T12:00:00.":                 {base, true},
		"2026-069T12:00:00.000000001":        {base.Add(1), true},
		"2026-069T12:00:00.0000000014":       {base.Add(1), false},
		"2026-069T12:00:00.0000000015Z":      {base.Add(2), false},
		"2026-069T12:00:00.00000000200":      {base.Add(2), true},
		"2026-03-10T11:59:59.99999999951234": {base, false},
		"2024-366T00:00:00":                  {time.Date(2024, 12, 31, 0, 0, 0, 0, time.UTC), true},
		"2000-02-29T00:00:00.5":              {time.Date(2000, 2, 29, 0, 0, 0, 500_000_000, time.UTC), true},
	} {
		got, exact, problem, _ := parseEpoch(s)
		if problem != "" || !got.Equal(c.want) || exact != c.exact {
			t.Errorf("%s: got %v, exact %v %s; want %v, exact %v", s, got, exact, problem, c.want, c.exact)
		}
	}
}

func TestHeaderIsAsked(t *testing.T) {
	sets := mustRead(t, pairTLE)
	var b bytes.Buffer
	if err := WriteOMM(&b, sets, OMMKVN, Header{}); err == nil || b.Len() > 0 {
		t.Errorf("a message without a time of creation was written: %v", err)
	}
	if err := WriteOMM(&b, sets, TLE, Header{}); err == nil {
		t.Error("TLE passes as an OMM format")
	}
	if err := WriteOMM(&b, sets, OMMKVN, Header{Created: time.Date(2026, 3, 10, 6, 0, 0, 0, time.UTC)}); err != nil {
		t.Fatal(err)
	}
	if !strings.HasPrefix(b.String(), "CCSDS_OMM_VERS      = 2.0\nCREATION_DATE       = 2026-03-10T06:00:00.000000\nORIGINATOR          = SLANTWISE\n") {
		t.Errorf("header is\n%s", b.String()[:140])
	}
}

func TestShortestDegrees(t *testing.T) {
	for s, a := range map[string]unit.Angle{"0": 0, "97.297": 97.297 * unit.Degree, "360": 360 * unit.Degree, "0.0001": 0.0001 * unit.Degree} {
		if got := shortestDegrees(a); got != s {
			t.Errorf("%v is written as %s, want %s", a, got, s)
		}
	}
}

func exampleSet() orbit.Elements {
	return orbit.Elements{Name: "WAGTAIL 1", CatalogNumber: 99001, InternationalDesignator: "2026-001A", Classification: "U",
		Epoch: time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC), MeanMotion: 15.21987654, Eccentricity: 0.0012345,
		Inclination: 97.4012 * unit.Degree, RAAN: 120.3456 * unit.Degree, ArgPerigee: 85.6789 * unit.Degree, MeanAnomaly: 274.5432 * unit.Degree,
		BStar: 0.000084553, MeanMotionDot: 0.00001234, ElementSetNo: 999, RevolutionAtEpoch: 1234}
}
