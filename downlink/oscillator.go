package downlink

import (
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Oscillator is how far a spacecraft's oscillator is off: the frequency that a
// transmitter sends, or a receiver listens on, less the nominal one. A straight line in
// time; temperature and ageing bend it, so that it is worth no more than its last
// measurement.
type Oscillator struct {
	Offset unit.Frequency // at Epoch
	Drift  float64        // Hz/s
	Epoch  time.Time      // without meaning for a drift of 0

	Points      int            // that the line was fitted to; 0: it was stated
	RMS         unit.Frequency // of what the fit leaves over, with n-2 degrees of freedom; 0 for fewer than three points
	First, Last time.Time      // of the points
}

// OscillatorPoint is a measured offset.
type OscillatorPoint struct {
	Time   time.Time
	Offset unit.Frequency
}

// OffsetAt returns the offset at an instant; 0 for nil.
func (o *Oscillator) OffsetAt(t time.Time) unit.Frequency {
	switch {
	case o == nil:
		return 0
	case o.Drift == 0:
		return o.Offset
	}
	return o.Offset + unit.Frequency(o.Drift*t.Sub(o.Epoch).Seconds())
}

// FitOscillator returns the least-squares line through measured offsets, about their
// mean time; through one point a constant. Times must rise and all be finite.
func FitOscillator(points []OscillatorPoint) (*Oscillator, error) {
	n := len(points)
	if n == 0 {
		return nil, errors.New("an oscillator needs one measured offset at least")
	}
	first := points[0].Time
	var meanS, meanHz float64
	for i, p := range points {
		if v := p.Offset.Hertz(); math.IsNaN(v) || math.IsInf(v, 0) {
			return nil, fmt.Errorf("point %d of the oscillator is not finite", i+1)
		}
		if i > 0 && !p.Time.After(points[i-1].Time) {
			return nil, fmt.Errorf("point %d of the oscillator: its time does not rise; sort the points by time, each once", i+1)
		}
		meanS += p.Time.Sub(first).Seconds() / float64(n)
		meanHz += p.Offset.Hertz() / float64(n)
	}
	var xx, xy float64
	for _, p := range points {
		x := p.Time.Sub(first).Seconds() - meanS
		xx += x * x
		xy += x * (p.Offset.Hertz() - meanHz)
	}
	o := &Oscillator{Offset: unit.Frequency(meanHz), Epoch: first.Add(time.Duration(meanS * float64(time.Second))),
		Points: n, First: first, Last: points[n-1].Time}
	if n > 1 {
		o.Drift = xy / xx
	}
	if n > 2 {
		sum := 0.0
		for _, p := range points {
			d := (p.Offset - o.OffsetAt(p.Time)).Hertz()
			sum += d * d
		}
		o.RMS = unit.Frequency(math.Sqrt(sum / float64(n-2)))
	}
	return o, nil
}

// String says what is known: "850 Hz off, drifting -12 Hz a day, at …".
func (o *Oscillator) String() string {
	s := fmt.Sprintf("%.6g Hz off", o.Offset.Hertz())
	if o.Drift != 0 {
		s += fmt.Sprintf(" at %s, drifting %.4g Hz a day", o.Epoch.UTC().Format("2006-01-02T15:04:05Z"), o.Drift*86400)
	}
	if o.Points > 0 {
		s += fmt.Sprintf(" (fit to %d measured", o.Points)
		if o.Points > 2 {
			s += fmt.Sprintf(", %.3g Hz left over", o.RMS.Hertz())
		}
		s += ", the last of " + o.Last.UTC().Format("2006-01-02T15:04Z") + ")"
	}
	return s
}

// Turnaround is a transponder's ratio: locked to an uplink the spacecraft sends
// Down/Up times the frequency that it receives, its own oscillator left out.
type Turnaround struct {
	Uplink   string // its name
	Down, Up int    // 240 and 221 in S band, common practice
}

// Ratio returns Down/Up.
func (t *Turnaround) Ratio() float64 { return float64(t.Down) / float64(t.Up) }
