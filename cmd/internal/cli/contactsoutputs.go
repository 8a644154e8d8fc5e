package cli

import (
	"io"

	"github.com/spf13/pflag"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/planfiles"
)

// planOutputs are the files that a plan is written to beside standard output.
type planOutputs struct {
	save string
}

func (f *planOutputs) add(fs *pflag.FlagSet) {
	fs.StringVar(&f.save, "save", "", "CSV `FILE` to write the plan to, too")
}

// writeFiles writes the plan to the files asked for.
func (a *planAnswer) writeFiles(env *Env, f *planOutputs) error {
	if f.save != "" {
		return atomicfile.Write(f.save, 0o644, func(w io.Writer) error {
			return writeCSV(w, planfiles.PlanColumns, a.csv())
		})
	}
	return nil
}
