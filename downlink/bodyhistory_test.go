package downlink

import (
	"strconv"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/attitude"
)

// A history that holds body z on the site sees it at the boresight; outside its span the
// budget is refused with the span.
func TestAttitudeHistory(t *testing.T) {
	const text = `CCSDS_AEM_VERS = 1.0
META_START
OBJECT_NAME = Wagtail 1
REF_FRAME_A = ITRF
REF_FRAME_B = SC_BODY_1
TIME_SYSTEM = UTC
START_TIME = 2026-03-10T12:00:00
STOP_TIME = 2026-03-10T12:05:00
ATTITUDE_TYPE = EULER_ANGLE
EULER_ROT_SEQ = 323
META_STOP
DATA_START
2026-03-10T12:00:00 LON COLAT 0
2026-03-10T12:05:00 LON COLAT 0
DATA_STOP
`
	up := circleSite.Origin.Unit()
	down := BodyDirectionOf(up.Scale(-1))
	h, err := attitude.Read(strings.NewReader(strings.NewReplacer("LON", num(down.AroundZ.Degrees()), "COLAT", num(down.OffZ.Degrees())).Replace(text)), orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	l := mustLink(t, bodySpec(t, AttitudeHistory, Body{History: h}, Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2, BackLobe: dbp(-20)}))
	over := orbit.State{Position: up.Scale(7e6), Velocity: circleSite.East.Scale(7500)}
	g, _ := l.GeometryOf(noon.Add(time.Minute), over)
	near(t, "off boresight", g.OffBoresight.Degrees(), 0, 1e-5)
	near(t, "gain", mustAt(t, l, g).term("transmit antenna gain"), 6, 1e-9)
	g, _ = l.GeometryOf(noon.Add(6*time.Minute), over)
	if _, err := l.At(g); err == nil || !strings.Contains(err.Error(), "does not hold 2026-03-10T12:06:00.000Z; it is useable from 2026-03-10T12:00:00.000Z to 2026-03-10T12:05:00.000Z") {
		t.Errorf("outside the span: %v", err)
	}
}

func num(v float64) string { return strconv.FormatFloat(v, 'f', 12, 64) }
