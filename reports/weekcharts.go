package reports

import (
	"math"

	vector "slantwise/reports/drawing"
)

// mostSets is how many spacecraft a chart of the summary tells apart; of more it shows the
// sum alone.
const mostSets = 4

var barLooks = [mostSets]struct {
	tone vector.Tone
	fill vector.Fill
}{{vector.First, vector.Full}, {vector.Second, vector.Slanted}, {vector.First, vector.Blank}, {vector.Second, vector.Dots}}

var stemLooks = [mostSets]vector.StemSet{
	{Symbol: vector.Circle, Tone: vector.First}, {Symbol: vector.Diamond, Tone: vector.Second, Dash: vector.Dashed},
	{Symbol: vector.Ring, Tone: vector.First, Dash: vector.Dotted}, {Symbol: vector.OpenTriangle, Tone: vector.Second},
}

// sketches are the charts of the summary: volume by day and by pass, contact time, and how
// old the element sets are. What has no value has no chart.
func (w *week) sketches() []sketch {
	var list []sketch
	if len(w.passes) == 0 {
		return nil
	}
	days := w.of(dayKind)
	if len(days) > 1 {
		list = append(list, w.volumeByDay()...)
	}
	list = append(list, w.volumeByPass()...)
	if len(days) > 1 {
		list = append(list, w.contactByDay(days))
	}
	return append(list, w.ages()...)
}

// dayLabels are the days, with the hours that the window has of one that it cuts.
func dayLabels(days []period) []string {
	var out []string
	for _, d := range days {
		label := d.from.Format("01-02")
		if !d.whole {
			label += " (" + fixed(d.to.Sub(d.from).Hours(), 0) + " h)"
		}
		out = append(out, label)
	}
	return out
}

func (w *week) volumeByDay() []sketch {
	names := distinctOf(w.passes, func(r *row) string { return r.spacecraft })
	if len(names) > mostSets {
		names = []string{""}
	}
	chart := &vector.Bars{Name: "day, UTC"}
	var sets [][]float64
	for _, name := range names {
		var values []float64
		for _, p := range w.periods {
			if p.kind == dayKind && p.spacecraft == name && p.station == "" {
				values = append(values, p.bytes)
			}
		}
		sets = append(sets, values)
	}
	most := maxOf(sets...)
	if !finite(greatestOf(allOf(sets))) {
		return nil
	}
	sc := scaleFor(most, byteScales)
	for k, name := range names {
		for i := range sets[k] {
			sets[k][i] /= sc.divisor
		}
		chart.Sets = append(chart.Sets, vector.BarSet{Name: name, Tone: barLooks[k].tone, Fill: barLooks[k].fill, Values: sets[k]})
	}
	chart.Groups = dayLabels(w.of(dayKind))
	chart.Left = vector.NewAxis(axisName("volume", sc.unit), 0, max(most/sc.divisor, 1e-9), true)
	what := "by spacecraft"
	if len(names) == 1 && names[0] == "" {
		what = "of all spacecraft"
	}
	return []sketch{{id: "days", title: "Volume a day", wide: true, draw: chart.Draw,
		caption: "Volume of the passes that begin on a day, " + what + ", in " + sc.unit + ", each in the mode that brings most. A day that the window cuts has its hours beside it."}}
}

func allOf(lists [][]float64) []float64 {
	var out []float64
	for _, l := range lists {
		out = append(out, l...)
	}
	return out
}

func (w *week) volumeByPass() []sketch {
	names := distinctOf(w.passes, func(r *row) string { return r.spacecraft })
	axis, base := clockOver(w.from, w.to)
	chart := &vector.Stems{X: axis}
	most := 0.0
	for i := range w.passes {
		most = max(most, maxOf([]float64{w.passes[i].modeBytes}))
	}
	if most == 0 {
		return nil
	}
	sc := scaleFor(most, byteScales)
	if len(names) > mostSets {
		names = []string{""}
	}
	for k, name := range names {
		set := stemLooks[k]
		set.Name = name
		for i := range w.passes {
			if p := &w.passes[i]; (name == "" || p.spacecraft == name) && finite(p.modeBytes) {
				set.Stems = append(set.Stems, vector.Stem{X: p.aos.Sub(base).Seconds(), Y: p.modeBytes / sc.divisor})
			}
		}
		chart.Sets = append(chart.Sets, set)
	}
	chart.Left = vector.NewAxis(axisName("volume", sc.unit), 0, most/sc.divisor, true)
	return []sketch{{id: "each", title: "Volume of each pass", wide: true, draw: chart.Draw,
		caption: "Each pass at its AOS in UTC, in " + sc.unit + ", told by spacecraft through its symbol and the dash of its foot. The same passes stand in the table of the index."}}
}

func (w *week) contactByDay(days []period) sketch {
	var contact, closes []float64
	for _, d := range days {
		contact, closes = append(contact, d.contact.Minutes()), append(closes, d.closes.Minutes())
	}
	chart := &vector.Bars{Name: "day, UTC", Groups: dayLabels(days), Left: vector.NewAxis("time, min", 0, max(maxOf(contact), 1), true),
		Sets: []vector.BarSet{{Name: "in sight", Tone: vector.Second, Fill: vector.Slanted, Values: contact}, {Name: "the link closes", Tone: vector.First, Fill: vector.Full, Values: closes}}}
	return sketch{id: "contact", title: "Contact time a day", wide: true, draw: chart.Draw,
		caption: "Time that spacecraft are in sight of stations, and of it the time that their links close, in minutes, summed over all passes that begin on a day."}
}

// ages draws how old the element sets are at the passes of a day, from the youngest to the
// oldest.
func (w *week) ages() []sketch {
	axis, base := clockOver(w.from, w.to)
	chart := &vector.Stems{X: axis, Sets: []vector.StemSet{{Symbol: vector.Square, Tone: vector.First, Dash: vector.Dotted}}}
	var all []float64
	for _, d := range w.of(dayKind) {
		if !d.aged {
			continue
		}
		low, high := d.ageFrom.Hours()/24, d.ageTo.Hours()/24
		all = append(all, low, high)
		chart.Sets[0].Stems = append(chart.Sets[0].Stems, vector.Stem{X: d.from.Add(d.to.Sub(d.from) / 2).Sub(base).Seconds(), Y: (low + high) / 2, Spread: (high - low) / 2})
	}
	if len(all) == 0 {
		return nil
	}
	chart.Left = vector.NewAxis("age, days", min(leastOf(all), 0), math.Max(greatestOf(all), 0.1), true)
	return []sketch{{id: "ages", title: "Age of the element sets", wide: true, draw: chart.Draw,
		caption: "Age at AOS over the passes of a day, in days: the bar reaches from the youngest to the oldest set, the square is the middle between them. The older, the less sure are times and pointing."}}
}
