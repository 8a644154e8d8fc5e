package drawing

import (
	"math"
	"strconv"
	"strings"
)

// Tick is a labelled place of an axis.
type Tick struct {
	At    float64
	Label string
}

// Axis is a scale from From to To, From < To.
type Axis struct {
	Name     string
	From, To float64
	Log      bool // both ends over 0
	Ticks    []Tick
}

// place returns where v lies between 0 (From) and 1 (To); NaN where a logarithmic axis has no place.
func (a *Axis) place(v float64) float64 {
	if a.Log {
		return math.Log(v/a.From) / math.Log(a.To/a.From)
	}
	return (v - a.From) / (a.To - a.From)
}

// NewAxis returns an axis with round ends around the values from least to greatest and about
// five ticks; where both are the same, with room on either side.
func NewAxis(name string, least, greatest float64, fromZero bool) Axis {
	if fromZero {
		least = min(least, 0)
	}
	if !(greatest-least > 1e-12*max(math.Abs(least), math.Abs(greatest), 1e-9)) {
		least, greatest = least-1, greatest+1
	}
	step := roundStep((greatest - least) / 5)
	a := Axis{Name: name, From: math.Floor(least/step+1e-9) * step, To: math.Ceil(greatest/step-1e-9) * step}
	a.Ticks = Steps(a.From, a.To, step)
	return a
}

// NewLogAxis returns a logarithmic axis over whole decades, of positive ends, with ticks at 1, 2
// and 5 where it is short.
func NewLogAxis(name string, least, greatest float64) Axis {
	low, high := math.Floor(math.Log10(least)+1e-9), math.Ceil(math.Log10(greatest)-1e-9)
	if high <= low {
		high = low + 1
	}
	a := Axis{Name: name, From: math.Pow(10, low), To: math.Pow(10, high), Log: true}
	for d := low; d <= high; d++ {
		for _, f := range []float64{1, 2, 5} {
			if v := f * math.Pow(10, d); f == 1 || high-low <= 2 && v < a.To {
				a.Ticks = append(a.Ticks, Tick{v, label(v, max(0, int(-d)))})
			}
		}
	}
	return a
}

// Steps returns ticks at the multiples of step in [from, to].
func Steps(from, to, step float64) []Tick {
	decimals := max(0, int(math.Ceil(-math.Log10(step)-1e-9)))
	var list []Tick
	for k := math.Ceil(from/step - 1e-9); k*step <= to+1e-9*step; k++ {
		list = append(list, Tick{k * step, label(k*step, decimals)})
	}
	return list
}

// roundStep returns the least of 1, 2 or 5 times a power of ten that is at least v.
func roundStep(v float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(v)))
	for _, f := range []float64{1, 2, 5} {
		if f*power >= v*(1-1e-9) {
			return f * power
		}
	}
	return 10 * power
}

// label writes a number with a true minus sign and never as minus nought.
func label(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	if strings.Trim(s, "-0.") == "" {
		return strings.TrimPrefix(s, "-")
	}
	return strings.Replace(s, "-", "−", 1)
}
