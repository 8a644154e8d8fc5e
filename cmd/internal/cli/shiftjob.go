package cli

import (
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"slices"
	"time"

	"slantwise/cmd/internal/planfiles"
	"slantwise/cmd/internal/scenario"
	"slantwise/reports"
)

// shiftJob is a sheet in the making.
type shiftJob struct {
	scenario *scenario.Scenario
	station  *scenario.Station
	antenna  string // empty: any
	from, to time.Time
	zone     *time.Location
	rows     []planfiles.PlanRow // of the plan at this station, within the sheet
	planned  bool
	report   *reportPlan
	rained   map[*chosenLink]*chosenLink // the same links in rain
	sheetOut *reports.Shift
}

// newShiftJob finds station, span, zone and plan.
func newShiftJob(env *Env, s *scenario.Scenario, o *shiftOptions) (*shiftJob, error) {
	j := &shiftJob{scenario: s, antenna: o.antenna, rained: map[*chosenLink]*chosenLink{}, sheetOut: &reports.Shift{Pages: o.pages}}
	var rows []planfiles.PlanRow
	var err error
	if o.plan != "" {
		if rows, err = readPlanFile(o.plan, planfiles.Plan); err != nil {
			return nil, err
		}
		if err := knownPlanRows(s, rows); err != nil {
			return nil, err
		}
		j.planned, j.sheetOut.Plan = true, filepath.Base(o.plan)
	}
	if o.station == "" && len(rows) > 0 && !slices.ContainsFunc(rows, func(r planfiles.PlanRow) bool { return r.Station != rows[0].Station }) {
		o.station = rows[0].Station
	}
	if j.station, err = pick("station", o.station, s.Stations, stationName); err != nil {
		return nil, err
	}
	if o.antenna != "" {
		if _, err := pick("antenna", o.antenna, j.station.Antennas, antennaName); err != nil {
			return nil, err
		}
	}
	if j.zone = j.station.Site.TimeZone; o.zone != "" {
		if j.zone, err = time.LoadLocation(o.zone); err != nil {
			return nil, inputErrorf("--time-zone: %q is not in the table of time zones; give a name as Europe/London", o.zone)
		}
	}
	if err := j.span(env, o); err != nil {
		return nil, err
	}
	for _, r := range rows {
		if r.Station == j.station.Site.Name && (j.antenna == "" || r.Antenna == j.antenna) && r.End.After(j.from) && r.Start.Before(j.to) {
			j.rows = append(j.rows, r)
		}
	}
	return j, nil
}

// span settles which hours the sheet is of: those asked for, as far as they lie in the window.
func (j *shiftJob) span(env *Env, o *shiftOptions) error {
	w := j.scenario.Window
	j.from = o.from
	if j.from.IsZero() {
		j.from = env.Now().UTC().Truncate(time.Minute)
		if j.from.Before(w.Start) || !j.from.Before(w.End) {
			j.from = w.Start
			env.note("now is outside of the window: the sheet begins with it, at %s; --from or --window-start takes another time", utc(j.from))
		}
	}
	if j.from.Before(w.Start) || !j.from.Before(w.End) {
		return inputErrorf("--from: %s is outside of the window, %s to %s; give an instant in it, or move it with --window-start and --window-length-h", utc(j.from), utc(w.Start), utc(w.End))
	}
	j.to = after(j.from, o.hours*3600)
	if j.to.After(w.End) {
		j.to = w.End
		env.note("the window ends at %s, and so does the sheet; --window-length-h makes it longer", utc(w.End))
	}
	return nil
}

// knownPlanRows refuses a plan that is of another scenario, with every name that is not known.
func knownPlanRows(s *scenario.Scenario, rows []planfiles.PlanRow) error {
	var faults []error
	told := map[string]bool{}
	fault := func(place, what, name string, known []string) {
		if key := what + name; !told[key] {
			told[key] = true
			faults = append(faults, fmt.Errorf("%s: %s %q is not in the scenario%s; it holds %s; is the plan of another one?", place, what, name, meant(name, known), quotedList(known)))
		}
	}
	for _, r := range rows {
		if i := slices.IndexFunc(s.Spacecraft, func(c scenario.Spacecraft) bool { return c.Name == r.Spacecraft }); i < 0 {
			fault(r.Place, "spacecraft", r.Spacecraft, namesOf(s.Spacecraft, spacecraftName))
		}
		i := slices.IndexFunc(s.Stations, func(st scenario.Station) bool { return st.Site.Name == r.Station })
		if i < 0 {
			fault(r.Place, "station", r.Station, namesOf(s.Stations, stationName))
			continue
		}
		st := &s.Stations[i]
		if known := namesOf(st.Antennas, antennaName); !slices.Contains(known, r.Antenna) {
			fault(r.Place, "antenna of "+r.Station, r.Antenna, known)
		}
	}
	return joinInput(faults)
}

func namesOf[T any](items []T, nameOf func(*T) string) []string {
	out := make([]string, len(items))
	for i := range items {
		out[i] = nameOf(&items[i])
	}
	return out
}

// sheet works the contacts out.
func (j *shiftJob) sheet(ctx context.Context) (*reports.Shift, error) {
	var err error
	if j.report, err = planReport(ctx, j.scenario, reportOptions{stations: []string{j.station.Site.Name}}); err != nil {
		return nil, err
	}
	out := j.sheetOut
	out.Title, out.Version, out.Station = filepath.Base(j.scenario.Label), version(), j.station.Site.Name
	out.From, out.To, out.Zone = j.from, j.to, j.zone
	out.RainPercent, out.RadiationCaution = shiftRainPercent, radiationCaution
	list, err := j.choose(ctx)
	if err != nil {
		return nil, err
	}
	for i := range list {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		c, err := j.contact(&list[i])
		if err != nil {
			return nil, fmt.Errorf("%s over %s: %w", list[i].craft(j).Name, out.Station, err)
		}
		out.Contacts = append(out.Contacts, *c)
	}
	j.clashes()
	if len(list) == 0 {
		out.None = j.nothing()
	}
	out.Basis = j.basis()
	for _, w := range append(append([]scenario.Note{}, j.scenario.Warnings...), warningNotes(j.report.warnings)...) {
		if w.About == "" || general(w) || w.About == "station "+out.Station || j.flies(w.About) {
			out.Notes = append(out.Notes, reports.Note{Kind: reports.Warning, About: w.About, Text: w.Text})
		}
	}
	return out, nil
}

// basis is what the sheet's numbers stand on: the orbits of its contacts, aged over its hours.
func (j *shiftJob) basis() reports.Basis {
	hours := *j.scenario
	hours.Window.Start, hours.Window.End = j.from, j.to
	var craft []*scenario.Spacecraft
	names := []string{"station " + j.station.Site.Name}
	for i := range j.scenario.Spacecraft {
		c := &j.scenario.Spacecraft[i]
		if slices.ContainsFunc(j.sheetOut.Contacts, func(k reports.ShiftContact) bool { return k.Spacecraft == c.Name }) {
			craft, names = append(craft, c), append(names, "spacecraft "+c.Name)
		}
	}
	if len(craft) == 0 {
		craft = allCraft(j.scenario) // that there is no contact is said of all of them
	}
	return about(basisOf(&hours, craft, reports.CautionPass), names...)
}

func warningNotes(list []string) (out []scenario.Note) {
	for _, w := range list {
		out = append(out, scenario.Note{Text: w})
	}
	return out
}

// flies tells whether a note is about a spacecraft of the sheet.
func (j *shiftJob) flies(about string) bool {
	return slices.ContainsFunc(j.sheetOut.Contacts, func(c reports.ShiftContact) bool { return concerns(about, c.Spacecraft, "", nil) })
}

// clashes tells of contacts that one antenna cannot have at the same time.
func (j *shiftJob) clashes() {
	list := j.sheetOut.Contacts
	for i := range list {
		for k := range list[:i] {
			a, b := &list[k], &list[i]
			if a.Antenna == b.Antenna && a.Antenna != "" && b.Start.Before(a.End) && a.Start.Before(b.End) {
				a.Cautions = append(a.Cautions, fmt.Sprintf("Contact %d wants the same antenna at the same time: take one, or change over.", i+1))
				b.Cautions = append(b.Cautions, fmt.Sprintf("Contact %d wants the same antenna at the same time: take one, or change over.", k+1))
			}
		}
	}
}

// nothing says that there is no contact, and when the next is.
func (j *shiftJob) nothing() string {
	const layout = "2006-01-02 15:04:05 UTC"
	text := fmt.Sprintf("No contact from %s to %s", j.from.Format(layout), j.to.Format(layout))
	if j.planned {
		return text + " at this station in the plan."
	}
	for i := range j.report.pages {
		page := &j.report.pages[i]
		if page.AOS.Before(j.to) || !j.takes(page) {
			continue
		}
		one, err := j.weigh([]*reportPage{page})
		if err == nil && one.why == "" {
			return text + fmt.Sprintf("; the next is %s, AOS %s.", j.report.craft[page.Spacecraft].Name, page.AOS.Format(layout))
		}
		if err != nil && !errors.As(err, new(*InputError)) {
			break
		}
	}
	return text + fmt.Sprintf(", and none to the end of the window, %s.", j.scenario.Window.End.Format(layout))
}
