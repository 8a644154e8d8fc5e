package attitude

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
)

// message is a message in KVN with one segment.
func message(meta, rows string) string {
	return "CCSDS_AEM_VERS = 1.0\nCREATION_DATE = 2026-03-09T00:00:00\nORIGINATOR = TEST\nMETA_START\nCOMMENT invented\nOBJECT_NAME = Wagtail 1\nOBJECT_ID = 2026-001A\nTIME_SYSTEM = UTC\n" +
		"START_TIME = 2026-03-10T12:00:00\nSTOP_TIME = 2026-069T12:10:00\n" + meta + "META_STOP\nDATA_START\n" + rows + "DATA_STOP\n"
}

const (
	inTEME = "REF_FRAME_A = TEME\nREF_FRAME_B = SC_BODY_1\nATTITUDE_DIR = A2B\n"
	inITRF = "REF_FRAME_A = ITRF2020\nREF_FRAME_B = SC_BODY_1\n"
	quats  = "ATTITUDE_TYPE = QUATERNION\n"
)

func mustRead(t *testing.T, text string) *History {
	t.Helper()
	h, err := Read(strings.NewReader(text), orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	return h
}

func axesAt(t *testing.T, h *History, clock string) [3]orbit.Vec3 {
	t.Helper()
	at, err := time.Parse("15:04:05", clock)
	if err != nil {
		t.Fatal(err)
	}
	x, y, z, err := h.BodyAxes(time.Date(2026, 3, 10, at.Hour(), at.Minute(), at.Second(), 0, time.UTC), orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	return [3]orbit.Vec3{x, y, z}
}

// Rows of body axes in the frame, by rotation_matrix of astropy 5.2.1, whose matrices
// turn coordinates; rounded to 12 decimals. Euler angles multiply theirs from the left.
func TestConventions(t *testing.T) {
	half := 100 * math.Pi / 360
	s := math.Sin(half) / 3
	quaternion := fmt.Sprintf("%.15f %.15f %.15f %.15f", s, 2*s, 2*s, math.Cos(half))
	first := fmt.Sprintf("%.15f %.15f %.15f %.15f", math.Cos(half), s, 2*s, 2*s)
	back := fmt.Sprintf("%.15f %.15f %.15f %.15f", -s, -2*s, -2*s, math.Cos(half))
	byVector := [3]orbit.Vec3{{X: -0.043242824593, Y: 0.917349208156, Z: -0.39572779586}, {X: -0.39572779586, Y: 0.347973234629, Z: 0.8498906633}, {X: 0.917349208156, Y: 0.193352161292, Z: 0.347973234629}}
	for name, c := range map[string]struct {
		meta, record string
		want         [3]orbit.Vec3
	}{
		"100 deg about (1, 2, 2)/3":  {inITRF + quats, quaternion, byVector},
		"scalar first":               {inITRF + quats + "QUATERNION_TYPE = FIRST\n", first, byVector},
		"the other direction":        {inITRF + "ATTITUDE_DIR = B2A\n" + quats, back, byVector},
		"from the body to the frame": {"REF_FRAME_A = SC_BODY_1\nREF_FRAME_B = ITRF\n" + quats, back, byVector},
		"with rates":                 {inITRF + "ATTITUDE_TYPE = QUATERNION/RATE\nRATE_FRAME = REF_FRAME_B\n", quaternion + " 0 0 0.1", byVector},
		"Euler 321": {inITRF + "ATTITUDE_TYPE = EULER_ANGLE\nEULER_ROT_SEQ = 321\n", "30 -20 75",
			[3]orbit.Vec3{{X: 0.813797681349, Y: 0.469846310393, Z: 0.342020143326}, {X: -0.41551494865, Y: 0.058960823267, Z: 0.90767337119}, {X: 0.406301195271, Y: -0.880776967188, Z: 0.243210346802}}},
		"Euler ZXZ": {inITRF + "ATTITUDE_TYPE = EULER_ANGLE\nEULER_ROT_SEQ = ZXZ\n", "110 40 -65",
			[3]orbit.Vec3{{X: 0.507858358126, Y: 0.634586285968, Z: -0.58256341607}, {X: -0.614195715638, Y: 0.74092364348, Z: 0.271653782274}, {X: 0.604022773555, Y: 0.219846310393, Z: 0.766044443119}}},
		"Euler 212": {inITRF + "ATTITUDE_TYPE = EULER_ANGLE\nEULER_ROT_SEQ = YXY\n", "10 50 100",
			[3]orbit.Vec3{{X: -0.280933226859, Y: 0.754406506735, Z: -0.593251502014}, {X: 0.133022221559, Y: 0.642787609687, Z: 0.754406506735}, {X: 0.950463892327, Y: 0.133022221559, Z: -0.280933226859}}},
	} {
		h := mustRead(t, message(c.meta, "2026-03-10T12:00:00 "+c.record+"\n2026-069T12:10:00.000Z "+c.record+"\n"))
		for k, got := range axesAt(t, h, "12:03:00") {
			if d := got.Sub(c.want[k]).Norm(); d > 2e-12 {
				t.Errorf("%s: axis %d is %v, want %v (off by %g)", name, k+1, got, c.want[k], d)
			}
		}
	}
}

// The example of CCSDS 504.0-B-2, figure G-4, as a public reader of the format quotes it:
// its quaternions are of length one to five decimals, its times rise, and its useable
// span lies within them. Its centre is another planet's, which the attitude does not mind.
func TestPublishedExample(t *testing.T) {
	const text = `CCSDS_AEM_VERS = 2.0
CREATION_DATE = 2002-11-04T17:22:31
ORIGINATOR = NASA/JPL
MESSAGE_ID = A7015Z3

META_START
OBJECT_NAME     = MARS GLOBAL SURVEYOR
OBJECT_ID       = 1996-062A
CENTER_NAME     = MARS BARYCENTER
REF_FRAME_A     = EME2000
REF_FRAME_B     = SC_BODY_1
TIME_SYSTEM     = UTC
START_TIME      = 1996-11-28T21:29:07.2555
USEABLE_START_TIME = 1996-11-28T22:08:02.5555
USEABLE_STOP_TIME  = 1996-11-30T01:18:02.5555
STOP_TIME       = 1996-11-30T01:28:02.5555
ATTITUDE_TYPE   = QUATERNION
INTERPOLATION_METHOD = hermite
INTERPOLATION_DEGREE = 7
META_STOP

DATA_START
1996-11-28T21:29:07.2555 0.56748  0.03146  0.45689  0.68427
1996-11-28T22:08:03.5555 0.42319  -0.45697 0.23784  0.74533
1996-11-28T22:08:04.5555 -0.84532 0.26974  -0.06532 0.45652
1996-11-30T01:28:02.5555 0.74563  -0.45375  0.36875  0.31964
DATA_STOP
`
	h, err := Read(strings.NewReader(text), orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	if spans := h.Spans(); len(spans) != 1 || !spans[0][0].Equal(time.Date(1996, 11, 28, 22, 8, 2, 555500000, time.UTC)) || len(h.Warnings) != 0 {
		t.Errorf("spans %v, warnings %v", spans, h.Warnings)
	}
	if !strings.Contains(h.Source(), "where the file asks for HERMITE") {
		t.Errorf("source %q", h.Source())
	}
	for _, off := range []time.Duration{-time.Second, 30 * time.Hour} {
		at := h.Spans()[0][0].Add(off)
		_, _, _, err := h.BodyAxes(at, orbit.EarthOrientation{})
		var outside *SpanError
		if e, ok := err.(*SpanError); ok {
			outside = e
		}
		if outside == nil || !strings.Contains(err.Error(), "useable from 1996-11-28T22:08:02.555Z to 1996-11-30T01:18:02.555Z") {
			t.Errorf("%v outside the span: %v", off, err)
		}
	}
}

// Halfway between two records about one axis the body has turned half as far, the shorter
// way, whatever the signs of the quaternions.
func TestBetweenRecords(t *testing.T) {
	record := func(minute int, angle, sign float64) string {
		s, c := math.Sincos(angle * math.Pi / 360)
		return fmt.Sprintf("2026-03-10T12:%02d:00 0 0 %.12f %.12f\n", minute, sign*s, sign*c)
	}
	h := mustRead(t, message(inITRF+quats, record(0, 20, 1)+record(4, 60, -1)+record(10, 60.00001, 1)))
	for clock, want := range map[string]float64{"12:00:00": 20, "12:01:00": 30, "12:02:00": 40, "12:04:00": 60, "12:08:00": 60, "12:10:00": 60} {
		x := axesAt(t, h, clock)[0]
		if got := math.Atan2(x.Y, x.X) * 180 / math.Pi; math.Abs(got-want) > 1e-4 {
			t.Errorf("at %s body x stands at %.6f deg, want %g", clock, got, want)
		}
	}
}

// The frames among the stars are turned into the Earth-fixed one as positions are: body z
// along x of each.
func TestFrames(t *testing.T) {
	at := time.Date(2026, 3, 10, 12, 5, 0, 0, time.UTC)
	turner, err := orbit.NewTurner(orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	for name, frame := range map[string]orbit.Frame{"EME2000": orbit.J2000, "ICRF": orbit.GCRF, "TOD_EARTH": orbit.TrueOfDate, "TEME": orbit.TEME, "ITRF-97": orbit.EarthFixed} {
		h := mustRead(t, message("REF_FRAME_A = "+name+"\nREF_FRAME_B = SC_BODY\nATTITUDE_TYPE = EULER_ANGLE\nEULER_ROT_SEQ = 213\n", "2026-03-10T12:00:00 90 0 0\n2026-03-10T12:10:00 90 0 0\n"))
		_, _, z, err := h.BodyAxes(at, orbit.EarthOrientation{})
		if err != nil {
			t.Fatal(err)
		}
		want := turner.ToEarthFixed(frame, orbit.Vec3{X: 1}, orbit.Vec3{}, at).Position
		if d := z.Sub(want).Norm(); d > 1e-8 {
			t.Errorf("%s: body z %v, want %v (off by %g)", name, z, want, d)
		}
	}
}

func TestXML(t *testing.T) {
	const text = `<?xml version="1.0" encoding="UTF-8"?>
<aem id="CCSDS_AEM_VERS" version="2.0"><header><CREATION_DATE>2026-03-09T00:00:00</CREATION_DATE><ORIGINATOR>TEST</ORIGINATOR></header>
<body><segment><metadata><COMMENT>x</COMMENT><OBJECT_NAME>Wagtail 1</OBJECT_NAME><OBJECT_ID>2026-001A</OBJECT_ID><REF_FRAME_A>ITRF</REF_FRAME_A><REF_FRAME_B>SC_BODY_1</REF_FRAME_B>
<TIME_SYSTEM>UTC</TIME_SYSTEM><START_TIME>2026-03-10T12:00:00</START_TIME><STOP_TIME>2026-03-10T12:10:00</STOP_TIME><ATTITUDE_TYPE>%s</ATTITUDE_TYPE>%s</metadata>
<data>%s</data></segment></body></aem>`
	quaternion := func(clock string) string {
		return "<attitudeState><quaternionEphemeris><EPOCH>2026-03-10T" + clock + "</EPOCH><quaternion><Q1>0.6</Q1><Q2>0</Q2><Q3>0</Q3><QC>0.8</QC></quaternion><quaternionDot><Q1_DOT>9</Q1_DOT></quaternionDot></quaternionEphemeris></attitudeState>\n"
	}
	euler := func(clock string) string {
		return "<attitudeState><eulerAngle><EPOCH>2026-03-10T" + clock + "</EPOCH><rotationAngles><rotation1 angle=\"X_ANGLE\" units=\"deg\">73.7397952917</rotation1><rotation2>0</rotation2><rotation3>0</rotation3></rotationAngles></eulerAngle></attitudeState>"
	}
	for name, h := range map[string]*History{
		"quaternions": mustRead(t, fmt.Sprintf(text, "QUATERNION/DERIVATIVE", "", quaternion("12:00:00")+quaternion("12:10:00"))),
		"angles":      mustRead(t, fmt.Sprintf(text, "EULER_ANGLE", "<EULER_ROT_SEQ>123</EULER_ROT_SEQ><ODD>1</ODD>", euler("12:00:00")+euler("12:10:00"))),
	} {
		// 2 arcsin 0.6 = 73.7398 deg about x: y goes to (0, 0.28, 0.96).
		if y := axesAt(t, h, "12:05:00")[1]; y.Sub(orbit.Vec3{Y: 0.28, Z: 0.96}).Norm() > 1e-9 {
			t.Errorf("%s: body y %v", name, y)
		}
		if name == "angles" && (len(h.Warnings) != 1 || !strings.Contains(h.Warnings[0], `"ODD" is not known`)) {
			t.Errorf("warnings %q", h.Warnings)
		}
	}
}

func TestBadMessages(t *testing.T) {
	const good = "2026-03-10T12:00:00 0 0 0 1\n2026-03-10T12:10:00 0 0 0 1\n"
	head := inITRF + quats
	for name, c := range map[string]struct{ text, want string }{
		"empty":                   {"", "CCSDS_AEM_VERS is missing"},
		"no segment":              {"CCSDS_AEM_VERS = 1.0\n", "no segment"},
		"not closed":              {strings.TrimSuffix(message(head, good), "DATA_STOP\n"), "the last block does not end"},
		"no equals":               {"CCSDS_AEM_VERS = 1.0\nwords\n", "line 2: \"words\" is not allowed here"},
		"no frame":                {message("REF_FRAME_B = SC_BODY\n"+quats, good), "line 4: the segment has no REF_FRAME_A"},
		"unknown frame":           {message("REF_FRAME_A = RTN\nREF_FRAME_B = SC_BODY\n"+quats, good), `the frame "RTN" is not read here`},
		"two bodies":              {message("REF_FRAME_A = SC_BODY_1\nREF_FRAME_B = SC_BODY_2\n"+quats, good), "one must be the body"},
		"direction":               {message(inITRF+"ATTITUDE_DIR = UP\n"+quats, good), "it must be A2B or B2A"},
		"time system":             {strings.Replace(message(head, good), "= UTC", "= TAI", 1), `TIME_SYSTEM "TAI" is not read here`},
		"spin":                    {message(inITRF+"ATTITUDE_TYPE = SPIN\n", good), "attitude: spin, which takes the axis"},
		"type":                    {message(inITRF+"ATTITUDE_TYPE = MATRIX\n", good), "is not known"},
		"sequence":                {message(inITRF+"ATTITUDE_TYPE = EULER_ANGLE\nEULER_ROT_SEQ = 332\n", good), "none twice in a row"},
		"no sequence":             {message(inITRF+"ATTITUDE_TYPE = EULER_ANGLE\n", good), "EULER_ROT_SEQ"},
		"quaternion not of one":   {message(head, "2026-03-10T12:00:00 0 0 0 1\n2026-03-10T12:10:00 0 0 0.1 1\n"), "line 17: the quaternion's length is 1.00499"},
		"too few numbers":         {message(head, "2026-03-10T12:00:00 0 0 1\n"), "line 16: the record has 3 numbers"},
		"no number":               {message(head, "2026-03-10T12:00:00 0 0 x 1\n"), `line 16: "x" is not allowed`},
		"NaN":                     {message(head, "2026-03-10T12:00:00 0 0 NaN 1\n"), `line 16: "NaN" is not allowed`},
		"time":                    {message(head, "2026-13-10T12:00:00 0 0 0 1\n"), "is not a time"},
		"times backwards":         {message(head, good+"2026-03-10T12:10:00 0 0 0 1\n"), "line 18: the time 2026-03-10T12:10:00 does not rise"},
		"records short of span":   {message(head, "2026-03-10T12:00:00 0 0 0 1\n2026-03-10T12:09:00 0 0 0 1\n"), "do not enclose"},
		"no records":              {message(head, ""), "do not enclose"},
		"span reversed":           {message(head+"USEABLE_STOP_TIME = 2026-03-10T11:00:00\n", good), "before it begins"},
		"segments overlap":        {message(head, good) + strings.TrimPrefix(message(head, good), "CCSDS_AEM_VERS = 1.0\n"), "overlaps"},
		"another object":          {message(head, good) + strings.Replace(strings.TrimPrefix(message(head, good), "CCSDS_AEM_VERS = 1.0\n"), "Wagtail 1", "Pipit", 1), "give one object a file"},
		"broken XML":              {"<aem version=\"1.0\"><body>", "this is no XML"},
		"XML record without time": {"<aem version=\"1.0\"><segment><attitudeState></attitudeState></segment></aem>", "the segment has no OBJECT_NAME"},
	} {
		if h, err := Read(strings.NewReader(c.text), orbit.EarthOrientation{}); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, %v, want %q", name, h, err, c.want)
		}
	}
}

// What is accepted has axes of length one everywhere in its spans and none outside.
func FuzzRead(f *testing.F) {
	f.Add(message(inTEME+quats, "2026-03-10T12:00:00 0 0 0 1\n2026-03-10T12:10:00 0.6 0 0 -0.8\n"))
	f.Add(message(inITRF+"ATTITUDE_TYPE = EULER_ANGLE\nEULER_ROT_SEQ = 321\n", "2026-03-10T12:00:00 0 0 1e6\n2026-03-10T12:10:00 1 2 3\n"))
	f.Add(message("REF_FRAME_A = EME2000\nREF_FRAME_B = SC_BODY\n"+quats+"USEABLE_START_TIME = 2026-03-10T12:10:00\n", "2026-03-10T12:00:00 1 0 0 0\n2026-03-10T12:10:00 -1 0 0 1e-9\n"))
	f.Add(`<aem version="1.0"><segment><metadata><OBJECT_NAME>x</OBJECT_NAME></metadata><data><attitudeState><EPOCH>2026-03-10T12:00:00</EPOCH></attitudeState></data></segment></aem>`)
	f.Add("CCSDS_AEM_VERS = 1.0\nMETA_START\nMETA_START\nDATA_STOP\n")
	f.Fuzz(func(t *testing.T, text string) {
		h, err := Read(strings.NewReader(text), orbit.EarthOrientation{})
		if err != nil {
			return
		}
		for _, s := range h.Spans() {
			for _, at := range []time.Time{s[0], s[0].Add(s[1].Sub(s[0]) / 3), s[1]} {
				x, y, z, err := h.BodyAxes(at, orbit.EarthOrientation{})
				if worst := max(math.Abs(x.Norm()-1), math.Abs(y.Norm()-1), x.Cross(y).Sub(z).Norm()); err != nil || !(worst < 1e-6) {
					t.Fatalf("axes %v %v %v at %v: %v", x, y, z, at, err)
				}
			}
		}
		if _, _, _, err := h.BodyAxes(h.Spans()[0][0].Add(-time.Nanosecond), orbit.EarthOrientation{}); err == nil {
			t.Fatal("axes before the first span")
		}
	})
}

func BenchmarkBodyAxes(b *testing.B) {
	var rows strings.Builder
	for i := range 601 {
		fmt.Fprintf(&rows, "2026-03-10T12:%02d:%02d 0 0 %.9f %.9f\n", i/60, i%60, math.Sin(float64(i)/900), math.Cos(float64(i)/900))
	}
	h, err := Read(strings.NewReader(message(inTEME+quats, rows.String())), orbit.EarthOrientation{})
	if err != nil {
		b.Fatal(err)
	}
	at := time.Date(2026, 3, 10, 12, 3, 4, 5, time.UTC)
	b.ReportAllocs()
	for b.Loop() {
		if _, _, _, err := h.BodyAxes(at, orbit.EarthOrientation{}); err != nil {
			b.Fatal(err)
		}
	}
}
