package rateplan

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

var noon = time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC)

// hill is a pass of ten intervals of 10 s: 50 dBHz, three intervals with 56 dBHz at both
// ends in the middle.
func hill() Track {
	t := Track{Start: noon}
	for i, c := range []float64{50, 50, 50, 50, 56, 56, 56, 56, 50, 50, 50} {
		t.Seconds, t.CN0DBHz = append(t.Seconds, float64(10*i)), append(t.CN0DBHz, c)
	}
	return t
}

func twoModes() []Mode {
	return []Mode{
		{Name: "slow", InformationRate: 1000, NetRate: 800, NeedDBHz: 49},
		{Name: "fast", InformationRate: 4000, NetRate: 3200, NeedDBHz: 55},
	}
}

func planOf(t *testing.T, rules Rules, track Track) Plan {
	t.Helper()
	p, err := NewPlanner(twoModes(), rules)
	if err != nil {
		t.Fatal(err)
	}
	plan, err := p.Plan(track)
	if err != nil {
		t.Fatal(err)
	}
	return plan
}

// Worked by hand: slow for all 100 s brings 10 kB, fast for the 30 s in which it closes 12
// kB. With two changes slow, fast, slow bring 70 s of 800 bit/s and 30 s of 3200 bit/s, 19
// kB, less 2 s of each where it has to lock. With 50 s in each, slow before fast has 20 s
// of fast left, 13 kB. A guard of 1.5 dB leaves slow the 30 s in the middle, a guard in time
// of 10 s leaves fast one interval, 50 s to 60 s. Shannon's limit without a band is C/N0 /
// ln 2, over 50 s of 50 dBHz, 30 s of 56 dBHz and two slopes.
func TestPlanByHand(t *testing.T) {
	for _, c := range []struct {
		name  string
		rules Rules
		bytes float64
		steps string
	}{
		{"one mode", Rules{}, 12000, "fast 0-100"},
		{"one mode, silent else", Rules{Silent: true}, 12000, "fast 40-70"},
		{"two changes", Rules{Changes: 2}, 19000, "slow 0-40, fast 40-70, slow 70-100"},
		{"one change", Rules{Changes: 1}, 16000, "slow 0-40, fast 40-100"},
		{"a change is needed less", Rules{Changes: 9}, 19000, "slow 0-40, fast 40-70, slow 70-100"},
		{"time to lock", Rules{Changes: 2, Relock: 2 * time.Second}, (38*800 + 28*3200 + 28*800) / 8, "slow 0-40, fast 40-70, slow 70-100"},
		{"least stay of 50 s", Rules{Changes: 2, LeastStay: 50 * time.Second}, 13000, "slow 0-50, fast 50-100"},
		{"guard of 1.5 dB", Rules{Changes: 2, Guard: 1.5}, 3000, "slow 0-100"},
		{"guard of 0.5 dB", Rules{Changes: 2, Guard: 0.5}, 19000, "slow 0-40, fast 40-70, slow 70-100"},
		{"guard of 10 s", Rules{Changes: 2, GuardTime: 10 * time.Second}, (90*800 + 10*3200) / 8, "slow 0-50, fast 50-60, slow 60-100"},
	} {
		p := planOf(t, c.rules, hill())
		if math.Abs(p.Bytes-c.bytes) > 1e-9 {
			t.Errorf("%s: %g bytes, want %g", c.name, p.Bytes, c.bytes)
		}
		var got []string
		for _, s := range p.Steps {
			got = append(got, s.Name+" "+s.From.Sub(noon).String()+"-"+s.To.Sub(noon).String())
		}
		if seconds := strings.NewReplacer("1m40s", "100", "1m10s", "70", "1m0s", "60", "40s", "40", "50s", "50", "0s", "0").Replace(strings.Join(got, ", ")); seconds != c.steps {
			t.Errorf("%s: %s, want %s", c.name, seconds, c.steps)
		}
		if math.Abs(p.FreeBytes-19000) > 1e-9 {
			t.Errorf("%s: free switching brings %g, want 19000", c.name, p.FreeBytes)
		}
		low, high := math.Pow(10, 5), math.Pow(10, 5.6)
		if want := (50*low + 20*(low+high)/2 + 30*high) / math.Ln2 / 8; math.Abs(p.ShannonBytes-want) > 1e-6*want {
			t.Errorf("%s: Shannon's limit is %g bytes, want %g", c.name, p.ShannonBytes, want)
		}
	}
}

func TestStepsTellTheirMargin(t *testing.T) {
	p := planOf(t, Rules{Changes: 2}, hill())
	for i, want := range []float64{1, 1, 1} {
		if got := float64(p.Steps[i].LeastMargin); math.Abs(got-want) > 1e-12 {
			t.Errorf("step %d: margin %g dB, want %g", i+1, got, want)
		}
	}
	if p.Steps[1].NetRate != 3200 || p.Steps[1].InformationRate != 4000 || p.Steps[1].Bytes != 12000 || p.Changes() != 2 {
		t.Errorf("got %+v", p.Steps[1])
	}
	within := p.ShareOfFree()
	if within != 1 {
		t.Errorf("share of free switching %g, want 1", within)
	}
}

// A gap in the middle of a contact: silent across it costs two changes.
func TestSilenceWithinAContact(t *testing.T) {
	track := hill()
	track.CN0DBHz[5] = math.NaN()
	p := planOf(t, Rules{Changes: 2, Silent: true}, track)
	if len(p.Steps) != 3 || p.Steps[1].Mode != silence || p.Steps[1].Name != "silent" || !math.IsNaN(float64(p.Steps[1].LeastMargin)) {
		t.Errorf("got %+v", p.Steps)
	}
	if want := 80 * 800.0 / 8; math.Abs(p.Bytes-want) > 1e-9 {
		t.Errorf("%g bytes, want %g", p.Bytes, want)
	}
}

func TestFixedAndCommon(t *testing.T) {
	p, err := NewPlanner(twoModes(), Rules{})
	if err != nil {
		t.Fatal(err)
	}
	low := Track{Start: noon, Seconds: []float64{0, 100, 200}, CN0DBHz: []float64{50, 50, 50}}
	fixed, err := p.Fixed(low)
	if err != nil || fixed.Steps[0].Name != "slow" || fixed.Bytes != 20000 {
		t.Errorf("got %+v, %v", fixed, err)
	}
	c, err := p.Common([]Track{hill(), low})
	// slow: 100 s and 200 s of 800 bit/s, 30 kB; fast: 30 s of 3200 bit/s, 12 kB.
	if err != nil || c.Mode != 0 || c.Bytes != 30000 || c.Plans[0].Bytes != 10000 || c.Plans[1].Bytes != 20000 {
		t.Errorf("got %+v, %v", c, err)
	}
	none, err := p.Common([]Track{{Start: noon, Seconds: []float64{0, 1}, CN0DBHz: []float64{0, 0}}})
	if err != nil || none.Mode != silence || none.Bytes != 0 || len(none.Plans[0].Steps) != 0 {
		t.Errorf("got %+v, %v", none, err)
	}
}

// Eb/N0 of 9.588 dB for QPSK without coding, 1 dB of loss, 3 dB of margin, 60 dB of
// rate: 73.588 dBHz.
func TestNewMode(t *testing.T) {
	r, err := modem.Mode{Name: "plain", Modulation: "qpsk", Coding: "none", DataRate: 1e6}.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	m, err := NewMode(r, 1, 3)
	if err != nil || math.Abs(m.NeedDBHz-73.588) > 5.01e-4 || m.SymbolRate != 5e5 || math.Abs(float64(m.Bandwidth)-5e5*1.35) > 1e-6 || m.NetRate >= 1e6 {
		t.Errorf("got %+v, %v", m, err)
	}
	if _, err := NewMode(modem.Resolved{}, 0, 0); err == nil || !strings.Contains(err.Error(), "neither data rate nor symbol rate") {
		t.Errorf("no rate: %v", err)
	}
}

func TestFromProfile(t *testing.T) {
	p := &downlink.Profile{Start: noon, Seconds: []float64{0, 1, 2}, CN0DBHz: []float64{50, 51, 52}, Usable: []bool{true, false, true}}
	track := FromProfile(p)
	if !track.Start.Equal(noon) || track.CN0DBHz[0] != 50 || !math.IsNaN(track.CN0DBHz[1]) || p.CN0DBHz[1] != 51 {
		t.Errorf("got %+v of %+v", track, p)
	}
}

func TestPlannerRefuses(t *testing.T) {
	good := Mode{Name: "a", InformationRate: 1000, NetRate: 900, NeedDBHz: 40}
	for want, c := range map[string]struct {
		change func(*Mode)
		rules  Rules
	}{
		"information rate: 0 bit/s":                          {func(m *Mode) { m.InformationRate = 0 }, Rules{}},
		"net rate: 0 bit/s":                                  {func(m *Mode) { m.NetRate = 0 }, Rules{}},
		"at most the information rate, 1000 bit/s":           {func(m *Mode) { m.NetRate = 1001 }, Rules{}},
		"required C/N0: NaN dBHz":                            {func(m *Mode) { m.NeedDBHz = math.NaN() }, Rules{}},
		"symbol rate: -1 baud":                               {func(m *Mode) { m.SymbolRate = -1 }, Rules{}},
		`mode "a" takes 2 MHz, more than the allotted 1 MHz`: {func(m *Mode) { m.Bandwidth = 2e6 }, Rules{Band: 1e6}},
		"changes of mode: -1":                                {func(*Mode) {}, Rules{Changes: -1}},
		"least stay: -1 s":                                   {func(*Mode) {}, Rules{LeastStay: -time.Second}},
		"time to lock again: 90000 s":                        {func(*Mode) {}, Rules{Relock: 25 * time.Hour}},
		"guard: NaN dB":                                      {func(*Mode) {}, Rules{Guard: unit.DB(math.NaN())}},
		"guard in time: -1 s":                                {func(*Mode) {}, Rules{GuardTime: -time.Second}},
	} {
		m := good
		c.change(&m)
		if _, err := NewPlanner([]Mode{m}, c.rules); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v, want %q", err, want)
		}
	}
	if _, err := NewPlanner([]Mode{good, good}, Rules{}); err == nil || !strings.Contains(err.Error(), `two modes are named "a"`) {
		t.Errorf("equal names: %v", err)
	}
	if _, err := NewPlanner(nil, Rules{}); err == nil || !strings.Contains(err.Error(), "0 modes") {
		t.Errorf("no modes: %v", err)
	}
	_, err := NewPlanner([]Mode{good}, Rules{Changes: -1, Guard: -1})
	var out *unit.RangeError
	if !errors.As(err, &out) || !strings.Contains(err.Error(), "guard: -1 dB") {
		t.Errorf("two faults: %v", err)
	}
}

func TestTrackRefuses(t *testing.T) {
	p, err := NewPlanner(twoModes(), Rules{})
	if err != nil {
		t.Fatal(err)
	}
	for want, track := range map[string]Track{
		"1 instants and 1 values":       {Seconds: []float64{0}, CN0DBHz: []float64{1}},
		"2 instants and 1 values":       {Seconds: []float64{0, 1}, CN0DBHz: []float64{1}},
		"sample 2 is at 0 s":            {Seconds: []float64{0, 0}, CN0DBHz: []float64{1, 1}},
		"sample 2 is at NaN s":          {Seconds: []float64{0, math.NaN()}, CN0DBHz: []float64{1, 1}},
		"C/N0 of sample 1 is +Inf dBHz": {Seconds: []float64{0, 1}, CN0DBHz: []float64{math.Inf(1), 1}},
	} {
		for what, f := range map[string]func(Track) (Plan, error){"Plan": p.Plan, "Fixed": p.Fixed} {
			if _, err := f(track); err == nil || !strings.Contains(err.Error(), want) {
				t.Errorf("%s: %v, want %q", what, err, want)
			}
		}
		if _, err := p.Common([]Track{hill(), track}); err == nil || !strings.Contains(err.Error(), "pass 2: track: ") {
			t.Errorf("Common: %v, want pass 2", err)
		}
	}
	if _, err := p.Common(nil); err == nil {
		t.Error("no passes are taken")
	}
}

// The series of the plan slow, fast, slow: its rate, its margin of 1 dB throughout, and
// Shannon's limit of 50 dBHz in a band of 1 kHz: 1000 log2(1 + 100).
func TestSeries(t *testing.T) {
	p, err := NewPlanner(twoModes(), Rules{Changes: 2, Band: 1000})
	if err != nil {
		t.Fatal(err)
	}
	plan, err := p.Plan(hill())
	if err != nil {
		t.Fatal(err)
	}
	s, err := p.Series(hill(), &plan)
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []float64{800, 800, 800, 800, 3200, 3200, 3200, 800, 800, 800, 0} {
		if s.RateBps[i] != want {
			t.Errorf("sample %d: %g bit/s, want %g", i, s.RateBps[i], want)
		}
	}
	if s.MarginDB[0] != 1 || s.MarginDB[5] != 1 || s.MarginDB[7] != 7 || !math.IsNaN(s.MarginDB[10]) || s.FreeBps[7] != 3200 || s.FreeBps[8] != 800 {
		t.Errorf("margins %v, free rates %v", s.MarginDB, s.FreeBps)
	}
	if want := 1000 * math.Log2(101); math.Abs(s.ShannonBps[0]-want) > 1e-9*want {
		t.Errorf("Shannon's limit %g bit/s, want %g", s.ShannonBps[0], want)
	}
	if plan.SoFar[4] != 4000 || plan.SoFar[7] != 16000 || plan.SoFar[10] != 19000 {
		t.Errorf("bytes so far %v", plan.SoFar)
	}
	if _, err := p.Series(Track{}, &plan); err == nil {
		t.Error("an empty track is taken")
	}
}

// More freedom never brings less: more changes, less stay, less guard, no lock.
func TestMoreFreedomBringsMore(t *testing.T) {
	track := overhead(721)
	plan := func(rules Rules) float64 {
		p, err := NewPlanner(ladder(12), rules)
		if err != nil {
			t.Fatal(err)
		}
		got, err := p.Plan(track)
		if err != nil {
			t.Fatal(err)
		}
		return got.Bytes
	}
	for _, silent := range []bool{false, true} {
		strict := Rules{Changes: 3, LeastStay: 40 * time.Second, Relock: 4 * time.Second, Guard: 1, GuardTime: 5 * time.Second, Silent: silent}
		base := plan(strict)
		if !(base > 0) {
			t.Fatal("the strict rules bring nothing")
		}
		for name, ease := range map[string]func(*Rules){
			"changes": func(r *Rules) { r.Changes = 6 }, "stay": func(r *Rules) { r.LeastStay = 0 }, "lock": func(r *Rules) { r.Relock = 0 },
			"guard": func(r *Rules) { r.Guard = 0 }, "guard in time": func(r *Rules) { r.GuardTime = 0 }, "loss": func(r *Rules) { r.Silent = false },
		} {
			eased := strict
			ease(&eased)
			if got := plan(eased); got < base*(1-1e-12) {
				t.Errorf("silent %t, with more freedom of %s: %g bytes, before %g", silent, name, got, base)
			}
		}
	}
}

func TestTooLargeToPlan(t *testing.T) {
	p, err := NewPlanner(twoModes(), Rules{Changes: 1000})
	if err != nil {
		t.Fatal(err)
	}
	long := Track{Seconds: make([]float64, 60_000), CN0DBHz: make([]float64, 60_000)}
	for i := range long.Seconds {
		long.Seconds[i] = float64(i)
	}
	if _, err := p.Plan(long); err == nil || !strings.Contains(err.Error(), "60000 samples with 2 modes and 1000 changes are too many") {
		t.Errorf("got %v", err)
	}
}
