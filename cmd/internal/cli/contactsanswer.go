package cli

import (
	"fmt"
	"strconv"

	"slantwise/cmd/internal/planfiles"
	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/change"
	"slantwise/downlink/contacts/solve"
)

// planAnswer is a plan as it is written.
type planAnswer struct {
	p       *planProblem
	result  *solve.Result
	rows    []contacts.Row
	changes []change.Difference // against the plan in force; nil: there is none
}

func newPlanAnswer(p *planProblem, r *solve.Result) *planAnswer {
	a := &planAnswer{p: p, result: r, rows: p.Rows(r.Plan, r.Worth)}
	if force := p.force; force != nil {
		a.changes = change.Compare(force.problem, force.plan, p.Problem, r.Plan)
	}
	return a
}

// planRowJSON is a row of a plan, with the names of its columns.
type planRowJSON struct {
	Contact     string  `json:"contact"`
	Request     *string `json:"request"`
	Station     string  `json:"station"`
	Antenna     string  `json:"antenna"`
	Spacecraft  string  `json:"spacecraft"`
	Transmitter *string `json:"transmitter"`
	Start       string  `json:"start_utc"`
	End         string  `json:"end_utc"`
	SetUpStart  string  `json:"setup_start_utc"`
	TearDownEnd string  `json:"teardown_end_utc"`
	Volume      number  `json:"volume_bytes"`
	Value       number  `json:"value"`
	Fixed       bool    `json:"fixed"`
}

// planJSON is the answer of contacts, as contacts schema describes it.
type planJSON struct {
	Value      float64          `json:"value"`
	Bound      number           `json:"bound"`
	Gap        number           `json:"gap_percent"`
	Proven     bool             `json:"proven_optimal"`
	Stop       string           `json:"stop"`
	Rounds     int              `json:"rounds"`
	FirstValue number           `json:"first_value"`
	LeftOut    []string         `json:"left_out_of_bound"`
	Now        string           `json:"now_utc"`
	From       string           `json:"horizon_start_utc"`
	To         string           `json:"horizon_end_utc"`
	Worth      contacts.Worth   `json:"worth"`
	Contacts   []planRowJSON    `json:"contacts"`
	Changes    []differenceJSON `json:"changes"`
	Notes      []string         `json:"notes"`
}

func (a *planAnswer) json() planJSON {
	r := a.result
	out := planJSON{
		Value: r.Value, Bound: num(r.Bound, 6), Gap: num(r.GapPercent, 6), Proven: r.Proven, Stop: string(r.Stop), Rounds: r.Rounds,
		FirstValue: num(r.First, 6), LeftOut: r.Left, Now: utc(a.p.At(a.p.Now)), From: utc(a.p.At(0)), To: utc(a.p.At(a.p.Length)),
		Worth: r.Worth, Contacts: []planRowJSON{}, Changes: differencesJSON(a.changes), Notes: append([]string{}, a.p.notes...),
	}
	for i := range a.rows {
		out.Contacts = append(out.Contacts, rowJSON(&a.rows[i]))
	}
	return out
}

func rowJSON(r *contacts.Row) planRowJSON {
	volume := none
	if r.HasVolume {
		volume = r.VolumeBytes
	}
	return planRowJSON{
		Contact: r.Contact, Request: orNull(r.Request), Station: r.Station, Antenna: r.Antenna, Spacecraft: r.Spacecraft, Transmitter: orNull(r.Transmitter),
		Start: utc(r.Start), End: utc(r.End), SetUpStart: utc(r.SetUpStart), TearDownEnd: utc(r.TearDownEnd),
		Volume: num(volume, 3), Value: num(r.Value, 6), Fixed: r.Fixed,
	}
}

// planCells returns a row as it stands in a CSV file, in the order of planfiles.PlanColumns.
func planCells(r *contacts.Row) []string {
	volume := ""
	if r.HasVolume {
		volume = fixed(r.VolumeBytes, 3)
	}
	return []string{r.Contact, r.Request, r.Station, r.Antenna, r.Spacecraft, r.Transmitter, utc(r.Start), utc(r.End),
		utc(r.SetUpStart), utc(r.TearDownEnd), volume, fixed(r.Value, 6), strconv.FormatBool(r.Fixed)}
}

// write writes the plan to standard output.
func (a *planAnswer) write(env *Env, f format) error {
	switch f {
	case formatJSON:
		return writeJSON(env.Out, a.json())
	case formatCSV:
		if err := writeCSV(env.Out, planfiles.PlanColumns, a.csv()); err != nil {
			return err
		}
	default:
		if err := a.writeTable(env); err != nil {
			return err
		}
	}
	a.tell(env)
	return nil
}

func (a *planAnswer) csv() func(func([]string) bool) {
	return func(yield func([]string) bool) {
		for i := range a.rows {
			if !yield(planCells(&a.rows[i])) {
				return
			}
		}
	}
}

func (a *planAnswer) writeTable(env *Env) error {
	columns := []column{{head: "start UTC", text: true}, {head: "end UTC", text: true}, {head: "spacecraft", text: true}, {head: "station", text: true},
		{head: "antenna", text: true}, {head: "request", text: true}, {head: "transmitter", text: true}, {head: "volume MB"}, {head: "value"}, {head: "", text: true}}
	var rows [][]string
	for i := range a.rows {
		r := &a.rows[i]
		volume, held := "", ""
		if r.HasVolume {
			volume = fixed(r.VolumeBytes/1e6, 3)
		}
		if r.Fixed {
			held = "fixed"
		}
		rows = append(rows, []string{utc(r.Start), utc(r.End), r.Spacecraft, r.Station, r.Antenna, r.Request, r.Transmitter, volume, fixed(r.Value, 0), held})
	}
	return writeTable(env.Out, env.outWidth(), columns, rows)
}

// tell says what the plan is worth and what is proven, for people.
func (a *planAnswer) tell(env *Env) {
	r := a.result
	env.note("%s", a.gain())
	env.note("value %s, and no plan is worth more than %s: %s", fixed(r.Value, 0), fixed(r.Bound, 0), gapText(r))
	if w := r.Worth; w.Share != 0 || w.Price != 0 || w.Changes != 0 {
		env.note("value = contacts %s + share %s - price %s (%s of money) - changes %s (%d)", fixed(w.Contacts, 0), fixed(w.Share, 0), fixed(w.Price, 0), fixed(w.Money, 2), fixed(w.Changes, 0), w.Changed)
	}
	if !r.Proven && len(r.Left) > 0 {
		env.note("the bound does not know of some rules that the plan keeps, and may be loose by them: %s", quotedList(r.Left))
	}
	for _, d := range a.changes {
		if d.Kind != change.Kept {
			env.note("%s", printable(differenceText(&d)))
		}
	}
	for _, n := range a.p.notes {
		env.note("%s", printable(n))
	}
}

// gain says what the plan is for: its contacts, and the bytes they bring down, or how
// long they last where no bytes are known.
func (a *planAnswer) gain() string {
	bytes, known, length := 0.0, false, contacts.Ms(0)
	for i := range a.rows {
		bytes += a.rows[i].VolumeBytes
		known = known || a.rows[i].HasVolume
	}
	list := a.result.Plan.Contacts
	for _, c := range list {
		length += c.Length()
	}
	switch n := counted(len(list), "contact", "contacts"); {
	case len(list) == 0:
		return "0 contacts"
	case known && len(list) == 1:
		return n + " brings down " + bytesText(bytes)
	case known:
		return n + " bring down " + bytesText(bytes)
	default:
		return fmt.Sprintf("%s, %s min in all", n, fixed(length.Seconds()/60, 1))
	}
}

func gapText(r *solve.Result) string {
	if r.Proven {
		return fmt.Sprintf("the plan is proven to be the best one (%s)", counted(r.Rounds, "round", "rounds"))
	}
	return fmt.Sprintf("a gap of %s %% stays open; ended by %s after %s", fixed(r.GapPercent, 3), r.Stop, counted(r.Rounds, "round", "rounds"))
}
