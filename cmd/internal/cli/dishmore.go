package cli

import (
	"fmt"
	"math"

	"slantwise/downlink/sizing"
	"slantwise/downlink/tolerance"
	"slantwise/orbit/unit"
)

// chosen is the dish that maps, sensitivities and chances are about: the one that is
// asked for, else the least that meets all, else the one that comes nearest, else the
// greatest of the range.
func (d *dishStudy) chosen(a *sizing.Answer, asked *float64) unit.Length {
	switch {
	case asked != nil:
		return unit.Length(*asked)
	case a.Together.Diameter > 0:
		return a.Together.Diameter
	case a.Together.Nearest != nil:
		return a.Together.Nearest.Variant.Diameter
	}
	return d.sizing.Range.High
}

// sensitivities changes one thing after the other.
func (d *dishStudy) sensitivities(env *Env, a *sizing.Answer, asked *float64) ([]sizing.Sensitivity, error) {
	bar := env.startShares("sensitivities")
	defer bar.stop()
	list, err := d.study.Sensitivities(d.chosen(a, asked), d.sizing.Range, bar.tell)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return list, nil
}

// sensitivitySheet is the sensitivities, the dearest first.
func sensitivitySheet(list []sizing.Sensitivity) *sheet {
	out := &sheet{name: "sensitivities", columns: []sheetColumn{
		wordsAs("change", "change"), numbersAs("bytes_per_day", "bytes a day", 0), numbersAs("diameter_cm", "cm of dish", 2),
	}}
	for _, x := range list {
		out.rows = append(out.rows, []any{x.Name, x.BytesPerDay, 100 * x.Diameter.Metres()})
	}
	return out
}

// mapAxes are how the values of a map's axis are named.
var mapAxes = map[sizing.Axis]struct{ column, head, name, unit string }{
	sizing.PowerAxis:     {"power_change_db", "power dB", "transmit power, change", "dB"},
	sizing.ElevationAxis: {"least_elevation_raised_deg", "raised deg", "least elevation, raised by", "deg"},
	sizing.NoiseAxis:     {"noise_added_k", "noise K", "system noise, added", "K"},
	sizing.FrequencyAxis: {"frequency_mhz", "MHz", "frequency", "MHz"},
}

// mapSheet is a map, a row a cell.
func mapSheet(p *sizing.Plane) *sheet {
	axis := mapAxes[p.Axis]
	out := &sheet{name: "map", columns: []sheetColumn{
		numbersAs(axis.column, axis.head, 3), numbersAs("diameter_m", "diameter m", 4), numbersAs("bytes_per_day", "bytes a day", 0),
		numbersAs("over_worst_share", "over, share", 4), numbersAs("just_met_diameter_m", "just met m", 4),
	}}
	for k, v := range p.Values {
		for i, d := range p.Diameters {
			over := p.Over[k][i]
			if math.IsInf(over, 0) {
				over = none
			}
			out.rows = append(out.rows, []any{v, d.Metres(), p.Bytes[k][i], over, p.Just[k]})
		}
	}
	out.notes = append(out.notes, mapNote(p))
	return out
}

func mapNote(p *sizing.Plane) string {
	text := "latency and the worst week are not in the map"
	if p.Planned > 1 {
		text = fmt.Sprintf("every %d. pass is planned for the map; at the ends and in the middle of its diameters that is up to %.2f %% from the bytes of all passes; ", p.Planned, 100*p.Error) + text
	}
	for _, left := range p.LeftOut {
		text += "; left out " + left
	}
	if p.Axis == sizing.FrequencyAxis {
		text += "; the antennas keep their areas and the spacecraft its pattern and power"
	}
	return text
}

func (d *dishStudy) plane(env *Env, axis sizing.Axis) (*sizing.Plane, error) {
	bar := env.startShares("map of diameter and " + string(axis))
	defer bar.stop()
	p, err := d.study.Plane(axis, d.sizing.Range, d.refit, bar.tell)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return p, nil
}

// refit makes the places of the sites for another frequency; bands of antennas are those
// of what would be built for it.
func (d *dishStudy) refit(f unit.Frequency) ([]sizing.Place, error) {
	tx := *d.transmitter
	tx.Frequency = f
	sky := newSkies(d.scenario)
	var out []sizing.Place
	for i := range d.links {
		c, a := d.links[i], *d.links[i].antenna
		a.Bands = nil
		c.antenna = &a
		p, err := d.place(sky, &c, &tx)
		if err != nil {
			return nil, fmt.Errorf("station %s at %g MHz: %w", c.station.Site.Name, f.Megahertz(), err)
		}
		out = append(out, p)
	}
	return out, nil
}

// tolerances makes the distribution of the scenario's design control; nil where it has
// no tolerance.
func (d *dishStudy) tolerances() (*tolerance.Chance, error) {
	var items []tolerance.Item
	for _, s := range d.scenario.Control.Spreads {
		items = append(items, tolerance.Item{Name: s.Term, Favourable: s.Favourable, Adverse: s.Adverse, Law: s.Law, Source: s.Source})
	}
	if len(items) == 0 {
		return nil, nil
	}
	c, err := tolerance.NewChance(items)
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("design control: %w", err)}
	}
	return c, nil
}

func (d *dishStudy) chance(env *Env, a *sizing.Answer, asked *float64) (*sizing.Chance, error) {
	of, err := d.tolerances()
	if err != nil || of == nil || len(a.Verdicts) == 0 {
		return nil, err
	}
	bar := env.startShares("probabilities")
	defer bar.stop()
	c, err := d.study.Chance(of, d.chosen(a, asked), d.sizing.Range, bar.tell)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return c, nil
}

// chanceSheet is the probability of a dish, then the dish of each probability.
func chanceSheet(c *sizing.Chance) *sheet {
	out := &sheet{name: "chances", columns: []sheetColumn{
		wordsAs("row", "row"), numbersAs("probability_percent", "probability %", 2), numbersAs("diameter_m", "diameter m", 4), numbersAs("slack_db", "slack dB", 3),
	}}
	out.rows = append(out.rows, []any{"dish", 100 * c.Probability, c.Diameter.Metres(), float64(c.Slack)})
	for _, x := range c.Assured {
		out.rows = append(out.rows, []any{"assured", 100 * x.Probability, diameterOr(x.Diameter.Metres()), none})
	}
	out.notes = append(out.notes, "every tolerance of the design control, independent of one another; what was bought is one deviation for all links and the whole year")
	return out
}
