package cli

import (
	"fmt"
	"math"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// acceptanceBytes are the bytes of the window's passes by the scenario's rules.
type acceptanceBytes struct{ promised, measured, low, high float64 }

// fly flies the passes of the window with the G/T as promised, as measured, and that less
// and plus its expanded uncertainty. A station that is better by some dB at every elevation hears
// as one that is sent so much more.
func (j *acceptanceJob) fly() error {
	if len(j.link.transmitter.Modes) == 0 {
		j.bytes = acceptanceBytes{none, none, none, none}
		j.notes = append(j.notes, "the transmitter has no mode: no bytes are counted")
		return nil
	}
	r := j.result
	for _, c := range []struct {
		dbk  float64
		into *float64
	}{{j.promised, &j.bytes.promised}, {r.DBK, &j.bytes.measured}, {r.DBK - r.Expanded(), &j.bytes.low}, {r.DBK + r.Expanded(), &j.bytes.high}} {
		var err error
		if *c.into, err = j.bytesWith(unit.DB(c.dbk - j.designDBK)); err != nil {
			return err
		}
	}
	return nil
}

func (j *acceptanceJob) bytesWith(better unit.DB) (float64, error) {
	tx := *j.link.transmitter
	if tx.EIRP != nil {
		more := tx.EIRP.Plus(better)
		tx.EIRP = &more
	} else {
		tx.Power = tx.Power.Plus(better)
	}
	st := *j.link.station
	st.Antennas = []station.Antenna{*j.link.antenna}
	s := *j.scenario
	s.Licences = nil // the power is changed to stand for the station's
	sum, passes, err := bytesOfWindow(&s, j.link.spacecraft, &tx, &st)
	j.passes = passes
	return sum, err
}

// bytesOfWindow plans the passes of the window over one station by the spacecraft's rate rules,
// with tx in place of its transmitters, and returns the sum of their bytes.
func bytesOfWindow(s *scenario.Scenario, of *scenario.Spacecraft, tx *downlink.Transmitter, st *scenario.Station) (sum float64, passes int, err error) {
	craft := *of
	craft.Transmitters = []downlink.Transmitter{*tx}
	planner, err := newRatePlanner(tx, &craft.RatePlan, nil)
	if err != nil {
		return 0, 0, err
	}
	flights, _, err := rateFlights(s, &craft, tx, []scenario.Station{*st})
	if err != nil {
		return 0, 0, err
	}
	if err := planner.settle(tracksOf(flights)); err != nil {
		return 0, 0, &InputError{Err: err}
	}
	plans, err := planAll(planner, flights)
	if err != nil {
		return 0, 0, err
	}
	for _, p := range plans {
		sum += p.plan.Bytes
	}
	return sum, len(plans), nil
}

// sheet lays out the uncertainty budget, then the answers.
func (j *acceptanceJob) sheet() *sheet {
	out := &sheet{name: "rows", columns: []sheetColumn{
		wordsAs("item", "item"), numbersAs("value", "value", 4), wordsAs("unit", "unit"), numbersAs("standard_uncertainty", "sigma", 4),
		numbersAs("sensitivity_db_per_unit", "dB per unit", 4), numbersAs("effect_db", "effect dB", 4),
	}}
	for _, t := range j.result.Terms {
		value, sigma, u, slope := t.Value, t.Sigma, t.Unit, t.Sensitivity
		if u == "W/(m2 Hz)" {
			value, sigma, u, slope = value*1e22, sigma*1e22, "SFU", slope*1e-22
		}
		out.rows = append(out.rows, []any{t.Name, value, u, sigma, slope, t.DB})
	}
	r := j.result
	line := func(item string, value float64, u string, sigma float64) {
		out.rows = append(out.rows, []any{item, value, u, sigma, none, none})
	}
	line("correction for the source's extent in the beam", r.Beam, "", none)
	line("measured G/T", r.DBK, "dB/K", r.Sigma)
	line("expanded uncertainty, factor 2", r.Expanded(), "dB", none)
	line("G/T as the scenario has it there", j.designDBK, "dB/K", none)
	line("promised G/T", j.promised, "dB/K", none)
	line("measured less promised", r.DBK-j.promised, "dB", r.Sigma)
	line("probability that the promise is kept", 100*r.KeptWith(j.promised), "%", none)
	line("bytes of the window with the promised G/T", j.bytes.promised, "B", none)
	line("bytes with the measured G/T", j.bytes.measured, "B", none)
	line("bytes with the measured less the expanded uncertainty", j.bytes.low, "B", none)
	line("bytes with the measured plus the expanded uncertainty", j.bytes.high, "B", none)
	out.notes = append(j.notes, j.verdict(), fmt.Sprintf("bytes: %d passes of the window by the scenario's rate rules, licences apart, all of C/N0 off by the difference at every elevation", j.passes))
	for _, t := range r.Terms {
		if t.Sigma == 0 {
			out.notes = append(out.notes, "no uncertainty is stated of: "+t.Name)
		}
	}
	return out
}

// verdict says in words what the measurement tells.
func (j *acceptanceJob) verdict() string {
	r := j.result
	off := r.DBK - j.promised
	switch {
	case math.Abs(off) <= r.Expanded():
		return fmt.Sprintf("undecided: the measured G/T is %+.2f dB from the promised one, within the expanded uncertainty of %.2f dB", off, r.Expanded())
	case off > 0:
		return fmt.Sprintf("kept: the measured G/T is %.2f dB above the promised one, more than the expanded uncertainty of %.2f dB", off, r.Expanded())
	}
	return fmt.Sprintf("not kept: the measured G/T is %.2f dB below the promised one, more than the expanded uncertainty of %.2f dB", -off, r.Expanded())
}
