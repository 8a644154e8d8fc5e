package cli

import (
	"slantwise/downlink/rateplan"
)

// ratesSteps writes when which mode is sent.
func ratesSteps(j *ratesJob) (*sheet, error) {
	out := &sheet{name: "steps", columns: []sheetColumn{
		wordsAs("start_utc", "start UTC"), wordsAs("end_utc", "end UTC"), wordsAs("mode", "mode"), numbersAs("symbol_rate_baud", "baud", 0),
		numbersAs("information_rate_bps", "bit/s", 0), numbersAs("net_rate_bps", "net bit/s", 0), numbersAs("least_margin_db", "least margin dB", 2),
		numbersAs("least_margin_over_required_db", "over required dB", 2), numbersAs("bytes", "B", 0),
		wordsAs("station", "station"), wordsAs("aos_utc", "AOS UTC"),
	}}
	for i, p := range j.plans {
		f := &j.flights[i]
		for k := range p.plan.Steps {
			s := &p.plan.Steps[k]
			out.rows = append(out.rows, []any{utc(s.From), utc(s.To), s.Name, known(s.SymbolRate.Hertz()), known(s.InformationRate.BitsPerSecond()), s.NetRate.BitsPerSecond(),
				leastMargin(s, j.tx.RequiredMargin), float64(s.LeastMargin), s.Bytes, f.station.Site.Name, utc(f.pass.AOS)})
		}
	}
	return out, nil
}

// known is a number of which 0 says that it does not exist.
func known(v float64) float64 {
	if v == 0 {
		return none
	}
	return v
}

// ratesPasses writes what each pass brings and how far from the bounds that is.
func ratesPasses(j *ratesJob) (*sheet, error) {
	out := &sheet{name: "passes", columns: []sheetColumn{
		wordsAs("station", "station"), wordsAs("aos_utc", "AOS UTC"), wordsAs("los_utc", "LOS UTC"), numbersAs("changes", "changes", 0), numbersAs("bytes", "B", 0),
		numbersAs("free_switching_bytes", "free switching B", 0), numbersAs("share_of_free_percent", "of it %", 2),
		numbersAs("shannon_bytes", "Shannon B", 0), numbersAs("share_of_shannon_percent", "of it %", 2),
		wordsAs("single_mode", "single mode"), numbersAs("single_mode_bytes", "by itself B", 0),
	}}
	for i, p := range j.plans {
		f := &j.flights[i]
		single := ""
		if len(p.fixed.Steps) > 0 {
			single = p.fixed.Steps[0].Name
		}
		out.rows = append(out.rows, []any{f.station.Site.Name, utc(f.pass.AOS), utc(f.pass.LOS), float64(p.plan.Changes()), p.plan.Bytes,
			p.plan.FreeBytes, 100 * p.plan.ShareOfFree(), p.plan.ShannonBytes, 100 * p.plan.ShareOfShannon(), single, p.fixed.Bytes})
	}
	return out, nil
}

// ratesSeries writes margin and rates sample by sample.
func ratesSeries(j *ratesJob) (*sheet, error) {
	out := &sheet{name: "samples", columns: []sheetColumn{
		wordsAs("utc", "UTC"), wordsAs("mode", "mode"), numbersAs("net_rate_bps", "net bit/s", 0), numbersAs("margin_over_required_db", "over required dB", 3),
		numbersAs("free_switching_bps", "free switching bit/s", 0), numbersAs("shannon_bps", "Shannon bit/s", 0), numbersAs("bytes_so_far", "B so far", 0),
		wordsAs("station", "station"), wordsAs("aos_utc", "AOS UTC"),
	}}
	for i, p := range j.plans {
		f := &j.flights[i]
		s, err := p.by.Series(f.track, &p.plan)
		if err != nil {
			return nil, err
		}
		for k, sec := range f.track.Seconds {
			at := after(f.track.Start, sec)
			out.rows = append(out.rows, []any{utc(at), modeAt(&p.plan, f.track, sec), s.RateBps[k], s.MarginDB[k], s.FreeBps[k], s.ShannonBps[k], p.plan.SoFar[k],
				f.station.Site.Name, utc(f.pass.AOS)})
		}
	}
	return out, nil
}

// modeAt names what a plan sends at some seconds of its track.
func modeAt(p *rateplan.Plan, t rateplan.Track, seconds float64) string {
	at := after(t.Start, seconds)
	for i := range p.Steps {
		if s := &p.Steps[i]; !at.Before(s.From) && at.Before(s.To) {
			return s.Name
		}
	}
	return "silent"
}
