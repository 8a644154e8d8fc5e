package downlink

import (
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

var noon = time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC)

// somewhere draws a state of a low orbit.
func somewhere(t *rapid.T) orbit.State {
	angle := func(name string) float64 { return rapid.Float64Range(-math.Pi, math.Pi).Draw(t, name) }
	a, b, c := angle("node"), angle("tilt"), angle("place")
	turn := func(v orbit.Vec3) orbit.Vec3 { // R_z(a) R_x(b) v
		s, k := math.Sincos(b)
		v = orbit.Vec3{X: v.X, Y: k*v.Y - s*v.Z, Z: s*v.Y + k*v.Z}
		s, k = math.Sincos(a)
		return orbit.Vec3{X: k*v.X - s*v.Y, Y: s*v.X + k*v.Y, Z: v.Z}
	}
	s, k := math.Sincos(c)
	r := rapid.Float64Range(6.6e6, 4.3e7).Draw(t, "radius")
	speed := math.Sqrt(3.986004418e14 / r)
	state := orbit.State{Position: turn(orbit.Vec3{X: r * k, Y: r * s}), Velocity: turn(orbit.Vec3{X: -speed * s, Y: speed * k})}
	// What turns with the Earth, so that the inertial velocity is that of the circle.
	const rate = 7.29211514670698e-5 // AIAA 2006-6753
	state.Velocity.X += rate * state.Position.Y
	state.Velocity.Y -= rate * state.Position.X
	return state
}

func sunAt(s orbit.State) orbit.Vec3 {
	return orbit.SunPosition(noon, orbit.EarthOrientation{}).Sub(s.Position).Unit()
}

// Axes are of length one, square to each other and right-handed, and each points where
// the doc says.
func TestBodyAxes(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := somewhere(t)
		down, sun := s.Position.Unit().Scale(-1), sunAt(s)
		normal := s.Position.Cross(s.InertialVelocity()).Unit()
		for name, axes := range map[string]func() (x, y, z orbit.Vec3){
			"nadir": func() (x, y, z orbit.Vec3) { return nadirAxes(s) },
			"sun":   func() (x, y, z orbit.Vec3) { return sunAxes(sun) },
			"yaw":   func() (x, y, z orbit.Vec3) { return yawAxes(s, sun) },
		} {
			x, y, z := axes()
			worst := max(math.Abs(x.Norm()-1), math.Abs(y.Norm()-1), x.Cross(y).Sub(z).Norm(), math.Abs(x.Dot(y)))
			toward := z.Sub(down).Norm()
			switch name {
			case "nadir":
				worst = max(worst, y.Add(normal).Norm(), x.Sub(s.InertialVelocity().Unit()).Norm()) // a circle
			case "sun":
				toward = z.Sub(sun).Norm()
				worst = max(worst, math.Abs(y.Z), -x.Z)
			case "yaw":
				worst = max(worst, math.Abs(y.Dot(sun)), -x.Dot(sun))
			}
			if worst > 1e-9 || toward > 1e-12 {
				t.Fatalf("%s: axes %v %v %v are off by %g", name, x, y, z, max(worst, toward))
			}
		}
	})
}

// The yaw from the velocity is atan2(-tan β, sin μ), with the Sun β above the orbit's
// plane and μ counted along the orbit from its midnight: Bar-Sever, A new model for GPS
// yaw attitude, Journal of Geodesy 70 (1996), 714, eq. (1), from memory.
func TestYawSteeringLaw(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := somewhere(t)
		sun := sunAt(s)
		radial, along := s.Position.Unit(), s.InertialVelocity().Unit()
		normal := radial.Cross(along)
		beta := math.Asin(sun.Dot(normal))
		// From midnight the spacecraft has come as far as the Sun stands ahead of straight below.
		mu := math.Atan2(sun.Dot(along), -sun.Dot(radial))
		if math.Abs(math.Sin(mu)) < 1e-3 && math.Abs(beta) < 1e-3 {
			t.Skip("the Sun on the line to the Earth's centre has no yaw")
		}
		want := math.Atan2(-math.Tan(beta), math.Sin(mu))
		x, _, z := yawAxes(s, sun)
		got := math.Atan2(z.Dot(along.Cross(x)), along.Dot(x))
		if d := math.Remainder(got-want, 2*math.Pi); math.Abs(d) > 1e-6 {
			t.Fatalf("β %.4f, μ %.4f: yaw %.8f rad, want %.8f", beta, mu, got, want)
		}
	})
}

// With the Sun straight above or below there is no yaw: the axes of nadir stand in.
func TestYawWithTheSunOverhead(t *testing.T) {
	s := circle{noon, 600}.StateAt(300)
	x, y, z := yawAxes(s, s.Position.Unit())
	a, b, c := nadirAxes(s)
	if x != a || y != b || z != c {
		t.Errorf("axes %v %v %v, want those of nadir %v %v %v", x, y, z, a, b, c)
	}
}

// bodySpec is a link of one spacecraft whose body is held by an attitude.
func bodySpec(t testing.TB, a Attitude, b Body, p Pattern) LinkSpec {
	spec := wagtail(t)
	spec.Transmitter.Attitude, spec.Transmitter.Body, spec.Transmitter.Pattern = a, b, p
	spec.Bodies = NewBodies(noon.Add(-time.Hour), noon.Add(time.Hour), orbit.EarthOrientation{})
	return spec
}

// A boresight off nadir: over the site the station stands straight below, toward body z,
// which the antenna sees away from the side that it was tilted to.
func TestOffsetBoresight(t *testing.T) {
	cosine := Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2, BackLobe: dbp(-20)}
	over := orbit.State{Position: circleSite.Origin.Unit().Scale(7e6), Velocity: circleSite.East.Scale(7500)}
	l := mustLink(t, bodySpec(t, AttitudeNadir, Body{Boresight: BodyDirection{deg(30), deg(90)}, Turn: deg(20)}, cosine))
	g, _ := l.GeometryOf(noon, over)
	for _, c := range []struct {
		what      string
		got       unit.Angle
		want, tol float64
	}{
		// The site's vertical is not the line to the centre, but the state is on that line.
		{"off body z", g.BodyOffZ, 0, 1e-6},
		{"off boresight", g.OffBoresight, 30, 1e-6},
		{"around boresight: 180 deg from the tilt, less the turn", g.AroundBoresight, 160, 1e-6},
	} {
		near(t, c.what, c.got.Degrees(), c.want, c.tol)
	}
	near(t, "gain", mustAt(t, l, g).term("transmit antenna gain"), 6+20*math.Log10(math.Cos(math.Pi/6)), 1e-6)
}

// Where a body's axis is the boresight, its angles agree with the plain ways to them.
func TestBodyAgreesWithPlainAngles(t *testing.T) {
	cosine := Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2, BackLobe: dbp(-20)}
	link := func(a Attitude, b Body) *Link { return mustLink(t, bodySpec(t, a, b, cosine)) }
	nadir, yaw, sun := link(AttitudeNadir, Body{}), link(AttitudeYawSteering, Body{}), link(AttitudeSun, Body{})
	back := link(AttitudeSun, Body{Boresight: BodyDirection{OffZ: deg(180)}})
	axis := orbit.Vec3{X: 0.6, Z: 0.8}
	spin := link(AttitudeSpin, Body{SpinAxis: axis})
	track := circle{noon, 900}
	for s := 0.0; s <= 900; s += 45 {
		at, state := noon.Add(time.Duration(s)*time.Second), track.StateAt(s)
		of := func(l *Link) unit.Angle { g, _ := l.GeometryOf(at, state); return g.OffBoresight }
		to := circleSite.Origin.Sub(state.Position).Unit()
		toSun := orbit.SunPosition(at, orbit.EarthOrientation{}).Sub(state.Position).Unit()
		inertial := orbit.TEMEToEarthFixed(axis, orbit.Vec3{}, at, orbit.EarthOrientation{}).Position
		near(t, "yaw steering", of(yaw).Degrees(), of(nadir).Degrees(), 1e-6)
		near(t, "sun", of(sun).Degrees(), math.Acos(to.Dot(toSun))*180/math.Pi, 1e-5)
		near(t, "against the Sun", of(back).Degrees(), 180-of(sun).Degrees(), 1e-6)
		near(t, "spin axis", of(spin).Degrees(), math.Acos(to.Dot(inertial))*180/math.Pi, 1e-5)
	}
}

// A profile has the body's angles where a gain depends on them, and they are those of
// the budgets.
func TestProfileOfABody(t *testing.T) {
	spec := bodySpec(t, AttitudeYawSteering, Body{Boresight: BodyDirection{deg(20), deg(45)}}, Pattern{Kind: GainGrid, Grid: bowl(t)})
	l, p := flown(t, spec, 400, 10*time.Second)
	track := circle{circleStart, 400}
	for i, s := range p.Seconds {
		g, _ := l.GeometryOf(circleStart.Add(time.Duration(s)*time.Second), track.StateAt(s))
		b := mustAt(t, l, g)
		for what, v := range map[string][2]float64{
			"around": {p.AroundBoresightDeg[i], b.AroundBoresight.Degrees()}, "off z": {p.BodyOffZDeg[i], b.BodyOffZ.Degrees()},
			"around z": {p.BodyAroundZDeg[i], b.BodyAroundZ.Degrees()}, "power": {p.ReceivedPowerDBm[i], b.ReceivedPowerDBm},
		} {
			if v[0] != v[1] {
				t.Fatalf("%s at %g s: %v in the profile, %v in the budget", what, s, v[0], v[1])
			}
		}
	}
	if _, plain := flown(t, wagtail(t), 60, time.Second); plain.BodyOffZDeg != nil {
		t.Error("a profile of nadir alone has columns of the body")
	}
}

// Without the Sun or the stars an attitude that needs them has no gain, and says why.
func TestAttitudeWithoutASky(t *testing.T) {
	spec := bodySpec(t, AttitudeSun, Body{}, Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2, BackLobe: dbp(-20)})
	spec.Bodies = nil
	l := mustLink(t, spec)
	g, _ := l.GeometryOf(noon, circle{noon, 600}.StateAt(300))
	if b, err := l.At(g); err == nil {
		t.Errorf("got a budget of %g dBm without the Sun", b.ReceivedPowerDBm)
	}
	if _, err := l.StatedGeometry(1e6, deg(30), nil, nil); err == nil {
		t.Error("a stated geometry took a Sun-pointing antenna at its boresight")
	}
	if g, err := l.StatedGeometry(1e6, deg(30), nil, degp(60)); err != nil || mustAt(t, l, g).term("transmit antenna gain") > 0 {
		t.Errorf("a stated angle off boresight: %v", err)
	}
}
