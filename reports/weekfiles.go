package reports

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
)

// Names of the files of the summary.
const (
	weekFile      = "week.html"
	weekCSVFile   = "week.csv"
	weekJSONFile  = "week.json"
	weekPaperFile = "week.pdf"
)

// periodField is a column of the summary's files: a text or a number.
type periodField struct {
	name   string
	text   func(*period) string
	number func(*period) number
}

// periodFields names the columns of week.csv and the fields of the periods in week.json.
// They get added, not renamed.
var periodFields = []periodField{
	{name: "period", text: func(p *period) string { return p.kind }},
	{name: "from_utc", text: func(p *period) string { return utcText(p.from) }},
	{name: "to_utc", text: func(p *period) string { return utcText(p.to) }},
	{name: "covered_h", number: func(p *period) number { return number{p.to.Sub(p.from).Hours(), 3} }},
	{name: "spacecraft", text: func(p *period) string { return p.spacecraft }},
	{name: "station", text: func(p *period) string { return p.station }},
	{name: "passes", number: func(p *period) number { return number{float64(p.passes), 0} }},
	{name: "passes_worth_taking", number: func(p *period) number { return number{float64(p.worth), 0} }},
	{name: "passes_logged", number: func(p *period) number { return number{float64(p.logged), 0} }},
	{name: "contact_s", number: func(p *period) number { return number{p.contact.Seconds(), 3} }},
	{name: "closes_s", number: func(p *period) number { return number{p.closes.Seconds(), 3} }},
	{name: "mode_bytes", number: func(p *period) number { return number{p.bytes, 0} }},
	{name: "plan_bytes", number: func(p *period) number { return number{p.planBytes, 0} }},
	{name: "taken_bytes", number: func(p *period) number { return number{p.taken, 0} }},
	{name: "predicted_of_taken_bytes", number: func(p *period) number { return number{p.predicted, 0} }},
	{name: "least_age_days", number: func(p *period) number { return p.age(p.ageFrom.Hours() / 24) }},
	{name: "greatest_age_days", number: func(p *period) number { return p.age(p.ageTo.Hours() / 24) }},
}

func (p *period) age(days float64) number {
	if !p.aged {
		return number{math.NaN(), 0}
	}
	return number{days, 4}
}

// csv has a row for each period, over all and for each spacecraft and station, whose names
// are empty where all are meant.
func (w *week) csv() ([]byte, error) {
	var out bytes.Buffer
	c := csv.NewWriter(&out)
	record := make([]string, len(periodFields))
	for k, f := range periodFields {
		record[k] = f.name
	}
	err := c.Write(record)
	for i := range w.periods {
		p := &w.periods[i]
		for k, f := range periodFields {
			record[k] = ""
			if f.text != nil {
				record[k] = f.text(p)
			} else if n := f.number(p); finite(n.v) {
				record[k] = string(appendFixed(nil, n.v, n.decimals))
			}
		}
		if err == nil {
			err = c.Write(record)
		}
	}
	c.Flush()
	if err == nil {
		err = c.Error()
	}
	return out.Bytes(), err
}

// namedPassJSON is one of the best or worst passes.
type namedPassJSON struct {
	Spacecraft string   `json:"spacecraft"`
	Station    string   `json:"station"`
	AOS        string   `json:"aos_utc"`
	Page       string   `json:"page"`
	Bytes      number   `json:"mode_bytes"`
	Reasons    []string `json:"reasons"`
}

type weekJSON struct {
	FromUTC     string            `json:"from_utc"`
	ToUTC       string            `json:"to_utc"`
	Passes      int               `json:"passes"`
	Overlapping int               `json:"passes_overlapping"`
	Periods     []json.RawMessage `json:"periods"`
	Best        []namedPassJSON   `json:"best"`
	Worst       []namedPassJSON   `json:"worst"`
}

func (w *week) json() ([]byte, error) {
	out := weekJSON{FromUTC: utcText(w.from), ToUTC: utcText(w.to), Passes: len(w.passes), Overlapping: w.overlapping,
		Periods: []json.RawMessage{}, Best: w.named(w.best), Worst: w.named(w.worst)}
	for i := range w.periods {
		one, err := w.periods[i].json()
		if err != nil {
			return nil, err
		}
		out.Periods = append(out.Periods, one)
	}
	text, err := json.MarshalIndent(out, "", " ")
	return append(text, '\n'), err
}

// json is the period with its fields in the order of the CSV; empty names are null.
func (p *period) json() (json.RawMessage, error) {
	dst := []byte{'{'}
	for k, f := range periodFields {
		if k > 0 {
			dst = append(dst, ',')
		}
		dst = append(append(append(dst, '"'), f.name...), `":`...)
		var v any
		switch {
		case f.text == nil:
			v = f.number(p)
		case f.text(p) != "":
			v = f.text(p)
		}
		one, err := json.Marshal(v)
		if err != nil {
			return nil, err
		}
		dst = append(dst, one...)
	}
	return append(dst, '}'), nil
}

func (w *week) named(list []weekPass) []namedPassJSON {
	m := w.middles()
	out := []namedPassJSON{}
	for i := range list {
		p := &list[i]
		out = append(out, namedPassJSON{p.spacecraft, p.station, utcText(p.aos), passFolder + "/" + p.page + ".html", number{p.modeBytes, 0}, p.reasons(m[p.spacecraft])})
	}
	return out
}
