// Package cli is the command line of slantwise: a file a command.
package cli

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os/signal"
	"syscall"

	"github.com/spf13/cobra"
)

// Exit codes, promised in the help text.
const (
	ExitAnswer  = 0 // an answer, an empty one too
	ExitFailure = 1 // the program could not do what was asked
	ExitInput   = 2 // the input is wrong
)

// InputError marks an error of what the user gave: exit code 2.
type InputError struct{ Err error }

// Error returns the text of the error inside.
func (e *InputError) Error() string { return e.Err.Error() }

// Unwrap returns the error inside.
func (e *InputError) Unwrap() error { return e.Err }

// Env is what a command may touch of the world.
type Env struct {
	In       io.Reader
	Out, Err io.Writer
	Scenario string // value of --scenario; empty: slantwise.yaml here, else the embedded demo
}

// Main runs the program and returns its exit code.
func Main(args []string, in io.Reader, out, errOut io.Writer) int {
	ctx, stop := signal.NotifyContext(context.Background(), syscall.SIGINT, syscall.SIGTERM)
	defer stop()
	env := &Env{In: in, Out: out, Err: errOut}
	root := newRoot(env)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	if err == nil {
		return ExitAnswer
	}
	fmt.Fprintln(errOut, "slantwise: "+err.Error())
	var ie *InputError
	if errors.As(err, &ie) {
		return ExitInput
	}
	return ExitFailure
}

func newRoot(env *Env) *cobra.Command {
	root := &cobra.Command{
		Use:           "slantwise",
		Short:         "Satellite passes, link budgets and pass reports for ground stations",
		SilenceUsage:  true,
		SilenceErrors: true,
	}
	root.SetOut(env.Out)
	root.SetErr(env.Err)
	root.PersistentFlags().StringVar(&env.Scenario, "scenario", "", "scenario `FILE` (default slantwise.yaml here, else the embedded demo)")
	return root
}
