package cli

import (
	"encoding/csv"
	"encoding/json"
	"html"
	"os"
	"strings"
	"testing"
)

// TestComparePage writes the page of two scenarios that differ in the power alone: every
// margin rises by 3.01 dB, the key that differs is named, and page, CSV and JSON agree.
func TestComparePage(t *testing.T) {
	compareFiles(t)
	text, err := os.ReadFile("a.yaml")
	if err != nil {
		t.Fatal(err)
	}
	louder := strings.Replace(string(text), "power_w: 1.0", "power_w: 2.0", 1)
	if err := os.WriteFile("c.yaml", []byte(louder), 0o600); err != nil {
		t.Fatal(err)
	}
	if code, _, errOut := invoke(t, "compare", "a.yaml", "c.yaml", "--page", "louder.html"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	read := func(name string) string {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		return string(text)
	}
	var j struct {
		Before, After struct {
			Orbits []struct {
				Epoch string  `json:"epoch_utc"`
				Age   float64 `json:"age_at_end_days"`
			}
			Defaults []string
		}
		Totals []struct {
			Before int     `json:"passes_before"`
			After  int     `json:"passes_after"`
			Margin float64 `json:"median_margin_change_db"`
		}
		Passes      []map[string]any
		Differences []struct{ Key, Before, After string }
	}
	if err := json.Unmarshal([]byte(read("louder.json")), &j); err != nil {
		t.Fatal(err)
	}
	if len(j.Differences) != 1 || !strings.HasSuffix(j.Differences[0].Key, ".power_w") || j.Differences[0].Before != "1.0" || j.Differences[0].After != "2.0" {
		t.Errorf("differences %q", j.Differences)
	}
	if all := j.Totals[0]; all.Before != all.After || all.Before != len(j.Passes) || all.Margin < 3.00 || all.Margin > 3.02 {
		t.Errorf("sums %+v over %d passes", j.Totals[0], len(j.Passes))
	}
	if o := j.After.Orbits; len(o) != 1 || o[0].Epoch != "2026-09-14T12:00:00.000Z" || o[0].Age != 1.5 {
		t.Errorf("orbits %+v", o)
	}
	if len(j.Before.Defaults) == 0 {
		t.Error("no default is told")
	}
	rows, err := csv.NewReader(strings.NewReader(read("louder.csv"))).ReadAll()
	if err != nil || len(rows) != len(j.Passes)+1 {
		t.Fatalf("%d rows of CSV for %d passes, %v", len(rows), len(j.Passes), err)
	}
	page := html.UnescapeString(read("louder.html"))
	for _, want := range []string{"a.yaml before, c.yaml after", "by +3.01 dB (median)", "epoch 2026-09-14 12:00:00 UTC, 12.0 h to 36.0 h old", ".power_w", "<td>1.0</td><td>2.0</td>", "P.618-14", `href="louder.csv"`} {
		if !strings.Contains(page, want) {
			t.Errorf("no %q on the page", want)
		}
	}
	if strings.Contains(read("louder.html"), "<script") {
		t.Error("the page has a script")
	}
}

// TestCompareUplink: the margin of an uplink is in JSON, and in tables and CSV only where
// it is named; that of a file against itself is the same.
func TestCompareUplink(t *testing.T) {
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new", "--launch-day", "day"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	columns := func(args ...string) string {
		code, out, errOut := invoke(t, append([]string{"compare", "day/nominal.yaml", "day/nominal.yaml", "--station", "Hoarfjord"}, args...)...)
		if code != ExitAnswer {
			t.Fatal(errOut)
		}
		return out
	}
	if head, _, _ := strings.Cut(columns("--format", "csv"), "\n"); strings.Contains(head, "uplink") {
		t.Errorf("without --uplink the CSV has %s", head)
	}
	if head, _, _ := strings.Cut(columns("--format", "csv", "--uplink", "command"), "\n"); !strings.HasSuffix(head, ",uplink_margin_before_db,uplink_margin_after_db") {
		t.Errorf("with --uplink the CSV has %s", head)
	}
	var j struct {
		Passes []struct {
			Before *float64 `json:"uplink_margin_before_db"`
			After  *float64 `json:"uplink_margin_after_db"`
		}
	}
	if err := json.Unmarshal([]byte(columns("--format", "json")), &j); err != nil || len(j.Passes) == 0 {
		t.Fatal(err, len(j.Passes))
	}
	for _, p := range j.Passes {
		if p.Before == nil || p.After == nil || *p.Before != *p.After {
			t.Errorf("margins %v and %v of the same uplink", p.Before, p.After)
		}
	}
}

func TestComparePageRefuses(t *testing.T) {
	compareFiles(t)
	for _, c := range []struct{ args, want string }{
		{"compare a.yaml b.yaml --page changes", "does not end in .html"},
		{"compare a.yaml b.yaml --page missing/changes.html", "missing"},
		{"compare a.yaml b.yaml --uplink command", "uplink: the scenario holds none"},
	} {
		code, _, errOut := invoke(t, strings.Fields(c.args)...)
		if code == ExitAnswer || !strings.Contains(errOut, c.want) {
			t.Errorf("%s: code %d, stderr %s", c.args, code, errOut)
		}
	}
}
