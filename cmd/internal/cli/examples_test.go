package cli

import (
	"os"
	"strings"
	"testing"

	"github.com/spf13/cobra"
)

// TestExamplesRun types in every example of the help, but for what needs a network.
func TestExamplesRun(t *testing.T) {
	var walk func(*cobra.Command)
	walk = func(c *cobra.Command) {
		for _, example := range exampleLines(c.Example) {
			if strings.Contains(example, "https://") {
				continue
			}
			t.Run(example, func(t *testing.T) {
				t.Chdir(t.TempDir())
				prepareExample(t, c.Name())
				args := words(t, example)
				if args[0] != "slantwise" {
					t.Fatalf("%q does not begin with the program's name", args)
				}
				if code, _, errOut := invoke(t, args[1:]...); code != ExitAnswer {
					t.Errorf("code %d, stderr %s", code, errOut)
				}
			})
		}
		for _, sub := range c.Commands() {
			walk(sub)
		}
	}
	walk(newRoot(newEnv(nil, nil, nil)))
}

// exampleLines joins lines that end in a backslash with the next.
func exampleLines(text string) []string {
	var lines []string
	for _, l := range strings.Split(strings.ReplaceAll(text, "\\\n", " "), "\n") {
		if l = strings.TrimSpace(l); l != "" {
			lines = append(lines, l)
		}
	}
	return lines
}

// prepareExample makes the files that examples name; new makes its own.
func prepareExample(t *testing.T, command string) {
	t.Helper()
	if command == "new" {
		return
	}
	if code, _, errOut := invoke(t, "new", "plans/summer.yaml"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	if err := os.Link("plans/summer.tle", "weather.tle"); err != nil {
		t.Fatal(err)
	}
	for _, side := range []string{"before.yaml", "after.yaml"} {
		if code, _, errOut := invoke(t, "new", side); code != ExitAnswer {
			t.Fatal(errOut)
		}
	}
	switch command {
	case "contacts", "verify", "explain":
		if code, _, errOut := invoke(t, "contacts", "--iterations", "1", "--save", "plan.csv"); code != ExitAnswer {
			t.Fatal(errOut)
		}
	case "add", "show", "fit", "whose", "export", "import":
		if code, _, errOut := invoke(t, "log", "rehearse", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe", "--into", "rehearsal.csv"); code != ExitAnswer {
			t.Fatal(errOut)
		}
		if command != "show" && command != "fit" && command != "export" && command != "import" {
			break
		}
		if code, _, errOut := invoke(t, "log", "add", "rehearsal.csv", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "safe"); code != ExitAnswer {
			t.Fatal(errOut)
		}
		if command == "import" {
			if code, _, errOut := invoke(t, "log", "export", "--into", "logbook.csv"); code != ExitAnswer {
				t.Fatal(errOut)
			}
		}
	case "compare":
		if err := os.WriteFile("plan.csv", []byte(samplePlan), 0o600); err != nil {
			t.Fatal(err)
		}
		if err := os.Link("plan.csv", "later.csv"); err != nil {
			t.Fatal(err)
		}
	}
	if err := os.WriteFile("positions.csv", []byte(samplePositions), 0o600); err != nil {
		t.Fatal(err)
	}
	// The columns that the model rain-specific reads.
	table := "frequency_ghz,elevation_deg,polarization_tilt_deg,rain_rate_mm_h\n20,40,45,10\n"
	if err := os.WriteFile("in.csv", []byte(table), 0o600); err != nil {
		t.Fatal(err)
	}
}

// samplePlan is a plan by hand.
const samplePlan = "station,antenna,spacecraft,start_utc,end_utc\nG,A,S,2026-03-10T00:00:00Z,2026-03-10T00:10:00Z\n"

// words splits a line as a shell does, as far as the examples need it: at blanks, not
// within double quotes, up to a comment or a redirection.
func words(t *testing.T, line string) []string {
	t.Helper()
	var out []string
	quoted := strings.Split(line, `"`)
	if len(quoted)%2 == 0 {
		t.Fatalf("a quote is left open: %s", line)
	}
	for i, part := range quoted {
		if i%2 == 1 {
			out = append(out, part)
			continue
		}
		for _, w := range strings.Fields(part) {
			if w == "#" || w == ">" {
				return out
			}
			out = append(out, w)
		}
	}
	return out
}
