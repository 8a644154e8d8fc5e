package cli

import (
	"fmt"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/tuning"
	"slantwise/orbit/unit"
	"slantwise/reports"
)

// reportUplink is an uplink and an antenna that can send it, with the modes that compete.
type reportUplink struct{ modes []chosenLink }

// uplinksBetween makes every uplink that the antennas' transmit sides allow.
func (p *reportPlan) uplinksBetween(k *skies, craft *reportCraft, st *reportSite, mode string) []reportUplink {
	var out []reportUplink
	for u := range craft.Uplinks {
		up := &craft.Uplinks[u]
		for a := range st.Antennas {
			if st.Antennas[a].Transmit == nil {
				continue
			}
			var one reportUplink
			for _, m := range competing(up.Modes, mode) {
				c := chosenLink{spacecraft: craft.Spacecraft, station: st.Station, refraction: st.refraction, transmitter: &up.Transmitter, uplink: up, antenna: &st.Antennas[a], mode: m}
				if c.prepare(k) != nil {
					break // another antenna sends it, or none: the page then has no such uplink
				}
				one.modes = append(one.modes, c)
			}
			if len(one.modes) > 0 {
				out = append(out, one)
			}
		}
	}
	return out
}

// addUplinks flies the pass of a page in the other direction.
func (p *reportPlan) addUplinks(out *reports.Pass, craft *reportCraft, page *reportPage) error {
	step := sampleStep(page.Duration())
	for i := range p.uplinks[page.Spacecraft][page.Site] {
		modes := p.uplinks[page.Spacecraft][page.Site][i].modes
		best, err := (&reportPage{Found: page.Found, link: &reportLink{modes: modes}}).bestMode(p.scenario, craft, step)
		if untold(err) {
			out.Notes = append(out.Notes, reports.Note{Kind: reports.Warning, About: "uplink " + modes[0].uplink.Name, Text: "no budget: " + err.Error()})
			continue
		}
		if err != nil {
			return err
		}
		u, err := reportedUplink(craft, page, best)
		if err != nil {
			return err
		}
		out.Uplinks = append(out.Uplinks, *u)
		about := "uplink " + u.Name
		for _, n := range append(best.link.linkNotes(), best.limits...) {
			if n.Kind != downlink.Default {
				out.Notes = append(out.Notes, reports.Note{Kind: noteKinds[n.Kind], About: about, Text: n.Text})
			}
		}
		if n := len(best.results); n > 1 {
			out.Notes = append(out.Notes, reports.Note{Kind: reports.Assumption, About: about,
				Text: fmt.Sprintf("of %d modes, %s would carry the most bytes in this pass, held from AOS to LOS; --mode takes another", n, u.Mode)})
		}
	}
	return nil
}

func reportedUplink(craft *reportCraft, page *reportPage, best *modeOnPass) (*reports.Uplink, error) {
	c, f := best.link, best.profile
	u := &reports.Uplink{
		Name: c.uplink.Name, Antenna: c.antenna.Name, Frequency: c.uplink.Frequency, DataRate: f.DataRate, RequiredMarginDB: f.RequiredMarginDB,
		ReceivedDBm: f.ReceivedPowerDBm, MarginDB: f.MarginDB, SendShiftHz: make([]float64, len(f.Seconds)), Works: f.Volume.Closes,
	}
	if c.mode != nil {
		u.Mode, u.ModeText = c.mode.Name, c.mode.Modulation+", "+c.mode.Coding
	}
	for i, rate := range f.RangeRateKmS {
		t := after(f.Start, f.Seconds[i])
		wanted := u.Frequency + c.uplink.Oscillator.OffsetAt(t)
		u.SendShiftHz[i] = (tuning.SendFor(wanted, unit.Speed(rate*1000)) - u.Frequency).Hertz()
	}
	u.Least, u.Greatest = extremes(f)
	for _, at := range []struct {
		time time.Time
		into *downlink.Budget
	}{{page.AOS, &u.AOS}, {page.Culmination, &u.Culmination}, {u.Least.Time, &u.LeastMargin}} {
		if at.time.IsZero() {
			continue
		}
		b, err := c.budgetAt(craft, at.time)
		if err != nil {
			return nil, err
		}
		*at.into = *b
	}
	if rad, ok := c.radiation(); ok {
		r := &reports.Radiation{Radiation: rad, Caution: radiationCaution}
		for _, d := range radiationDistances {
			r.At = append(r.At, reports.Density{Distance: d, WattsM2: rad.DensityAt(d)})
		}
		u.Radiation = r
	}
	return u, nil
}

// budgetAt is the budget of a link at an instant of the window.
func (c *chosenLink) budgetAt(craft *reportCraft, t time.Time) (*downlink.Budget, error) {
	e := craft.ephemeris
	g, _ := c.link.GeometryOf(t, e.StateAt(max(0, min(e.Seconds(t), e.Span()))))
	b, err := c.link.At(g)
	if err != nil {
		return nil, fmt.Errorf("at %s: %w", utc(t), err)
	}
	return b, nil
}
