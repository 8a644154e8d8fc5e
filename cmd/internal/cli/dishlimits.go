package cli

import (
	"context"
	"fmt"
	"math"

	"slantwise/downlink/sizing"
	"slantwise/orbit/unit"
)

// askedDish is a dish that limits are told of.
type askedDish struct {
	name    string
	variant sizing.Variant
}

// limitDishes are the scenario's own dishes and the least that meets all, or the one that
// is asked about.
func (d *dishStudy) limitDishes(a *sizing.Answer, asked *float64) []askedDish {
	if asked != nil {
		return []askedDish{{"asked about", sizing.Variant{Diameter: unit.Length(*asked)}}}
	}
	out := []askedDish{{"yours", sizing.Variant{}}}
	if a.Together.Diameter > 0 {
		out = append(out, askedDish{"least that meets all", sizing.Variant{Diameter: a.Together.Diameter}})
	}
	return out
}

// limitList gathers the limits of one dish.
type limitList struct {
	dish     string
	diameter float64 // m; none where the sites' own differ
	sheet    *sheet
}

func (l *limitList) add(name string, value float64, u, meaning string) {
	l.sheet.rows = append(l.sheet.rows, []any{l.dish, l.diameter, name, value, u, meaning})
}

// limitSheet is what dishes allow, everything else as it is.
func (d *dishStudy) limitSheet(ctx context.Context, env *Env, a *sizing.Answer, asked *float64) (*sheet, error) {
	out := &sheet{name: "limits", columns: []sheetColumn{wordsAs("dish", "dish"), numbersAs("diameter_m", "diameter m", 4),
		wordsAs("limit", "limit"), numbersAs("value", "value", 4), wordsAs("unit", "unit"), wordsAs("meaning", "meaning")}}
	for _, x := range d.limitDishes(a, asked) {
		l := &limitList{dish: x.name, diameter: x.variant.Diameter.Metres(), sheet: out}
		if x.variant.Diameter == 0 {
			own, ok := d.study.Own()
			if l.diameter = own.Metres(); !ok {
				l.diameter = none
			}
		}
		if err := d.limitsOf(ctx, env, l, x.variant); err != nil {
			return nil, err
		}
	}
	d.altitudes = nil // years of other orbits
	return out, nil
}

// limitsOf adds the limits of one dish.
func (d *dishStudy) limitsOf(ctx context.Context, env *Env, l *limitList, v sizing.Variant) error {
	needs := d.sizing.Needs.List()
	slack, err := d.study.Slack(needs, v)
	if err != nil {
		return &InputError{Err: err}
	}
	l.add("slack", float64(slack), "dB", "so much worse every link may be until a requirement fails; negative: so much is missing")
	if tx := d.transmitter; tx.EIRP != nil {
		l.add("least EIRP", tx.EIRP.DBW()-float64(slack), "dBW", "with which all is just met")
	} else {
		l.add("least transmit power", tx.Power.Minus(slack).DBW(), "dBW", "with which all is just met")
	}
	if err := d.rateLimit(l, v); err != nil {
		return err
	}
	at := 30 * unit.Degree
	if m := d.sizing.Needs.Margin; m != nil {
		at = m.Elevation
		d.rangeLimit(l, v, m)
	}
	for i := range d.links {
		g, err := d.study.GOverT(i, v, at)
		if err != nil {
			return &InputError{Err: err}
		}
		l.add("worst G/T, "+d.links[i].station.Site.Name, float64(g-slack), "dB/K", fmt.Sprintf("at %g deg under a clear sky, where the dish has %.2f dB/K", at.Degrees(), float64(g)))
	}
	raise, ok, err := d.study.HighestRaise(needs, v)
	if err != nil {
		return &InputError{Err: err}
	}
	if !ok {
		raise = unit.Angle(none)
	}
	l.add("least elevation raised by", raise.Degrees(), "deg", "at every site, with which all is just met")
	km, err := d.altitudeLimit(ctx, env, needs, v)
	if err != nil {
		return err
	}
	l.add("greatest altitude", km, "km", "of a mean orbit of the same kind, up to which all is met")
	return nil
}

// rateLimit is the data rate that margin and availability allow the mode.
func (d *dishStudy) rateLimit(l *limitList, v sizing.Variant) error {
	radio := sizing.None()
	radio.Margin, radio.MarginShare, radio.Availability = d.sizing.Needs.Margin, d.sizing.Needs.MarginShare, d.sizing.Needs.Availability
	list := radio.List()
	if len(list) == 0 {
		return nil
	}
	slack, err := d.study.Slack(list, v)
	if err != nil {
		return &InputError{Err: err}
	}
	m, err := d.need(d.mode)
	if err != nil {
		return &InputError{Err: err}
	}
	l.add("data rate of mode "+d.mode.Name, m.InformationRate.BitsPerSecond()*slack.Ratio(), "bit/s", "with the same coding, at which margin and availability are just met")
	return nil
}

// rangeLimit is the distance at which the margin is just there.
func (d *dishStudy) rangeLimit(l *limitList, v sizing.Variant, m *sizing.MarginAt) {
	o, err := d.study.Outcome(v)
	if err != nil {
		return // it was evaluated before
	}
	over := o.MarginDB - float64(m.Margin)
	for i := range d.links {
		if slant, _, ok := d.flight.Sites[i].At(m.Elevation); ok {
			l.add("greatest range, "+d.links[i].station.Site.Name, slant.Kilometres()*math.Pow(10, over/20), "km",
				fmt.Sprintf("at %g deg with the margin just there and the same air, where the orbit has %.0f km", m.Elevation.Degrees(), slant.Kilometres()))
		}
	}
}
