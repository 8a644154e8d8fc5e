package fit

import (
	"fmt"
	"strconv"
	"time"
)

// Why tells what is missing where a fit is refused.
type Why int

// Reasons of a refusal.
const (
	BadDatum         Why = iota + 1 // a datum that cannot be one
	TooFew                          // fewer numbers than unknowns
	NoFirstGuess                    // positions too far apart, or in line with the Earth's centre
	SpanShortForDrag                // B* stays open
	Undetermined                    // some combination of the elements stays open
	NotConverged
	BeyondTheory   // residuals far above what SGP4 can carry
	OutsideTheory  // SGP4 has no such orbit: hyperbolic, under the ground, decayed inside the span
	TooManyRefused // outlier handling would leave too few
)

var whyWords = [...]string{
	BadDatum: "datum that cannot be one", TooFew: "too few data", NoFirstGuess: "no first guess",
	SpanShortForDrag: "the data do not carry B*", Undetermined: "the data leave elements open",
	NotConverged: "no convergence", BeyondTheory: "residuals beyond what SGP4 can carry",
	OutsideTheory: "no SGP4 orbit follows the data", TooManyRefused: "too many outliers",
}

// String returns the reason in words.
func (w Why) String() string {
	if w < 1 || int(w) >= len(whyWords) {
		return "reason " + strconv.Itoa(int(w))
	}
	return whyWords[w]
}

// Refusal says why the data cannot carry a fit, and what to do.
type Refusal struct {
	Why   Why
	Time  time.Time // of the datum at fault; zero where all are
	Line  int       // of that datum; 0 where lines do not apply
	Found string    // what was found, with numbers
	Next  string    // what to do
	Err   error     // what lies behind it; may be nil
}

// Error returns "why: at time, line n: found; next".
func (r *Refusal) Error() string {
	s := r.Why.String() + ": "
	if !r.Time.IsZero() {
		s += "at " + r.Time.UTC().Format("2006-01-02T15:04:05.000Z")
		if r.Line > 0 {
			s += fmt.Sprintf(" (line %d)", r.Line)
		}
		s += ": "
	}
	s += r.Found
	if r.Err != nil {
		s += ": " + r.Err.Error()
	}
	return s + "; " + r.Next
}

// Unwrap returns what lies behind it.
func (r *Refusal) Unwrap() error { return r.Err }

func kilometres(m float64) string { return strconv.FormatFloat(m/1000, 'g', 6, 64) + " km" }

func short(x float64) string { return strconv.FormatFloat(x, 'g', 4, 64) }

func plural(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return strconv.Itoa(n) + " " + what + "s"
}
