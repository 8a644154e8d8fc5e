package cli

import (
	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
)

// completeFlags tells the shell which words the flags of a command and of those below
// it may have: fixed ones, or the names that the scenario holds.
func completeFlags(cmd *cobra.Command, env *Env) {
	fixed := map[string][]string{
		"format":         {string(formatTable), string(formatCSV), string(formatJSON)},
		"convert":        elementKinds(),
		"notation":       {"kvn", "xml"},
		"sort":           passOrders,
		"axis":           {"power", "elevation", "noise", "frequency"},
		"horizon":        {"geometric", "apparent"},
		"locked":         lockedWords,
		"element-choice": {"newest", "nearest"},
	}
	for flag, words := range fixed {
		complete(cmd, flag, func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return words, cobra.ShellCompDirectiveNoFileComp
		})
	}
	complete(cmd, "spacecraft", env.names(func(s *scenario.Scenario) (names []string) {
		for i := range s.Spacecraft {
			names = append(names, s.Spacecraft[i].Name)
		}
		return names
	}))
	complete(cmd, "station", env.names(func(s *scenario.Scenario) (names []string) {
		for i := range s.Stations {
			names = append(names, s.Stations[i].Site.Name)
		}
		return names
	}))
	for _, sub := range cmd.Commands() {
		completeFlags(sub, env)
	}
}

// complete registers the words of a flag that a command has of its own.
func complete(cmd *cobra.Command, flag string, words cobra.CompletionFunc) {
	if cmd.LocalNonPersistentFlags().Lookup(flag) == nil && cmd.PersistentFlags().Lookup(flag) == nil {
		return
	}
	if err := cmd.RegisterFlagCompletionFunc(flag, words); err != nil {
		panic(err) // the flag is there, and nobody else registers one
	}
}

// names completes with names of the scenario; with none where it cannot be read.
func (e *Env) names(of func(*scenario.Scenario) []string) cobra.CompletionFunc {
	return func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
		s, err := scenario.Load(scenario.Request{Path: e.Scenario, Flags: e.overrides, Need: needOrbits})
		if err != nil {
			return nil, cobra.ShellCompDirectiveNoFileComp
		}
		return of(s), cobra.ShellCompDirectiveNoFileComp
	}
}
