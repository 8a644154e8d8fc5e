package cli

import (
	"fmt"
	"slices"
	"time"

	"github.com/spf13/pflag"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// rateRules are the flags that replace rules of the scenario's rate_plan; nil and empty:
// not given.
type rateRules struct {
	modes                                             string
	mostChanges, leastStayS, relockS, guardDB, guardS *float64
	silent, silentGiven                               bool
	lowBaud, highBaud                                 *float64
}

func (r *rateRules) add(fs *pflag.FlagSet) {
	fs.StringVar(&r.modes, "modes", "", "how often the mode is `CHOSEN`: changing (within a pass), one_a_pass or one_for_all")
	addNumber(fs, &r.mostChanges, "most-changes", "at most so `MANY` changes in a pass; without --modes it means changing")
	addNumber(fs, &r.leastStayS, "least-stay-s", "least `SECONDS` in each mode")
	addNumber(fs, &r.relockS, "relock-s", "`SECONDS` without data after each change and whenever a mode begins to close")
	addNumber(fs, &r.guardDB, "guard-db", "`DB` over the required margin")
	addNumber(fs, &r.guardS, "guard-s", "`SECONDS` for which a mode must close before and after, as the orbit's time errs")
	fs.BoolVar(&r.silent, "silent", false, "the spacecraft is silent where its mode does not close")
	addNumber(fs, &r.lowBaud, "lowest-symbol-rate-baud", "lowest `BAUD` of a range of symbol rates")
	addNumber(fs, &r.highBaud, "highest-symbol-rate-baud", "highest `BAUD` of it")
}

// over returns the rules with the flags in their places.
func (r *rateRules) over(plan scenario.RatePlan) (scenario.RatePlan, error) {
	if r.modes != "" && !slices.Contains(scenario.ModeChoices, r.modes) {
		return plan, inputErrorf("--modes: %q is not allowed; it must be %s", r.modes, quotedList(scenario.ModeChoices))
	}
	switch {
	case r.modes != "":
		plan.Choice = scenario.ModeChoice(r.modes)
	case r.mostChanges != nil:
		plan.Choice = scenario.Changing
	}
	if r.mostChanges != nil {
		n := *r.mostChanges
		if !(n >= 0 && n <= 1000) || n != float64(int(n)) {
			return plan, inputErrorf("--most-changes: %g is not allowed; it must be a whole number, 0 to 1000", n)
		}
		plan.Rules.Changes = int(n)
	}
	switch {
	case plan.Choice != scenario.Changing && r.mostChanges != nil:
		return plan, inputErrorf("--most-changes has no effect with --modes %s, where the mode does not change within a pass; leave one out", plan.Choice)
	case plan.Choice != scenario.Changing:
		plan.Rules.Changes = 0
	case r.mostChanges == nil && plan.Rules.Changes == 0 && r.modes != "":
		return plan, inputErrorf("--most-changes: left out, and the scenario has no most_changes; give how often the mode may change in a pass")
	}
	for _, f := range []struct {
		flag string
		v    *float64
		into *time.Duration
	}{{"least-stay-s", r.leastStayS, &plan.Rules.LeastStay}, {"relock-s", r.relockS, &plan.Rules.Relock}, {"guard-s", r.guardS, &plan.Rules.GuardTime}} {
		if f.v == nil {
			continue
		}
		if !(*f.v >= 0 && *f.v <= 86_400) {
			return plan, inputErrorf("--%s: %g s is not allowed; it must be 0 to 86400 s", f.flag, *f.v)
		}
		*f.into = time.Duration(*f.v * float64(time.Second))
	}
	if r.guardDB != nil {
		if !(*r.guardDB >= 0 && *r.guardDB <= 100) {
			return plan, inputErrorf("--guard-db: %g dB is not allowed; it must be 0 to 100 dB", *r.guardDB)
		}
		plan.Rules.Guard = unit.DB(*r.guardDB)
	}
	if r.silentGiven {
		plan.Rules.Silent = r.silent
	}
	return plan, r.symbolRates(&plan)
}

// symbolRates takes the range of symbol rates.
func (r *rateRules) symbolRates(plan *scenario.RatePlan) error {
	if r.lowBaud == nil && r.highBaud == nil {
		return nil
	}
	if r.lowBaud == nil || r.highBaud == nil {
		return inputErrorf("--lowest-symbol-rate-baud and --highest-symbol-rate-baud go together; give both")
	}
	if low, high := *r.lowBaud, *r.highBaud; !(low > 0 && high >= low && high <= 1e15) {
		return inputErrorf("--lowest-symbol-rate-baud, --highest-symbol-rate-baud: %g to %g baud is not allowed; give a range that rises, greater than 0 and at most 1e15 baud", low, high)
	}
	plan.Rates, plan.Low, plan.High = nil, unit.Frequency(*r.lowBaud), unit.Frequency(*r.highBaud)
	return nil
}

// rulesNotes says under which rules the plan was made.
func rulesNotes(p *scenario.RatePlan, tx *downlink.Transmitter) []string {
	r := &p.Rules
	how := map[scenario.ModeChoice]string{
		scenario.Changing: fmt.Sprintf("at most %d changes in a pass, each mode for at least %g s, a guard of %g s", r.Changes, r.LeastStay.Seconds(), r.GuardTime.Seconds()),
		scenario.OneAPass: "one mode a pass", scenario.OneForAll: "one mode for all passes",
	}[p.Choice]
	where := "goes on sending"
	if r.Silent {
		where = "is silent"
	}
	text := fmt.Sprintf("rules: %s; %g s to lock again, a guard of %g dB over the required margin of %g dB; the spacecraft %s where its mode does not close",
		how, r.Relock.Seconds(), float64(r.Guard), float64(tx.RequiredMargin), where)
	out := []string{text}
	if len(p.Rates) > 0 || p.High > 0 {
		out = append(out, "the codings of the transmitter's modes are sent at the symbol rates of the plan, with the catalogue's thresholds")
	}
	return out
}
