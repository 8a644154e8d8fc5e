package reports

import (
	"bytes"
	"html/template"
	"slices"
	"strconv"
	"strings"
	"time"
)

// indexView is what the template of the index shows.
type indexView struct {
	pageView
	Heading               string
	From, To, Horizon     string
	Rows                  []rowView
	Spacecraft, Stations  []string
	Count                 stateCounts
	Best                  []rowView
	HasRadio              bool
	Chart                 bool
	Warnings              []Note
	Assumptions, Defaults []Note
	CSV, JSON             template.URL
	PDF                   string        // the file beside the page; empty: none
	Drawing               template.HTML // the overview on a page without script; else empty
	Sky                   string        // what the path in the numbers is; empty: no row has one
	Lacks                 []string      // what is missing where
}

// stateCounts says how many passes there are, and how many pages of each kind: a pass
// with several links has several.
type stateCounts struct{ Passes, All, Throughout, Partly, Never, Without int }

// rowView is a line of the index; the second of each pair is what the page's script
// sorts by.
type rowView struct {
	Page, Spacecraft, Station, Link, Mode string
	UTC, LOS, Local                       string
	AOSSort                               int64
	Duration, Elevation, Closed           string
	DurationSort, ClosedSort              string
	Least, Greatest                       string
	LeastSort, GreatestSort               string
	ModeVolume, Achievable                string
	ModeSort, AchievableSort              string
	ClearLeast, ClearVolume               string // empty: no clear sky beside it
	Plan, PlanShare                       string // bytes at the rate plan and percent of free switching; empty: none
	Sure                                  string // plus-minus of AOS and LOS; empty: not known
	Narrow                                string // for how long the beam is too narrow to be sure of; empty: never
	Vanish                                string // percent of probability that the pass takes place; empty: it does
	Sun                                   string // for how long it is in the beam; empty: it is not
	Verdict                               verdict
	Cut                                   string
	Share                                 string // width of the bar beside the volume, percent
}

// bestCount is how many passes the index names first.
const bestCount = 6

// newIndexView fills in what the index says.
func newIndexView(w *writer, rows []row) *indexView {
	r := w.report
	v := &indexView{
		pageView: w.page("", r.Title+": passes and downlinks"),
		Heading:  r.Title, From: dayClock(r.From), To: dayClock(r.To), Horizon: kindOfElevation(r.Horizon),
		Spacecraft: distinct(rows, func(r *row) string { return r.spacecraft }),
		Stations:   distinct(rows, func(r *row) string { return r.station }),
		CSV:        indexCSVFile, JSON: indexJSONFile, Chart: len(rows) > 0,
	}
	if w.options.PDF {
		v.PDF = paperFile
	}
	v.foot(w.indexBasis(), "assumptions-title")
	v.addRows(rows)
	v.addSky(rows)
	for _, n := range r.Notes {
		switch n.Kind {
		case Warning:
			v.Warnings = append(v.Warnings, n)
		case Assumption:
			v.Assumptions = append(v.Assumptions, n)
		case Default:
			v.Defaults = append(v.Defaults, n)
		}
	}
	return v
}

// indexBasis is what all passes stand on, with the defaults that hold for all of them.
func (w *writer) indexBasis() *Basis {
	b := w.report.Basis
	b.Defaults = defaultsIn(w.report.Notes)
	return &b
}

func indexPage(w *writer, v *indexView, rows []row) ([]byte, error) {
	if v.Chart && w.options.Static {
		o := overviewSketch(w.report, rows)
		s := sketch{wide: true, tall: o.Height(), draw: o.Draw}
		v.Drawing = s.markup(overviewCaption)
	} else if v.Chart {
		data, err := marshalDrawings(map[string]any{"drawings": []drawing{drawOverview(w.report, rows)}, "offsets": nil})
		if err != nil {
			return nil, err
		}
		v.Data = dataElement(data)
	}
	if w.options.OneFile {
		if err := v.inline(rows); err != nil {
			return nil, err
		}
	}
	var out bytes.Buffer
	err := pageTemplates().ExecuteTemplate(&out, "index.html", v)
	return out.Bytes(), err
}

// inline puts the index's files into it.
func (v *indexView) inline(rows []row) error {
	c, err := indexCSV(rows)
	if err != nil {
		return err
	}
	j, err := indexJSON(rows)
	v.CSV, v.JSON = dataAddress("text/csv", c), dataAddress("application/json", j)
	return err
}

func (v *indexView) addRows(rows []row) {
	greatest := map[string]float64{}
	passes := map[string]bool{}
	for i := range rows {
		r := &rows[i]
		passes[strings.Join([]string{r.spacecraft, r.station, utcText(r.aos)}, "\x00")] = true
		if finite(r.modeBytes) {
			greatest[r.spacecraft] = max(greatest[r.spacecraft], r.modeBytes)
		}
	}
	v.Count.Passes = len(passes)
	for i := range rows {
		v.Rows = append(v.Rows, newRowView(&rows[i], greatest[rows[i].spacecraft]))
		v.Count.All++
		switch rows[i].verdict.state {
		case closesThrough:
			v.Count.Throughout++
		case closesPartly:
			v.Count.Partly++
		case neverCloses:
			v.Count.Never++
		default:
			v.Count.Without++
		}
	}
	v.HasRadio = v.Count.Without < v.Count.All
	for _, i := range bestRows(rows, len(v.Spacecraft) > 1) {
		v.Best = append(v.Best, v.Rows[i])
	}
}

// bestRows returns the passes that bring most in the chosen mode, best first: one of
// each spacecraft, so that the fastest transmitter does not hide the others, or the
// best of the only one.
func bestRows(rows []row, oneEach bool) []int {
	var order []int
	for i := range rows {
		if rows[i].modeBytes > 0 {
			order = append(order, i)
		}
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch x, y := rows[a].modeBytes, rows[b].modeBytes; {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
	if oneEach {
		seen := map[string]bool{}
		order = slices.DeleteFunc(order, func(i int) bool {
			again := seen[rows[i].spacecraft]
			seen[rows[i].spacecraft] = true
			return again
		})
	}
	return order[:min(bestCount, len(order))]
}

func newRowView(r *row, greatest float64) rowView {
	v := rowView{
		Page: passFolder + "/" + r.page + ".html", Spacecraft: r.spacecraft, Station: r.station, Link: r.link, Mode: r.mode,
		UTC: dayClock(r.aos), LOS: clock(r.los), Local: localText(r.aos, r.zone, clockLayout), AOSSort: r.aos.UnixMilli(),
		Duration: span(r.los.Sub(r.aos)), DurationSort: sortKey(r.los.Sub(r.aos).Seconds(), 3),
		Elevation: fixed(r.maxElevationDeg, 1),
		Closed:    r.verdict.Closed(), ClosedSort: sortKey(r.closedSeconds(), 3),
		Least: fixed(r.least, 1), LeastSort: sortKey(r.least, 3),
		Greatest: fixed(r.greatest, 1), GreatestSort: sortKey(r.greatest, 3),
		ModeVolume: withUnit(r.modeBytes, byteScales), ModeSort: sortKey(r.modeBytes, 0),
		Achievable: withUnit(r.achievableBytes, byteScales), AchievableSort: sortKey(r.achievableBytes, 0),
		Verdict: r.verdict,
		Cut:     map[string]string{"aos": "begins before the window", "los": "ends after the window", "both": "lasts beyond the window"}[r.cut],
	}
	if finite(r.clearModeBytes) {
		v.ClearLeast, v.ClearVolume = fixed(r.clearLeast, 1), withUnit(r.clearModeBytes, byteScales)
	}
	if r.plan != nil {
		v.Plan, v.PlanShare = withUnit(r.plan.Bytes, byteScales), fixed(100*r.plan.ShareOfFree, 0)
	}
	if r.sunInBeam > 0 {
		v.Sun = span(time.Duration(r.sunInBeam * float64(time.Second)))
	}
	if s := r.surety; s != nil {
		v.Sure = edgesText(s.AOS, s.LOS)
		if s.MayVanish {
			v.Vanish = fixed(100*s.Existence, 0)
		}
	}
	if r.beamUnsure > 0 {
		v.Narrow = span(time.Duration(r.beamUnsure * float64(time.Second)))
	}
	if greatest > 0 && r.modeBytes > 0 {
		v.Share = string(appendFixed(nil, 100*r.modeBytes/greatest, 1))
	}
	return v
}

// sortKey writes a number for the page's script; empty sorts last.
func sortKey(v float64, decimals int) string {
	if !finite(v) {
		return ""
	}
	return strconv.FormatFloat(v, 'f', decimals, 64)
}

func distinct(rows []row, of func(*row) string) []string {
	var list []string
	seen := map[string]bool{}
	for i := range rows {
		if s := of(&rows[i]); !seen[s] {
			seen[s] = true
			list = append(list, s)
		}
	}
	slices.Sort(list)
	return list
}
