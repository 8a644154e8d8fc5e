package cli

import (
	"fmt"
	"strconv"

	"github.com/spf13/pflag"

	"slantwise/cmd/internal/scenario"
)

// addNumber adds a flag that takes a finite number; without it *v stays nil.
func addNumber(fs *pflag.FlagSet, v **float64, name, usage string) {
	fs.Var(numberFlag{v}, name, usage)
}

type numberFlag struct{ v **float64 }

// String returns the number, empty where none was given.
func (n numberFlag) String() string {
	if *n.v == nil {
		return ""
	}
	return strconv.FormatFloat(**n.v, 'g', -1, 64)
}

// Type names the value in the help text.
func (n numberFlag) Type() string { return "NUMBER" }

// Set takes a number.
func (n numberFlag) Set(s string) error {
	v, err := scenario.ParseNumber(s)
	if err != nil {
		return err
	}
	*n.v = &v
	return nil
}

// addWorkers adds the flag --workers; 0, as many as the machine can, is its default.
func addWorkers(fs *pflag.FlagSet, n *int, what string) {
	fs.Var((*workersFlag)(n), "workers", "`HOW` many "+what+" at once; 0: as many as the machine can")
}

// maxWorkers is more than any machine has use for.
const maxWorkers = 10000

type workersFlag int

// String returns the number of workers.
func (w *workersFlag) String() string { return strconv.Itoa(int(*w)) }

// Type names the value in the help text.
func (w *workersFlag) Type() string { return "NUMBER" }

// Set takes a number of workers.
func (w *workersFlag) Set(s string) error {
	v, err := strconv.Atoi(s)
	if err != nil || v < 0 || v > maxWorkers {
		return fmt.Errorf("%q is not allowed; it must be a whole number, 0 (as many as the machine can) to %d", s, maxWorkers)
	}
	*w = workersFlag(v)
	return nil
}
