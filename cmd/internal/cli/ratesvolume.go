package cli

import (
	"fmt"
	"math"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/passvolume"
	"slantwise/downlink/propagation"
	"slantwise/downlink/rateplan"
)

// volumePercents are the shares of the year at which the path is asked: P.618's span,
// from 0.01 % on, where a volume does not change any more.
var volumePercents = []float64{0.01, 0.03, 0.1, 0.3, 1, 2, 5, 10, 20, 50}

// volumeLinks are the links of one kind by percentage.
type volumeLinks struct {
	clear *chosenLink
	under []*chosenLink // of volumePercents; empty for a scenario with a clear sky
}

// ratesVolumes writes the distribution of each pass's bytes, and of their sum.
func ratesVolumes(j *ratesJob) (*sheet, error) {
	out := &sheet{name: "volumes", columns: []sheetColumn{
		wordsAs("row", "row"), wordsAs("station", "station"), wordsAs("aos_utc", "AOS UTC"), numbersAs("planned_bytes", "planned B", 0), numbersAs("clear_sky_bytes", "clear sky B", 0),
		numbersAs("mean_bytes", "mean B", 0), numbersAs("sigma_bytes", "sigma B", 0), numbersAs("median_bytes", "median B", 0),
		numbersAs("reached_90_percent_bytes", "90 % B", 0), numbersAs("reached_95_percent_bytes", "95 % B", 0), numbersAs("reached_99_percent_bytes", "99 % B", 0),
	}}
	byStation := map[string]*volumeLinks{}
	var of []passvolume.Distribution
	planned, clear := 0.0, 0.0
	for i := range j.plans {
		f := &j.flights[i]
		links := byStation[f.station.Site.Name]
		if links == nil {
			var err error
			if links, err = newVolumeLinks(j.scenario, f.link); err != nil {
				return nil, &InputError{Err: err}
			}
			byStation[f.station.Site.Name] = links
		}
		r, err := links.distribute(f, j.plans[i])
		if err != nil {
			return nil, &InputError{Err: fmt.Errorf("pass over %s at %s: %w", f.station.Site.Name, utc(f.pass.AOS), err)}
		}
		of = append(of, r.Volumes)
		planned, clear = planned+j.plans[i].plan.Bytes, clear+r.ClearSkyBytes
		out.rows = append(out.rows, volumeRow("pass", f.station.Site.Name, utc(f.pass.AOS), j.plans[i].plan.Bytes, r.ClearSkyBytes, r.Volumes))
	}
	if len(of) > 0 {
		out.rows = append(out.rows,
			volumeRow("all, independent", "", "", planned, clear, passvolume.Independent(of)),
			volumeRow("all, one weather", "", "", planned, clear, passvolume.Dependent(of)))
	}
	out.notes = []string{
		"the schedule is sent as planned; what gets through is by the average year's statistics of the path, fully correlated within a pass",
		"nothing counts in the worst 0.01 % of the time; above 50 % the attenuation of 50 % is held",
	}
	return out, nil
}

func volumeRow(row, station, aos string, planned, clear float64, d passvolume.Distribution) []any {
	return []any{row, station, aos, planned, clear, d.Mean(), d.Sigma(), d.ReachedWith(0.5), d.ReachedWith(0.9), d.ReachedWith(0.95), d.ReachedWith(0.99)}
}

// newVolumeLinks prepares a link under every percentage and under a clear sky.
func newVolumeLinks(s *scenario.Scenario, c *chosenLink) (*volumeLinks, error) {
	if s.Path.ClearSky {
		return &volumeLinks{clear: c}, nil
	}
	out := &volumeLinks{}
	under := func(change func(*scenario.PathChoice)) (*chosenLink, error) {
		other := *s
		change(&other.Path)
		link := *c
		link.clear = nil
		return &link, link.prepare(newSkies(&other))
	}
	var err error
	if out.clear, err = under(func(p *scenario.PathChoice) { p.ClearSky = true }); err != nil {
		return nil, err
	}
	for _, q := range volumePercents {
		link, err := under(func(p *scenario.PathChoice) { p.Exceedance = propagation.Exceedance(q) * propagation.Percent })
		if err != nil {
			return nil, fmt.Errorf("path exceeded for %g %% of the year: %w", q, err)
		}
		out.under = append(out.under, link)
	}
	return out, nil
}

// distribute returns the distribution of a plan's bytes.
func (v *volumeLinks) distribute(f *rateFlight, r *ratedPass) (*passvolume.Result, error) {
	p := passvolume.Pass{Seconds: f.track.Seconds, Lock: r.relock.Seconds()}
	clear, err := v.levels(f, v.clear)
	if err != nil {
		return nil, err
	}
	p.CN0DBHz = clear
	p.NeedDBHz, p.RateBps, p.Changes = schedule(f.track, r)
	for i, link := range v.under {
		levels, err := v.levels(f, link)
		if err != nil {
			return nil, err
		}
		lost := make([]float64, len(clear))
		for k := range lost {
			if !math.IsInf(clear[k], -1) {
				lost[k] = clear[k] - levels[k]
			}
		}
		p.ExceedancePercent, p.AttenuationDB = append(p.ExceedancePercent, volumePercents[i]), append(p.AttenuationDB, lost)
	}
	return passvolume.Distribute(&p)
}

// levels returns C/N0 along a pass over another link, -Inf where it may not be used.
func (v *volumeLinks) levels(f *rateFlight, link *chosenLink) ([]float64, error) {
	p, err := link.link.Profile(f.eph, f.pass.AOS, f.pass.LOS, volumeStep(f.pass.Duration()))
	if err != nil {
		return nil, err
	}
	out := make([]float64, len(p.CN0DBHz))
	for i, c := range p.CN0DBHz {
		out[i] = c
		if math.IsNaN(c) || math.IsNaN(f.track.CN0DBHz[i]) {
			out[i] = math.Inf(-1)
		}
	}
	return out, nil
}

// schedule returns what a plan sends from each sample on: the C/N0 that it needs and
// its net rate, and where a step begins.
func schedule(t rateplan.Track, r *ratedPass) (need, rate []float64, changes []bool) {
	need, rate, changes = make([]float64, len(t.Seconds)), make([]float64, len(t.Seconds)), make([]bool, len(t.Seconds))
	step, last := 0, -1
	for i, sec := range t.Seconds {
		at := after(t.Start, sec)
		for step < len(r.plan.Steps) && !at.Before(r.plan.Steps[step].To) {
			step++
		}
		if step < len(r.plan.Steps) && !at.Before(r.plan.Steps[step].From) && r.plan.Steps[step].Mode >= 0 {
			s := &r.plan.Steps[step]
			need[i], rate[i], changes[i] = r.needAt(s), s.NetRate.BitsPerSecond(), step != last
			last = step
		}
	}
	return need, rate, changes
}
