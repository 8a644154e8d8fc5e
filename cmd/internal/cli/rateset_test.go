package cli

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"
)

type shareRow struct {
	Station, Link, Direction string
	AOS                      string `json:"aos_utc"`
	LOS                      string `json:"los_utc"`
	Seconds, Bytes           float64
	AloneSeconds             float64 `json:"alone_seconds"`
	AloneBytes               float64 `json:"alone_bytes"`
}

func askShares(t *testing.T, args ...string) []shareRow {
	t.Helper()
	code, out, errOut := invoke(t, append([]string{"rates", "--format", "json"}, args...)...)
	var a struct{ Shares []shareRow }
	if err := json.Unmarshal([]byte(out), &a); code != ExitAnswer || err != nil || len(a.Shares) == 0 {
		t.Fatalf("code %d, %d rows, %v: %s", code, len(a.Shares), err, errOut)
	}
	return a.Shares
}

// TestLinkSetOfTheDemo: alone each downlink brings what rates says; with commands first
// the uplink works for its minute, and the half-duplex radio gives up 2 s of each 10 s
// to commands of 600 B/s and 0.4 s to the changes.
func TestLinkSetOfTheDemo(t *testing.T) {
	code, out, errOut := invoke(t, "rates", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--show", "passes", "--format", "json")
	var passes struct{ Passes []struct{ Bytes float64 } }
	if err := json.Unmarshal([]byte(out), &passes); code != ExitAnswer || err != nil {
		t.Fatalf("code %d, %v: %s", code, err, errOut)
	}
	rows := askShares(t, "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--set", "commands first")
	if len(rows) != 2*len(passes.Passes) {
		t.Fatalf("%d rows for %d passes", len(rows), len(passes.Passes))
	}
	for i, p := range passes.Passes {
		down, up := rows[2*i], rows[2*i+1]
		if math.Abs(down.AloneBytes-p.Bytes) > 1 || down.Bytes >= down.AloneBytes {
			t.Errorf("%s: %.0f B of %.0f B, rates has %.0f B", down.AOS, down.Bytes, down.AloneBytes, p.Bytes)
		}
		if up.Direction != "up" || up.Seconds != 60 || up.Bytes != 480_000 {
			t.Errorf("%s: %+v", up.AOS, up)
		}
	}
	for _, r := range askShares(t, "--spacecraft", "Pipit 2", "--station", "Reedmere", "--set", "half duplex") {
		from, _ := time.Parse(time.RFC3339, r.AOS)
		to, _ := time.Parse(time.RFC3339, r.LOS)
		length := to.Sub(from).Seconds()
		turns, rest := math.Floor(length/10), math.Mod(length, 10)
		want := turns*2 + min(rest, 2)
		if r.Direction == "down" {
			want = turns*7.6 + max(0, min(rest, 9.8)-2.2)
		}
		// Both close throughout in these passes, LOS is printed to the millisecond.
		if r.AloneSeconds > length-1 && math.Abs(r.Seconds-want) > 0.11 {
			t.Errorf("%s %s: %.1f s, want %.3f", r.AOS, r.Link, r.Seconds, want)
		}
		if r.Direction == "up" && math.Abs(r.Bytes-600*r.Seconds) > 60 {
			t.Errorf("%s: %.0f B in %.1f s", r.AOS, r.Bytes, r.Seconds)
		}
	}
}

func TestLinkSetWrongly(t *testing.T) {
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"--set", "comands first"}, `--set: "comands first" is not in the scenario`},
		{[]string{"--set", "commands first", "--transmitter", "X-band"}, "goes with --spacecraft, --station and --pass alone"},
		{[]string{"--set", "commands first", "--guard-db", "1"}, "goes with --spacecraft, --station and --pass alone"},
	} {
		code, _, errOut := invoke(t, append([]string{"rates", "--spacecraft", "Wagtail 1"}, c.args...)...)
		if code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: code %d, %s", c.args, code, errOut)
		}
	}
	// Only one station has an antenna for both links.
	code, out, errOut := invoke(t, "rates", "--spacecraft", "Wagtail 1", "--set", "commands first", "--format", "csv")
	if code != ExitAnswer || strings.Contains(out, "Hoarfjord") || !strings.Contains(errOut, "no contact over Hoarfjord: no antenna takes all links of the set") {
		t.Errorf("code %d: %s", code, errOut)
	}
}

// A budget's volume is that of its link alone, and says so where a set leaves it less.
func TestBudgetTellsItsLinkSets(t *testing.T) {
	const told = `in the link set half duplex it has a share of the pass: slantwise rates --set "half duplex"`
	for transmitter, want := range map[string]bool{"UHF": true, "X-band": false} {
		link := []string{"budget", "--spacecraft", "Pipit 2", "--station", "Reedmere", "--antenna", "crossed yagi", "--transmitter", transmitter}
		if !want { // in another set, of another order
			link = []string{"budget", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--mode", "fast"}
		}
		code, out, errOut := invoke(t, link...)
		if code != ExitAnswer || strings.Contains(out, told) != want {
			t.Errorf("%s: exit code %d; told %t, want %t\n%s", transmitter, code, !want, want, errOut)
		}
	}
}
