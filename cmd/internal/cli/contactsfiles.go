package cli

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"time"

	"slantwise/cmd/internal/planfiles"
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/contacts"
)

type windowRow = contacts.WindowRow

// readPlanFile reads a file of rows.
func readPlanFile[T any](file string, read func(string, io.Reader, planfiles.Clock) ([]T, error)) ([]T, error) {
	f, err := os.Open(file)
	if err != nil {
		return nil, inputErrorf("%s: %v", file, plainFileError(err))
	}
	defer f.Close()
	rows, err := read(file, f, scenario.ParseUTC)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return rows, nil
}

// plainFileError says why a file cannot be opened, without its name.
func plainFileError(err error) error {
	if errors.Is(err, fs.ErrNotExist) {
		return errors.New("there is no such file; check the name")
	}
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err
	}
	return err
}

// horizon sets the window of a scenario that nobody named to the time that the windows
// of a file span.
func (o *planSource) horizon(env *Env, s *scenario.Scenario, rows []windowRow) error {
	given := env.overrides["window.start_utc"].Changed || env.overrides["window.length_h"].Changed || env.overrides["window.end_utc"].Changed
	if !s.Demo && s.Window.Start.IsZero() {
		return inputErrorf("window: the scenario holds none; give one that holds the windows of %s", o.windows)
	}
	if !s.Demo {
		return nil
	}
	s.Spacecraft, s.Stations, s.ContactPlan = nil, nil, scenario.ContactPlan{Step: s.ContactPlan.Step, Least: s.ContactPlan.Least}
	if given {
		env.note("no scenario was named: the horizon is %s to %s, without other rules", utc(s.Window.Start), utc(s.Window.End))
		return nil
	}
	var first, last time.Time
	for _, r := range rows {
		if first.IsZero() || r.Start.Before(first) {
			first = r.Start
		}
		if r.End.After(last) {
			last = r.End
		}
	}
	if !last.After(first) {
		if len(rows) > 0 {
			return nil // the rows are at fault, and say so themselves
		}
		return inputErrorf("%s: the file holds no window", o.windows)
	}
	s.Window.Start, s.Window.End = first.Truncate(time.Second), last.Add(time.Second-1).Truncate(time.Second)
	env.note("no scenario was named: the horizon is what the windows span, %s to %s, without other rules", utc(s.Window.Start), utc(s.Window.End))
	return nil
}
