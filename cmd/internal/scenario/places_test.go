package scenario_test

import (
	"os"
	"strings"
	"testing"

	"slantwise/cmd/internal/scenario"
)

func writeFile(t *testing.T, name, text string) {
	t.Helper()
	if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

// TestUnreadablePlaces are faults of the file itself, which no text can hold.
func TestUnreadablePlaces(t *testing.T) {
	t.Chdir(t.TempDir())
	huge, err := os.Create("huge.yaml")
	if err != nil {
		t.Fatal(err)
	}
	if err := huge.Truncate(200 << 20); err != nil { // sparse: takes no room
		t.Fatal(err)
	}
	if err := huge.Close(); err != nil {
		t.Fatal(err)
	}
	if err := os.Mkdir("folder.yaml", 0o755); err != nil {
		t.Fatal(err)
	}
	writeFile(t, "locked.yaml", "window: {}\n")
	if err := os.Chmod("locked.yaml", 0); err != nil {
		t.Fatal(err)
	}
	for file, want := range map[string]string{
		"huge.yaml":    "huge.yaml: the file is larger than 8 MB, which no scenario is; name a scenario; element sets belong under element_files",
		"folder.yaml":  "folder.yaml: this is a directory; name the scenario file in it",
		"nowhere.yaml": "nowhere.yaml: there is no such file; check the name, or write a new scenario with: slantwise new",
		"locked.yaml":  "locked.yaml: there is no permission to read it; give yourself the right to read it",
	} {
		if file == "locked.yaml" && os.Geteuid() == 0 {
			continue // the administrator may read everything
		}
		if _, err := scenario.Load(scenario.Request{Path: file}); err == nil || err.Error() != want {
			t.Errorf("%s:\n got %v\nwant %s", file, err, want)
		}
	}
}

// TestLongLists are refused by their length before each item is.
func TestLongLists(t *testing.T) {
	t.Chdir(t.TempDir())
	writeFile(t, "long.yaml", "stations: ["+strings.Repeat("{},", 10_001)+"]\n")
	_, err := scenario.Load(scenario.Request{Path: "long.yaml"})
	const want = "long.yaml:1: stations: the list has 10001 items; it may have at most 10000"
	if err == nil || !strings.Contains(err.Error(), want) {
		t.Errorf("got %v, want it to hold %q", err, want)
	}
	for _, ext := range []string{"yaml", "toml", "json"} {
		writeFile(t, "huge."+ext, `{"stations": [`+strings.Repeat("0,", 2_000_000)+"0]}")
		want := "huge." + ext + ": the file holds more than 1000000 values; make it smaller"
		if _, err := scenario.Load(scenario.Request{Path: "huge." + ext}); err == nil || err.Error() != want {
			t.Errorf("two million values: got %v, want %s", err, want)
		}
	}
	writeFile(t, "many.yaml", "stations: ["+strings.Repeat("{},", 1000)+"]\n")
	_, err = scenario.Load(scenario.Request{Path: "many.yaml"})
	if err == nil || strings.Count(err.Error(), "\n") != 100 || !strings.HasSuffix(err.Error(), " more faults") {
		t.Errorf("a thousand wrong stations do not give 100 faults and their number: %v", err)
	}
}
