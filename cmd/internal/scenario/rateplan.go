package scenario

import (
	"fmt"
	"time"

	"slantwise/downlink/rateplan"
	"slantwise/orbit/unit"
)

var ratePlanKeys = []string{
	"modes", "most_changes", "least_stay_s", "relock_s", "guard_db", "guard_s", "silent",
	"symbol_rate_range_baud", "symbol_rate_steps", "symbol_rates_baud",
}

// ModeChoice says how often a spacecraft chooses its mode.
type ModeChoice string

// Choices of the mode, as the scenario writes them.
const (
	Changing  ModeChoice = "changing"    // within a pass, by the rules
	OneAPass  ModeChoice = "one_a_pass"  // once for each pass
	OneForAll ModeChoice = "one_for_all" // once for all passes of the window
)

// ModeChoices lists them, the one that is taken where none is given first.
var ModeChoices = []string{string(OneAPass), string(Changing), string(OneForAll)}

// RatePlan is how a spacecraft may choose its modes.
type RatePlan struct {
	Choice ModeChoice
	Rules  rateplan.Rules // without the band, which is the transmitter's; no changes unless Choice is Changing

	Rates     []unit.Frequency // symbol rates for the codings of the modes; empty: Low to High
	Low, High unit.Frequency   // both 0: the modes as they are
	Steps     int              // of the range where the mode changes
}

// DefaultSymbolRateSteps is into how many rates a range is cut where none are given.
const DefaultSymbolRateSteps = 12

// ratePlan reads a spacecraft's rules for its modes. Without them it sends in one mode
// a pass, as that is what every spacecraft can.
func (o object) ratePlan(owner *Spacecraft) RatePlan {
	plan := RatePlan{Choice: OneAPass, Steps: DefaultSymbolRateSteps}
	if owner.Recorder != nil {
		plan.Rules.Relock = inSeconds(owner.Recorder.LockOn)
	}
	r := o.child("rate_plan", ratePlanKeys)
	r.about = o.about + ", rate plan"
	if r.node == nil {
		if len(owner.Transmitters) > 0 {
			r.assume("rate_plan left out: one mode a pass, the one that brings down the most")
		}
		return plan
	}
	w, given := r.word("modes", ModeChoices...)
	if !given {
		r.assume("modes left out: %s", w)
	}
	plan.Choice = ModeChoice(w)
	const day = 86_400
	whole := atLeast(0, 1000, "")
	if plan.Choice == Changing {
		plan.Rules.Changes = r.whole("most_changes", r.required("most_changes", whole, "how often the mode may change in a pass"))
	} else {
		r.useless("where the mode does not change within a pass", "most_changes", "least_stay_s", "guard_s", "symbol_rate_steps")
	}
	plan.Rules.LeastStay = inSeconds(r.numberOr("least_stay_s", atLeast(0, day, "s"), 0))
	plan.Rules.GuardTime = inSeconds(r.numberOr("guard_s", atLeast(0, day, "s"), 0))
	plan.Rules.Guard = unit.DB(r.numberOr("guard_db", atLeast(0, 100, "dB"), 0))
	plan.Rules.Silent = r.flag("silent")
	if owner.Recorder != nil {
		r.useless("beside the recorder's lock_on_s", "relock_s")
	} else {
		plan.Rules.Relock = inSeconds(r.zeroLeftOut("relock_s", atLeast(0, day, "s")))
	}
	r.symbolRates(&plan)
	return plan
}

func (o object) symbolRates(plan *RatePlan) {
	baud := above(0, 1e15, "baud")
	which, given := o.exclusive("symbol_rate_range_baud", "symbol_rates_baud")
	if plan.Choice == Changing && (!given || which == "symbol_rates_baud") {
		o.useless("without symbol_rate_range_baud", "symbol_rate_steps")
	}
	if which == "symbol_rates_baud" {
		for i, n := range o.items(which, "symbol rates", maxParts) {
			if v, ok := o.numberAt(n, fmt.Sprintf("%s[%d]", which, i), baud); ok {
				plan.Rates = append(plan.Rates, unit.Frequency(v))
			}
		}
		return
	}
	if ends, ok := o.two("symbol_rate_range_baud", baud); ok {
		if plan.Low, plan.High = unit.Frequency(ends[0]), unit.Frequency(ends[1]); plan.High < plan.Low {
			o.fault(o.get(which), which, "%g to %g baud is not a range", "give the lower symbol rate first", ends[0], ends[1])
		}
	}
	plan.Steps = o.whole("symbol_rate_steps", o.numberOr("symbol_rate_steps", atLeast(2, 1000, ""), DefaultSymbolRateSteps))
}

// whole returns a number of a key that must be whole.
func (o object) whole(key string, v float64) int {
	if v != float64(int(v)) {
		o.fault(o.get(key), key, "%g is not allowed; it must be a whole number", "", v)
	}
	return int(v)
}

func inSeconds(v float64) time.Duration { return time.Duration(v * float64(time.Second)) }
