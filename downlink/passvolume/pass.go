package passvolume

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Pass is a schedule along a pass, with the statistics of its path. Rate and need of a
// sample hold to the next one; those of the last sample have no effect. C/N0 and
// attenuation go straight between samples.
type Pass struct {
	Seconds  []float64 // rising, at least two
	CN0DBHz  []float64 // in clear sky; -Inf where the link is not usable
	NeedDBHz []float64 // C/N0 from which the mode of the moment gets through
	RateBps  []float64 // information bits a second after overheads and expected frame losses; 0: silent
	Lock     float64   // seconds that are lost at each begin of reception and at each change
	Changes  []bool    // whether the receiver has to lock again at a sample, as a mode begins there; empty: never

	ExceedancePercent []float64   // of the time, rising, in (0, 100]; empty: clear sky alone
	AttenuationDB     [][]float64 // by exceedance, then by sample: what C/N0 loses
}

// Check returns every fault of the pass at once.
func (p *Pass) Check() error {
	var faults []error
	n := len(p.Seconds)
	if len(p.Changes) != 0 && len(p.Changes) != n {
		faults = append(faults, fmt.Errorf("%d marks of changes on %d samples; give one a sample, or none", len(p.Changes), n))
	}
	if n < 2 || len(p.CN0DBHz) != n || len(p.NeedDBHz) != n || len(p.RateBps) != n {
		return fmt.Errorf("a pass needs columns of one length, two at least; it has %d instants, %d C/N0, %d needs and %d rates", n, len(p.CN0DBHz), len(p.NeedDBHz), len(p.RateBps))
	}
	for i := range n {
		if i > 0 && !(p.Seconds[i] > p.Seconds[i-1]) || math.IsNaN(p.Seconds[i]) || math.IsInf(p.Seconds[i], 0) {
			faults = append(faults, fmt.Errorf("sample %d: %g s does not rise, or is not finite", i+1, p.Seconds[i]))
		}
		if v := p.CN0DBHz[i]; math.IsNaN(v) || v > 1000 {
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("sample %d: C/N0", i+1), Value: v, Unit: "dBHz", Allowed: "at most 1000 dBHz"})
		}
		if v := p.NeedDBHz[i]; !(math.Abs(v) <= 1000) {
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("sample %d: C/N0 needed", i+1), Value: v, Unit: "dBHz", Allowed: "-1000 to 1000 dBHz"})
		}
		if v := p.RateBps[i]; !(v >= 0 && v <= 1e15) {
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("sample %d: rate", i+1), Value: v, Unit: "bit/s", Allowed: "0 to 1e15 bit/s"})
		}
	}
	if !(p.Lock >= 0 && p.Lock <= 1e6) {
		faults = append(faults, &unit.RangeError{Quantity: "lock-on time", Value: p.Lock, Unit: "s", Allowed: "0 to 1e6 s"})
	}
	return errors.Join(append(faults, p.checkPath()...)...)
}

func (p *Pass) checkPath() []error {
	var faults []error
	if len(p.AttenuationDB) != len(p.ExceedancePercent) {
		return []error{fmt.Errorf("the pass has %d exceedances and %d curves of attenuation; give as many of both", len(p.ExceedancePercent), len(p.AttenuationDB))}
	}
	for i, q := range p.ExceedancePercent {
		if !(q > 0 && q <= 100) || i > 0 && !(q > p.ExceedancePercent[i-1]) {
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("exceedance %d", i+1), Value: q, Unit: "%", Allowed: "greater than 0 and at most 100 %, and greater than the one before"})
		}
		if len(p.AttenuationDB[i]) != len(p.Seconds) {
			faults = append(faults, fmt.Errorf("the attenuation exceeded in %g %% has %d samples, the pass %d", q, len(p.AttenuationDB[i]), len(p.Seconds)))
		}
		for j, a := range p.AttenuationDB[i] {
			if !(math.Abs(a) <= 1000) {
				faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("attenuation exceeded in %g %%, sample %d", q, j+1), Value: a, Unit: "dB", Allowed: "-1000 to 1000 dB"})
			}
		}
	}
	return faults
}

// bytes returns the volume under an attenuation, one value a sample; nil: none.
func (p *Pass) bytes(attenuation []float64) float64 {
	level := func(i int) float64 {
		if attenuation == nil {
			return p.CN0DBHz[i]
		}
		return p.CN0DBHz[i] - attenuation[i]
	}
	bits, until, counts := 0.0, math.Inf(-1), 0.0 // reception so far: when it ended, from when it counts
	before := level(0)
	for i := 1; i < len(p.Seconds); i++ {
		after := level(i)
		a, b := p.Seconds[i-1], p.Seconds[i]
		from, to, ok := closes(a, b, before-p.NeedDBHz[i-1], after-p.NeedDBHz[i-1])
		before = after
		if !ok || p.RateBps[i-1] == 0 {
			continue
		}
		if from > until || len(p.Changes) > 0 && p.Changes[i-1] {
			counts = from + p.Lock
		}
		until = to
		if begin := max(from, counts); to > begin {
			bits += p.RateBps[i-1] * (to - begin)
		}
	}
	return bits / 8
}

// closes returns when between two instants a margin that goes straight is at least 0.
func closes(a, b, before, after float64) (from, to float64, ok bool) {
	switch {
	case before >= 0 && after >= 0:
		return a, b, true
	case before >= 0 && !math.IsInf(after, -1):
		to = a + (b-a)*before/(before-after)
		return a, to, to > a
	case after >= 0 && !math.IsInf(before, -1):
		from = a + (b-a)*before/(before-after)
		return from, b, from < b
	}
	return 0, 0, false
}
