package cli

import (
	"math"
	"sync"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/rateplan"
	"slantwise/reports"
)

// reportRates holds the planners of a report, one for each transmitter, made when the
// first page asks for it.
type reportRates struct {
	mutex    sync.Mutex
	planners map[*downlink.Transmitter]*sharedPlanner
}

// sharedPlanner is a planner that pages copy; err says why there is none.
type sharedPlanner struct {
	once    sync.Once
	planner *ratePlanner
	err     error
}

// of returns a planner of a transmitter for the caller alone.
func (r *reportRates) of(p *reportPlan, craft *reportCraft, tx *downlink.Transmitter) (*ratePlanner, error) {
	r.mutex.Lock()
	if r.planners == nil {
		r.planners = map[*downlink.Transmitter]*sharedPlanner{}
	}
	one := r.planners[tx]
	if one == nil {
		one = &sharedPlanner{}
		r.planners[tx] = one
	}
	r.mutex.Unlock()
	one.once.Do(func() { one.planner, one.err = p.newPlanner(craft, tx) })
	if one.err != nil {
		return nil, one.err
	}
	return one.planner.copy()
}

// newPlanner makes a planner and settles its one mode for all passes of the report,
// where there is to be one.
func (p *reportPlan) newPlanner(craft *reportCraft, tx *downlink.Transmitter) (*ratePlanner, error) {
	planner, err := newRatePlanner(tx, &craft.RatePlan, nil)
	if err != nil || planner.choice != scenario.OneForAll {
		return planner, err
	}
	var stations []scenario.Station
	for i := range p.sites {
		stations = append(stations, *p.sites[i].Station)
	}
	flights, _, err := rateFlights(p.scenario, craft.Spacecraft, tx, stations)
	if err != nil {
		return nil, err
	}
	return planner, planner.settle(tracksOf(flights))
}

// addRates adds the rate plan of a page; without one it says why.
func (p *reportPlan) addRates(out *reports.Pass, craft *reportCraft, page *reportPage, best *modeOnPass) error {
	if best.link.mode == nil {
		return nil
	}
	planner, err := p.rates.of(p, craft, page.link.transmitter)
	if err != nil {
		out.Notes = append(out.Notes, reports.Note{Kind: reports.Warning, About: "rate plan", Text: "there is none: " + err.Error()})
		return nil
	}
	track := rateplan.FromProfile(best.profile)
	rated, err := planner.plan(track)
	if err != nil {
		return err
	}
	series, err := rated.by.Series(track, &rated.plan)
	if err != nil {
		return err
	}
	out.Radio.Plan = reportedPlan(rated, &series, best.profile.RequiredMarginDB)
	for _, text := range rulesNotes(&craft.RatePlan, page.link.transmitter) {
		out.Notes = append(out.Notes, reports.Note{Kind: reports.Assumption, About: "rate plan", Text: text})
	}
	return nil
}

func reportedPlan(r *ratedPass, s *rateplan.Series, requiredDB float64) *reports.Plan {
	out := &reports.Plan{
		Bytes: r.plan.Bytes, FreeBytes: r.plan.FreeBytes, ShannonBytes: r.plan.ShannonBytes,
		ShareOfFree: r.plan.ShareOfFree(), ShareOfShannon: r.plan.ShareOfShannon(), Changes: r.plan.Changes(), SingleBytes: r.fixed.Bytes,
		RateBps: s.RateBps, MarginDB: make([]float64, len(s.MarginDB)), FreeBps: s.FreeBps, ShannonBps: s.ShannonBps, SoFar: r.plan.SoFar,
	}
	for i, m := range s.MarginDB {
		out.MarginDB[i] = m + requiredDB
	}
	if len(r.fixed.Steps) > 0 {
		out.SingleMode = r.fixed.Steps[0].Name
	}
	for i := range r.plan.Steps {
		step := &r.plan.Steps[i]
		least := float64(step.LeastMargin) + requiredDB
		if step.Mode < 0 {
			least = math.NaN()
		}
		out.Steps = append(out.Steps, reports.PlanStep{
			From: step.From, To: step.To, Mode: step.Name, SymbolRate: step.SymbolRate, InformationRate: step.InformationRate,
			NetRate: step.NetRate, LeastMarginDB: least, Bytes: step.Bytes,
		})
	}
	return out
}
