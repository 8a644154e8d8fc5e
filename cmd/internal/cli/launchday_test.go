package cli

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"slantwise/cmd/internal/scenario"
)

// newcomer is a scenario of a spacecraft that was just launched, on its separation state.
const newcomer = `window: {start_utc: 2026-09-15T00:00:00Z, length_h: 12}
FILES
spacecraft:
  - name: Newcomer
    ORBIT
stations:
  - {name: S, latitude_deg: 50, longitude_deg: 0, altitude_m: 0}
  - {name: N, latitude_deg: 69, longitude_deg: 19, altitude_m: 0}
`

const separation = `state: {epoch_utc: 2026-09-15T00:00:00Z, frame: EME2000, position_km: [6878.137, 0.5, -2.25], velocity_km_s: [0.001, 0.985, 7.55]}`

// newcomerFile writes the scenario with the orbit given, and returns its name.
func newcomerFile(t *testing.T, dir, files, orbit string) string {
	t.Helper()
	text := strings.NewReplacer("FILES", files, "ORBIT", orbit).Replace(newcomer)
	name := filepath.Join(dir, "s.yaml")
	if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return name
}

// rowsOf runs a command in CSV and returns its rows without the head.
func rowsOf(t *testing.T, args ...string) ([][]string, string) {
	t.Helper()
	code, out, errOut := invoke(t, append(args, "--format", "csv")...)
	if code != ExitAnswer {
		t.Fatalf("%v: exit %d\n%s", args, code, errOut)
	}
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:], errOut
}

// moved returns a row with its three instants later.
func moved(t *testing.T, row []string, by time.Duration) []string {
	t.Helper()
	out := slices.Clone(row)
	for i := 2; i <= 4; i++ {
		at, err := scenario.ParseUTC(row[i])
		if err != nil {
			t.Fatal(err)
		}
		out[i] = utc(at.Add(by))
	}
	return out
}

// A launch eleven minutes late has the same passes eleven minutes later.
func TestLaunchSlipMovesPasses(t *testing.T) {
	dir := t.TempDir()
	nominal, _ := rowsOf(t, "passes", "--scenario", newcomerFile(t, dir, "", separation))
	slipped, errOut := rowsOf(t, "passes", "--scenario", newcomerFile(t, dir, "", "launch_slip_s: 660\n    "+separation))
	if !strings.Contains(errOut, "launch_slip_s: the launch is taken 660 s late") {
		t.Errorf("not told: %s", errOut)
	}
	if len(nominal) < 8 {
		t.Fatalf("%d passes", len(nominal))
	}
	for i, row := range nominal[:len(nominal)-2] {
		if want := moved(t, row, 11*time.Minute); !slices.Equal(slipped[i], want) {
			t.Errorf("pass %d\n got %v\nwant %v", i, slipped[i], want)
		}
	}
	// A spacecraft that is merely late flies over an Earth that has turned on.
	late, _ := rowsOf(t, "passes", "--scenario", newcomerFile(t, dir, "", "time_offset_s: 660\n    "+separation))
	if slices.Equal(late[0], slipped[0]) {
		t.Error("late and slipped are the same")
	}
}

// After valid_until_utc there is nothing, the pass under way is cut, and it is told.
func TestValidUntilEndsPasses(t *testing.T) {
	dir := t.TempDir()
	nominal, _ := rowsOf(t, "passes", "--scenario", newcomerFile(t, dir, "", separation))
	const end = "2026-09-15T00:13:00.000Z" // in the first pass over S
	file := newcomerFile(t, dir, "", "valid_until_utc: 2026-09-15T00:13:00Z\n    "+separation)
	rows, errOut := rowsOf(t, "passes", "--scenario", file, "--station", "S")
	if len(rows) != 1 || rows[0][2] != nominal[0][2] || rows[0][4] != end || rows[0][11] != "los" {
		t.Errorf("passes %v", rows)
	}
	if !strings.Contains(errOut, "no passes from 2026-09-15T00:13:00Z to 2026-09-15T12:00:00Z: valid_until_utc") {
		t.Errorf("not told: %s", errOut)
	}
	for _, args := range [][]string{
		{"pointing", "--spacecraft", "Newcomer", "--station", "S", "--from", "2026-09-15T00:12:00Z", "--to", "2026-09-15T00:14:00Z"},
		{"pointing", "--spacecraft", "Newcomer", "--station", "S", "--from", "2026-09-15T01:00:00Z", "--to", "2026-09-15T01:01:00Z"},
	} {
		code, _, errOut := invoke(t, append(args, "--scenario", file)...)
		if code != ExitInput || !strings.Contains(errOut, "valid_until_utc") {
			t.Errorf("%v: exit %d, %s", args, code, errOut)
		}
	}
}

// An ephemeris written of an orbit has its passes, to the millisecond or two; where it
// ends, they do.
func TestTabulatedOrbitHasTheSamePasses(t *testing.T) {
	dir := t.TempDir()
	file := newcomerFile(t, dir, "", separation)
	want, _ := rowsOf(t, "passes", "--scenario", file)
	for _, notation := range []string{"kvn", "xml"} {
		into := filepath.Join(dir, "it."+notation)
		code, _, errOut := invoke(t, "elements", "tabulate", "--scenario", file, "--spacecraft", "Newcomer", "--object-id", "2026-099A",
			"--frame", "ITRF", "--notation", notation, "--into", into)
		if code != ExitAnswer || !strings.Contains(errOut, "read back, positions are within 0.00") {
			t.Fatalf("exit %d, %s", code, errOut)
		}
		with := newcomerFile(t, dir, "element_files: [it."+notation+"]", "element_set: 2026-099A")
		got, _ := rowsOf(t, "passes", "--scenario", with)
		if len(got) != len(want) {
			t.Fatalf("%d passes, want %d", len(got), len(want))
		}
		for i := range got {
			for k := 2; k <= 4; k++ {
				a, errA := scenario.ParseUTC(got[i][k])
				b, errB := scenario.ParseUTC(want[i][k])
				// Culminations are flat: a millimetre of range is 10 ms there.
				if allowed := []time.Duration{2, 50, 2}[k-2] * time.Millisecond; errA != nil || errB != nil || a.Sub(b).Abs() > allowed {
					t.Errorf("pass %d: %v, want %v", i, got[i], want[i])
				}
			}
		}
		// Every command takes it.
		for _, args := range [][]string{{"check"}, {"elements", "fit", "--spacecraft", "Newcomer"},
			{"pointing", "--spacecraft", "Newcomer", "--station", "S", "--from", "2026-09-15T00:10:00Z", "--to", "2026-09-15T00:11:00Z"}} {
			if code, _, errOut := invoke(t, append(args, "--scenario", with)...); code != ExitAnswer {
				t.Errorf("%v: exit %d, %s", args, code, errOut)
			}
		}
	}
	code, _, errOut := invoke(t, "elements", "tabulate", "--scenario", file, "--spacecraft", "Newcomer", "--step", "15m")
	if code != ExitInput || !strings.Contains(errOut, "take a shorter step") {
		t.Errorf("exit %d, %s", code, errOut)
	}
}
