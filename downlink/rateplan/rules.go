package rateplan

import (
	"errors"
	"time"

	"slantwise/orbit/unit"
)

// Rules are what a schedule must keep to. The zero value is one mode without guards.
type Rules struct {
	Changes   int            // at most; going silent within the contact and coming back are changes too
	LeastStay time.Duration  // in each mode, and in a silence within the contact; a single mode is exempt
	Relock    time.Duration  // without data after each change, and whenever a mode begins to close again
	Guard     unit.DB        // over the C/N0 that a mode needs
	GuardTime time.Duration  // a mode must close so long before and after, as the spacecraft's clock and the orbit's time differ; changes alone need it, so that a single mode does not
	Silent    bool           // true: the spacecraft is silent where its mode does not close, so that nothing is lost; false: it goes on sending, and what is sent then is lost
	Band      unit.Frequency // allotted; bounds the modes and Shannon's limit; 0: any
}

// mostChanges bounds the changes of a schedule.
const mostChanges = 1000

func (r *Rules) check() error {
	var faults []error
	if r.Changes < 0 || r.Changes > mostChanges {
		faults = append(faults, &unit.RangeError{Quantity: "changes of mode", Value: float64(r.Changes), Allowed: "0 to 1000"})
	}
	for _, d := range []struct {
		what string
		v    time.Duration
	}{{"least stay", r.LeastStay}, {"time to lock again", r.Relock}, {"guard in time", r.GuardTime}} {
		if d.v < 0 || d.v > 24*time.Hour {
			faults = append(faults, &unit.RangeError{Quantity: d.what, Value: d.v.Seconds(), Unit: "s", Allowed: "0 to 86400 s"})
		}
	}
	if !(r.Guard >= 0 && r.Guard <= 100) {
		faults = append(faults, &unit.RangeError{Quantity: "guard", Value: float64(r.Guard), Unit: "dB", Allowed: "0 to 100 dB"})
	}
	if !(r.Band >= 0 && r.Band <= 1e16) {
		faults = append(faults, &unit.RangeError{Quantity: "allotted bandwidth", Value: r.Band.Hertz(), Unit: "Hz", Allowed: "0 (any) to 1e16 Hz"})
	}
	return errors.Join(faults...)
}
