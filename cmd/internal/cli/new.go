package cli

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/scenario"
)

func newNew(env *Env) *cobra.Command {
	launchDay, planningDay, teamWeek := false, false, false
	cmd := &cobra.Command{
		Use:   "new [FILE]",
		Short: "Write a commented scenario to start from",
		Long: `Write a commented scenario to start from into FILE (slantwise.yaml where none is
named), and a small file of element sets beside it. A folder that is not there is
made; a file that is there is never replaced.

With --launch-day FILE is a folder: it gets the first day of an invented satellite, as
four scenarios that differ in the orbit alone (the separation state as planned, after a
late launch, an ephemeris from tracking, the first element set). With --planning-day it
gets a day of contact planning on the demo's spacecraft: yesterday's and today's element
sets, rules of the plan, and an outage as a calendar. With --team-week it gets the week of
a team with one satellite and one station, and three invented tables of measurements.`,
		Example: `  slantwise new
  slantwise new plans/summer.yaml
  slantwise new --launch-day first-day
  slantwise new --planning-day day
  slantwise new --team-week week`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 1 {
				return inputErrorf("new takes one FILE, not %d; see slantwise new --help", len(args))
			}
			return nil
		},
		RunE: func(_ *cobra.Command, args []string) error {
			file, many := scenario.DefaultFile, 0
			for _, f := range []struct {
				asked  bool
				folder string
			}{{launchDay, "launch-day"}, {planningDay, "planning-day"}, {teamWeek, "team-week"}} {
				if f.asked {
					file, many = f.folder, many+1
				}
			}
			if many > 1 {
				return inputErrorf("--launch-day, --planning-day and --team-week write a folder each; give one of them")
			}
			if len(args) == 1 {
				file = args[0]
			}
			switch {
			case launchDay:
				return writeDay(env, file, scenario.LaunchDay, "passes --plus-minus")
			case planningDay:
				return writeDay(env, file, scenario.PlanningDay, "contacts --iterations 10")
			case teamWeek:
				return writeDay(env, file, scenario.TeamWeek, "contacts --iterations 3")
			}
			return runNew(env, file)
		},
	}
	cmd.Flags().BoolVar(&launchDay, "launch-day", false, "write the scenarios of a launch day into a folder (launch-day where none is named)")
	cmd.Flags().BoolVar(&planningDay, "planning-day", false, "write the files of a day of contact planning into a folder (planning-day where none is named)")
	cmd.Flags().BoolVar(&teamWeek, "team-week", false, "write the files of a team's week into a folder (team-week where none is named)")
	return cmd
}

// writeDay writes the files of a day into a folder, all of them or none, and says how to
// go on.
func writeDay(env *Env, folder string, day func() ([]scenario.File, error), next string) error {
	files, err := day()
	if err != nil {
		return err
	}
	for _, f := range files {
		if path := filepath.Join(folder, f.Name); exists(path) {
			return taken(path)
		}
	}
	if err := os.MkdirAll(folder, 0o777); err != nil {
		return fmt.Errorf("making the folder %s: %w", folder, err)
	}
	for i, f := range files {
		if err := createText(filepath.Join(folder, f.Name), f.Text); err != nil {
			for _, made := range files[:i] {
				os.Remove(filepath.Join(folder, made.Name)) // of no use alone
			}
			return err
		}
	}
	_, err = fmt.Fprintf(env.Out, "wrote %d files into %s; next: slantwise %s --scenario %s\n", len(files), folder, next, filepath.Join(folder, files[0].Name))
	return err
}

func exists(path string) bool {
	_, err := os.Lstat(path)
	return err == nil
}

func runNew(env *Env, file string) error {
	ext := filepath.Ext(file)
	if ext != ".yaml" && ext != ".yml" || filepath.Base(file) == ext {
		return inputErrorf("%q: new writes YAML; give a name that ends in .yaml", file)
	}
	elementFile := strings.TrimSuffix(file, ext) + ".tle"
	scenarioText, elementText, err := scenario.Start(filepath.Base(elementFile))
	if err != nil {
		return err
	}
	for _, path := range []string{file, elementFile} {
		if exists(path) {
			return taken(path)
		}
	}
	if err := os.MkdirAll(filepath.Dir(file), 0o777); err != nil {
		return fmt.Errorf("making the folder of %s: %w", file, err)
	}
	if err := createText(elementFile, elementText); err != nil {
		return err
	}
	if err := createText(file, scenarioText); err != nil {
		os.Remove(elementFile) // it was made just now and is of no use alone
		return err
	}
	_, err = fmt.Fprintf(env.Out, "wrote %s and %s; next: slantwise check --scenario %s\n", file, elementFile, file)
	return err
}

func createText(path, text string) error {
	err := atomicfile.Create(path, 0o644, func(w io.Writer) error {
		_, err := io.WriteString(w, text)
		return err
	})
	if errors.Is(err, fs.ErrExist) {
		return taken(path)
	}
	return err
}

func taken(path string) error {
	return inputErrorf("%s: there is such a file already, and it is left as it is; name another FILE", path)
}
