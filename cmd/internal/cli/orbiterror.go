package cli

import (
	"fmt"
	"math"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/station/pass"
)

// orbitError is what the scenario states of a spacecraft's position over the flight; nil
// where it states nothing or no orbit is flown.
func (k *skies) orbitError(c *scenario.Spacecraft) (*downlink.OrbitError, error) {
	if c.Uncertainty == nil || k.flight.From.IsZero() || len(c.Candidates) == 0 {
		return nil, nil
	}
	u, err := k.scenario.UncertaintyOver(c, k.flight.From, k.flight.To)
	if err != nil {
		return nil, err
	}
	return &downlink.OrbitError{Uncertainty: u, Probability: c.Uncertainty.Probability}, nil
}

// narrowAhead is how long after the window it is still told when a beam becomes too
// narrow.
const narrowAhead = 30 * 24 * time.Hour

// surety is how sure an answer about a pass is.
type surety struct {
	plusMinus *pass.PlusMinus // nil: not known
	unsure    []downlink.Interval
	narrow    time.Time // from when on the beam is too narrow for a pass overhead; zero: not in the time looked at
	led       bool      // the orbit leads the beam
}

// judge works the surety of a pass out; nil where the position is taken as exact.
func (c *chosenLink) judge(s *scenario.Scenario, eph *orbit.Ephemeris, p *pass.Pass, f *downlink.Profile) (*surety, error) {
	if c.orbit == nil {
		return nil, nil
	}
	g, err := pass.NewGauge(&c.station.Site, s.Horizon)
	if err != nil {
		return nil, err
	}
	m, err := g.PlusMinus(eph, p, c.orbit.Uncertainty)
	if err != nil {
		return nil, err
	}
	out := &surety{plusMinus: &m, unsure: f.BeamUnsure, led: f.BeamUnsure != nil}
	out.narrow, _ = c.link.TooNarrowFrom(c.link.LeastHeight(eph), s.Window.Start, s.Window.End.Add(narrowAhead))
	return out, nil
}

// plusMinusText writes seconds with their sign; empty where the window cuts.
func plusMinusText(seconds float64) string {
	if math.IsNaN(seconds) {
		return ""
	}
	return "±" + fixed(seconds, decimalsOf(seconds)) + " s"
}

// decimalsOf keeps two digits or so of a spread.
func decimalsOf(v float64) int {
	switch {
	case v >= 10:
		return 0
	case v >= 1:
		return 1
	}
	return 2
}

// lines says how sure a pass is, for the head of an answer.
func (u *surety) lines() []string {
	m := u.plusMinus
	var out []string
	edges := ""
	if t := plusMinusText(m.AOS); t != "" {
		edges += ", AOS " + t
	}
	if t := plusMinusText(m.LOS); t != "" {
		edges += ", LOS " + t
	}
	out = append(out, fmt.Sprintf("by the orbit's error, one standard deviation%s, culmination ±%.3f deg", edges, m.MaxElevation.Degrees()))
	if m.MayVanish() {
		out = append(out, vanishText(m))
	}
	for _, in := range u.unsure {
		out = append(out, fmt.Sprintf("the beam is too narrow to be sure of from %s to %s: inside the half-power points with a probability under %g", utc(in.From), utc(in.To), downlink.SureProbability))
	}
	switch {
	case !u.led:
	case u.narrow.IsZero():
		out = append(out, fmt.Sprintf("a pass overhead stays in the beam (probability %g) to 30 days after the window, as far as the uncertainty is known", downlink.SureProbability))
	default:
		out = append(out, fmt.Sprintf("for a pass overhead the beam is too narrow to be sure of from %s on", utc(u.narrow)))
	}
	return out
}

func vanishText(m *pass.PlusMinus) string {
	return fmt.Sprintf("the pass grazes the horizon, %.3f deg over it at culmination: it takes place with a probability of %.2f, and AOS and LOS may lie farther off than said", m.Headroom.Degrees(), m.Existence())
}

// into fills what a budget's JSON tells of it.
func (u *surety) into(out *budgetJSON) {
	if u == nil {
		return
	}
	m := u.plusMinus
	out.Pass.AOSPlusMinus, out.Pass.LOSPlusMinus = num(m.AOS, 3), num(m.LOS, 3)
	out.Pass.MaxElPlusMinus, out.Pass.Existence = num(m.MaxElevation.Degrees(), 4), num(m.Existence(), 4)
	out.Pass.BeamUnsure = intervalsOut(u.unsure)
	if !u.narrow.IsZero() {
		from := utc(u.narrow)
		out.NarrowFrom = &from
	}
}
