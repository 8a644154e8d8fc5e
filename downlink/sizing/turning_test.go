package sizing

import (
	"math"
	"testing"

	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/mount"
)

// mountOf is an elevation-over-azimuth mount with a room of a turn and a half.
func mountOf(lower, upper, lowerAcceleration, upperAcceleration float64, rows ...[3]float64) *station.Mount {
	axis := func(low, high, rate, acceleration float64) station.Axis {
		a := unit.AngularAcceleration(acceleration * unit.Degree.Radians())
		if acceleration == 0 {
			a = unit.AngularAcceleration(math.Inf(1))
		}
		return station.Axis{Low: unit.Angle(low) * unit.Degree, High: unit.Angle(high) * unit.Degree, Rate: unit.AngularRate(rate * unit.Degree.Radians()), Acceleration: a}
	}
	m := &station.Mount{Lower: axis(-270, 270, lower, lowerAcceleration), Upper: axis(0, 90, upper, upperAcceleration)}
	for _, r := range rows {
		m.ByDiameter = append(m.ByDiameter, station.MountRates{Diameter: unit.Length(r[0]), Lower: unit.AngularRate(r[1] * unit.Degree.Radians()), Upper: unit.AngularRate(r[2] * unit.Degree.Radians())})
	}
	return m
}

// plansOf is what an antenna does not follow of a site's passes by a plan for each of them
// with its own tolerance, along the course that the follow command takes: seconds by pass.
func plansOf(t *testing.T, s *Study, a *station.Antenna) []float64 {
	t.Helper()
	y, f := &s.spec.Flight.Sites[0], s.spec.Places[0].Clear.Transmitter.Frequency
	d, err := mount.New(a.Mount)
	if err != nil {
		t.Fatal(err)
	}
	r, err := station.NewRefraction(y.Site.HeightAboveSea())
	if err != nil {
		t.Fatal(err)
	}
	_, tolerance := a.FollowingError(f)
	var out []float64
	for _, p := range y.Passes {
		c, err := mount.PassCourse(y.Site.Frame(), s.spec.Flight.ephemeris, p.AOS, p.LOS, r)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, d.Plan(c, mount.Options{Tolerance: tolerance}).LostSeconds())
	}
	return out
}

func sum(v []float64) float64 {
	total := 0.0
	for _, x := range v {
		total += x
	}
	return total
}

func outageSeconds(o *outage) float64 {
	total := 0.0
	for i := range o.passes {
		for _, l := range o.lost[i] {
			total += l.Seconds()
		}
	}
	return total
}

// mountCase is the usual case with a mount, a fortnight under a clear sky.
func mountCase(m *station.Mount) testCase {
	c := usualCase()
	c.clear, c.days = true, 14
	c.antenna.Mount = m
	return c
}

// The outage of a diameter is that of a plan for each pass with the tolerance of its beam, no
// less than it and up to 8 % more: with 2 m the beam is wide, and a plan made for its tolerance
// gains from it; a pass at a time by up to 15 %. Where rates change with the diameter, by
// plans at other diameters, the sum likewise, and a pass at the edge of the keyhole by up to 6 s.
func TestOutageAgainstPlans(t *testing.T) {
	for _, x := range []struct {
		name string
		of   *station.Mount
		at   []unit.Length
	}{
		{"usual", mountOf(6, 3, 3, 2), []unit.Length{2, 9}},
		{"slow", mountOf(1.5, 1, 0.5, 0.5), []unit.Length{6}},
		{"by diameter", mountOf(6, 3, 3, 2, [3]float64{2, 8, 4}, [3]float64{12, 1.2, 1}), []unit.Length{3.3, 7.7, 11.2}},
		{"low range", func() *station.Mount { m := mountOf(6, 3, 3, 2); m.Upper.Low = 20 * unit.Degree; return m }(), []unit.Length{4}},
	} {
		c := mountCase(x.of)
		s := c.study(t, None(), Family{})
		for _, d := range x.at {
			a, err := s.antenna(0, Variant{Diameter: d})
			if err != nil {
				t.Fatal(err)
			}
			o, err := s.turning.outage(0, s.spec.Places[0].Clear.Antenna, a, 8.18*unit.Gigahertz)
			if err != nil {
				t.Fatal(err)
			}
			want := plansOf(t, s, a)
			n := 0
			for p, w := range want {
				got := 0.0
				for _, l := range o.of(p) {
					got += l.Seconds()
				}
				if w > 0 {
					n++
				}
				edge := 0.5
				if len(x.of.ByDiameter) > 0 {
					edge = 6
				}
				if got < 0.95*w-edge || got > 1.15*w+edge {
					t.Errorf("%s, %g m: pass %d is lost for %.3f s, a plan of its own loses %.3f", x.name, d.Metres(), p, got, w)
				}
			}
			if got, all := outageSeconds(o), sum(want); n < 2 || got < 0.99*all || got > 1.08*all {
				t.Errorf("%s, %g m: %.1f s of %d passes are lost, plans of their own lose %.1f", x.name, d.Metres(), got, n, all)
			}
		}
	}
}

// Slower axes, and a narrower tolerance, never lose less; the mount never adds bytes or
// availability, and what it takes is the difference to a dish that follows everything.
func TestMountLaws(t *testing.T) {
	needs := None()
	needs.Availability = 90
	free := mountCase(nil)
	whole, err := free.study(t, needs, Family{}).Outcome(Variant{Diameter: 5})
	if err != nil {
		t.Fatal(err)
	}
	if whole.MountLostBytesPerDay != 0 || whole.NotFollowedSPerDay != 0 {
		t.Fatalf("without a mount %+v is lost", whole)
	}
	before := whole
	for _, rate := range []float64{20, 6, 3, 1.5, 0.7} {
		c := mountCase(mountOf(rate, 3, 0, 0))
		o, err := c.study(t, needs, Family{}).Outcome(Variant{Diameter: 5})
		if err != nil {
			t.Fatal(err)
		}
		if o.BytesPerDay > before.BytesPerDay*(1+1e-9) || o.AvailabilityPercent > before.AvailabilityPercent+1e-9 || o.NotFollowedSPerDay < before.NotFollowedSPerDay-0.05 || o.LongestGapH < before.LongestGapH-1e-9 {
			t.Errorf("at %g deg/s %+v, at a greater rate %+v", rate, o, before)
		}
		if d := o.BytesPerDay + o.MountLostBytesPerDay - whole.BytesPerDay; math.Abs(d) > 1e-9*whole.BytesPerDay {
			t.Errorf("at %g deg/s the bytes with those lost differ by %g from those of a dish that follows everything", rate, d)
		}
		before = o
	}
	if !(before.MountLostBytesPerDay > 0.05*whole.BytesPerDay && before.AvailabilityPercent < whole.AvailabilityPercent-3) {
		t.Errorf("a slow mount takes %g of %g bytes a day, availability %g %% of %g %%", before.MountLostBytesPerDay, whole.BytesPerDay, before.AvailabilityPercent, whole.AvailabilityPercent)
	}
	// An axis that stands in 20 deg and more: what is lost is the time under 20 deg.
	m := mountOf(60, 60, 0, 0)
	m.Upper.Low = 20 * unit.Degree
	c := mountCase(m)
	s := c.study(t, None(), Family{})
	o, err := s.Outcome(Variant{Diameter: 5})
	if err != nil {
		t.Fatal(err)
	}
	y, low := &s.spec.Flight.Sites[0], 0.0
	for p := range y.Passes {
		from, to := y.Samples(p)
		for i := from + 1; i < to; i++ {
			if (y.ElevationDeg[i-1]+y.ElevationDeg[i])/2 < 20 {
				low += y.Seconds[i] - y.Seconds[i-1]
			}
		}
	}
	if low /= c.days; math.Abs(o.NotFollowedSPerDay/low-1) > 0.03 {
		t.Errorf("%.1f s a day are not followed, %.1f s lie under 20 deg", o.NotFollowedSPerDay, low)
	}
}

// The keyhole's closed form, on a great circle at a constant rate, is what the year loses
// of a pass at that distance from the zenith: the spacecraft's own rate at culmination in it,
// which over the keyhole is constant to a few percent.
func TestOutageAgainstTheKeyhole(t *testing.T) {
	c := mountCase(mountOf(4, 3, 0, 0))
	c.antenna.Mount.Tolerance = 0.001 * unit.Degree
	c.days = 40
	s := c.study(t, None(), Family{})
	a, err := s.antenna(0, Variant{})
	if err != nil {
		t.Fatal(err)
	}
	o, err := s.turning.outage(0, s.spec.Places[0].Clear.Antenna, a, 8.18*unit.Gigahertz)
	if err != nil {
		t.Fatal(err)
	}
	y, n := &s.spec.Flight.Sites[0], 0
	frame := y.Site.Frame()
	for p := range y.Passes {
		top := y.Passes[p].MaxElevation
		if top < 83*unit.Degree {
			continue
		}
		at := s.spec.Flight.ephemeris.Seconds(y.Passes[p].Culmination)
		l := frame.Look(s.spec.Flight.ephemeris.StateAt(at))
		rate := unit.AngularRate(float64(l.AzimuthRate) * math.Cos(float64(top)))
		if rate < 0 {
			rate = -rate
		}
		want := mount.KeyholeTime(rate, a.Mount.Lower.Rate, 90*unit.Degree-top)
		got := 0.0
		for _, l := range o.of(p) {
			got += l.Seconds()
		}
		n++
		if math.Abs(got-want) > 0.05*want+0.3 {
			t.Errorf("pass %d, %.3f deg high at %.3f deg/s: %.2f s are lost, the closed form has %.2f", p, top.Degrees(), rate.DegreesPerSecond(), got, want)
		}
	}
	if n < 3 {
		t.Errorf("%d passes came near the zenith", n)
	}
}

// A track without some spans of it lacks just these, wherever they lie.
func TestTrackWithoutSpans(t *testing.T) {
	base := passTrack{at: make([]place, 11)}
	for i := range 11 {
		base.Seconds, base.CN0DBHz, base.clear = append(base.Seconds, float64(10*i)), append(base.CN0DBHz, float64(i)), append(base.clear, float64(i))
	}
	usable := func(p *passTrack) float64 {
		sum := 0.0
		for i := 1; i < len(p.Seconds); i++ {
			if !(p.Seconds[i] > p.Seconds[i-1]) {
				t.Fatalf("instants %v", p.Seconds)
			}
			if !math.IsNaN(p.CN0DBHz[i-1] + p.CN0DBHz[i] + p.clear[i-1] + p.clear[i]) {
				sum += p.Seconds[i] - p.Seconds[i-1]
			}
		}
		return sum
	}
	for _, x := range []struct {
		lost []mount.Span
		want float64
	}{
		{[]mount.Span{{From: 32, To: 35}}, 97}, {[]mount.Span{{From: 30, To: 40}}, 90}, {[]mount.Span{{From: 28, To: 61.5}}, 66.5},
		{[]mount.Span{{From: 0, To: 15}}, 85}, {[]mount.Span{{From: -20, To: 4}}, 96}, {[]mount.Span{{From: 93, To: 100}}, 93}, {[]mount.Span{{From: 93, To: 140}}, 93},
		{[]mount.Span{{From: -5, To: 105}}, 0}, {[]mount.Span{{From: 11, To: 12}, {From: 12.5, To: 13}, {From: 55, To: 77}}, 76.5},
		{[]mount.Span{{From: -30, To: -20}, {From: 120, To: 130}}, 100}, {[]mount.Span{{From: 50, To: 50.001}}, 100},
	} {
		got := base.without(x.lost)
		if u := usable(&got); math.Abs(u-x.want) > 0.01 {
			t.Errorf("without %v: %g s are usable, want %g: %v %v", x.lost, u, x.want, got.Seconds, got.CN0DBHz)
		}
		for i, v := range got.CN0DBHz {
			if !math.IsNaN(v) && math.Abs(v-got.Seconds[i]/10) > 1e-9 {
				t.Errorf("without %v: %g at %g s", x.lost, v, got.Seconds[i])
			}
		}
	}
}
