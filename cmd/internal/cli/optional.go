package cli

import "github.com/spf13/pflag"

// optional is a number of the command line that may be left out.
type optional struct {
	name, usage string
	into        **float64 // nil where the flag was not given
}

// addOptional adds the flags and returns what fills them once the line is parsed.
func addOptional(fs *pflag.FlagSet, list []optional) func(*pflag.FlagSet) {
	values := make([]float64, len(list))
	for i, o := range list {
		fs.Float64Var(&values[i], o.name, 0, o.usage)
	}
	return func(parsed *pflag.FlagSet) {
		for i, o := range list {
			if parsed.Changed(o.name) {
				*o.into = &values[i]
			}
		}
	}
}
