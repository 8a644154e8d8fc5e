package reports

import (
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// Surety is what the orbit's error does to a pass: one standard deviation each.
type Surety struct {
	AOS, LOS     float64 // s; NaN where the window cuts
	MaxElevation unit.Angle
	Existence    float64 // probability that the pass takes place
	MayVanish    bool    // it grazes the horizon, and AOS and LOS are not known to first order
	Basis        string  // where the figures come from

	// By event, AOS, culmination and LOS: of the direction over both axes together, and of the
	// received frequency (NaN without a radio).
	Direction [3]unit.Angle
	Doppler   [3]unit.Frequency

	Led         bool                // the orbit leads the antenna, so that the rest has a meaning
	Unsure      []downlink.Interval // while the beam is too narrow to be sure of
	NarrowFrom  time.Time           // from when on it is for a pass overhead; zero: not until NarrowUntil
	NarrowUntil time.Time           // how far ahead was looked
}

// suretyView is what a page says of it.
type suretyView struct {
	Edges     string   // "AOS ±0.19 s, LOS ±0.19 s"; empty where the window cuts both
	Elevation string   // deg
	Vanish    string   // probability that the pass takes place, percent; empty: it does
	Led       bool     // the antenna follows the prediction
	Unsure    []string // spans in UTC
	From      string   // UTC; empty: not to Until
	Until     string
	Percent   string
	Basis     string
}

func newSuretyView(p *Pass) *suretyView {
	s := p.Surety
	if s == nil {
		return nil
	}
	v := &suretyView{Elevation: fixed(s.MaxElevation.Degrees(), 3), Led: s.Led, Basis: s.Basis, Percent: fixed(100*downlink.SureProbability, 0)}
	v.Edges = edgesText(s.AOS, s.LOS)
	if s.MayVanish {
		v.Vanish = fixed(100*s.Existence, 0)
	}
	for _, in := range s.Unsure {
		v.Unsure = append(v.Unsure, utcClock(in.From, layoutOf(p))+" to "+utcClock(in.To, layoutOf(p)))
	}
	if !s.NarrowFrom.IsZero() {
		v.From = dayClock(s.NarrowFrom)
	} else {
		v.Until = dayClock(s.NarrowUntil)
	}
	return v
}

// edgesText writes the plus-minus of both ends, as far as they exist.
func edgesText(aos, los float64) string {
	text := ""
	if finite(aos) {
		text = "AOS " + plusMinus(aos)
	}
	if finite(los) {
		if text != "" {
			text += ", "
		}
		text += "LOS " + plusMinus(los)
	}
	return text
}

// plusMinus writes a spread in seconds with two digits or so.
func plusMinus(seconds float64) string {
	decimals := 2
	if seconds >= 10 {
		decimals = 0
	} else if seconds >= 1 {
		decimals = 1
	}
	return "±" + fixed(seconds, decimals) + " s"
}

// suretyRows are the lines of the table of events.
func suretyRows(s *Surety, radio bool) []budgetRow {
	times := budgetRow{Name: "time, plus-minus", Unit: "s"}
	for i, v := range [3]float64{s.AOS, 0, s.LOS} {
		text := "–"
		if i != 1 && finite(v) {
			text = fixed(v, 2)
		}
		times.Cells = append(times.Cells, text)
	}
	direction := budgetRow{Name: "direction, plus-minus", Unit: "deg"}
	doppler := budgetRow{Name: "Doppler, plus-minus", Unit: "Hz"}
	for i := range s.Direction {
		direction.Cells = append(direction.Cells, fixed(s.Direction[i].Degrees(), 3))
		doppler.Cells = append(doppler.Cells, fixed(s.Doppler[i].Hertz(), 0))
	}
	rows := []budgetRow{times, direction}
	if radio {
		rows = append(rows, doppler)
	}
	return rows
}

// beamFigure shows what the orbit's error does to the pointing, beside half the beam.
func beamFigure(p *Pass) timeFigure {
	f := p.Profile
	fig := timeFigure{
		id: "beam", title: "Pointing by the orbit's error", quantity: "angle", unit: "deg", fromZero: true,
		caption: "Error of the direction by the orbit alone, one standard deviation over both axes (solid), in degrees over UTC.",
		series:  []series{{name: "by the orbit", short: "pointing ±", dash: solid, values: f.OrbitTotalDeg, divisor: 1, decimals: 4}},
	}
	if p.Surety.Led {
		fig.caption = "Error of the direction by the orbit alone, one standard deviation over both axes (solid), and what it and the antenna's own error do not exceed with a probability of " +
			fixed(100*downlink.SureProbability, 0) + " % (dashed), in degrees over UTC. Over the dotted line, the half-power point, the beam is too narrow to be sure of."
		fig.series = append(fig.series,
			series{name: "orbit and antenna, " + fixed(100*downlink.SureProbability, 0) + " %", short: "kept to", dash: dashed, values: f.SureErrorDeg, divisor: 1, decimals: 4},
			series{name: "half the beam", dash: dotted, values: constant(f.HalfBeamDeg, len(f.Seconds)), divisor: 1, decimals: 4, still: true})
	}
	return fig
}

// suretyColumns are the columns of the samples.
func suretyColumns(p *Pass) []column {
	if p.Surety == nil {
		return nil
	}
	f := p.Profile
	return []column{{"orbit_pointing_along_deg", 4, f.OrbitAlongDeg}, {"orbit_pointing_deg", 4, f.OrbitTotalDeg},
		{"doppler_spread_hz", 1, f.DopplerSpreadHz}, {"pointing_error_95_deg", 4, f.SureErrorDeg}}
}

// suretyJSON stands in a pass's JSON.
type suretyJSON struct {
	AOS          number         `json:"aos_plus_minus_s"`
	LOS          number         `json:"los_plus_minus_s"`
	MaxElevation number         `json:"max_elevation_plus_minus_deg"`
	Existence    number         `json:"existence_probability"`
	Unsure       []intervalJSON `json:"beam_too_narrow"`
	NarrowFrom   string         `json:"beam_too_narrow_from_utc"` // for a pass overhead; empty: not known, or not within the time looked at
	Basis        string         `json:"basis"`
}

func suretyHead(s *Surety) *suretyJSON {
	if s == nil {
		return nil
	}
	out := &suretyJSON{AOS: number{s.AOS, 3}, LOS: number{s.LOS, 3}, MaxElevation: number{s.MaxElevation.Degrees(), 4},
		Existence: number{s.Existence, 4}, Unsure: intervals(s.Unsure), Basis: s.Basis}
	if !s.NarrowFrom.IsZero() {
		out.NarrowFrom = utcText(s.NarrowFrom)
	}
	return out
}
