package cli

import (
	"errors"
	"fmt"
	"io"
	"slices"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
)

func newCheck(env *Env) *cobra.Command {
	var f format
	cmd := &cobra.Command{
		Use:   "check",
		Short: "Find all faults of a scenario and list every default taken",
		Long: `Read the scenario with all its files, fly each spacecraft over the window, prepare
each link, and tell all faults at once; where there are none, list the element sets
that are used with their age, warnings, and every default that was taken.`,
		Example: `  slantwise check
  slantwise check --scenario plans/summer.yaml --format json`,
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runCheck(env, f) },
	}
	addFormat(cmd, &f)
	return cmd
}

func runCheck(env *Env, f format) error {
	s, err := env.read(needOrbits)
	if err != nil {
		return err
	}
	if err := fly(s); err != nil {
		return &InputError{Err: err}
	}
	warnOfLinks(s)
	switch f {
	case formatCSV:
		return checkCSV(env.Out, s)
	case formatJSON:
		return writeJSON(env.Out, checkResult(s))
	}
	return checkTable(env, s)
}

// fly propagates every spacecraft over the window. An orbit with no state in it is a
// fault, one that ends within it a warning.
func fly(s *scenario.Scenario) error {
	var faults []error
	for _, c := range s.Spacecraft {
		e, err := s.Ephemeris(&c, s.Window.Start, s.Window.End, nil)
		if ended(err) {
			continue // the scenario warns of it
		}
		if err != nil {
			faults = append(faults, fmt.Errorf("spacecraft %s: %w", c.Name, err))
			continue
		}
		if cut := e.Truncated(); cut != nil {
			s.Warnings = append(s.Warnings, scenario.Note{About: "spacecraft " + c.Name, Text: "passes end where its orbit does: " + cut.Error()})
		}
		if bend := e.BendNote(); bend != "" {
			s.Warnings = append(s.Warnings, scenario.Note{About: "spacecraft " + c.Name, Text: bend})
		}
	}
	return errors.Join(faults...)
}

func checkTable(env *Env, s *scenario.Scenario) error {
	width := env.outWidth()
	var craft, stations, notes [][]string
	for _, c := range s.Spacecraft {
		flies := c.Orbit.String()
		var number, epoch, age, sets string
		if c.Orbit.HasNumber() {
			flies = c.Elements.Name
			number, sets = fmt.Sprintf("%05d", c.Elements.CatalogNumber), fmt.Sprint(c.Elements.Among)
		}
		if c.Orbit.HasEpoch() {
			epoch, age = utc(c.Elements.Epoch), fixed(c.Elements.Age.Hours()/24, 2)
		}
		craft = append(craft, []string{
			c.Name, flies, number, epoch, age, sets, fmt.Sprint(len(c.Transmitters)), fmt.Sprint(len(c.Uplinks)),
		})
	}
	for _, st := range s.Stations {
		stations = append(stations, []string{
			st.Site.Name, fixed(st.Site.Latitude.Degrees(), 4), fixed(st.Site.Longitude.Degrees(), 4),
			fixed(st.Site.Altitude.Metres(), 0), fmt.Sprint(len(st.Antennas)),
		})
	}
	for _, n := range checkNotes(s) {
		notes = append(notes, n[:])
	}
	if _, err := fmt.Fprintf(env.Out, "%s: no faults\nwindow %s to %s (%s h), %s elevation decides AOS and LOS\n\n",
		printable(s.Label), utc(s.Window.Start), utc(s.Window.End), fixed(s.Window.Length().Hours(), 2), s.Horizon); err != nil {
		return err
	}
	return errors.Join(
		writeTable(env.Out, width, []column{textColumn("spacecraft"), textColumn("orbit"), numberColumn("number"),
			textColumn("epoch UTC"), numberColumn("age d"), numberColumn("sets"), numberColumn("transmitters"), numberColumn("uplinks")}, craft),
		newLine(env.Out),
		writeTable(env.Out, width, []column{textColumn("station"), numberColumn("latitude deg"), numberColumn("longitude deg"),
			numberColumn("altitude m"), numberColumn("antennas")}, stations),
		newLine(env.Out),
		writeTable(env.Out, width, []column{textColumn("kind"), textColumn("about"), textColumn("note")}, notes),
	)
}

func newLine(w io.Writer) error {
	_, err := io.WriteString(w, "\n")
	return err
}

// checkNotes lists warnings, then defaults: kind, about, text.
func checkNotes(s *scenario.Scenario) [][3]string {
	var out [][3]string
	for _, n := range s.Warnings {
		out = append(out, [3]string{"warning", n.About, n.Text})
	}
	for _, n := range s.Assumptions {
		out = append(out, [3]string{"default", n.About, n.Text})
	}
	return out
}

func checkCSV(w io.Writer, s *scenario.Scenario) error {
	return writeCSV(w, []string{"kind", "about", "text"}, func(yield func([]string) bool) {
		for _, n := range checkNotes(s) {
			if !yield(slices.Clone(n[:])) {
				return
			}
		}
	})
}
