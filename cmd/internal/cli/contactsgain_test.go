package cli

import (
	"os"
	"strings"
	"testing"
)

// What a plan brings down is said first, and windows from outside without a scenario have
// nothing to do with the demo, whatever part of the horizon the command line gives.
func TestContactsSayWhatThePlanBrings(t *testing.T) {
	t.Chdir(t.TempDir())
	windows := "request,spacecraft,station,antenna,window_start_utc,window_end_utc,minimum_s,desired_s,setup_s,teardown_s,value_per_s\n" +
		"R1,Aa,Süd,S1,2026-12-01T10:00:00Z,2026-12-01T10:10:00Z,120,300,60,30,2\n"
	if err := os.WriteFile("w.csv", []byte(windows), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"contacts", "--iterations", "1"}, " contacts bring down "},
		{[]string{"contacts", "--iterations", "3", "--windows", "w.csv"}, "slantwise: 1 contact, 5.0 min in all\nslantwise: value 600, "},
		{[]string{"contacts", "--iterations", "3", "--windows", "w.csv", "--window-start", "2026-12-01T09:00:00Z", "--window-length-h", "5"},
			"the horizon is 2026-12-01T09:00:00.000Z to 2026-12-01T14:00:00.000Z, without other rules\nslantwise: 1 contact, 5.0 min in all\n"},
	} {
		code, _, told := invoke(t, c.args...)
		if code != ExitAnswer || !strings.Contains(told, c.want) {
			t.Errorf("%v: code %d, told %q; want %q in it", c.args, code, told, c.want)
		}
		if len(c.args) > 3 && strings.Contains(told, "demo") {
			t.Errorf("%v: %q speaks of the demo, whose rules do not count", c.args, told)
		}
	}
}

// TestContactsTellsStrangeAntennas: a name that the scenario does not have is told.
func TestContactsTellsStrangeAntennas(t *testing.T) {
	t.Chdir(t.TempDir())
	text := "request,spacecraft,station,antenna,window_start_utc,window_end_utc,minimum_s,desired_s,setup_s,teardown_s,value_per_s\n" +
		"R1,My spacecraft,My station,dish,2026-09-15T01:00:00Z,2026-09-15T02:00:00Z,300,600,0,0,1\n" +
		"R2,My spacecraft,My station,dihs,2026-09-15T03:00:00Z,2026-09-15T04:00:00Z,300,600,0,0,1\n"
	if err := os.WriteFile("w.csv", []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	if code, _, errOut := invoke(t, "new"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	code, _, errOut := invoke(t, "contacts", "--windows", "w.csv")
	if code != ExitAnswer || !strings.Contains(errOut, `the scenario does not have "My station dihs" of the windows`) || strings.Contains(errOut, "station dish") {
		t.Errorf("code %d, %s", code, errOut)
	}
}
