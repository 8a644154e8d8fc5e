package reports

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"time"
)

// row is what the index keeps of a pass once its page is written.
type row struct {
	page                       string
	spacecraft, station, link  string
	mode                       string
	zone                       *time.Location
	aos, culmination, los      time.Time
	maxElevationDeg            float64
	cut                        string
	verdict                    verdict
	least, greatest, required  float64
	modeBytes, achievableBytes float64
	path                       PathInfo
	clearLeast, clearModeBytes float64 // under a clear sky
	sunInBeam                  float64 // seconds
	surety                     *Surety
	beamUnsure                 float64 // seconds; NaN where it has no meaning
	plan                       *Plan
	logged                     bool          // in the logbook
	takenBytes, predictedBytes float64       // of its logbook entry; NaN: not known
	age                        time.Duration // of the element set at AOS
	inPlace                    bool          // no element set is flown
}

func newRow(page string, p *Pass) row {
	q := &p.Pass
	none := math.NaN()
	r := row{
		page: page, spacecraft: p.Spacecraft, station: p.Site.Name, zone: p.Site.TimeZone,
		aos: q.AOS, culmination: q.Culmination, los: q.LOS,
		maxElevationDeg: q.MaxElevation.Degrees(), cut: q.Cut.String(), verdict: verdictOf(p),
		least: none, greatest: none, required: none, modeBytes: none, achievableBytes: none,
		clearLeast: none, clearModeBytes: none, sunInBeam: none, surety: p.Surety, beamUnsure: none, logged: len(p.Measured) > 0, takenBytes: none, predictedBytes: none,
		age: p.Elements.Age, inPlace: p.Elements.InPlace != "",
	}
	for i := range p.Measured { // the last word on what was taken
		if m := &p.Measured[i]; finite(m.TakenBytes) {
			r.takenBytes, r.predictedBytes = m.TakenBytes, m.PredictedBytes
		}
	}
	if p.Surety != nil && p.Surety.Led {
		r.beamUnsure = 0
		for _, in := range p.Surety.Unsure {
			r.beamUnsure += in.To.Sub(in.From).Seconds()
		}
	}
	if p.Radio != nil {
		r.link, r.mode = p.Radio.Transmitter+" to "+p.Radio.Antenna, p.Radio.Mode
		r.least, r.greatest, r.required = p.Radio.Least.Value, p.Radio.Greatest.Value, p.Profile.RequiredMarginDB
		r.modeBytes, r.achievableBytes = p.Profile.Volume.ModeBytes, p.Profile.Volume.AchievableBytes
		r.path = p.Radio.Path
		if q := p.Radio.Plan; q != nil { // without its samples
			r.plan = &Plan{Bytes: q.Bytes, Changes: q.Changes, ShareOfFree: q.ShareOfFree, ShareOfShannon: q.ShareOfShannon}
		}
		if c := p.Radio.ClearSky; c != nil {
			r.clearLeast, r.clearModeBytes = p.Radio.ClearLeast.Value, c.Volume.ModeBytes
		}
		if in := p.Profile.SunInBeam; in != nil {
			r.sunInBeam = 0
			for _, s := range in {
				r.sunInBeam += s.To.Sub(s.From).Seconds()
			}
		}
	}
	return r
}

// field is a column of the index's files: a text or a number.
type field struct {
	name   string
	text   func(*row) string
	number func(*row) number
}

// indexFields names the columns of passes.csv and the fields of passes.json. They
// get added, not renamed.
var indexFields = []field{
	{name: "spacecraft", text: func(r *row) string { return r.spacecraft }},
	{name: "station", text: func(r *row) string { return r.station }},
	{name: "link", text: func(r *row) string { return r.link }},
	{name: "mode", text: func(r *row) string { return r.mode }},
	{name: "aos_utc", text: func(r *row) string { return utcText(r.aos) }},
	{name: "culmination_utc", text: func(r *row) string { return utcText(r.culmination) }},
	{name: "los_utc", text: func(r *row) string { return utcText(r.los) }},
	{name: "cut", text: func(r *row) string { return r.cut }},
	{name: "duration_s", number: func(r *row) number { return number{r.los.Sub(r.aos).Seconds(), 3} }},
	{name: "max_elevation_deg", number: func(r *row) number { return number{r.maxElevationDeg, 4} }},
	{name: "link_state", text: func(r *row) string { return r.verdict.Key() }},
	{name: "closes_s", number: func(r *row) number { return number{r.closedSeconds(), 3} }},
	{name: "least_margin_db", number: func(r *row) number { return number{r.least, 3} }},
	{name: "greatest_margin_db", number: func(r *row) number { return number{r.greatest, 3} }},
	{name: "required_margin_db", number: func(r *row) number { return number{r.required, 3} }},
	{name: "mode_bytes", number: func(r *row) number { return number{r.modeBytes, 0} }},
	{name: "achievable_bytes", number: func(r *row) number { return number{r.achievableBytes, 0} }},
	{name: "page", text: func(r *row) string { return passFolder + "/" + r.page + ".html" }},
	{name: "exceeded_percent", number: func(r *row) number { return exceeded(&r.path) }},
	{name: "missing", text: func(r *row) string { return strings.Join(r.path.Missing, " ") }},
	{name: "clear_sky_least_margin_db", number: func(r *row) number { return number{r.clearLeast, 3} }},
	{name: "clear_sky_mode_bytes", number: func(r *row) number { return number{r.clearModeBytes, 0} }},
	{name: "sun_in_beam_s", number: func(r *row) number { return number{r.sunInBeam, 3} }},
	{name: "plan_bytes", number: func(r *row) number { return r.planned(func(p *Plan) float64 { return p.Bytes }, 0) }},
	{name: "plan_share_of_free_switching_percent", number: func(r *row) number { return r.planned(func(p *Plan) float64 { return 100 * p.ShareOfFree }, 2) }},
	{name: "plan_share_of_shannon_percent", number: func(r *row) number { return r.planned(func(p *Plan) float64 { return 100 * p.ShareOfShannon }, 2) }},
	{name: "plan_changes", number: func(r *row) number { return r.planned(func(p *Plan) float64 { return float64(p.Changes) }, 0) }},
	{name: "aos_plus_minus_s", number: func(r *row) number { return r.sure(func(s *Surety) float64 { return s.AOS }, 3) }},
	{name: "los_plus_minus_s", number: func(r *row) number { return r.sure(func(s *Surety) float64 { return s.LOS }, 3) }},
	{name: "existence_probability", number: func(r *row) number { return r.sure(func(s *Surety) float64 { return s.Existence }, 4) }},
	{name: "beam_too_narrow_s", number: func(r *row) number { return number{r.beamUnsure, 3} }},
}

// planned is a number of the rate plan; it does not exist without one.
func (r *row) planned(of func(*Plan) float64, decimals int) number {
	if r.plan == nil {
		return number{math.NaN(), 0}
	}
	return number{of(r.plan), decimals}
}

// sure is a number of the surety; it does not exist without one.
func (r *row) sure(of func(*Surety) float64, decimals int) number {
	if r.surety == nil {
		return number{math.NaN(), 0}
	}
	return number{of(r.surety), decimals}
}

func (r *row) closedSeconds() float64 {
	if r.verdict.state > neverCloses {
		return math.NaN()
	}
	return r.verdict.closed.Seconds()
}

// indexCSV returns the table of the index.
func indexCSV(rows []row) ([]byte, error) {
	var out bytes.Buffer
	w := csv.NewWriter(&out)
	record := make([]string, len(indexFields))
	for k, f := range indexFields {
		record[k] = f.name
	}
	err := w.Write(record)
	for i := range rows {
		for k, f := range indexFields {
			switch {
			case f.text != nil:
				record[k] = f.text(&rows[i])
			case finite(f.number(&rows[i]).v):
				n := f.number(&rows[i])
				record[k] = string(appendFixed(nil, n.v, n.decimals))
			default:
				record[k] = ""
			}
		}
		if err == nil {
			err = w.Write(record)
		}
	}
	w.Flush()
	if err == nil {
		err = w.Error()
	}
	return out.Bytes(), err
}

// indexJSON returns the same as JSON, an object a pass, fields in the CSV's order.
func indexJSON(rows []row) ([]byte, error) {
	dst := []byte(`{"passes":[`)
	for i := range rows {
		dst = append(comma(dst, i), '\n')
		for k, f := range indexFields {
			dst = append(dst, []byte{'{', ','}[min(k, 1)])
			dst = append(append(append(dst, '"'), f.name...), `":`...)
			var v any
			if f.text != nil {
				v = f.text(&rows[i])
			} else {
				v = f.number(&rows[i])
			}
			one, err := json.Marshal(v)
			if err != nil {
				return nil, err
			}
			dst = append(dst, one...)
		}
		dst = append(dst, '}')
	}
	return append(dst, "\n]}\n"...), nil
}
