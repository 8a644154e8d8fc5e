package cli

import (
	"fmt"
	"io"
	"os"
	"sync/atomic"
	"time"

	"github.com/spf13/pflag"
	"golang.org/x/term"

	"slantwise/cmd/internal/scenario"
)

// InputError marks an error of what the user gave: exit code 2.
type InputError struct{ Err error }

// Error returns the text of the error inside.
func (e *InputError) Error() string { return e.Err.Error() }

// Unwrap returns the error inside.
func (e *InputError) Unwrap() error { return e.Err }

// inputErrorf returns an *InputError with a formatted text.
func inputErrorf(format string, args ...any) error {
	return &InputError{Err: fmt.Errorf(format, args...)}
}

// Env is what a command may touch of the world.
type Env struct {
	In       io.Reader
	Out, Err io.Writer
	Now      func() time.Time // the clock
	Scenario string           // value of --scenario; empty: slantwise.yaml here, else the embedded demo

	overrides map[string]*pflag.Flag // flags that replace a scenario key, by key path
	started   bool                   // the command line was understood and the command began
	opened    func(file string)      // told of each file that a scenario is read from; nil: nobody asks
	finishes  *atomic.Bool           // an interrupt makes the command finish with what it has
}

func newEnv(in io.Reader, out, errOut io.Writer) *Env {
	return &Env{In: in, Out: out, Err: errOut, Now: time.Now, finishes: new(atomic.Bool)}
}

// need says what of the scenario a command uses.
type need = scenario.Need

// needOrbits is a command that flies the spacecraft: window and element sets must
// be there. needRadio is one with a stated geometry: element files stay unread.
const (
	needOrbits = scenario.NeedOrbits
	needRadio  = scenario.NeedRadio
)

// load reads the scenario of the command line, and says on stderr which one it is
// where none was named, and what it warns of. Faults come all at once, as an
// *InputError.
func (e *Env) load(n need) (*scenario.Scenario, error) {
	s, err := e.read(n)
	if err != nil {
		return nil, err
	}
	e.warn(s)
	return s, nil
}

// warn says what a scenario warns of.
func (e *Env) warn(s *scenario.Scenario) {
	for i, w := range s.Warnings {
		if i == warningLimit {
			e.note("warning: and %d more; slantwise check lists them all", len(s.Warnings)-i)
			break
		}
		e.note("warning: %s", printable(w.String()))
	}
}

// warningLimit is how many warnings a command tells; a thousand old element sets
// must not push the answer off the screen.
const warningLimit = 10

// read is load without the warnings, for a command that tells them itself.
func (e *Env) read(n need) (*scenario.Scenario, error) {
	s, err := e.open(n)
	if err != nil {
		return nil, err
	}
	if s.Demo {
		e.note("no --scenario and no %s here: this is the embedded demo (slantwise new writes a scenario to start from)", scenario.DefaultFile)
	}
	return s, nil
}

// open is read without a word, for a command that may not use what the demo says.
func (e *Env) open(n need) (*scenario.Scenario, error) {
	s, err := scenario.Load(scenario.Request{Path: e.Scenario, Flags: e.overrides, Need: n, Opened: e.opened})
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return s, nil
}

// patience is how long the command may take after an interrupt.
func (e *Env) patience() time.Duration {
	if e.finishes.Load() {
		return patienceWithResult
	}
	return patience
}

// note writes a line for people to stderr.
func (e *Env) note(format string, args ...any) {
	fmt.Fprintf(e.Err, "slantwise: "+format+"\n", args...)
}

// outWidth returns the width of the terminal that stdout is, or 0 where stdout is
// no terminal.
func (e *Env) outWidth() int {
	f, ok := e.Out.(*os.File)
	if !ok || !term.IsTerminal(int(f.Fd())) {
		return 0
	}
	width, _, err := term.GetSize(int(f.Fd()))
	if err != nil { // a terminal that does not tell its size gets plain output
		return 0
	}
	return width
}

// errIsTerminal tells whether someone watches stderr.
func (e *Env) errIsTerminal() bool {
	f, ok := e.Err.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}
