package sizing

import (
	"errors"
	"math"
	"testing"

	"slantwise/downlink/tolerance"
	"slantwise/orbit/unit"
)

// The slack of a variant is where a scan of the power comes to the edge; with so much
// taken off, it is 0.
func TestSlack(t *testing.T) {
	c := usualCase()
	c.days = 7
	needs := None()
	needs.BytesPerDay = 3e9
	s := c.study(t, needs, Family{})
	for _, d := range []unit.Length{2, 4} {
		slack, err := s.Slack(needs.List(), Variant{Diameter: d})
		if err != nil {
			t.Fatal(err)
		}
		o, err := s.Outcome(Variant{Diameter: d, Power: -slack})
		if err != nil {
			t.Fatal(err)
		}
		worse, err := s.Outcome(Variant{Diameter: d, Power: -slack - 0.011})
		if err != nil {
			t.Fatal(err)
		}
		if o.BytesPerDay < 3e9 || worse.BytesPerDay >= 3e9 {
			t.Errorf("%g m has a slack of %.3f dB, where %.6g and a little more %.6g bytes come down", d.Metres(), float64(slack), o.BytesPerDay, worse.BytesPerDay)
		}
	}
	if never, err := s.Slack([]Need{{Kind: Bytes, Required: 1e15, part: planned, of: func(o *Outcome) float64 { return o.BytesPerDay }}}, Variant{Diameter: 2}); err != nil || !math.IsNaN(float64(never)) {
		t.Errorf("a petabyte: slack %v, %v", never, err)
	}
}

// With a symmetric tolerance the least dish meets all with half the probability; the
// assured diameters rise with it, and each has its probability by its own slack.
func TestChance(t *testing.T) {
	c := usualCase()
	c.days = 7
	needs := marginAt(10*unit.Degree, 6)
	s := c.study(t, needs, Family{})
	r := Range{Low: 1, High: 8}
	f, err := s.Least(needs.List(), r)
	if err != nil {
		t.Fatal(err)
	}
	table, err := tolerance.NewChance([]tolerance.Item{{Name: "all", Favourable: 2, Adverse: -2, Law: tolerance.Gaussian}})
	if err != nil {
		t.Fatal(err)
	}
	got, err := s.Chance(table, f.Diameter, r, nil)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(got.Probability-0.5) > 0.02 {
		t.Errorf("the least dish meets all with %.3f", got.Probability)
	}
	before := unit.Length(0)
	for _, a := range got.Assured {
		slack, err := s.Slack(needs.List(), Variant{Diameter: a.Diameter})
		if err != nil {
			t.Fatal(err)
		}
		if p := 1 - table.Below(-float64(slack)); a.Diameter <= before || math.Abs(p-a.Probability) > 0.01 {
			t.Errorf("%.4f m for a probability of %g has %.4f", a.Diameter.Metres(), a.Probability, p)
		}
		before = a.Diameter
	}
}

// Each change costs bytes and dish; the dish that is so much greater does suffice, and
// one dB of power is one dB of pointing.
func TestSensitivities(t *testing.T) {
	c := usualCase()
	c.days = 7
	needs := None()
	needs.BytesPerDay = 3e9
	s := c.study(t, needs, Family{})
	r := Range{Low: 1, High: 10}
	f, err := s.Least(needs.List(), r)
	if err != nil {
		t.Fatal(err)
	}
	list, err := s.Sensitivities(f.Diameter, r, nil)
	if err != nil {
		t.Fatal(err)
	}
	by := map[string]Sensitivity{}
	for i, x := range list {
		by[x.Name] = x
		if !(x.BytesPerDay < 0) || !(x.Diameter > 0) || i > 0 && x.BytesPerDay < list[i-1].BytesPerDay {
			t.Errorf("%+v", x)
		}
	}
	power, pointing := by["1 dB less transmit power"], by["1 dB more pointing loss"]
	if math.Abs(power.BytesPerDay/pointing.BytesPerDay-1) > 1e-9 {
		t.Errorf("a dB of power costs %g bytes a day, of pointing %g", power.BytesPerDay, pointing.BytesPerDay)
	}
	// A dB is 12 % of the diameter where pointing and surface take little.
	if share := power.Diameter.Metres() / f.Diameter.Metres(); !(share > 0.11 && share < 0.2) {
		t.Errorf("a dB of power is %.3f of the diameter", share)
	}
}

// A map's line is the search's own diameter, within what is straight between its
// columns; planning some passes is near enough to all.
func TestPlane(t *testing.T) {
	c := usualCase()
	c.days = 200
	needs := None()
	needs.BytesPerDay = 3e9
	s := c.study(t, needs, Family{})
	r := Range{Low: 1, High: 6}
	refit := func(f unit.Frequency) ([]Place, error) {
		var out []Place
		for i := range c.sites {
			p := c.place(t, i)
			p.Clear.Transmitter.Frequency = f
			p.Clear.PathModels, p.Weather, p.Statistics = nil, nil, nil
			out = append(out, p)
		}
		return out, nil
	}
	for _, axis := range Axes {
		p, err := s.Plane(axis, r, refit, nil)
		if err != nil {
			t.Fatal(err)
		}
		if p.Planned < 2 || !(p.Error < 0.03) {
			t.Errorf("%s: every %d. pass, off by %.4f", axis, p.Planned, p.Error)
		}
		before := 0.0
		for k, value := range p.Values {
			just := p.Just[k]
			if axis != PowerAxis || math.IsNaN(just) {
				continue
			}
			f, err := s.LeastOf(needs.List(), r, Variant{Power: unit.DB(value)})
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(just/f.Diameter.Metres()-1) > 0.03 || before != 0 && just > before {
				t.Errorf("%+g dB: the map's line is at %.3f m, the search finds %.3f", value, just, f.Diameter.Metres())
			}
			before = just
		}
	}
}

// Frequencies that cannot be had are left out and told.
func TestPlaneLeavesOut(t *testing.T) {
	c := usualCase()
	c.days, c.clear = 7, true
	s := c.study(t, None(), Family{})
	refit := func(f unit.Frequency) ([]Place, error) {
		if f > 9*unit.Gigahertz {
			return nil, errors.New("no such table")
		}
		p := c.place(t, 0)
		p.Clear.Transmitter.Frequency = f
		return []Place{p}, nil
	}
	p, err := s.Plane(FrequencyAxis, Range{Low: 1, High: 2}, refit, nil)
	if err != nil || len(p.Values) != 4 || len(p.Bytes) != 4 || len(p.LeftOut) != 4 {
		t.Errorf("%+v, %v", p, err)
	}
	never := func(unit.Frequency) ([]Place, error) { return nil, errors.New("no such table") }
	if _, err := s.Plane(FrequencyAxis, Range{Low: 1, High: 2}, never, nil); err == nil {
		t.Error("no frequency at all: no error")
	}
}

// At four times the frequency the same two areas hold the beam's gain: without weather
// and errors a dish at the spacecraft's EIRP receives the same power, so that C/N0
// stays.
func TestFrequencyAtTheSameArea(t *testing.T) {
	c := usualCase()
	c.days, c.clear = 7, true
	c.antenna.PointingRMS, c.antenna.SurfaceRMS = 0, 0
	needs := marginAt(20*unit.Degree, 3)
	s := c.study(t, needs, Family{})
	f, places := c.fly(t)
	places[0].Clear.Transmitter.Frequency *= 4
	spec := s.spec
	spec.Flight, spec.Places = f, places
	four, err := NewStudy(spec)
	if err != nil {
		t.Fatal(err)
	}
	a, err := s.Outcome(Variant{Diameter: 3})
	if err != nil {
		t.Fatal(err)
	}
	b, err := four.Outcome(Variant{Diameter: 3})
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(a.MarginDB-b.MarginDB) > 1e-9 {
		t.Errorf("margin %.6f dB, at four times the frequency %.6f dB", a.MarginDB, b.MarginDB)
	}
}

func TestHighestRaise(t *testing.T) {
	c := usualCase()
	c.days, c.clear = 7, true
	needs := None()
	needs.BytesPerDay = 1e9
	s := c.study(t, needs, Family{})
	raise, ok, err := s.HighestRaise(needs.List(), Variant{Diameter: 3})
	if err != nil || !ok || !(raise > unit.Degree && raise < 60*unit.Degree) {
		t.Fatalf("%v, %t, %v", raise.Degrees(), ok, err)
	}
	for _, x := range []struct {
		more unit.Angle
		met  bool
	}{{0, true}, {0.06 * unit.Degree, false}} {
		o, err := s.Outcome(Variant{Diameter: 3, Raise: raise + x.more})
		if err != nil {
			t.Fatal(err)
		}
		if (o.BytesPerDay >= 1e9) != x.met {
			t.Errorf("raised by %.3f deg: %.6g bytes a day", (raise + x.more).Degrees(), o.BytesPerDay)
		}
	}
}
