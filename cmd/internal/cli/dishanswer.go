package cli

import (
	"bufio"
	"fmt"
	"math"
	"strings"

	"slantwise/downlink/sizing"
)

// dishJSON is the JSON of the answer; the first four fields are a promise.
type dishJSON struct {
	Satisfied    bool              `json:"satisfied"`
	Least        number            `json:"least_diameter_m"`
	Binding      *string           `json:"binding_requirement"`
	Requirements []requirementJSON `json:"requirements"`
	Greatest     number            `json:"greatest_diameter_m"` // of the stretch that begins with the least
	Sentence     string            `json:"answer"`
	Nearest      *nearestJSON      `json:"nearest"` // where no diameter meets all
	Peak         number            `json:"gain_peak_diameter_m"`
	PeakBy       *string           `json:"gain_peak_by"` // the greatest of the next
	PeakTakers   []takerJSON       `json:"gain_peak_contributors"`
	Saturated    number            `json:"bytes_saturated_diameter_m"`
	Mounts       *dishMountJSON    `json:"mounts"` // null where no antenna has one
	Own          []ownJSON         `json:"own_antennas"`
	Notes        []budgetNoteJSON  `json:"assumptions"`
}

type requirementJSON struct {
	Name      string `json:"name"`
	Required  number `json:"required"`
	Reached   number `json:"reached"`
	Unit      string `json:"unit"`
	Satisfied bool   `json:"satisfied"`
	Least     number `json:"least_diameter_m"`
	Greatest  number `json:"greatest_diameter_m"`
	Best      number `json:"best_reached"`         // where no diameter meets it
	BestAt    number `json:"best_at_diameter_m"`   // likewise
	At        number `json:"reached_at_the_least"` // by the least diameter that meets all
}

type nearestJSON struct {
	Diameter number `json:"diameter_m"`
	Misses   string `json:"misses"`
}

// takerJSON is a loss that ends the growth of the gain.
type takerJSON struct {
	Loss  string `json:"loss"`
	Share number `json:"share_percent"`    // of what all take at the summit from the next bit of diameter
	Alone number `json:"alone_diameter_m"` // where the summit were by this loss alone
}

// dishMountJSON is what mounts do not follow; Then is at the least diameter that meets all.
type dishMountJSON struct {
	Limit           number `json:"limit_diameter_m"` // beyond which they take more than a larger dish brings; null: not within the range
	Lost            number `json:"lost_bytes_per_day"`
	NotFollowed     number `json:"not_followed_s_per_day"`
	LostThen        number `json:"lost_bytes_per_day_at_the_least"`
	NotFollowedThen number `json:"not_followed_s_per_day_at_the_least"`
}

type ownJSON struct {
	Station  string `json:"station"`
	Antenna  string `json:"antenna"`
	Diameter number `json:"diameter_m"`
}

func (d *dishStudy) writeAnswer(env *Env, a *sizing.Answer, f format) error {
	switch f {
	case formatJSON:
		return writeJSON(env.Out, d.answerJSON(a))
	case formatCSV:
		for _, l := range d.sentences(a) {
			env.note("%s", printable(l))
		}
		return d.withNotes(d.answerSheet(a)).write(env, f)
	}
	w := bufio.NewWriter(env.Out)
	for _, l := range d.sentences(a) {
		fmt.Fprintln(w, printable(l))
	}
	fmt.Fprintln(w)
	if err := w.Flush(); err != nil {
		return err
	}
	return d.withNotes(d.answerSheet(a)).write(env, f)
}

func (d *dishStudy) answerSheet(a *sizing.Answer) *sheet {
	out := &sheet{name: "requirements", columns: []sheetColumn{
		wordsAs("name", "requirement"), numbersAs("required", "required", 3), numbersAs("reached", "reached now", 3), wordsAs("unit", "unit"), wordsAs("satisfied", "met now"),
		numbersAs("least_diameter_m", "least m", 3), numbersAs("greatest_diameter_m", "greatest m", 3), numbersAs("best_reached", "best reached", 3), numbersAs("best_at_diameter_m", "at m", 3),
	}}
	for i := range a.Verdicts {
		v := &a.Verdicts[i]
		best, at := bestOf(v)
		met := "no"
		if v.MetNow {
			met = "yes"
		}
		out.rows = append(out.rows, []any{string(v.Kind), v.Required, v.ReachedNow, v.Unit, met, diameterOr(v.Alone.Diameter.Metres()), diameterOr(v.Alone.Most.Metres()), best, at})
	}
	return out
}

// bestOf returns what is reached of a requirement that no diameter meets, and where.
func bestOf(v *sizing.Verdict) (reached, at float64) {
	if v.Alone.Nearest == nil {
		return none, none
	}
	return v.Reached(v.Alone.Nearest), v.Alone.Nearest.Variant.Diameter.Metres()
}

// diameterOr is a diameter, none for 0.
func diameterOr(d float64) float64 {
	if d == 0 {
		return none
	}
	return d
}

func (d *dishStudy) answerJSON(a *sizing.Answer) *dishJSON {
	out := &dishJSON{Satisfied: a.Satisfied, Least: num(diameterOr(a.Together.Diameter.Metres()), 4), Greatest: num(diameterOr(a.Together.Most.Metres()), 4),
		Requirements: []requirementJSON{}, Sentence: strings.Join(d.sentences(a), " "), Peak: num(diameterOr(a.Limit.Peak.Metres()), 3),
		Saturated: num(diameterOr(a.Limit.Saturated.Metres()), 3), PeakTakers: []takerJSON{}, Notes: []budgetNoteJSON{}}
	for i, t := range a.Limit.By {
		if i == 0 {
			out.PeakBy = &a.Limit.By[0].Loss
		}
		out.PeakTakers = append(out.PeakTakers, takerJSON{t.Loss, num(100*t.Share, 2), num(diameterOr(t.Alone.Metres()), 3)})
	}
	then := a.Then
	for i := range a.Verdicts {
		v := &a.Verdicts[i]
		name := string(v.Kind)
		if i == a.Binding {
			out.Binding = &name
		}
		best, at := bestOf(v)
		r := requirementJSON{Name: name, Required: num(v.Required, 6), Reached: num(v.ReachedNow, 6), Unit: v.Unit, Satisfied: v.MetNow,
			Least: num(diameterOr(v.Alone.Diameter.Metres()), 4), Greatest: num(diameterOr(v.Alone.Most.Metres()), 4), Best: num(best, 6), BestAt: num(at, 4), At: num(none, 0)}
		if then != nil {
			r.At = num(v.Reached(then), 6)
		}
		out.Requirements = append(out.Requirements, r)
	}
	if n := a.Together.Nearest; n != nil {
		out.Nearest = &nearestJSON{num(n.Variant.Diameter.Metres(), 4), d.misses(a)}
	}
	if with, _ := d.study.Moved(); with > 0 {
		out.Mounts = &dishMountJSON{Limit: num(diameterOr(a.Limit.Turning.Metres()), 3), Lost: num(a.Now.MountLostBytesPerDay, 0), NotFollowed: num(a.Now.NotFollowedSPerDay, 3),
			LostThen: num(none, 0), NotFollowedThen: num(none, 3)}
		if then != nil {
			out.Mounts.LostThen, out.Mounts.NotFollowedThen = num(then.MountLostBytesPerDay, 0), num(then.NotFollowedSPerDay, 3)
		}
	}
	for i := range d.links {
		c := &d.links[i]
		out.Own = append(out.Own, ownJSON{c.station.Site.Name, c.antenna.Name, num(diameterOr(c.antenna.Diameter.Metres()), 4)})
	}
	for _, n := range d.notes {
		out.Notes = append(out.Notes, budgetNoteJSON{n.Kind.String(), n.Text})
	}
	return out
}

// sentences says the answer, the first sentence first.
func (d *dishStudy) sentences(a *sizing.Answer) []string {
	var out []string
	say := func(format string, args ...any) { out = append(out, fmt.Sprintf(format, args...)) }
	if len(a.Verdicts) == 0 {
		say("Nothing is required: give requirements in the sizing block. With their own antennas the sites bring %s a day.", bytesText(a.Now.BytesPerDay))
		return append(out, d.limits(a)...)
	}
	own := d.ownText()
	if a.Satisfied {
		say("Yes, the dishes suffice (%s): all that is required is met.", own)
	} else {
		say("No, the dishes do not suffice (%s): %s.", own, d.shortfalls(a))
	}
	binding := a.Verdicts[a.Binding]
	switch f := a.Together; {
	case f.Diameter > 0 && f.Diameter == d.sizing.Range.Low:
		say("Every requirement is met from the least diameter of the range on, %s.", metres(f.Diameter.Metres()))
	case f.Diameter > 0:
		say("The least diameter that meets all is %s; %s binds.", metres(f.Diameter.Metres()), requirementText(binding.Kind))
	default:
		say("No diameter from %s to %s meets all: %s", metres(d.sizing.Range.Low.Metres()), metres(d.sizing.Range.High.Metres()), d.misses(a))
	}
	if f := a.Together; f.Most > 0 && f.Most < d.sizing.Range.High {
		say("From %s on it meets them no more.", metres(f.Most.Metres()))
	}
	return append(out, d.limits(a)...)
}

func (d *dishStudy) ownText() string {
	var parts []string
	for i := range d.links {
		c := &d.links[i]
		parts = append(parts, fmt.Sprintf("%s %g m", c.station.Site.Name, c.antenna.Diameter.Metres()))
	}
	return strings.Join(parts, ", ")
}

// shortfalls tells what the scenario's own antennas miss.
func (d *dishStudy) shortfalls(a *sizing.Answer) string {
	var parts []string
	for i := range a.Verdicts {
		if v := &a.Verdicts[i]; !v.MetNow {
			parts = append(parts, fmt.Sprintf("%s %s of %s", requirementText(v.Kind), valueText(v.ReachedNow, v.Unit), valueText(v.Required, v.Unit)))
		}
	}
	return strings.Join(parts, "; ")
}

// misses tells what comes nearest where no diameter meets all, and what each needs.
func (d *dishStudy) misses(a *sizing.Answer) string {
	n := a.Together.Nearest
	if n == nil {
		return ""
	}
	var parts, alone []string
	for i := range a.Verdicts {
		v := &a.Verdicts[i]
		if !v.Met(n) {
			parts = append(parts, fmt.Sprintf("%s reaches %s of %s", requirementText(v.Kind), valueText(v.Reached(n), v.Unit), valueText(v.Required, v.Unit)))
		}
		if v.Alone.Diameter > 0 && len(a.Verdicts) > 1 {
			alone = append(alone, fmt.Sprintf("%s alone needs %s to %s", requirementText(v.Kind), metres(v.Alone.Diameter.Metres()), metres(v.Alone.Most.Metres())))
		}
	}
	text := fmt.Sprintf("%s comes nearest, where %s (nearest: the requirement that is missed by the greatest share of what is required is missed by the least, then the next; 10 dB count as a whole)",
		metres(n.Variant.Diameter.Metres()), strings.Join(parts, " and "))
	if len(alone) > 0 {
		text += "; " + strings.Join(alone, ", ")
	}
	return text + "."
}

func requirementText(k sizing.Kind) string {
	return map[sizing.Kind]string{
		sizing.Bytes: "bytes a day", sizing.WorstWeekBytes: "bytes a day in the worst week", sizing.WorstMonthBytes: "bytes a day in the worst month",
		sizing.MarginThere: "the margin at the elevation", sizing.MarginTime: "the margin for the share of contact time",
		sizing.AvailableShare: "availability", sizing.Gap: "the longest gap", sizing.Age: "the age of 95 % of the data",
	}[k]
}

func valueText(v float64, u string) string {
	switch {
	case math.IsNaN(v):
		return "nothing"
	case u == "B/d":
		return bytesText(v)
	case u == "%":
		return fmt.Sprintf("%.2f %%", v)
	case v != 0 && math.Abs(v) < 0.01:
		return fmt.Sprintf("%.2g %s", v, u)
	}
	return fmt.Sprintf("%.2f %s", v, u)
}
