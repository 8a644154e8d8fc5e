package reports

import (
	"bytes"
	"html/template"
)

// passView is what the template of a pass page shows.
type passView struct {
	pageView
	Previous, Next         string // file names beside this page; empty at the ends of the list
	Spacecraft, Station    string
	Begin, End             string // UTC
	BeginISO, EndISO       string
	EndClock               string
	Local                  string
	Duration, CutText      string
	Highest, HighestToward string
	Verdict                verdict
	Link                   *linkView
	Element                elementView
	Events                 budgetView
	HasZone                bool
	Warnings               []Note
	Figures                []figureView
	Ground                 *groundView
	Sights                 []sightView // empty where there is none to draw
	Budget, Noise          budgetView
	Surety                 *suretyView // nil: the position is taken as exact
	Uplinks                []uplinkView
	LinkSets               []linkSetView
	Measured               *measuredView // nil: nothing was logged
	Modes                  []modeView    // empty where there was nothing to choose
	Doubts                 []Note        // of single budgets
	Assumptions, Defaults  []Note
	CSV, JSON              template.URL
	PDF                    string // the file beside the page; empty: none
	Stem                   string
}

// linkView is the answer about the radio link.
type linkView struct {
	Transmitter, Antenna, Mode, ModeText, Frequency string
	Closes                                          []string
	Of                                              string
	Least, Greatest, Required                       string
	HasMargin                                       bool
	Strongest                                       string // empty: not known
	ModeVolume, AchievableVolume                    string
	ModeRate                                        string
	Sky                                             skyView
	Plan                                            *planView
	Mount                                           *mountView
}

// modeView is a line of the table of modes.
type modeView struct {
	Name, Text, Rate, Closed, Margin, Volume string
	Chosen                                   bool
}

func modeViews(modes []ModeResult) []modeView {
	if len(modes) < 2 {
		return nil
	}
	list := make([]modeView, len(modes))
	for i, m := range modes {
		list[i] = modeView{
			Name: m.Name, Text: m.Text, Rate: withUnit(m.Rate.BitsPerSecond(), rateScales), Closed: span(m.Closed),
			Margin: fixed(m.LeastMarginDB, 1) + " to " + fixed(m.GreatestMarginDB, 1), Volume: withUnit(m.Bytes, byteScales), Chosen: m.Chosen,
		}
	}
	return list
}

type elementView struct {
	Name, Epoch, Age, From, InPlace string
}

// passPage renders the page of a pass.
func passPage(w *writer, i int, p *Pass) ([]byte, error) {
	v := newPassView(p)
	v.pageView = w.page("../", v.Spacecraft+" over "+v.Station+", "+v.Begin+" UTC")
	v.Stem = w.names[i]
	if i > 0 {
		v.Previous = w.names[i-1]
	}
	if i+1 < len(w.names) {
		v.Next = w.names[i+1]
	}
	v.addNotes(p.Notes)
	basis := w.report.Basis.ofPass(p)
	v.foot(&basis, "assumptions-title")
	fr := newFrame(p)
	drawings, views := figures(p, fr)
	v.Figures, v.Ground, v.Sights = views, newGroundView(p), sightViews(p)
	if w.options.Static {
		addStatic(v.Figures, sketches(p, fr))
		drawings = nil
	}
	data, err := marshalDrawings(map[string]any{
		"drawings": drawings,
		"offsets":  offsets(p.Pass.AOS, p.Pass.LOS, p.Site.TimeZone, fr.base),
		"start":    fr.position(nearestSample(p.Profile, p.Pass.Culmination)),
	})
	if err != nil {
		return nil, err
	}
	if !w.options.Static {
		v.Data = dataElement(data)
	}
	v.CSV, v.JSON = template.URL(v.Stem+".csv"), template.URL(v.Stem+".json")
	v.Measured = newMeasuredView(w, v.Stem, p, fr)
	if w.options.PDF {
		v.PDF = v.Stem + ".pdf"
	}
	if w.options.OneFile {
		if v.CSV, v.JSON, err = inlineFiles(p); err != nil {
			return nil, err
		}
	}
	var out bytes.Buffer
	out.Grow(len(data) + 64<<10)
	err = pageTemplates().ExecuteTemplate(&out, "pass.html", v)
	return out.Bytes(), err
}

// inlineFiles returns the pass's CSV and JSON as addresses that hold them.
func inlineFiles(p *Pass) (csv, js template.URL, err error) {
	j, err := passJSON(p)
	if err != nil {
		return "", "", err
	}
	return dataAddress("text/csv", samplesCSV(p)), dataAddress("application/json", j), nil
}

func newPassView(p *Pass) *passView {
	q := &p.Pass
	v := &passView{
		Spacecraft: p.Spacecraft, Station: p.Site.Name,
		Begin: dayClock(q.AOS), End: dayClock(q.LOS), EndClock: clock(q.LOS),
		BeginISO: utcText(q.AOS), EndISO: utcText(q.LOS),
		Duration: span(q.Duration()),
		Highest:  fixed(q.MaxElevation.Degrees(), 1), HighestToward: direction(q.CulminationAzimuth.Degrees()),
		Verdict: verdictOf(p),
		HasZone: p.Site.TimeZone != nil,
		Element: elementView{p.Elements.Name, dayClock(p.Elements.Epoch), age(p.Elements.Age), p.Elements.Source.File, p.Elements.InPlace},
	}
	if v.Begin[:10] != v.End[:10] {
		v.EndClock = v.End
	}
	if v.HasZone {
		v.Local = localText(q.AOS, p.Site.TimeZone, layoutOf(p)) + " to " + localText(q.LOS, p.Site.TimeZone, layoutOf(p))
	}
	v.CutText = map[string]string{
		"aos":  "Already up when the window opens: the pass began earlier than shown.",
		"los":  "Still up when the window closes: the pass lasts longer than shown.",
		"both": "Up during the whole window: the pass begins earlier and ends later than shown.",
	}[q.Cut.String()]
	v.Events, v.Surety = eventTable(p), newSuretyView(p)
	v.Uplinks, v.LinkSets = uplinkViews(p), linkSetViews(p.LinkSets)
	if p.Radio != nil {
		v.Link = newLinkView(p)
		v.Budget, v.Noise, v.Modes = budgetTable(p), noiseTable(p), modeViews(p.Radio.Modes)
		for _, b := range budgetsOf(p) {
			for _, c := range b.budget.Cautions {
				v.Doubts = append(v.Doubts, Note{About: "at " + b.name, Text: c})
			}
		}
	}
	return v
}

func newLinkView(p *Pass) *linkView {
	r, f := p.Radio, p.Profile
	l := &linkView{
		Transmitter: r.Transmitter, Antenna: r.Antenna, Mode: r.Mode, ModeText: r.ModeText,
		Frequency: withUnit(r.Frequency.Hertz(), freqScales), Of: span(p.Pass.Duration()),
		Least: fixed(r.Least.Value, 1), Greatest: fixed(r.Greatest.Value, 1), Required: fixed(f.RequiredMarginDB, 1),
		HasMargin:        finite(r.Greatest.Value),
		ModeRate:         withUnit(f.DataRate.BitsPerSecond(), rateScales),
		ModeVolume:       withUnit(f.Volume.ModeBytes, byteScales),
		AchievableVolume: withUnit(f.Volume.AchievableBytes, byteScales),
		Sky:              newSkyView(p),
		Plan:             newPlanView(p),
		Mount:            newMountView(p),
	}
	if s := greatestOf(f.ReceivedPowerDBm); finite(s) {
		l.Strongest = fixed(s, 1)
	}
	for _, c := range f.Volume.Closes {
		l.Closes = append(l.Closes, utcClock(c.From, layoutOf(p))+" to "+utcClock(c.To, layoutOf(p)))
	}
	return l
}

// direction writes an azimuth with its point of the compass.
func direction(azimuthDeg float64) string {
	return fixed(azimuthDeg, 0) + "° (" + compass(azimuthDeg) + ")"
}

// addNotes sorts notes onto the page.
func (v *passView) addNotes(notes []Note) {
	for _, n := range notes {
		switch n.Kind {
		case Warning:
			v.Warnings = append(v.Warnings, n)
		case Assumption:
			v.Assumptions = append(v.Assumptions, n)
		case Default:
			v.Defaults = append(v.Defaults, n)
		}
	}
}
