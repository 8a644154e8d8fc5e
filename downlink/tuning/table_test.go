package tuning_test

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"slantwise/downlink/tuning"
	"slantwise/orbit/unit"
)

var start = time.Date(2026, 3, 10, 6, 12, 0, 500e6, time.UTC)

// pass is the shift of a straight fly-by: v = 7.5 km/s at a least range of 800 km, seen
// at 2.2 GHz, from -300 s to 300 s. In closed form: -f v² t / (c r).
func pass(step float64) (tuning.Course, func(s float64) float64) {
	shift := func(s float64) float64 {
		t := s - 300
		return -2.2e9 / unit.SpeedOfLight * 7500 * 7500 * t / math.Hypot(8e5, 7500*t)
	}
	c := tuning.Course{Start: start}
	for s := 0.0; s <= 600; s += step {
		c.Seconds, c.ShiftHz = append(c.Seconds, s), append(c.ShiftHz, shift(s))
	}
	return c, shift
}

// TestResidualIsKept asks the closed form at every 20 ms.
func TestResidualIsKept(t *testing.T) {
	for _, r := range []tuning.Rule{
		{Residual: 500}, {Residual: 2000, Quantum: 1000}, {Residual: 5000, Every: 10 * time.Second}, {Residual: 700, Quantum: 100, Every: time.Second},
	} {
		c, shift := pass(1)
		table, err := tuning.Table(c, r)
		if err != nil {
			t.Fatalf("%+v: %v", r, err)
		}
		for i, s := range table {
			if i > 0 && !s.From.Equal(table[i-1].To) {
				t.Fatalf("%+v: step %d begins at %s, the one before ends at %s", r, i, s.From, table[i-1].To)
			}
			if r.Every > 0 && i > 0 && s.From.Truncate(r.Every) != s.From {
				t.Errorf("%+v: step %d begins at %s, not on a multiple", r, i, s.From)
			}
			if q := r.Quantum.Hertz(); q > 0 && math.Abs(math.Remainder(s.ShiftHz, q)) > 1e-6 {
				t.Errorf("%+v: setting %g Hz is no multiple", r, s.ShiftHz)
			}
			worst := 0.0
			for at := s.From; !at.After(s.To); at = at.Add(20 * time.Millisecond) {
				worst = max(worst, math.Abs(shift(at.Sub(start).Seconds())-s.ShiftHz))
			}
			if worst > s.ResidualHz+1e-6 || s.ResidualHz > r.Residual.Hertz()+1e-9 {
				t.Errorf("%+v: step %d leaves %.2f Hz, says %.2f Hz, may %g Hz", r, i, worst, s.ResidualHz, r.Residual.Hertz())
			}
		}
		if !table[0].From.Equal(start) || !table[len(table)-1].To.Equal(start.Add(600*time.Second)) {
			t.Errorf("%+v: the table runs from %s to %s", r, table[0].From, table[len(table)-1].To)
		}
	}
}

// TestFewestSteps compares with all ways to part a short course.
func TestFewestSteps(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := tuning.Course{Start: start}
		for i := range rapid.IntRange(2, 9).Draw(t, "samples") {
			c.Seconds = append(c.Seconds, float64(i))
			c.ShiftHz = append(c.ShiftHz, float64(rapid.IntRange(-50, 50).Draw(t, "shift")))
		}
		r := tuning.Rule{Residual: unit.Frequency(rapid.IntRange(5, 100).Draw(t, "residual")), Quantum: unit.Frequency(rapid.SampledFrom([]float64{0, 7}).Draw(t, "quantum"))}
		table, err := tuning.Table(c, r)
		fewest := fewestOf(&c, r, len(c.Seconds)-1)
		var re *tuning.ResidualError
		switch {
		case errors.As(err, &re):
			if fewest < math.MaxInt {
				t.Fatalf("refused with %v, and %d steps do", err, fewest)
			}
		case err != nil:
			t.Fatal(err)
		case len(table) != fewest:
			t.Fatalf("%d steps, and %d do", len(table), fewest)
		}
	})
}

// fewestOf tries every subset of the inner samples as the instants of change.
func fewestOf(c *tuning.Course, r tuning.Rule, stretches int) int {
	fewest := math.MaxInt
	for set := range 1 << (stretches - 1) {
		steps, from, fine := 0, 0, true
		for i := 1; i <= stretches; i++ {
			if i < stretches && set&(1<<(i-1)) == 0 {
				continue
			}
			steps++
			fine = fine && held(c, r, from, i)
			from = i
		}
		if fine {
			fewest = min(fewest, steps)
		}
	}
	return fewest
}

// held tells whether one setting covers the samples from a to b, with the bends worked
// out anew.
func held(c *tuning.Course, r tuning.Rule, a, b int) bool {
	n := len(c.ShiftHz)
	second := func(i int) float64 {
		if n < 3 {
			return 0
		}
		i = max(1, min(n-2, i))
		return math.Abs(c.ShiftHz[i-1] - 2*c.ShiftHz[i] + c.ShiftHz[i+1])
	}
	low, high := math.Inf(1), math.Inf(-1)
	for i := a; i < b; i++ {
		bend := 1.25 * max(second(i), second(i+1)) / 8
		low = min(low, c.ShiftHz[i]-bend, c.ShiftHz[i+1]-bend)
		high = max(high, c.ShiftHz[i]+bend, c.ShiftHz[i+1]+bend)
	}
	set := (low + high) / 2
	if q := r.Quantum.Hertz(); q > 0 {
		set = math.Round(set/q) * q
	}
	return max(high-set, set-low) <= r.Residual.Hertz()
}

func TestBadInput(t *testing.T) {
	good, _ := pass(1)
	for _, c := range []struct {
		course tuning.Course
		rule   tuning.Rule
		want   string
	}{
		{tuning.Course{}, tuning.Rule{Residual: 1}, "a course needs as many shifts as instants, two at least; it has 0 and 0"},
		{tuning.Course{Seconds: []float64{0, 0}, ShiftHz: []float64{0, 0}}, tuning.Rule{Residual: 1}, "sample 2 of the course: 0 s does not rise over 0 s"},
		{tuning.Course{Seconds: []float64{0, 1}, ShiftHz: []float64{0, math.NaN()}}, tuning.Rule{Residual: 1}, "sample 2 of the course is not finite"},
		{good, tuning.Rule{}, "residual: 0 Hz is not allowed; it must be greater than 0"},
		{good, tuning.Rule{Residual: 1, Quantum: -1}, "step of the settings: -1 Hz"},
		{good, tuning.Rule{Residual: 1, Every: -1}, "time between settings"},
		{good, tuning.Rule{Residual: 100, Every: 10 * time.Second}, "from 06:12:"},
	} {
		if _, err := tuning.Table(c.course, c.rule); err == nil || !strings.HasPrefix(err.Error(), c.want) {
			t.Errorf("got %v, want %s", err, c.want)
		}
	}
}

func ExampleTable() {
	c := tuning.Course{
		Start:   time.Date(2026, 3, 10, 6, 12, 0, 0, time.UTC),
		Seconds: []float64{0, 10, 20, 30, 40}, ShiftHz: []float64{4000, 2000, 0, -2000, -4000},
	}
	table, err := tuning.Table(c, tuning.Rule{Residual: 2000})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, s := range table {
		fmt.Printf("%s %+.0f Hz, within %.0f Hz\n", s.From.Format("15:04:05"), s.ShiftHz, s.ResidualHz)
	}
	// Output:
	// 06:12:00 +2000 Hz, within 2000 Hz
	// 06:12:20 -2000 Hz, within 2000 Hz
}

func BenchmarkTable(b *testing.B) {
	c, _ := pass(1)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := tuning.Table(c, tuning.Rule{Residual: 700, Quantum: 100}); err != nil {
			b.Fatal(err)
		}
	}
}
