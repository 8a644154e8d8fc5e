package cli

import (
	"context"

	"github.com/spf13/cobra"
)

func newCheck(env *Env) *cobra.Command {
	return &cobra.Command{Use: "check", RunE: func(cmd *cobra.Command, _ []string) error { return runCheck(cmd.Context(), env) }}
}
func runCheck(ctx context.Context, env *Env) error {
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	for _, a := range s.Assumptions {
		env.note("%s", a)
	}
	return nil
}
