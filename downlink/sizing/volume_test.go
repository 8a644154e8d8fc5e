package sizing

import (
	"math"
	"testing"

	"slantwise/downlink"
	"slantwise/downlink/passvolume"
	"slantwise/downlink/rateplan"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// The expected bytes of a pass against the mean of its distribution, whose weather is
// one for the whole pass and takes time to lock after a fade: 0.5 %.
func TestExpectedBytesAgainstDistribution(t *testing.T) {
	c := usualCase()
	c.days = 7
	s := c.study(t, None(), Family{})
	for _, d := range []unit.Length{1.5, 2.5, 5} {
		v := Variant{Diameter: d}
		f, err := s.front(0, v)
		if err != nil {
			t.Fatal(err)
		}
		expected, mean := 0.0, 0.0
		for _, turn := range s.turns {
			w := work{study: s, variant: v, fronts: []*front{f}, outages: make([]*outage, 1), out: &Outcome{}, days: make([]float64, 8)}
			track := w.track(turn)
			plan, err := s.schedule(track.turn, &track.Track)
			if err != nil {
				t.Fatal(err)
			}
			if len(plan.steps) == 0 {
				continue
			}
			w.count(turn.Site, &track, &plan, 1)
			for _, b := range w.days {
				expected += b
			}
			mean += distributed(t, s, f, turn, &track.Track, track.clear, &plan)
		}
		if math.Abs(expected/mean-1) > 5e-3 {
			t.Errorf("%g m: expected %.6g bytes, the distributions' means add up to %.6g", d.Metres(), expected, mean)
		}
	}
}

// distributed is the mean volume of a plan by the package that distributes volumes.
func distributed(t *testing.T, s *Study, f *front, turn Turn, track *rateplan.Track, clear []float64, plan *schedule) float64 {
	n := len(track.Seconds)
	p := passvolume.Pass{Seconds: track.Seconds, CN0DBHz: clear, NeedDBHz: make([]float64, n), RateBps: make([]float64, n), Lock: 4, Changes: make([]bool, n)}
	step, end := -1, plan.steps[len(plan.steps)-1].to
	for i, sec := range track.Seconds {
		for step+1 < len(plan.steps) && sec >= plan.steps[step+1].from-1e-6 {
			step++
			p.Changes[i] = true
		}
		p.Changes[i] = p.Changes[i] || math.Abs(sec-end) < 1e-6
		if step >= 0 && sec < end-1e-6 && plan.steps[step].mode >= 0 {
			m := caseModes[plan.steps[step].mode]
			p.NeedDBHz[i], p.RateBps[i] = m.NeedDBHz, m.NetRate.BitsPerSecond()
		}
	}
	st := &s.sites[turn.Site]
	for k, percent := range st.air.percent {
		loss := make([]float64, n)
		for i := range loss {
			at := st.place[turn.From+i]
			loss[i] = f.losses[at.rung][k] + float64(at.part)*(f.losses[at.rung+1][k]-f.losses[at.rung][k])
		}
		p.ExceedancePercent, p.AttenuationDB = append(p.ExceedancePercent, percent), append(p.AttenuationDB, loss)
	}
	r, err := passvolume.Distribute(&p)
	if err != nil {
		t.Fatal(err)
	}
	return r.Volumes.Mean()
}

// Availability in the year and its worst month as the statistics of contacts have them.
func TestAvailabilityAgainstYear(t *testing.T) {
	c := usualCase()
	c.days = 7
	c.power = -6
	s := c.study(t, None(), Family{})
	o, err := s.Outcome(Variant{})
	if err != nil {
		t.Fatal(err)
	}
	place := c.place(t, 0)
	spec := place.Clear
	a := c.antenna
	spec.Antenna = &a
	mode := downlinkMode()
	spec.Mode = &mode
	spec.Transmitter.RequiredMargin = 3
	link, err := downlink.NewLink(spec)
	if err != nil {
		t.Fatal(err)
	}
	var cells downlink.ContactCells
	eph, err := c.orbit.Ephemeris(caseStart, caseStart.AddDate(0, 0, 7), c.earth(), nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range s.spec.Flight.Sites[0].Passes {
		profile, err := link.Profile(eph, p.AOS, p.LOS, DefaultStep)
		if err != nil {
			t.Fatal(err)
		}
		cells.Add(profile)
	}
	path := caseSpec(t, &c.sites[0], a)
	year, err := downlink.NewYear(link, path, &cells)
	if err != nil {
		t.Fatal(err)
	}
	under, month := year.UnderMargin(0)
	if d := 100 - o.AvailabilityPercent - 100*under.High; math.Abs(d) > 0.25 {
		t.Errorf("unavailable %.3f %%, the year's statistics have %.3f %%", 100-o.AvailabilityPercent, 100*under.High)
	}
	if d := 100 - o.WorstMonthAvailabilityPercent - 100*month.High; math.Abs(d) > 0.25 {
		t.Errorf("unavailable in the worst month %.3f %%, the year's statistics have %.3f %%", 100-o.WorstMonthAvailabilityPercent, 100*month.High)
	}
}

// Two sites in one place hear the spacecraft in turn and bring no more than one.
func TestOverlappingPassesCountOnce(t *testing.T) {
	c := usualCase()
	c.days, c.clear = 7, true
	one := c.study(t, None(), Family{})
	twin := c.sites[0]
	twin.Name = "Twin"
	c.sites = append(c.sites, twin)
	two := c.study(t, None(), Family{})
	a, err := one.Outcome(Variant{Diameter: 3})
	if err != nil {
		t.Fatal(err)
	}
	b, err := two.Outcome(Variant{Diameter: 3})
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(a.BytesPerDay/b.BytesPerDay-1) > 1e-12 || a.LongestGapH != b.LongestGapH || len(one.turns) != len(two.turns) {
		t.Errorf("twins bring %.8g bytes a day in %d turns, one site %.8g in %d", b.BytesPerDay, len(two.turns), a.BytesPerDay, len(one.turns))
	}
}

// A profile that may not be used brings nothing, and a least elevation over the sites'
// own takes from the bytes.
func TestWhatMayNotBeUsedDoesNotCount(t *testing.T) {
	c := usualCase()
	c.days, c.clear = 7, true
	c.sites = append(c.sites, station.Site{Name: "South", Latitude: -45 * unit.Degree, Longitude: 170 * unit.Degree, MinimumElevation: 10 * unit.Degree})
	c.keep = func(p *downlink.Profile) error {
		p.Permit(nil)
		return nil
	}
	s := c.study(t, None(), Family{})
	o, err := s.Outcome(Variant{Diameter: 3})
	if err != nil {
		t.Fatal(err)
	}
	if o.BytesPerDay != 0 || math.Abs(o.LongestGapH-7*24) > 1e-9 || o.AvailabilityPercent != 0 {
		t.Errorf("nothing may be used: %g bytes a day, gap %g h, available %g %%", o.BytesPerDay, o.LongestGapH, o.AvailabilityPercent)
	}
	c.keep = nil
	s = c.study(t, None(), Family{})
	before := math.Inf(1)
	for _, el := range []float64{0, 5, 10, 20, 40} {
		o, err := s.Outcome(Variant{Diameter: 3, Raise: unit.Angle(el) * unit.Degree})
		if err != nil {
			t.Fatal(err)
		}
		if o.BytesPerDay > before || o.BytesPerDay == 0 {
			t.Errorf("raised by %g deg: %g bytes a day, before %g", el, o.BytesPerDay, before)
		}
		before = o.BytesPerDay
	}
}
