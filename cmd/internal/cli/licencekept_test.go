package cli

import (
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestLicenceIsKeptTo: the volume of a pass leaves out the time under the licence's 10
// deg of elevation, in the budget and in the report, and both name the licence. At 0.5
// MB/s the two cuts of the second pass over the hill (58.0 s and 57.5 s by the command
// licence) are 57.7 MB.
func TestLicenceIsKeptTo(t *testing.T) {
	inBytesScenario(t)
	ask := []string{"budget", "--station", "Test Hill", "--transmitter", "X-band", "--mode", "slow", "--pass", "2026-03-10T11:20:00Z"}
	with := askBudget(t, ask...)
	var told []string
	for _, n := range with.Assumptions {
		if n.Kind == "warning" && strings.Contains(n.Text, `licence "sky"`) {
			told = append(told, n.Text)
		}
	}
	if text := strings.Join(told, "\n"); !strings.Contains(text, "least elevation to receive 10 deg takes") || !strings.Contains(text, "EIRP at most 5 dBW is not kept") {
		t.Errorf("the budget tells of the licence: %q", told)
	}
	code, _, errOut := invoke(t, "report", "--station", "Test Hill")
	if code != ExitAnswer {
		t.Fatalf("code %d: %s", code, errOut)
	}
	named, pages := 0, 0
	err := filepath.WalkDir("slantwise-report", func(path string, _ fs.DirEntry, err error) error {
		if err != nil || filepath.Ext(path) != ".html" {
			return err
		}
		pages++
		text, err := os.ReadFile(path)
		if strings.Contains(string(text), "least elevation to receive 10 deg") {
			named++
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	if named < 6 {
		t.Errorf("%d pages name the licence, of %d", named, pages)
	}
	bare := bytesScenario[:strings.Index(bytesScenario, "licence:")]
	if err := os.WriteFile("slantwise.yaml", []byte(bare), 0o644); err != nil {
		t.Fatal(err)
	}
	without := askBudget(t, ask...)
	if d := without.Pass.ModeBytes - with.Pass.ModeBytes; d < 57.5e6 || d > 58e6 {
		t.Errorf("the licence takes %.0f B of %.0f B; want about 57.7 MB", d, without.Pass.ModeBytes)
	}
}
