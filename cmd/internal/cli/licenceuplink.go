package cli

import (
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/licence"
)

// licensedEnd is a transmitter or an uplink as a licence asks of it.
type licensedEnd struct {
	name string
	use  licence.Use
}

// endsOver lists a spacecraft's transmitters, and its uplinks where the station can send.
func endsOver(c *scenario.Spacecraft, st *scenario.Station) []licensedEnd {
	var out []licensedEnd
	for i := range c.Transmitters {
		out = append(out, licensedEnd{c.Transmitters[i].Name, licence.Downlink})
	}
	for i := range c.Uplinks {
		for a := range st.Antennas {
			l := chosenLink{uplink: &c.Uplinks[i], transmitter: &c.Uplinks[i].Transmitter, antenna: &st.Antennas[a]}
			if l.takesFrequency() == nil {
				out = append(out, licensedEnd{c.Uplinks[i].Name, licence.Uplink})
				break
			}
		}
	}
	return out
}

// addUplinkBreaches holds what stations send to a spacecraft to the licences.
func addUplinkBreaches(out *sheet, s *scenario.Scenario, c *scenario.Spacecraft, stations []scenario.Station) {
	for u := range c.Uplinks {
		up := &c.Uplinks[u]
		for k := range stations {
			told := map[string]bool{}
			for a := range stations[k].Antennas {
				l := chosenLink{spacecraft: c, uplink: up, transmitter: &up.Transmitter, antenna: &stations[k].Antennas[a]}
				if l.takesFrequency() != nil {
					continue
				}
				for _, r := range licencesFor(s, c.Name, up.Name) {
					for _, e := range l.emissions() {
						for _, b := range r.Breaches(e) {
							kind := "breach"
							if b.Unknown {
								kind = "not checked"
							}
							if key := r.Name + b.String(); !told[key] {
								told[key] = true
								out.rows = append(out.rows, []any{kind, r.Name, b.Rule, c.Name, up.Name, stations[k].Site.Name, "", "", "", none, b.Found})
							}
						}
					}
				}
			}
		}
	}
}
