package tuning

import (
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Course is the shift along a pass.
type Course struct {
	Start   time.Time
	Seconds []float64 // after Start, rising, at least two
	ShiftHz []float64 // as many
}

// Rule is what the table must keep.
type Rule struct {
	Residual unit.Frequency // greatest difference between shift and setting, greater than 0
	Quantum  unit.Frequency // settings are whole multiples of it; 0: any setting
	Every    time.Duration  // settings change on whole multiples of it, UTC; 0: at any sample
}

// Step is a row of the table.
type Step struct {
	From, To   time.Time
	ShiftHz    float64 // the setting
	ResidualHz float64 // the greatest difference while it is held
}

// Table returns the steps, one after the other from the first sample to the last. Where
// no table keeps the rule the error is a *ResidualError.
//
// Between samples the shift bends away from the straight line by an eighth of the
// second difference; that much, of the stronger bend at either end and a quarter more
// for what bends in between, is taken off the residual that is allowed.
func Table(c Course, r Rule) ([]Step, error) {
	if err := check(&c, &r); err != nil {
		return nil, err
	}
	edges := c.edges(r.Every)
	bend := c.bends()
	var out []Step
	for at := 0; at < len(edges)-1; {
		best := Step{}
		to := at
		span := newSpan()
		for next := at + 1; next < len(edges); next++ {
			span.take(&c, bend, edges[next-1], edges[next])
			s := span.step(r.Quantum.Hertz())
			if s.ResidualHz > r.Residual.Hertz() {
				if to == at {
					return nil, &ResidualError{At: c.time(edges[at]), Allowed: r.Residual, Least: unit.Frequency(s.ResidualHz), Until: c.time(edges[next])}
				}
				break
			}
			best, to = s, next
		}
		best.From, best.To = c.time(edges[at]), c.time(edges[to])
		out = append(out, best)
		at = to
	}
	return out, nil
}

// ResidualError says that even the shortest step leaves more over than is allowed.
type ResidualError struct {
	At, Until      time.Time
	Allowed, Least unit.Frequency
}

// Error says when, how much, and what to do.
func (e *ResidualError) Error() string {
	return fmt.Sprintf("from %s to %s the least residual is %.1f Hz, more than the %g Hz allowed; allow more, let settings change more often, or take a finer course",
		e.At.UTC().Format("15:04:05.000"), e.Until.UTC().Format("15:04:05.000"), e.Least.Hertz(), e.Allowed.Hertz())
}

func check(c *Course, r *Rule) error {
	var faults []error
	n := len(c.Seconds)
	if n < 2 || len(c.ShiftHz) != n {
		return fmt.Errorf("a course needs as many shifts as instants, two at least; it has %d and %d", len(c.ShiftHz), n)
	}
	for i := range n {
		if v := c.Seconds[i] + c.ShiftHz[i]; math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("sample %d of the course is not finite", i+1)
		}
		if i > 0 && !(c.Seconds[i] > c.Seconds[i-1]) {
			return fmt.Errorf("sample %d of the course: %g s does not rise over %g s", i+1, c.Seconds[i], c.Seconds[i-1])
		}
	}
	if v := r.Residual.Hertz(); !(v > 0 && v <= 1e12) {
		faults = append(faults, &unit.RangeError{Quantity: "residual", Value: v, Unit: "Hz", Allowed: "greater than 0 and at most 1e12 Hz"})
	}
	if v := r.Quantum.Hertz(); !(v >= 0 && v <= 1e12) {
		faults = append(faults, &unit.RangeError{Quantity: "step of the settings", Value: v, Unit: "Hz", Allowed: "0 to 1e12 Hz"})
	}
	if r.Every < 0 || r.Every > time.Hour {
		faults = append(faults, &unit.RangeError{Quantity: "time between settings", Value: r.Every.Seconds(), Unit: "s", Allowed: "0 to 3600 s"})
	}
	return errors.Join(faults...)
}

func (c *Course) time(s float64) time.Time {
	return c.Start.Add(time.Duration(math.Round(s * 1e9)))
}

// edges lists the instants at which a setting may change, with both ends.
func (c *Course) edges(every time.Duration) []float64 {
	if every == 0 {
		return c.Seconds
	}
	first, last := c.Seconds[0], c.Seconds[len(c.Seconds)-1]
	out := []float64{first}
	at := c.time(first).Truncate(every).Add(every)
	for ; ; at = at.Add(every) {
		s := at.Sub(c.Start).Seconds()
		if s >= last {
			return append(out, last)
		}
		if s > first {
			out = append(out, s)
		}
	}
}

// bendFactor allows for a stronger bend between samples than at them.
const bendFactor = 1.25

// bends returns, for each stretch between samples, how far the shift may lie off the
// straight line.
func (c *Course) bends() []float64 {
	n := len(c.Seconds)
	second := make([]float64, n) // derivative, Hz/s², at the inner samples
	for i := 1; i < n-1; i++ {
		h1, h2 := c.Seconds[i]-c.Seconds[i-1], c.Seconds[i+1]-c.Seconds[i]
		slope1, slope2 := (c.ShiftHz[i]-c.ShiftHz[i-1])/h1, (c.ShiftHz[i+1]-c.ShiftHz[i])/h2
		second[i] = 2 * (slope2 - slope1) / (h1 + h2)
	}
	if n > 2 {
		second[0], second[n-1] = second[1], second[n-2]
	}
	out := make([]float64, n-1)
	for i := range out {
		h := c.Seconds[i+1] - c.Seconds[i]
		out[i] = bendFactor * max(math.Abs(second[i]), math.Abs(second[i+1])) * h * h / 8
	}
	return out
}

// span is the shifts that one setting must cover.
type span struct {
	low, high float64
	sample    int // where the next look begins
}

func newSpan() span { return span{low: math.Inf(1), high: math.Inf(-1)} }

// take widens the span by a time of the course.
func (p *span) take(c *Course, bend []float64, from, to float64) {
	for p.sample < len(bend)-1 && c.Seconds[p.sample+1] <= from {
		p.sample++
	}
	for i := p.sample; i < len(bend) && c.Seconds[i] < to; i++ {
		a, b := max(from, c.Seconds[i]), min(to, c.Seconds[i+1])
		for _, t := range [2]float64{a, b} {
			w := (t - c.Seconds[i]) / (c.Seconds[i+1] - c.Seconds[i])
			v := c.ShiftHz[i]*(1-w) + c.ShiftHz[i+1]*w
			p.low, p.high = min(p.low, v-bend[i]), max(p.high, v+bend[i])
		}
	}
}

// step returns the best setting for the span.
func (p *span) step(quantum float64) Step {
	s := Step{ShiftHz: (p.low + p.high) / 2}
	if quantum > 0 {
		s.ShiftHz = math.Round(s.ShiftHz/quantum) * quantum
	}
	s.ResidualHz = max(p.high-s.ShiftHz, s.ShiftHz-p.low)
	return s
}
