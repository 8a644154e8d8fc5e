package reports

import "slantwise/reports/paper"

// LinkSet tells what the links of a set get of a pass that they share.
type LinkSet struct {
	Name    string
	Rule    string // how they share it, in words
	Antenna string // of the station that takes them all
	Shares  []LinkShare
}

// LinkShare is a link's part of a pass, beside what it would have alone.
type LinkShare struct {
	Link                     string
	Up                       bool
	Seconds, Bytes           float64
	AloneSeconds, AloneBytes float64
}

type linkSetView struct {
	Name, Rule, Antenna string
	Rows                []linkShareView
}

type linkShareView struct{ Link, Direction, Time, Volume, AloneTime, AloneVolume string }

func linkSetViews(sets []LinkSet) []linkSetView {
	var out []linkSetView
	for _, s := range sets {
		v := linkSetView{Name: s.Name, Rule: s.Rule, Antenna: s.Antenna}
		for _, x := range s.Shares {
			v.Rows = append(v.Rows, linkShareView{x.Link, x.direction(), fixed(x.Seconds, 1), withUnit(x.Bytes, byteScales), fixed(x.AloneSeconds, 1), withUnit(x.AloneBytes, byteScales)})
		}
		out = append(out, v)
	}
	return out
}

func (x *LinkShare) direction() string {
	if x.Up {
		return "up"
	}
	return "down"
}

// on writes the set on paper.
func (v *linkSetView) on(d *paper.Document) {
	t := paper.Table{Corner: "link", Heads: []string{"direction", "time, s", "volume", "alone, s", "alone, volume"}}
	for _, r := range v.Rows {
		t.Rows = append(t.Rows, paper.Row{Name: r.Link, Cells: []string{r.Direction, r.Time, r.Volume, r.AloneTime, r.AloneVolume}})
	}
	d.Heading("Shared among the links of " + v.Name)
	d.Paragraph("At " + v.Antenna + ", " + v.Rule + ".")
	d.Table(t)
}

type linkSetJSON struct {
	Set     string          `json:"set"`
	Rule    string          `json:"rule"`
	Antenna string          `json:"antenna"`
	Shares  []linkShareJSON `json:"shares"`
}

type linkShareJSON struct {
	Link         string `json:"link"`
	Direction    string `json:"direction"`
	Seconds      number `json:"seconds"`
	Bytes        number `json:"bytes"`
	AloneSeconds number `json:"alone_seconds"`
	AloneBytes   number `json:"alone_bytes"`
}

func linkSetsOf(sets []LinkSet) []linkSetJSON {
	out := []linkSetJSON{}
	for _, s := range sets {
		one := linkSetJSON{Set: s.Name, Rule: s.Rule, Antenna: s.Antenna, Shares: []linkShareJSON{}}
		for _, x := range s.Shares {
			one.Shares = append(one.Shares, linkShareJSON{x.Link, x.direction(), number{x.Seconds, 1}, number{x.Bytes, 0}, number{x.AloneSeconds, 1}, number{x.AloneBytes, 0}})
		}
		out = append(out, one)
	}
	return out
}
