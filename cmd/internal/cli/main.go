// Package cli is the command line of slantwise: a file a command.
package cli

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os/signal"
	"syscall"
	"time"

	"slantwise/cmd/internal/atomicfile"
)

// Exit codes, promised in the help text.
const (
	ExitAnswer  = 0 // an answer, an empty one too
	ExitFailure = 1 // the program could not do what was asked
	ExitInput   = 2 // the input is wrong
)

// Main runs the program and returns its exit code.
func Main(args []string, in io.Reader, out, errOut io.Writer) int {
	ctx, stop := signal.NotifyContext(context.Background(), syscall.SIGINT, syscall.SIGTERM)
	defer stop()
	// A second interrupt then has its usual effect and ends the process.
	context.AfterFunc(ctx, stop)
	// A reader that has gone (| head) then shows as an error of the write, which is
	// met in exitCode, so that temporary files are removed on the way out.
	signal.Ignore(syscall.SIGPIPE)
	return run(ctx, args, newEnv(in, out, errOut))
}

// patience is how long an interrupted command may take to tidy up.
const patience = 500 * time.Millisecond

// patienceWithResult is how long one may take that writes what it has found so far.
const patienceWithResult = time.Minute

// run executes the command line and returns the exit code. An interrupted command
// that does not return within patience is left behind.
func run(ctx context.Context, args []string, env *Env) int {
	root := newRoot(env)
	root.SetArgs(args)
	help := &watchedWriter{to: env.Out}
	root.SetOut(help)
	done := make(chan error, 1)
	go func() {
		err := root.ExecuteContext(ctx)
		if help.err != nil {
			env.started = true // the command line was right; what failed is the writing
			err = help.err
		}
		done <- err
	}()
	var err error
	select {
	case err = <-done:
	case <-ctx.Done():
		select {
		case err = <-done:
		case <-time.After(env.patience()):
			err = ctx.Err()
		}
	}
	if ctx.Err() != nil && err != nil {
		atomicfile.RemovePending()
		fmt.Fprintln(env.Err, "slantwise: interrupted; nothing half-written was left behind")
		return ExitFailure
	}
	return exitCode(env, err)
}

// exitCode tells the user of the error, if there is one, and returns the exit code.
func exitCode(env *Env, err error) int {
	if err == nil || errors.Is(err, syscall.EPIPE) { // the reader had enough
		return ExitAnswer
	}
	fmt.Fprintln(env.Err, "slantwise: "+failureText(err))
	var ie *InputError
	if errors.As(err, &ie) || !env.started {
		return ExitInput
	}
	return ExitFailure
}

// watchedWriter keeps the first error of a writer; help and version are written by
// code that drops it.
type watchedWriter struct {
	to  io.Writer
	err error
}

// Write passes p on.
func (w *watchedWriter) Write(p []byte) (int, error) {
	n, err := w.to.Write(p)
	if err != nil && w.err == nil {
		w.err = fmt.Errorf("write the help: %w", err)
	}
	return n, err
}
