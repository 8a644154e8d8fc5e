package oem

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
)

var begin = time.Date(2026, 9, 14, 0, 0, 0, 0, time.UTC)

func flown(t testing.TB, length time.Duration) *orbit.Ephemeris {
	t.Helper()
	el := orbit.Elements{Name: "Wagtail 1", Epoch: begin, MeanMotion: 15.1, Eccentricity: 0.0012, Inclination: 97.5 * unit.Degree, BStar: 1e-4}
	e, err := orbit.NewEphemeris(el, begin, begin.Add(length), orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	return e
}

// What is written is read back within 1 m, in either notation and every frame.
func TestWrittenIsReadBack(t *testing.T) {
	e := flown(t, 6*time.Hour)
	for f := orbit.EarthFixed; f <= orbit.GCRF; f++ {
		for _, n := range []Notation{KVN, XML} {
			tr, err := Sample(e, "Wagtail <1> & co", "2026-001A", f, time.Minute, orbit.EarthOrientation{})
			if err != nil {
				t.Fatal(err)
			}
			var text bytes.Buffer
			if err := Write(&text, tr, n, Header{Created: begin, Comments: []string{"a\ncomment"}}); err != nil {
				t.Fatal(err)
			}
			got, err := Read(&text, "it.oem", orbit.EarthOrientation{})
			if err != nil {
				t.Fatal(err)
			}
			if len(got.Trajectories) != 1 || got.Trajectories[0].Name != "Wagtail <1> & co" || got.Trajectories[0].ID != "2026-001A" || len(got.Warnings) > 0 || got.Originator != "SLANTWISE" {
				t.Fatalf("%v: %+v", f, got)
			}
			var again orbit.Ephemeris
			if err := again.Follow(&got.Trajectories[0], orbit.Shift{}, begin, begin.Add(6*time.Hour), orbit.EarthOrientation{}); err != nil {
				t.Fatal(err)
			}
			worst, worstV := 0.0, 0.0
			for s := 0.0; s <= e.Span(); s += 11.3 {
				a, b := again.StateAt(s), e.StateAt(s)
				worst, worstV = math.Max(worst, a.Position.Sub(b.Position).Norm()), math.Max(worstV, a.Velocity.Sub(b.Velocity).Norm())
			}
			if worst > 0.3 || worstV > 2e-3 {
				t.Errorf("%v, notation %d: %.4f m, %.5f m/s", f, n, worst, worstV)
			}
			t.Logf("%v, notation %d: %.4f m, %.6f m/s", f, n, worst, worstV)
		}
	}
}

// message is a KVN message with the metadata's lines and data given.
func message(metadata, data string) string {
	return "CCSDS_OEM_VERS = 2.0\nCREATION_DATE = 2026-09-14T00:00:00\nORIGINATOR = TEST\n" + segmentText(metadata, data)
}

func segmentText(metadata, data string) string {
	return "META_START\n" + metadata + "META_STOP\n" + data
}

const metaText = `OBJECT_NAME = W
OBJECT_ID = 2026-001A
CENTER_NAME = EARTH
REF_FRAME = GCRF
TIME_SYSTEM = UTC
START_TIME = 2026-09-14T00:00:00
STOP_TIME = 2026-09-14T00:03:00
INTERPOLATION = LAGRANGE
INTERPOLATION_DEGREE = 1
`

const dataText = `2026-09-14T00:00:00 7000 0 0 0 7.5 0
2026-257T00:01:00.000Z 6985 450 0 -0.5 7.48 0 0.001 0 0
COMMENT between
2026-09-14T00:03:00 6870 1340 0 -1.4 7.3 0
`

func TestWhatAMessageMaySay(t *testing.T) {
	f, err := Read(strings.NewReader(message(metaText+"MODEL = x\n", dataText)), "f", orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	s := f.Trajectories[0].Segments[0]
	if len(s.States) != 3 || s.Frame != orbit.GCRF || s.Interpolation != (orbit.Interpolation{Kind: orbit.Lagrange, Degree: 1}) ||
		!s.From.Equal(begin) || !s.To.Equal(begin.Add(3*time.Minute)) || s.States[1].Position != (orbit.Vec3{X: 6985e3, Y: 450e3}) || !s.States[1].Time.Equal(begin.Add(time.Minute)) {
		t.Errorf("%+v", s)
	}
	if len(f.Warnings) != 1 || !strings.Contains(f.Warnings[0].String(), `f:14: the keyword "MODEL"`) {
		t.Errorf("warnings %v", f.Warnings)
	}
	// Time scales: leap seconds of 2026, 37 s; GPS time is 19 s behind TAI, TT 32.184 s ahead.
	for _, c := range []struct {
		system string
		offset time.Duration
	}{{"TAI", 37 * time.Second}, {"GPS", 18 * time.Second}, {"TT", 69184 * time.Millisecond}, {"UT1", -250 * time.Millisecond}} {
		f, err := Read(strings.NewReader(message(strings.Replace(metaText, "= UTC", "= "+c.system, 1), dataText)), "f", orbit.EarthOrientation{UT1MinusUTC: -250 * time.Millisecond})
		if err != nil {
			t.Fatal(err)
		}
		if got := begin.Sub(f.Trajectories[0].Segments[0].From); got != c.offset {
			t.Errorf("%s: %v after UTC, want %v", c.system, got, c.offset)
		}
	}
	// The interpolation is chosen where none is stated, as far as the states go.
	bare := strings.Replace(metaText, "INTERPOLATION = LAGRANGE\nINTERPOLATION_DEGREE = 1\n", "", 1)
	if f, err = Read(strings.NewReader(message(bare, dataText)), "f", orbit.EarthOrientation{}); err != nil || f.Trajectories[0].Segments[0].Interpolation.Degree != 5 || len(f.Warnings) != 1 {
		t.Errorf("%v %+v", err, f)
	}
}

// The offsets of TAI at the instants on both sides of a leap second, as the IERS lists them.
func TestLeapSeconds(t *testing.T) {
	for _, c := range []struct {
		utc   time.Time
		ahead int
	}{
		{time.Date(1972, 1, 1, 0, 0, 0, 0, time.UTC), 10}, {time.Date(2016, 12, 31, 23, 59, 59, 0, time.UTC), 36},
		{time.Date(2017, 1, 1, 0, 0, 0, 0, time.UTC), 37}, {time.Date(2008, 12, 31, 12, 0, 0, 0, time.UTC), 33},
	} {
		got, problem := tai.utcOf(c.utc.Add(time.Duration(c.ahead)*time.Second), 0)
		if problem != "" || !got.Equal(c.utc) {
			t.Errorf("%v: %v %s", c.utc, got, problem)
		}
	}
	if _, problem := tt.utcOf(time.Date(1970, 1, 1, 0, 0, 0, 0, time.UTC), 0); problem == "" {
		t.Error("1970 has no whole seconds between TAI and UTC, yet it was taken")
	}
}

func TestBadMessages(t *testing.T) {
	second := strings.NewReplacer("00:00:00\n", "00:02:00\n", "00:03:00\n", "00:06:00\n").Replace(metaText)
	secondData := "2026-09-14T00:02:00 6985 450 0 -0.5 7.48 0\n2026-09-14T00:06:00 6640 2214 0 -2.39 7.1 0\n"
	cov := "COVARIANCE_START\nEPOCH = 2026-09-14T00:01:00\nCOV_REF_FRAME = RTN\n1e-4\n0 1e-4\n0 0 1e-4\n0 0 0 1e-10\n0 0 0 0 1e-10\n0 0 0 0 0 1e-10\nCOVARIANCE_STOP\n"
	swap := func(old, new string) string { return strings.Replace(metaText, old, new, 1) }
	for _, c := range []struct{ name, text, want string }{
		{"not an OEM", "CCSDS_OPM_VERS = 2.0\n", "does not begin as an OEM"},
		{"no segment", "CCSDS_OEM_VERS = 2.0\n", "holds no segment"},
		{"version", strings.Replace(message(metaText, dataText), "2.0", "4.0", 1), `f:1: CCSDS_OEM_VERS "4.0": is not a version that is read`},
		{"unknown frame", message(swap("GCRF", "MARSIAU"), dataText), `f:8: REF_FRAME "MARSIAU": is not a frame that is read`},
		{"another centre", message(swap("EARTH", "MOON"), dataText), `f:7: CENTER_NAME "MOON": is valid, but only EARTH is supported`},
		{"time scale", message(swap("= UTC", "= TDB"), dataText), `f:9: TIME_SYSTEM "TDB"`},
		{"missing key", message(swap("OBJECT_ID = 2026-001A\n", ""), dataText), "f:4: OBJECT_ID: is missing"},
		{"interpolation", message(swap("LAGRANGE", "SPLINE"), dataText), `INTERPOLATION "SPLINE"`},
		{"degree", message(swap("DEGREE = 1", "DEGREE = 7"), dataText), "takes 8 states, and there are 3"},
		{"backwards", message(metaText, dataText+"2026-09-14T00:02:00 6870 1340 0 -1.4 7.3 0\n"), `f:19: EPOCH "2026-09-14T00:02:00": does not come after`},
		{"inside the Earth", message(metaText, strings.Replace(dataText, "7000 0 0", "700 0 0", 1)), "f:15: state: the position lies inside the Earth, 700.000 km"},
		{"metres", message(metaText, strings.Replace(dataText, "7000 0 0", "7000000000 0 0", 1)), "must be at most 5e6 km"},
		{"not a number", message(metaText, strings.Replace(dataText, "450", "NaN", 1)), `f:16: Y "NaN": is not a finite number`},
		{"fields", message(metaText, "2026-09-14T00:00:00 7000 0 0 0 7.5\n"), "f:15: state: it has 6 fields"},
		{"usable beyond", message(metaText+"USEABLE_STOP_TIME = 2026-09-14T00:09:00\n", dataText), "f:14: USEABLE_STOP_TIME \"2026-09-14T00:09:00.000Z\": lies outside the states"},
		{"overlap", message(metaText, dataText+segmentText(second, secondData)), "overlap"},
		{"calendar", message(metaText, strings.Replace(dataText, "2026-09-14T00:00", "2026-02-30T00:00", 1)), "is no day of the calendar"},
		{"leap second", message(metaText, strings.Replace(dataText, "00:00:00", "00:00:60", 1)), "is a leap second"},
		{"covariance", message(metaText, dataText+strings.Replace(cov, "0 1e-4\n", "2e-4 1e-4\n", 1)), "f:20: covariance: covariance: row 2"},
		{"covariance rows", message(metaText, dataText+strings.Replace(cov, "0 0 1e-4\n", "0 0\n", 1)), "row 3 of a lower triangle has 3 numbers"},
		{"covariance frame", message(metaText, dataText+strings.Replace(cov, "RTN", "MOON", 1)), `COV_REF_FRAME "MOON"`},
		{"cut off", message(metaText, dataText) + "META_START\nOBJECT_NAME = W\n", "no META_STOP follows"},
		{"XML", `<oem version="2.0"><header>`, "is not XML"},
	} {
		got, err := Read(strings.NewReader(c.text), "f", orbit.EarthOrientation{})
		var fs *elements.Faults
		if err == nil || got != nil || !errors.As(err, &fs) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}
	if _, err := Read(strings.NewReader(message(metaText, dataText+cov)), "f", orbit.EarthOrientation{}); err != nil {
		t.Error(err)
	}
}

// A covariance means the same in every frame: rotated by hand onto the axes of a frame, it
// comes back as it was on those of the orbit.
func TestCovarianceOfEveryFrame(t *testing.T) {
	// At (7000, 0, 0) km with 7.5 km/s along y, radial, along and across are x, y, z; the
	// velocity is along as well, so that T, N, W are y, -x, z.
	want := [6]float64{100, 2500, 400, 1e-4, 4e-4, 9e-4}
	for _, c := range []struct {
		frame string
		diag  [6]float64 // km², on the frame's axes
	}{
		{"RTN", [6]float64{100, 2500, 400, 1e-4, 4e-4, 9e-4}},
		{"GCRF", [6]float64{100, 2500, 400, 1e-4, 4e-4, 9e-4}},
		{"TNW", [6]float64{2500, 100, 400, 4e-4, 1e-4, 9e-4}},
	} {
		var b strings.Builder
		b.WriteString("COVARIANCE_START\nEPOCH = 2026-09-14T00:00:00\nCOV_REF_FRAME = " + c.frame + "\n")
		for i := range 6 {
			for range i {
				b.WriteString("0 ")
			}
			fmt.Fprintf(&b, "%.10e\n", c.diag[i]*1e-6)
		}
		b.WriteString("COVARIANCE_STOP\n")
		f, err := Read(strings.NewReader(message(metaText, dataText+b.String())), "f", orbit.EarthOrientation{})
		if err != nil {
			t.Fatal(err)
		}
		got := f.Trajectories[0].Covariance[0].Covariance
		for i := range 6 {
			if math.Abs(got[i][i]-want[i]) > 1e-5*want[i] {
				t.Errorf("%s: row %d is %g, want %g", c.frame, i, got[i][i], want[i])
			}
		}
	}
}

func TestXMLCovariance(t *testing.T) {
	e := flown(t, time.Hour)
	tr, err := Sample(e, "W", "1", orbit.TEME, time.Minute, orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	var text bytes.Buffer
	if err := Write(&text, tr, XML, Header{Created: begin}); err != nil {
		t.Fatal(err)
	}
	var cov strings.Builder
	cov.WriteString("<covarianceMatrix><EPOCH>2026-09-14T00:30:00</EPOCH><COV_REF_FRAME>RTN</COV_REF_FRAME>")
	for i, row := range covarianceLeaves {
		for j, name := range row {
			v := "0"
			if i == j {
				v = "1e-6"
			}
			fmt.Fprintf(&cov, "<%s>%s</%s>", name, v, name)
		}
	}
	cov.WriteString("</covarianceMatrix></data>")
	f, err := Read(strings.NewReader(strings.Replace(text.String(), "</data>", cov.String(), 1)), "f", orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	c := f.Trajectories[0].Covariance
	if len(c) != 1 || math.Abs(c[0].Covariance[2][2]-1) > 1e-9 || !c[0].Time.Equal(begin.Add(30*time.Minute)) {
		t.Errorf("%+v", c)
	}
}

func manyLines(t testing.TB) string {
	e := flown(t, 100_000*time.Second)
	tr, err := Sample(e, "W", "1", orbit.GCRF, time.Second, orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	var text bytes.Buffer
	if err := Write(&text, tr, KVN, Header{Created: begin}); err != nil {
		t.Fatal(err)
	}
	return text.String()
}

func BenchmarkRead100000Lines(b *testing.B) {
	text := manyLines(b)
	b.SetBytes(int64(len(text)))
	for b.Loop() {
		if _, err := Read(strings.NewReader(text), "f", orbit.EarthOrientation{}); err != nil {
			b.Fatal(err)
		}
	}
}

func fuzz(f *testing.F) {
	f.Fuzz(func(t *testing.T, text string) {
		got, err := Read(strings.NewReader(text), "f", orbit.EarthOrientation{})
		if (got == nil) == (err == nil) {
			t.Fatalf("neither a message nor an error, or both: %v", err)
		}
		if err != nil {
			var fs *elements.Faults
			if !errors.As(err, &fs) || fs.Total < 1 {
				t.Fatalf("an untyped error: %v", err)
			}
			return
		}
		for i := range got.Trajectories {
			tr := &got.Trajectories[i]
			if err := tr.Validate(); err != nil {
				t.Fatalf("what was accepted is not valid: %v", err)
			}
			for k := range tr.Segments {
				if _, _, err := tr.StateAt(tr.Segments[k].From, orbit.EarthOrientation{}); err != nil {
					t.Fatal(err)
				}
			}
		}
	})
}

func FuzzKVN(f *testing.F) {
	f.Add(message(metaText, dataText))
	f.Add(message(metaText+"USEABLE_START_TIME = 2026-09-14T00:01:00\n", dataText+"COVARIANCE_START\nEPOCH = 2026-09-14T00:01:00\n1e-4\n"))
	f.Add(message(metaText, dataText+segmentText(metaText, dataText))) // overlaps
	f.Add("CCSDS_OEM_VERS = 3.0\nMETA_STOP\nMETA_START\nMETA_START\n")
	fuzz(f)
}

func FuzzXML(f *testing.F) {
	const small = `<oem version="2.0"><header><ORIGINATOR>T</ORIGINATOR></header><body><segment><metadata>
<OBJECT_NAME>W</OBJECT_NAME><OBJECT_ID>1</OBJECT_ID><CENTER_NAME>EARTH</CENTER_NAME><REF_FRAME>ITRF</REF_FRAME>
<TIME_SYSTEM>UTC</TIME_SYSTEM><START_TIME>2026-09-14T00:00:00</START_TIME><STOP_TIME>2026-09-14T00:01:00</STOP_TIME>
</metadata><data>
<stateVector><EPOCH>2026-09-14T00:00:00</EPOCH><X>7000</X><Y>0</Y><Z>0</Z><X_DOT>0</X_DOT><Y_DOT>7</Y_DOT><Z_DOT>0</Z_DOT></stateVector>
<stateVector><EPOCH>2026-09-14T00:01:00</EPOCH><X>6990</X><Y>420</Y><Z>0</Z><X_DOT>0</X_DOT><Y_DOT>7</Y_DOT><Z_DOT>0</Z_DOT></stateVector>
</data></segment></body></oem>`
	f.Add(small)
	f.Add(strings.Replace(small, "<data>", "<data><covarianceMatrix><EPOCH>2026-09-14T00:00:00</EPOCH></covarianceMatrix>", 1))
	f.Add("<ndm><oem version=\"2.0\"><body><segment><data><stateVector/></data></segment></body></oem></ndm>") // no metadata
	fuzz(f)
}
