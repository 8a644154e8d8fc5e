package reports

import (
	"slantwise/downlink"
)

// skyView says at the head of a page what the path in its numbers is.
type skyView struct {
	Clear                bool   // all numbers are those of a clear sky
	Percent              string // else: exceeded for this; empty without a path
	Missing, MissingText string
	Beside               *besideView // the clear sky beside it
	Bodies               []bodyView  // nil: not known
}

// besideView is the answer of the same pass under a clear sky.
type besideView struct{ Least, Greatest, ModeVolume, AchievableVolume string }

// bodyView tells when a body of the sky is in the beam.
type bodyView struct {
	Name string
	When []string // empty: never
}

func newSkyView(p *Pass) skyView {
	r := p.Radio
	v := skyView{Clear: r.Path.ClearSky, Missing: inWords(r.Path.Missing), MissingText: r.Path.MissingText}
	if !v.Clear && r.Path.ExceededPercent > 0 {
		v.Percent = percentText(&r.Path)
	}
	if c := r.ClearSky; c != nil {
		v.Beside = &besideView{
			Least: fixed(r.ClearLeast.Value, 1), Greatest: fixed(r.ClearGreatest.Value, 1),
			ModeVolume: withUnit(c.Volume.ModeBytes, byteScales), AchievableVolume: withUnit(c.Volume.AchievableBytes, byteScales),
		}
	}
	for _, b := range []struct {
		name string
		in   []downlink.Interval
	}{{"Sun", p.Profile.SunInBeam}, {"Moon", p.Profile.MoonInBeam}} {
		if b.in == nil {
			continue
		}
		body := bodyView{Name: b.name}
		for _, in := range b.in {
			body.When = append(body.When, clock(in.From)+" to "+clock(in.To))
		}
		v.Bodies = append(v.Bodies, body)
	}
	return v
}

// pathJSON is what the path in the numbers is.
type pathJSON struct {
	ClearSky        bool     `json:"clear_sky"`
	ExceededPercent number   `json:"exceeded_percent"` // of an average year; null under a clear sky or without a path
	Missing         []string `json:"missing"`
}

// clearJSON is the same pass under a clear sky.
type clearJSON struct {
	LeastMarginDB    number         `json:"least_margin_db"`
	LeastMarginUTC   string         `json:"least_margin_utc"`
	GreatestMarginDB number         `json:"greatest_margin_db"`
	GreatestUTC      string         `json:"greatest_margin_utc"`
	AchievableBytes  number         `json:"achievable_bytes"`
	ModeBytes        number         `json:"mode_bytes"`
	Closes           []intervalJSON `json:"closes"`
}

func pathOf(i *PathInfo) pathJSON {
	j := pathJSON{ClearSky: i.ClearSky, ExceededPercent: exceeded(i), Missing: []string{}}
	j.Missing = append(j.Missing, i.Missing...)
	return j
}

func clearOf(r *Radio) *clearJSON {
	c := r.ClearSky
	if c == nil {
		return nil
	}
	return &clearJSON{
		LeastMarginDB: number{r.ClearLeast.Value, 3}, LeastMarginUTC: utcText(r.ClearLeast.Time),
		GreatestMarginDB: number{r.ClearGreatest.Value, 3}, GreatestUTC: utcText(r.ClearGreatest.Time),
		AchievableBytes: number{c.Volume.AchievableBytes, 0}, ModeBytes: number{c.Volume.ModeBytes, 0},
		Closes: intervals(c.Volume.Closes),
	}
}

// intervals writes spans of time; none gives an empty list.
func intervals(list []downlink.Interval) []intervalJSON {
	out := []intervalJSON{}
	for _, in := range list {
		out = append(out, intervalJSON{utcText(in.From), utcText(in.To)})
	}
	return out
}
