package cli

import (
	"math"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// spreadColumns follow the columns of a pointing file where the plus-minus is asked for:
// one standard deviation each; the direction along the apparent motion, over both axes together,
// and the received frequency.
var spreadColumns = []string{"pointing_along_plus_minus_deg", "pointing_plus_minus_deg", "doppler_plus_minus_hz"}

// pointingSure tells how sure the rows are.
type pointingSure struct {
	uncertainty orbit.Uncertainty
	frame       *station.Frame
	carrierHz   float64 // NaN without a transmitter
}

// sureOf prepares it; nil where the scenario states nothing and it is not asked for.
func (p *pointing) sureOf(env *Env, s *scenario.Scenario, o *pointingOptions) error {
	if p.spacecraft.Uncertainty == nil && !o.plusMinus {
		return nil
	}
	u, assumed, err := s.AssumedUncertainty(p.spacecraft, p.from, p.to)
	if err != nil {
		return &InputError{Err: err}
	}
	if _, err := u.At(p.from); err != nil {
		env.note("warning: no plus-minus at the first instant: %v", err)
	}
	if assumed {
		env.note("position_uncertainty left out: by the age of the element set, common practice for low orbits, no measurement")
	}
	env.note("the position of %s is uncertain %s", printable(p.spacecraft.Name), u.Basis())
	p.sure = &pointingSure{uncertainty: u, frame: &p.frame, carrierHz: math.NaN()}
	if p.transmitter != nil {
		p.sure.carrierHz = p.transmitter.Frequency.Hertz()
	}
	return nil
}

// spread returns the numbers of spreadColumns for a row; NaN where they are not known.
func (q *pointingSure) spread(r *pointingRow) [3]float64 {
	s, err := q.uncertainty.At(r.at)
	if err != nil {
		return [3]float64{math.NaN(), math.NaN(), math.NaN()}
	}
	l := q.frame.LookSpread(r.state, s)
	return [3]float64{l.Along.Degrees(), l.Total().Degrees(), q.carrierHz * float64(l.RangeRate) / unit.SpeedOfLight}
}

// spreadDecimals are the decimals of spreadColumns.
var spreadDecimals = [3]int{6, 6, 3}

func (q *pointingSure) appendCSV(b []byte, r *pointingRow) []byte {
	for n, v := range q.spread(r) {
		b = appendFixed(append(b, ','), v, spreadDecimals[n])
	}
	return b
}

func (q *pointingSure) appendJSON(b []byte, r *pointingRow) []byte {
	for n, v := range q.spread(r) {
		b = append(append(append(b, `, "`...), spreadColumns[n]...), `": `...)
		before := len(b)
		if b = appendFixed(b, v, spreadDecimals[n]); len(b) == before {
			b = append(b, "null"...)
		}
	}
	return b
}
