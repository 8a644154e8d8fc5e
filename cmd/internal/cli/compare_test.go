package cli

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// compareFiles writes a scenario and one with another radio and a later window.
func compareFiles(t *testing.T) {
	t.Helper()
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new", "a.yaml"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	text, err := os.ReadFile("a.yaml")
	if err != nil {
		t.Fatal(err)
	}
	after := strings.NewReplacer("power_w: 1.0", "power_w: 2.0", "start_utc: 2026-09-15T00", "start_utc: 2026-09-15T06").Replace(string(text))
	if err := os.WriteFile("b.yaml", []byte(after), 0o600); err != nil {
		t.Fatal(err)
	}
}

func compareRows(t *testing.T, args ...string) []map[string]string {
	t.Helper()
	code, out, errOut := invoke(t, append([]string{"compare", "--format", "csv"}, args...)...)
	if code != ExitAnswer {
		t.Fatalf("code %d: %s", code, errOut)
	}
	all, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, r := range all[1:] {
		row := map[string]string{}
		for i, name := range all[0] {
			row[name] = r[i]
		}
		rows = append(rows, row)
	}
	return rows
}

// TestCompareWithItself: every pass is the same, and --changed leaves none.
func TestCompareWithItself(t *testing.T) {
	compareFiles(t)
	rows := compareRows(t, "a.yaml", "a.yaml")
	if len(rows) < 3 {
		t.Fatalf("%d rows", len(rows))
	}
	for _, r := range rows {
		if r["change"] != "same" || r["aos_shift_s"] != "0.000" || r["margin_before_db"] != r["margin_after_db"] || r["margin_after_db"] == "" || r["volume_after_bytes"] == "" {
			t.Errorf("%v", r)
		}
	}
	if rows := compareRows(t, "a.yaml", "a.yaml", "--changed"); len(rows) > 0 {
		t.Errorf("--changed lists %v", rows)
	}
}

// TestCompareRadioAndWindow: twice the power adds 3.01 dB to every pass in both files,
// passes at the ends of the windows are gone or new, and all passes of both lists stand
// in the rows.
func TestCompareRadioAndWindow(t *testing.T) {
	compareFiles(t)
	count := map[string]int{}
	for _, r := range compareRows(t, "a.yaml", "b.yaml") {
		count[r["change"]]++
		if before, after := r["margin_before_db"], r["margin_after_db"]; r["change"] == "same" && math.Abs(near(t, after)-near(t, before)-301) > 1 {
			t.Errorf("margin %s after %s dB", after, before)
		}
	}
	for _, change := range []string{"same", "gone", "new"} {
		if count[change] == 0 {
			t.Errorf("no pass is %s: %v", change, count)
		}
	}
	for i, file := range []string{"a.yaml", "b.yaml"} {
		_, out, _ := invoke(t, "passes", "--scenario", file, "--format", "csv")
		alone := count[[]string{"gone", "new"}[i]]
		if got, want := count["same"]+count["moved"]+alone, strings.Count(out, "\n")-1; got != want {
			t.Errorf("%s: %d passes in the rows, %d in the list", file, got, want)
		}
	}
}

// near reads a figure in whole hundredths.
func near(t *testing.T, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return math.Round(v * 100)
}

func TestCompareRefuses(t *testing.T) {
	compareFiles(t)
	for _, c := range []struct{ name, want string }{
		{"compare a.yaml", "takes two scenario files"},
		{"compare a.yaml missing.yaml", "missing.yaml"},
		{"compare a.yaml b.yaml --transmitter X-band", `it holds "downlink"` + "\n"},
		{"compare a.yaml b.yaml --spacecraft Nobody", "Nobody"},
		{"compare --scenario a.yaml a.yaml b.yaml", "--scenario does not go with compare"},
	} {
		code, _, errOut := invoke(t, strings.Fields(c.name)...)
		if code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%s: code %d, stderr %s", c.name, code, errOut)
		}
	}
}
