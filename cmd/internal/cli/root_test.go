package cli

import (
	"strings"
	"testing"

	"github.com/spf13/cobra"
)

func TestWrongCommandLines(t *testing.T) {
	for _, tt := range []struct {
		args string
		want string // all of stderr
	}{
		{"chek", `slantwise: unknown command "chek" for slantwise; did you mean "check"; see slantwise --help`},
		{"zzzzzz", `slantwise: unknown command "zzzzzz" for slantwise; see slantwise --help`},
		{"--senario x", "slantwise: unknown flag: --senario; did you mean --scenario; see slantwise --help"},
		{"check --formt csv", "slantwise: unknown flag: --formt; did you mean --format; see slantwise check --help"},
		{"check --format xml", `slantwise: --format: "xml" is not allowed; it must be table, csv or json; see slantwise check --help`},
		{"check --format", "slantwise: flag needs an argument: --format; see slantwise check --help"},
		{"check now", `slantwise: slantwise check takes no "now"; all it needs is given by flags, see slantwise check --help`},
		{"new a.yaml b.yaml", "slantwise: new takes one FILE, not 2; see slantwise new --help"},
		{"help chek", `slantwise: unknown command "chek" for slantwise; did you mean "check"; see slantwise --help`},
		{"completion bsh", `slantwise: unknown command "bsh" for slantwise completion; did you mean "bash", "zsh", "fish"; see slantwise completion --help`},
		{"check --scenario nowhere.yaml", "slantwise: nowhere.yaml: there is no such file; check the name, or write a new scenario with: slantwise new"},
		{"check --window-length-h 1d", `slantwise: flag --window-length-h: window.length_h: "1d" is not allowed; it must be a number, greater than 0 and at most 87672 h; give the number alone, the name says the unit`},
	} {
		code, out, errOut := invoke(t, strings.Fields(tt.args)...)
		if code != ExitInput || out != "" || errOut != tt.want+"\n" {
			t.Errorf("%s:\n code %d, want %d\n stdout %q\n stderr %s want   %s", tt.args, code, ExitInput, out, errOut, tt.want)
		}
	}
}

func TestHelpListsExitCodes(t *testing.T) {
	code, out, errOut := invoke(t, "--help")
	if code != ExitAnswer || errOut != "" {
		t.Errorf("code %d, stderr %q", code, errOut)
	}
	for _, want := range []string{"0  an answer, an empty one too", "1  a failure", "2  the input is wrong", "Examples:"} {
		if !strings.Contains(out, want) {
			t.Errorf("the help lacks %q", want)
		}
	}
}

// TestEveryCommandIsExplained: each command of ours has a line, an example that
// names it, and refuses a flag that it does not know.
func TestEveryCommandIsExplained(t *testing.T) {
	var walk func(*cobra.Command)
	walk = func(c *cobra.Command) {
		if c.Name() == "help" || c.HasParent() && c.Parent().Name() == "completion" {
			return // the library's own
		}
		if c.Short == "" || !strings.Contains(c.Example, c.CommandPath()) {
			t.Errorf("%s: line %q, example %q", c.CommandPath(), c.Short, c.Example)
		}
		if code, _, _ := invoke(t, append(strings.Fields(c.CommandPath())[1:], "--no-such-flag")...); code != ExitInput {
			t.Errorf("%s --no-such-flag: code %d, want %d", c.CommandPath(), code, ExitInput)
		}
		for _, sub := range c.Commands() {
			walk(sub)
		}
	}
	walk(newRoot(newEnv(nil, nil, nil)))
}

func TestCompletion(t *testing.T) {
	for _, shell := range []string{"bash", "zsh", "fish", "powershell"} {
		if code, out, _ := invoke(t, "completion", shell); code != ExitAnswer || !strings.Contains(out, "slantwise") {
			t.Errorf("completion %s: code %d, %d bytes", shell, code, len(out))
		}
	}
	if _, out, _ := invoke(t, "__complete", "check", "--format", ""); !strings.Contains(out, "table\ncsv\njson") {
		t.Errorf("--format completes to %q", out)
	}
	t.Chdir(t.TempDir()) // the demo
	if _, out, _ := invoke(t, "__complete", "passes", "--station", ""); !strings.HasPrefix(out, "Skerry Point\nHoarfjord\n") {
		t.Errorf("--station completes to %q", out)
	}
	if _, out, _ := invoke(t, "__complete", "budget", "--horizon", ""); !strings.HasPrefix(out, "geometric\napparent\n") {
		t.Errorf("--horizon completes to %q", out)
	}
}

func TestVersion(t *testing.T) {
	if code, out, _ := invoke(t, "--version"); code != ExitAnswer || !strings.HasPrefix(out, "slantwise ") {
		t.Errorf("code %d, %q", code, out)
	}
}
