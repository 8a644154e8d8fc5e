package cli

import (
	"bufio"
	"fmt"
	"strings"

	"slantwise/downlink/propagation"
)

// yearJSON is the JSON of the statistics. Fractions of contact time are in percent,
// from low to high where the percentages evaluated leave it open.
type yearJSON struct {
	Spacecraft   string            `json:"spacecraft"`
	Station      string            `json:"station"`
	Transmitter  string            `json:"transmitter"`
	Antenna      string            `json:"antenna"`
	Mode         *string           `json:"mode"`
	FrequencyMHz nano              `json:"frequency_mhz"`
	Missing      []string          `json:"missing"`
	Days         float64           `json:"days_flown"`
	Passes       int               `json:"passes_flown"`
	ContactH     number            `json:"contact_h_per_year"`
	Attenuation  []yearAttenuation `json:"attenuation"`
	Margin       []yearMargin      `json:"margin"`
	Bytes        yearBytes         `json:"bytes_per_year"`
	Assumptions  []budgetNoteJSON  `json:"assumptions"`
}

type yearAttenuation struct {
	ContactPercent float64 `json:"contact_percent"`
	Exceeded       number  `json:"total_attenuation_exceeded_db"`
}

type yearMargin struct {
	Margin    float64 `json:"margin_over_required_db"`
	YearLow   number  `json:"below_contact_percent_low"`
	YearHigh  number  `json:"below_contact_percent_high"`
	MonthLow  number  `json:"below_worst_month_percent_low"`
	MonthHigh number  `json:"below_worst_month_percent_high"`
	Clear     number  `json:"below_clear_sky_percent"`
}

type yearBytes struct {
	Mode            number `json:"mode"`
	Achievable      number `json:"achievable"`
	ClearMode       number `json:"clear_sky_mode"`
	ClearAchievable number `json:"clear_sky_achievable"`
}

func (a *yearAnswer) write(env *Env, f format) error {
	switch f {
	case formatCSV:
		return a.writeCSV(env)
	case formatJSON:
		return writeJSON(env.Out, a.json())
	}
	return a.writeTable(env)
}

func (a *yearAnswer) json() yearJSON {
	c := a.link
	weather, clear := a.year.Volume()
	out := yearJSON{
		Spacecraft: c.spacecraft.Name, Station: c.station.Site.Name, Transmitter: c.transmitter.Name, Antenna: c.antenna.Name,
		FrequencyMHz: nano(c.transmitter.Frequency.Megahertz()), Missing: append([]string{}, c.sky.missing...),
		Days: a.days, Passes: a.passes, ContactH: num(a.scaled(a.year.ContactSeconds())/3600, 3),
		Attenuation: []yearAttenuation{}, Margin: []yearMargin{}, Assumptions: []budgetNoteJSON{},
		Bytes: yearBytes{num(a.scaled(weather.Mode), 0), num(a.scaled(weather.Achievable), 0), num(a.scaled(clear.Mode), 0), num(a.scaled(clear.Achievable), 0)},
	}
	if c.mode != nil {
		out.Mode = &c.mode.Name
	}
	for i, v := range a.attenuations() {
		out.Attenuation = append(out.Attenuation, yearAttenuation{yearFractions[i], num(v, 4)})
	}
	for _, m := range a.margins() {
		out.Margin = append(out.Margin, yearMargin{m.margin, percent(m.year.Low), percent(m.year.High), percent(m.month.Low), percent(m.month.High), percent(m.clear)})
	}
	for _, n := range a.notes {
		out.Assumptions = append(out.Assumptions, budgetNoteJSON{n.Kind.String(), n.Text})
	}
	return out
}

func percent(fraction float64) number { return num(100*fraction, 4) }

// writeCSV writes the attenuation by fraction of contact time; the rest is in the JSON.
func (a *yearAnswer) writeCSV(env *Env) error {
	for _, l := range a.head() {
		env.note("%s", printable(l))
	}
	missing := strings.Join(a.link.sky.missing, " ")
	return writeCSV(env.Out, []string{"quantity", "value_db", "contact_percent_low", "contact_percent_high", "worst_month_percent_low", "worst_month_percent_high", "clear_sky_percent", pathMissing},
		func(yield func([]string) bool) {
			for i, v := range a.attenuations() {
				p := fixed(yearFractions[i], 4)
				if !yield([]string{"total attenuation above", fixed(v, 4), p, p, "", "", "", missing}) {
					return
				}
			}
			for _, m := range a.margins() {
				if !yield([]string{"margin over required below", fixed(m.margin, 4), fixed(100*m.year.Low, 4), fixed(100*m.year.High, 4),
					fixed(100*m.month.Low, 4), fixed(100*m.month.High, 4), fixed(100*m.clear, 4), missing}) {
					return
				}
			}
		})
}

// head says what the statistics are about, and first what they lack.
func (a *yearAnswer) head() []string {
	c := a.link
	lines := []string{fmt.Sprintf("%s to %s: %s at %g MHz, antenna %s", c.spacecraft.Name, c.station.Site.Name, c.transmitter.Name, c.transmitter.Frequency.Megahertz(), c.antenna.Name)}
	if len(c.sky.missing) > 0 {
		lines = append(lines, missingText(c.sky.missing))
	}
	lines = append(lines, fmt.Sprintf("%.1f h of contact a year, from %d passes in %g days", a.scaled(a.year.ContactSeconds())/3600, a.passes, a.days),
		"marginals of an average year: how often in all, not when, and no two instants together")
	if c.mode != nil {
		weather, clear := a.year.Volume()
		lines = append(lines, fmt.Sprintf("a year brings %s in mode %s (clear sky %s), %s at the achievable rate (clear sky %s)",
			bytesText(a.scaled(weather.Mode)), c.mode.Name, bytesText(a.scaled(clear.Mode)), bytesText(a.scaled(weather.Achievable)), bytesText(a.scaled(clear.Achievable))))
	}
	return lines
}

func (a *yearAnswer) writeTable(env *Env) error {
	w := bufio.NewWriter(env.Out)
	for _, l := range a.head() {
		fmt.Fprintln(w, printable(l))
	}
	fmt.Fprintln(w)
	if err := w.Flush(); err != nil {
		return err
	}
	var rows [][]string
	for i, v := range a.attenuations() {
		if fixed(v, 2) != "" {
			rows = append(rows, []string{fixed(yearFractions[i], 2), fixed(v, 2)})
		}
	}
	if err := writeTable(env.Out, env.outWidth(), []column{numberColumn("% of contact time"), numberColumn("attenuation above dB")}, rows); err != nil {
		return err
	}
	rows = nil
	for _, m := range a.margins() {
		rows = append(rows, []string{fixed(m.margin, 1), spanText(m.year), spanText(m.month), fixed(100*m.clear, 3)})
	}
	if err := newLine(env.Out); err != nil {
		return err
	}
	if len(rows) > 0 {
		columns := []column{numberColumn("margin over required dB"), numberColumn("% of contact time below"), numberColumn("% in the average worst month"), numberColumn("% under a clear sky")}
		if err := writeTable(env.Out, env.outWidth(), columns, rows); err != nil {
			return err
		}
	}
	return (&pathAnswer{notes: a.notes}).writeNotes(env)
}

// spanText writes a span in percent, one number where its ends agree as printed.
func spanText(s propagation.Span) string {
	low, high := fixed(100*s.Low, 3), fixed(100*s.High, 3)
	if low == high {
		return low
	}
	return low + " to " + high
}
