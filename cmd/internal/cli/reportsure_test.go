package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The report of a scenario that states how uncertain its positions are tells it on each page, with
// a radio and without, and in the index.
func TestReportOfAnUncertainOrbit(t *testing.T) {
	uncertainDemo(t, "3")
	folder := filepath.Join(t.TempDir(), "out")
	code, _, errOut := invoke(t, "report", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--station", "Acacia Ridge", "--into", folder)
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	pages, err := filepath.Glob(filepath.Join(folder, "passes", "*.html"))
	if err != nil || len(pages) < 4 {
		t.Fatalf("%d pages, %v", len(pages), err)
	}
	for _, page := range pages {
		text, err := os.ReadFile(page)
		if err != nil {
			t.Fatal(err)
		}
		if !strings.Contains(string(text), "By the orbit’s error AOS ±0.") || !strings.Contains(string(text), "Here the position is uncertain by the age of the element set") {
			t.Errorf("%s does not tell how sure the pass is", filepath.Base(page))
		}
		// Acacia Ridge has no antenna for this transmitter.
		if radio := strings.Contains(page, "skerry"); radio != strings.Contains(string(text), "Doppler, plus-minus") || radio != strings.Contains(string(text), "For a pass overhead it is too narrow from") {
			t.Errorf("%s: what only a radio has", filepath.Base(page))
		}
	}
	index, err := os.ReadFile(filepath.Join(folder, "index.html"))
	if err != nil || !strings.Contains(string(index), "beam unsure for ") {
		t.Errorf("the index does not tell of a narrow beam (%v)", err)
	}
}
