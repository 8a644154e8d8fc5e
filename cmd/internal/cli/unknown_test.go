package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The history holds the first passes of the window and ends before the later ones.
const shortHistory = `CCSDS_AEM_VERS = 1.0
CREATION_DATE = 2026-09-15T05:00:00
ORIGINATOR = INVENTED

META_START
OBJECT_NAME = Sandpiper 1
OBJECT_ID = 2026-777A
REF_FRAME_A = EME2000
REF_FRAME_B = SC_BODY_1
ATTITUDE_DIR = A2B
TIME_SYSTEM = UTC
START_TIME = 2026-09-15T06:00:00
STOP_TIME = 2026-09-15T09:00:00
ATTITUDE_TYPE = QUATERNION
QUATERNION_TYPE = LAST
META_STOP

DATA_START
2026-09-15T06:00:00 0 0 0 1
2026-09-15T07:30:00 0 0 0.6 0.8
2026-09-15T09:00:00 0 0 0.8 0.6
DATA_STOP
`

// One pass for which nothing is stated does not take the answer from the others: it is
// named, with the reason.
func TestPassesOutsideAnAttitudeHistoryAreTold(t *testing.T) {
	file := launchDayWith(t, "catalogued.yaml", "attitude: tumbling # until it is stabilised\n        attitude_probability: 0.8", "attitude: history\n        attitude_file: short.aem")
	if err := os.WriteFile(filepath.Join(filepath.Dir(file), "short.aem"), []byte(shortHistory), 0o600); err != nil {
		t.Fatal(err)
	}
	const why = "the attitude history does not hold"
	for _, args := range [][]string{{"rates", "--spacecraft", "Sandpiper 1", "--station", "Hoarfjord", "--format", "csv"}, {"contacts", "--format", "csv"}} {
		code, out, errOut := invoke(t, append(args, "--scenario", file)...)
		if code != ExitAnswer || !strings.Contains(errOut, why) || strings.Count(out, "\n") < 2 || strings.Contains(out, "T09:38:") {
			t.Errorf("%v: exit code %d\n%s\n%.600s", args, code, out, errOut)
		}
	}
	pages := filepath.Join(t.TempDir(), "pages")
	if code, _, errOut := invoke(t, "report", "--scenario", file, "--station", "Hoarfjord", "--into", pages); code != ExitAnswer {
		t.Fatalf("report: exit code %d\n%s", code, errOut)
	}
	held, err := os.ReadFile(filepath.Join(pages, "passes", "sandpiper-1-hoarfjord-20260915t080248z.html"))
	if err != nil || strings.Contains(string(held), why) {
		t.Errorf("a pass that the history holds: %v", err)
	}
	after, err := os.ReadFile(filepath.Join(pages, "passes", "sandpiper-1-hoarfjord-20260915t093840z.html"))
	if err != nil || !strings.Contains(string(after), "no budget: ") || !strings.Contains(string(after), why) {
		t.Errorf("a pass after the history: no reason on its page: %v", err)
	}
}

// The rate plan, which contact plans are made of, holds the orbit's error as the budget
// does: an orbit known to 20 km loses bytes in a beam of 0.7 degrees.
func TestRatePlanHoldsTheOrbitsError(t *testing.T) {
	plan := func(along string) string {
		file := launchDayWith(t, "catalogued.yaml", "{along_km: 0.6, along_km_per_day: 1.5", "{along_km: "+along+", along_km_per_day: 0")
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		narrow := strings.ReplaceAll(strings.ReplaceAll(string(text), "frequency_mhz: 2245", "frequency_mhz: 8180"), "[[2200, 2290]]", "[[8025, 8400]]")
		if err := os.WriteFile(file, []byte(strings.ReplaceAll(narrow, "data_rate_bps: 32.0e3", "data_rate_bps: 1.0e4")), 0o600); err != nil {
			t.Fatal(err)
		}
		code, out, errOut := invoke(t, "rates", "--scenario", file, "--spacecraft", "Sandpiper 1", "--station", "Hoarfjord", "--pass", "2026-09-15T06:30:00Z", "--format", "csv")
		if code != ExitAnswer {
			t.Fatalf("exit code %d\n%s", code, errOut)
		}
		return out
	}
	if sure, unsure := plan("0.001"), plan("20"); sure == unsure {
		t.Errorf("an error of 20 km along the track changes nothing:\n%s", unsure)
	}
}
