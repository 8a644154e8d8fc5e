package cli

import (
	_ "embed"
	"fmt"

	"github.com/spf13/cobra"
)

// planSchema describes the JSON of a contact plan, as JSON Schema, draft 2020-12.
//
//go:embed contactplan.schema.json
var planSchema string

func newContactsSchema(env *Env) *cobra.Command {
	return &cobra.Command{
		Use:     "schema",
		Short:   "Write the JSON Schema of contacts --format json",
		Long:    `Write the JSON Schema (draft 2020-12) that the answer of contacts --format json keeps to.`,
		Example: `  slantwise contacts schema > contactplan.schema.json`,
		Args:    noArgs,
		RunE: func(*cobra.Command, []string) error {
			if _, err := fmt.Fprint(env.Out, planSchema); err != nil {
				return fmt.Errorf("write the schema: %w", err)
			}
			return nil
		},
	}
}
