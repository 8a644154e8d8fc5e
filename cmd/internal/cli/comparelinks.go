package cli

import (
	"fmt"
	"math"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
)

// side flies the transmitter of margins and bytes and the uplink, where they are.
func (o *compareOptions) side(s *scenario.Scenario, c *scenario.Spacecraft, stations []scenario.Station) (*comparedSide, error) {
	out := &comparedSide{links: map[string]map[time.Time]compared{}}
	tx := o.transmitterOf(c)
	switch {
	case tx != nil:
		if err := out.flyDown(s, c, tx, stations); err != nil {
			return nil, err
		}
	case len(c.Transmitters) == 0:
		out.notes = append(out.notes, "no margins and bytes: it has no transmitter")
	default:
		out.notes = append(out.notes, "no margins and bytes: name one of its transmitters by --transmitter")
	}
	if u := o.uplinkOf(c); u != nil {
		return out, out.flyUp(s, c, u, stations)
	}
	return out, nil
}

// flyDown fills in margins and bytes.
func (s *comparedSide) flyDown(sc *scenario.Scenario, c *scenario.Spacecraft, tx *downlink.Transmitter, stations []scenario.Station) error {
	planner, err := newRatePlanner(tx, &c.RatePlan, nil)
	if err != nil {
		return err
	}
	flights, notes, err := rateFlights(sc, c, tx, stations)
	if err != nil {
		return err
	}
	s.notes = append(s.notes, notes...)
	if err := planner.settle(tracksOf(flights)); err != nil {
		return &InputError{Err: err}
	}
	plans, err := planAll(planner, flights)
	if err != nil {
		return err
	}
	for i := range flights {
		s.put(flights[i].station.Site.Name, flights[i].pass.AOS, func(one *compared) {
			one.marginDB, one.bytes = highestOf(flights[i].profile.MarginDB), plans[i].plan.Bytes
		})
	}
	return nil
}

// flyUp fills in the margins of an uplink in its first mode, from the first antenna of
// each station that can send it.
func (s *comparedSide) flyUp(sc *scenario.Scenario, c *scenario.Spacecraft, u *downlink.Receiver, stations []scenario.Station) error {
	sky := newSkies(sc)
	for k := range stations {
		st := &stations[k]
		link := sendingLink(sky, c, u, st)
		if link == nil {
			continue // it can send nothing there, which is the answer
		}
		eph, passes, err := passesOver(sc, c, st)
		if err != nil {
			return err
		}
		for i := range passes {
			p := &passes[i]
			f, err := link.link.Profile(eph, p.AOS, p.LOS, volumeStep(p.Duration()))
			if untold(err) {
				s.notes = append(s.notes, fmt.Sprintf("no margin of uplink %s over %s at %s: %v", u.Name, st.Site.Name, utc(p.AOS), err))
				continue
			}
			if err != nil {
				return &InputError{Err: fmt.Errorf("%s over %s, uplink %s: %w", c.Name, st.Site.Name, u.Name, err)}
			}
			s.put(st.Site.Name, p.AOS, func(one *compared) { one.uplinkDB = highestOf(f.MarginDB) })
		}
	}
	return nil
}

// sendingLink prepares the uplink's first mode from the first antenna of the station that
// can send it; nil: none can.
func sendingLink(sky *skies, c *scenario.Spacecraft, u *downlink.Receiver, st *scenario.Station) *chosenLink {
	for a := range st.Antennas {
		if st.Antennas[a].Transmit == nil {
			continue
		}
		link := &chosenLink{spacecraft: c, station: st, transmitter: &u.Transmitter, uplink: u, antenna: &st.Antennas[a], mode: &u.Modes[0]}
		if link.prepare(sky) == nil {
			return link
		}
	}
	return nil
}

func highestOf(values []float64) float64 {
	highest := none
	for _, v := range values {
		if !math.IsNaN(v) && !(v <= highest) {
			highest = v
		}
	}
	return highest
}
