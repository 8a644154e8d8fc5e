package cli

import (
	"errors"
	"fmt"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"slantwise/cmd/internal/nearest"
)

// newRoot builds the whole command line. Each command stands in a file of its own
// and is registered here.
func newRoot(env *Env) *cobra.Command {
	root := &cobra.Command{
		Use:   "slantwise",
		Short: "Satellite passes, link budgets and pass reports for ground stations",
		Long: `slantwise tells when a ground station hears a spacecraft, how strong, at which
data rate, and how many bytes come down.

It works on a scenario file (window, element sets, spacecraft, stations). Without
one it shows an embedded demo.

Results go to stdout, words for people to stderr. Exit codes:
  0  an answer, an empty one too
  1  a failure
  2  the input is wrong`,
		Example: `  slantwise new                                  # write a scenario to start from
  slantwise check                                # find all faults of ./slantwise.yaml
  slantwise passes --format csv > passes.csv     # all passes of the window`,
		Args:          noArgs,
		RunE:          func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
		SilenceUsage:  true,
		SilenceErrors: true,
		Version:       version(),
	}
	root.SetOut(env.Out)
	root.SetErr(env.Err)
	root.SetIn(env.In)
	root.SetVersionTemplate("slantwise {{.Version}}\n")
	root.SetFlagErrorFunc(flagError)
	root.SuggestionsMinimumDistance = 2
	addScenarioFlags(root, env)
	root.AddCommand(
		newCheck(env),
		newElements(env),
		newNew(env),
		newPasses(env),
		newCompare(env),
		newPointing(env),
		newBudget(env),
		newPath(env),
		newReport(env),
		newServe(env),
		newShift(env),
		newModes(env),
		newTuning(env),
		newFlux(env),
		newDesignControl(env),
		newLicence(env),
		newRates(env),
		newRecorder(env),
		newDish(env),
		newAcceptance(env),
		newSites(env),
		newFollow(env),
		newLog(env),
		newContacts(env),
	)
	completeFlags(root, env)
	refuseUnknownTopics(root)
	markStart(root, env)
	return root
}

// addScenarioFlags adds what chooses the scenario and replaces its scalars.
func addScenarioFlags(root *cobra.Command, env *Env) {
	fs := root.PersistentFlags()
	fs.StringVar(&env.Scenario, "scenario", "", "scenario `FILE`: YAML, TOML or JSON (default slantwise.yaml here, else the embedded demo)")
	env.overrides = map[string]*pflag.Flag{}
	for _, o := range []struct{ flag, key, usage string }{
		{"window-start", "window.start_utc", "start of the window, `UTC`, in place of the scenario's"},
		{"window-end", "window.end_utc", "end of the window, `UTC`, in place of the scenario's"},
		{"window-length-h", "window.length_h", "length of the window in `HOURS`, in place of the scenario's"},
		{"element-choice", "element_choice", "`newest` or nearest, in place of the scenario's"},
		{"horizon", "horizon", "`geometric` or apparent elevation decides AOS and LOS, in place of the scenario's"},
		{"exceeded-percent", "path.exceeded_percent", "attenuation and noise exceeded for so many `PERCENT` of an average year, in place of the scenario's"},
	} {
		fs.String(o.flag, "", o.usage)
		env.overrides[o.key] = fs.Lookup(o.flag)
	}
	fs.Bool("clear-sky", false, "gas of the ordinary air alone: no cloud, rain or scintillation")
	env.overrides["path.clear_sky"] = fs.Lookup("clear-sky")
}

// refuseUnknownTopics makes the library's own commands refuse words that they do not
// know, which they answer with their help.
func refuseUnknownTopics(root *cobra.Command) {
	root.InitDefaultCompletionCmd()
	root.InitDefaultHelpCmd()
	for _, c := range root.Commands() {
		switch c.Name() {
		case "completion":
			c.Args = noArgs
			c.RunE = func(cmd *cobra.Command, _ []string) error { return cmd.Help() }
			c.Example = "  slantwise completion bash > /etc/bash_completion.d/slantwise"
		case "help":
			c.Args = func(cmd *cobra.Command, args []string) error {
				found, rest, err := root.Find(args)
				if err != nil || len(rest) > 0 && found.HasSubCommands() {
					return noArgs(root, args)
				}
				return nil
			}
		}
	}
}

// markStart lets every command note that it began: what fails before that is a
// fault of the command line.
func markStart(cmd *cobra.Command, env *Env) {
	if run := cmd.RunE; run != nil {
		cmd.RunE = func(c *cobra.Command, args []string) error {
			env.started = true
			return run(c, args)
		}
	}
	for _, sub := range cmd.Commands() {
		markStart(sub, env)
	}
}

// noArgs refuses words that are no flag, and names the nearest command where a
// command was meant.
func noArgs(cmd *cobra.Command, args []string) error {
	if len(args) == 0 {
		return nil
	}
	if !cmd.HasSubCommands() {
		return inputErrorf("%s takes no %q; all it needs is given by flags, see %s --help", cmd.CommandPath(), args[0], cmd.CommandPath())
	}
	var known []string
	for _, sub := range cmd.Commands() {
		if sub.IsAvailableCommand() {
			known = append(known, sub.Name())
		}
	}
	return inputErrorf("unknown command %q for %s%s; see %s --help", args[0], cmd.CommandPath(), meant(args[0], known), cmd.CommandPath())
}

// flagError says which flag has a wrong value, and names the nearest flag where one
// is unknown.
func flagError(cmd *cobra.Command, err error) error {
	text := err.Error()
	var wrong *pflag.InvalidValueError
	if errors.As(err, &wrong) {
		text = "--" + wrong.GetFlag().Name + ": " + errors.Unwrap(wrong).Error()
	}
	if name, ok := strings.CutPrefix(text, "unknown flag: --"); ok {
		var known []string
		cmd.Flags().VisitAll(func(f *pflag.Flag) { known = append(known, f.Name) })
		for i, n := range nearest.Names(name, known, 3) {
			if i == 0 {
				text += "; did you mean"
			}
			text += " --" + n
		}
	}
	return inputErrorf("%s; see %s --help", text, cmd.CommandPath())
}

// meant returns `; did you mean "a", "b"`, or nothing where no known name is near.
func meant(name string, known []string) string {
	near := nearest.Names(name, known, 3)
	if len(near) == 0 {
		return ""
	}
	quoted := make([]string, len(near))
	for i, n := range near {
		quoted[i] = fmt.Sprintf("%q", n)
	}
	return "; did you mean " + strings.Join(quoted, ", ")
}
