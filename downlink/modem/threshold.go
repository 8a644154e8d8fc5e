package modem

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"slantwise/orbit/unit"
)

// Metric says what an error rate counts.
type Metric string

// Metrics of error rates.
const (
	BitErrors      Metric = "bit error rate"
	CodewordErrors Metric = "codeword error rate"
	FrameErrors    Metric = "frame error rate"
	PacketErrors   Metric = "packet error rate"
)

var metrics = []Metric{BitErrors, CodewordErrors, FrameErrors, PacketErrors}

// ParseMetric reads "bit", "codeword", "frame" or "packet", or a metric in full.
func ParseMetric(s string) (Metric, error) {
	for _, m := range metrics {
		if s == string(m) || s == strings.TrimSuffix(string(m), " error rate") {
			return m, nil
		}
	}
	return "", fmt.Errorf("%q is not allowed; it must be bit, codeword, frame or packet", s)
}

// Threshold is the Eb/N0 that one error rate requires.
type Threshold struct {
	EbN0       unit.DB // per information bit, without implementation loss
	ErrorRate  float64
	Metric     Metric
	Provenance string // "seen-primary", "seen-secondary", "computed", or "user" for a row of the user's own
	Source     string
}

// String returns "1e-05 bit error rate".
func (t Threshold) String() string { return formatRate(t.ErrorRate) + " " + string(t.Metric) }

func formatRate(r float64) string { return strconv.FormatFloat(r, 'e', -1, 64) }

// RateError says that the Eb/N0 for an error rate is not known.
type RateError struct {
	Row       string // "qpsk ccsds-ldpc-4-5"
	Metric    Metric
	ErrorRate float64
	Known     []string // what is known of the row: "1e-04 codeword error rate", "bit error rate 1e-12 to 5e-01"
}

// Error says the row, the error rate and what is known.
func (e *RateError) Error() string {
	return fmt.Sprintf("%s: the Eb/N0 for a %s of %s is not known, and curves are not continued beyond their ends; known are %s",
		e.Row, e.Metric, formatRate(e.ErrorRate), strings.Join(e.Known, ", "))
}

// At returns what a row requires for an error rate of a metric. The empty metric is
// the row's own, that of its first threshold; an error rate of 0 takes the row's first
// threshold of the metric. A threshold of the row's table comes before its curves.
// Fails with a *RateError where the error rate is not known, or a *unit.RangeError.
func (r *Row) At(metric Metric, errorRate float64) (Threshold, error) {
	if !(errorRate >= 0 && errorRate < 1) {
		return Threshold{}, &unit.RangeError{Quantity: "error rate", Value: errorRate, Allowed: "greater than 0 and less than 1"}
	}
	if metric == "" {
		metric = r.Thresholds[0].Metric
	}
	for _, t := range r.Thresholds {
		if t.Metric == metric && (errorRate == 0 || sameRate(t.ErrorRate, errorRate)) {
			return t, nil
		}
	}
	for i := range r.Curves {
		c := &r.Curves[i]
		if c.Metric == metric && errorRate == 0 {
			errorRate = c.usual()
		}
		if c.Metric != metric || !c.holds(errorRate) {
			continue
		}
		need, err := c.EbN0(errorRate)
		return Threshold{EbN0: need, ErrorRate: errorRate, Metric: metric, Provenance: c.Provenance, Source: c.Source}, err
	}
	return Threshold{}, &RateError{Row: r.Name(), Metric: metric, ErrorRate: errorRate, Known: r.known()}
}

// ErrorRate returns the error rate of the row's own metric at an Eb/N0, from its curve.
// Fails with a *RateError where there is no curve there.
func (r *Row) ErrorRate(ebn0 unit.DB) (float64, error) {
	metric := r.Thresholds[0].Metric
	for i := range r.Curves {
		if c := &r.Curves[i]; c.Metric == metric {
			if rate, err := c.ErrorRate(ebn0); err == nil {
				return rate, nil
			}
		}
	}
	return 0, fmt.Errorf("%s: the %s at Eb/N0 %.2f dB is not known; known are %s", r.Name(), metric, float64(ebn0), strings.Join(r.known(), ", "))
}

// sameRate compares error rates that were written in decimals.
func sameRate(a, b float64) bool { return math.Abs(a-b) <= 1e-9*a }

func (r *Row) known() []string {
	var out []string
	for _, t := range r.Thresholds {
		out = append(out, t.String())
	}
	for _, c := range r.Curves {
		out = append(out, fmt.Sprintf("%s %.2g to %.2g", c.Metric, c.Low, c.High))
	}
	return slices.Compact(out)
}
