package cli

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"
)

// TestLogExportImport: out as CSV and JSON, into new books, out again: the same bytes.
func TestLogExportImport(t *testing.T) {
	inLogbook(t, "--remark", "gusts, \"light\"\r\nthen calm", "--taken-bytes", "123456789")
	for _, f := range []string{"csv", "json"} {
		_, first, errOut := invoke(t, "log", "export", "--format", f)
		if errOut != "" || strings.Count(first, "cn0_dbhz") < 200 {
			t.Fatalf("%s: %s%.300s", f, errOut, first)
		}
		if err := os.WriteFile("out."+f, []byte(first), 0o600); err != nil {
			t.Fatal(err)
		}
		code, _, errOut := invoke(t, "log", "import", "out."+f, "--book", f+".logbook")
		if code != ExitAnswer || !strings.Contains(errOut, "1 pass added to "+f+".logbook, 0 were in it already") {
			t.Errorf("code %d, %s", code, errOut)
		}
		if _, again, _ := invoke(t, "log", "export", "--format", f, "--book", f+".logbook"); again != first {
			t.Errorf("%s: what was read in is another", f)
		}
		if _, _, errOut := invoke(t, "log", "import", "out."+f, "--book", f+".logbook"); !strings.Contains(errOut, "0 passes added") || !strings.Contains(errOut, "1 were in it") {
			t.Errorf("a second time: %s", errOut)
		}
	}
	if code, _, errOut := invoke(t, "log", "export", "--format", "table"); code != ExitInput || !strings.Contains(errOut, "csv or json") {
		t.Errorf("code %d, %s", code, errOut)
	}
}

// TestLogDamaged: a damaged logbook says so with what to do, shows and exports the rest, and the
// report goes on with a warning.
func TestLogDamaged(t *testing.T) {
	inLogbook(t)
	whole, err := os.ReadFile(defaultBook)
	if err != nil {
		t.Fatal(err)
	}
	gone := bytes.Clone(whole)
	clear(gone[len(gone)/2/4096*4096:][:4096])
	for name, broken := range map[string][]byte{"cut": whole[:len(whole)*6/10], "a page gone": gone} {
		t.Run(name, func(t *testing.T) {
			if err := os.WriteFile("broken.logbook", broken, 0o600); err != nil {
				t.Fatal(err)
			}
			for _, call := range []string{"log show", "log show --trend", "log show --number 1", "log export"} {
				code, out, errOut := invoke(t, append(strings.Fields(call), "--book", "broken.logbook")...)
				if code != ExitFailure || !strings.Contains(errOut, "broken.logbook") || !strings.Contains(errOut, "measurements are there") || !strings.Contains(out, "Wagtail 1") && !strings.Contains(out, "used") {
					t.Errorf("%s: code %d, %s\n%.200s", call, code, errOut, out)
				}
			}
			if code, _, errOut := invoke(t, "log", "export", "--book", "broken.logbook", "--into", "rest.csv"); code != ExitFailure {
				t.Errorf("code %d, %s", code, errOut)
			}
			code, _, errOut := invoke(t, "log", "import", "rest.csv", "--book", name+".logbook")
			if code != ExitAnswer || !strings.Contains(errOut, "it is not what was written") {
				t.Errorf("code %d, %s", code, errOut)
			}
			if code, out, _ := invoke(t, "log", "show", "--book", name+".logbook", "--format", "csv"); code != ExitAnswer || !strings.Contains(out, "measurements are there") {
				t.Errorf("the remark does not tell of the loss: code %d, %s", code, out)
			}
			code, _, errOut = invoke(t, "report", "--station", "Skerry Point", "--spacecraft", "Wagtail 1", "--log", "broken.logbook", "--into", name)
			if code != ExitAnswer || len(measuredPages(t, name)) != 1 {
				t.Errorf("report: code %d, %s", code, errOut)
			}
		})
	}
	if err := os.WriteFile(defaultBook, []byte("no logbook at all, but a text of some length"), 0o600); err != nil {
		t.Fatal(err)
	}
	if code, _, errOut := invoke(t, "log", "show"); code != ExitInput || !strings.Contains(errOut, "damaged or no logbook") || !strings.Contains(errOut, "go back to a copy") {
		t.Errorf("code %d, %s", code, errOut)
	}
	if code, _, errOut := invoke(t, "report", "--station", "Reedmere", "--into", "r"); code != ExitAnswer || !strings.Contains(errOut, "measurements are left out") {
		t.Errorf("report beside no logbook: code %d, %s", code, errOut)
	}
}

// TestLogShowTrend: three passes, each 0.5 dB lower than the one before a day later.
func TestLogShowTrend(t *testing.T) {
	inLogbook(t)
	text, err := os.ReadFile("r.csv")
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimSpace(string(text)), "\n")
	rows := records(t, "log", "show", "--number", "1")
	predicted := map[string]float64{}
	for _, r := range rows {
		if r["quantity"] == "cn0_dbhz" {
			predicted[r["utc"]] = float(t, r, "predicted")
		}
	}
	for k := 1; k <= 2; k++ { // the same pass, so that the prediction is the same; the trend is over the order in time
		var out strings.Builder
		for i, l := range lines {
			f := strings.Split(l, ",")
			if i > 1 && f[1] != "" {
				f[1] = fmt.Sprintf("%.2f", float(t, map[string]string{"v": f[1]}, "v")-0.5*float64(k))
				l = strings.Join(f, ",")
			}
			out.WriteString(l + "\n")
		}
		name := fmt.Sprintf("r%d.csv", k)
		if err := os.WriteFile(name, []byte(out.String()), 0o600); err != nil {
			t.Fatal(err)
		}
		if code, _, errOut := invoke(t, append([]string{"log", "add", name, "--taken-bytes", "1e6"}, rehearsed...)...); code != ExitAnswer {
			t.Fatal(errOut)
		}
	}
	passes := records(t, "log", "show")
	if len(passes) != 3 || passes[2]["taken_bytes"] != "1000000" || passes[0]["link"] != "X-band to dish, mode safe" {
		t.Fatalf("%v", passes)
	}
	for k, p := range passes {
		if want := rehearsalLevelDB - 0.5*float64(k); math.Abs(float(t, p, "level_bias_db")-want) > 0.06 {
			t.Errorf("pass %d: bias %s, put in %g", k+1, p["level_bias_db"], want)
		}
	}
	trend := records(t, "log", "show", "--trend")
	if len(trend) != 2 || trend[0]["quantity"] != "cn0_dbhz" || math.Abs(float(t, trend[0], "bias")-(rehearsalLevelDB-0.5)) > 0.06 || math.Abs(float(t, trend[0], "between_passes")-0.5) > 0.05 {
		t.Errorf("%v", trend)
	}
	if trend[0]["per_day"] != "" || trend[0]["taken_bytes"] != "2000000" {
		t.Errorf("passes at one time have no trend, bytes count where both are known: %v", trend[0])
	}
	if code, _, errOut := invoke(t, "log", "show", "--trend", "--number", "1"); code != ExitInput || !strings.Contains(errOut, "give one of them") {
		t.Errorf("code %d, %s", code, errOut)
	}
}

func TestLogAddRefuses(t *testing.T) {
	inLogbook(t)
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"log", "add", "r.csv"}, "are in the logbook already as number 1"},
		{[]string{"log", "add", "r.csv", "--taken-bytes", "-1"}, "--taken-bytes: -1 is not allowed"},
		{[]string{"log", "add", "none.csv"}, "none.csv"},
	} {
		if code, _, errOut := invoke(t, append(c.args, rehearsed...)...); code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: code %d, %s", c.args, code, errOut)
		}
	}
}
