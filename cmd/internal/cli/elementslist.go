package cli

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// elementRow is an element set with what follows from it; NaN and the zero time
// stand for what does not exist.
type elementRow struct {
	elements.Chosen
	ageDays, perigeeKm, apogeeKm, periodMin float64
	node                                    time.Time
	used                                    bool // of the sets of its object, this one is flown
	remark                                  string
}

// elementRows computes the facts of every set; the caution of those in use.
func elementRows(sets []orbit.Elements, choice elements.Choice, at time.Time) []elementRow {
	used := map[orbit.Elements]elements.Chosen{}
	for _, c := range elements.Choose(sets, choice, at) {
		used[c.Elements] = c
	}
	rows := make([]elementRow, len(sets))
	for i, el := range sets {
		chosen, inUse := used[el]
		chosen.Elements = el
		rows[i] = elementRow{Chosen: chosen, used: inUse, remark: chosen.Caution,
			ageDays: el.Age(at).Hours() / 24, perigeeKm: math.NaN(), apogeeKm: math.NaN(), periodMin: math.NaN()}
		rows[i].derive(at)
	}
	return rows
}

func (r *elementRow) derive(at time.Time) {
	facts, err := r.Facts()
	if err != nil {
		r.remark = elements.Label(r.Elements) + ": " + err.Error()
		return
	}
	r.perigeeKm, r.apogeeKm = facts.Perigee.Kilometres(), facts.Apogee.Kilometres()
	r.periodMin = facts.Period.Minutes()
	node, err := r.NextAscendingNode(at)
	if err != nil {
		if r.used {
			r.remark = strings.TrimPrefix(r.remark+"; "+elements.Label(r.Elements)+": no next node: "+err.Error(), "; ")
		}
		return
	}
	r.node = node
}

func listElements(env *Env, o elementsOptions, sets []orbit.Elements) error {
	rows := elementRows(sets, o.choice, o.at)
	noteRemarks(env, rows)
	switch o.format {
	case formatCSV:
		return writeCSV(env.Out, elementHeads, func(yield func([]string) bool) {
			for i := range rows {
				if !yield(rows[i].record()) {
					return
				}
			}
		})
	case formatJSON:
		return writeJSON(env.Out, elementsResult(o, rows))
	}
	return elementsTable(env, o, rows)
}

// noteRemarks tells the first remarks; a stale catalogue has one for each object.
func noteRemarks(env *Env, rows []elementRow) {
	told := 0
	for _, r := range rows {
		if r.remark == "" {
			continue
		}
		if told++; told <= listLimit {
			env.note("warning: %s", printable(r.remark))
		}
	}
	if more := told - listLimit; more > 0 {
		env.note("and %d more warnings; --format json has them all", more)
	}
}

var elementHeads = []string{"name", "catalog_number", "international_designator", "epoch_utc", "age_d", "perigee_km", "apogee_km",
	"inclination_deg", "period_min", "next_ascending_node_utc", "used", "file", "line"}

func (r *elementRow) record() []string {
	return []string{
		r.Name, strconv.Itoa(r.CatalogNumber), r.InternationalDesignator, utc(r.Epoch), fixed(r.ageDays, 3), fixed(r.perigeeKm, 1),
		fixed(r.apogeeKm, 1), fixed(r.Inclination.Degrees(), 4), fixed(r.periodMin, 3), utc(r.node), yes(r.used), r.Source.File,
		strconv.Itoa(r.Source.Line),
	}
}

func setCount(n int) string {
	if n == 1 {
		return "1 element set"
	}
	return strconv.Itoa(n) + " element sets"
}

func yes(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}

func elementsTable(env *Env, o elementsOptions, rows []elementRow) error {
	table := make([][]string, len(rows))
	for i := range rows {
		r := rows[i].record()
		r[1] = fmt.Sprintf("%05d", rows[i].CatalogNumber)
		table[i] = slices.Delete(slices.Clone(r[:11]), 2, 3)
	}
	if _, err := fmt.Fprintf(env.Out, "%s; age and next node at %s; of several sets of an object the %s is used\n\n", setCount(len(rows)), utc(o.at), o.choice); err != nil {
		return fmt.Errorf("write the table: %w", err)
	}
	return writeTable(env.Out, env.outWidth(), []column{
		textColumn("name"), numberColumn("number"), textColumn("epoch UTC"), numberColumn("age d"), numberColumn("perigee km"), numberColumn("apogee km"),
		numberColumn("inclination deg"), numberColumn("period min"), textColumn("next ascending node UTC"), textColumn("used"),
	}, table)
}

// elementsAnswer is the JSON of elements. Fields get added, not renamed.
type elementsAnswer struct {
	AtUTC  string       `json:"at_utc"` // of age and next node
	Choice string       `json:"element_choice"`
	Sets   []elementSet `json:"sets"`
}

type elementSet struct {
	Name           string  `json:"name"`
	CatalogNumber  int     `json:"catalog_number"`
	Designator     string  `json:"international_designator"`
	EpochUTC       string  `json:"epoch_utc"`
	AgeDays        number  `json:"age_d"`
	PerigeeKm      number  `json:"perigee_km"`
	ApogeeKm       number  `json:"apogee_km"`
	InclinationDeg number  `json:"inclination_deg"`
	PeriodMin      number  `json:"period_min"`
	NextNodeUTC    *string `json:"next_ascending_node_utc"`
	Used           bool    `json:"used"`
	Remark         *string `json:"remark"` // a caution, or why a number is missing
	File           string  `json:"file"`
	Line           int     `json:"line"`
}

func elementsResult(o elementsOptions, rows []elementRow) elementsAnswer {
	a := elementsAnswer{AtUTC: utc(o.at), Choice: o.choice.String(), Sets: []elementSet{}}
	for i := range rows {
		r := &rows[i]
		a.Sets = append(a.Sets, elementSet{
			Name: r.Name, CatalogNumber: r.CatalogNumber, Designator: r.InternationalDesignator, EpochUTC: utc(r.Epoch),
			AgeDays: num(r.ageDays, 3), PerigeeKm: num(r.perigeeKm, 1), ApogeeKm: num(r.apogeeKm, 1),
			InclinationDeg: num(r.Inclination.Degrees(), 4), PeriodMin: num(r.periodMin, 3), NextNodeUTC: orNull(utc(r.node)),
			Used: r.used, Remark: orNull(r.remark), File: r.Source.File, Line: r.Source.Line,
		})
	}
	return a
}

// orNull makes an empty text null.
func orNull(s string) *string {
	if s == "" {
		return nil
	}
	return &s
}
