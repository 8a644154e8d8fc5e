package cli

import (
	"bytes"
	"encoding/json"
	"fmt"
	"slices"
	"strings"
)

// pathJSON is the JSON of a path; points hold pathColumns by name.
type pathJSON struct {
	Station     string           `json:"station"`
	ClearSky    bool             `json:"clear_sky"`
	Missing     []string         `json:"missing"`
	Points      []pathPointJSON  `json:"points"`
	Assumptions []budgetNoteJSON `json:"assumptions"`
}

// pathPointJSON writes the columns in their order.
type pathPointJSON struct{ q *pathPoint }

// MarshalJSON writes an object with pathColumns as its keys.
func (p pathPointJSON) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	for i, v := range p.q.numbers() {
		text, err := json.Marshal(nano(v))
		if err != nil {
			return nil, err
		}
		fmt.Fprintf(&b, "%c%q: %s", "{,"[min(i, 1)], pathColumns[i], text)
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

// write writes the points as CSV or JSON. Words for people go to stderr beside the
// CSV.
func (a *pathAnswer) write(env *Env, f format) error {
	if f == formatJSON {
		out := pathJSON{Station: a.target.station.Site.Name, ClearSky: a.target.spec.ClearSky,
			Missing: append([]string{}, a.missing()...), Points: []pathPointJSON{}, Assumptions: []budgetNoteJSON{}}
		for i := range a.points {
			out.Points = append(out.Points, pathPointJSON{&a.points[i]})
		}
		for _, n := range a.notes {
			out.Assumptions = append(out.Assumptions, budgetNoteJSON{n.Kind.String(), n.Text})
		}
		return writeJSON(env.Out, out)
	}
	for _, l := range a.head() {
		env.note("%s", printable(l))
	}
	missing := strings.Join(a.missing(), " ")
	return writeCSV(env.Out, append(slices.Clone(pathColumns), pathMissing), func(yield func([]string) bool) {
		for i := range a.points {
			var row []string
			for _, v := range a.points[i].numbers() {
				row = append(row, fixed(v, 6))
			}
			if !yield(append(row, missing)) {
				return
			}
		}
	})
}
