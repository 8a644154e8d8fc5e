package oem

import (
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
)

// ellipse returns two-body states from the perigee on, over a turn or 2,000 of them, by Kepler's
// equation.
func ellipse(perigee, eccentricity float64, step time.Duration) []orbit.TimedState {
	const mu = 3.986004418e14 // m³/s², EGM 96
	a := perigee / (1 - eccentricity)
	n := math.Sqrt(mu / (a * a * a))
	b := math.Sqrt(1 - eccentricity*eccentricity)
	var out []orbit.TimedState
	for t := 0.0; t < 2*math.Pi/n && len(out) < 2000; t += step.Seconds() {
		e := n * t
		for range 50 {
			e -= (e - eccentricity*math.Sin(e) - n*t) / (1 - eccentricity*math.Cos(e))
		}
		rate := n / (1 - eccentricity*math.Cos(e))
		out = append(out, orbit.TimedState{Time: begin.Add(time.Duration(t * 1e9)),
			Position: orbit.Vec3{X: a * (math.Cos(e) - eccentricity), Y: a * b * math.Sin(e)},
			Velocity: orbit.Vec3{X: -a * math.Sin(e) * rate, Y: a * b * math.Cos(e) * rate}})
	}
	return out
}

func TestOrbitsContradictThemselvesNowhere(t *testing.T) {
	for _, perigee := range []float64{6.5e6, 7e6, 1.2e7, 4.2164e7} {
		for _, e := range []float64{0, 0.1, 0.4, 0.74, 0.9} {
			for _, step := range []time.Duration{time.Second, 10 * time.Second, time.Minute, 5 * time.Minute, 15 * time.Minute, time.Hour} {
				if problem := contradiction(ellipse(perigee, e, step)); problem != "" {
					t.Errorf("perigee %g m, eccentricity %g, every %v: %s", perigee, e, step, problem)
				}
			}
		}
	}
}

func TestVelocitiesThatContradictPositions(t *testing.T) {
	const turn = 7.2921159e-5 // rad/s, of the Earth, WGS-84
	spoil := map[string]func(*orbit.TimedState){
		"zero":     func(s *orbit.TimedState) { s.Velocity = orbit.Vec3{} },
		"reversed": func(s *orbit.TimedState) { s.Velocity = s.Velocity.Scale(-1) },
		"a tenth":  func(s *orbit.TimedState) { s.Velocity = s.Velocity.Scale(0.1) },
		"exchange": func(s *orbit.TimedState) { s.Velocity.X, s.Velocity.Y = s.Velocity.Y, s.Velocity.X },
		"inertial beside Earth-fixed": func(s *orbit.TimedState) {
			s.Velocity = s.Velocity.Add(orbit.Vec3{Z: turn}.Cross(s.Position))
		},
	}
	for name, with := range spoil {
		states := ellipse(7e6, 0.001, time.Minute)
		for i := range states {
			with(&states[i])
		}
		if contradiction(states) == "" {
			t.Errorf("%s: taken", name)
		}
	}
}

func TestXMLSaysUnitsAndTwice(t *testing.T) {
	xml := func(states string) string {
		return `<oem id="CCSDS_OEM_VERS" version="2.0"><body><segment><metadata><OBJECT_NAME>W</OBJECT_NAME><OBJECT_ID>2026-001A</OBJECT_ID><CENTER_NAME>EARTH</CENTER_NAME>` +
			`<REF_FRAME>GCRF</REF_FRAME><TIME_SYSTEM>UTC</TIME_SYSTEM><START_TIME>2026-09-14T00:00:00</START_TIME><STOP_TIME>2026-09-14T00:01:00</STOP_TIME>` +
			`<INTERPOLATION>LINEAR</INTERPOLATION><INTERPOLATION_DEGREE>1</INTERPOLATION_DEGREE></metadata><data>` + states + `</data></segment></body></oem>`
	}
	state := func(at, x string) string {
		return `<stateVector><EPOCH>2026-09-14T` + at + `</EPOCH>` + x + `<Z>0</Z><X_DOT units="km/s">-0.24</X_DOT><Y_DOT>7.54</Y_DOT><Z_DOT>0</Z_DOT></stateVector>`
	}
	first, second := state("00:00:00", `<X units="km">7000</X><Y>0</Y>`), state("00:01:00", `<X>6985</X><Y>452</Y>`)
	if _, err := Read(strings.NewReader(xml(first+second)), "f", orbit.EarthOrientation{}); err != nil {
		t.Fatal(err)
	}
	for old, want := range map[string]string{`<X units="km">`: `f:1: X "m": is not the unit of an OEM: km`, `<Y>0</Y>`: `f:1: Y "0": stands twice in one stateVector`} {
		with := map[string]string{`<X units="km">`: `<X units="m">`, `<Y>0</Y>`: `<Y>0</Y><Y>0</Y>`}[old]
		_, err := Read(strings.NewReader(xml(strings.Replace(first, old, with, 1)+second)), "f", orbit.EarthOrientation{})
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: got %v, want %q", with, err, want)
		}
	}
}
