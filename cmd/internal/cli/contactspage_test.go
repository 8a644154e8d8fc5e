package cli

import (
	"context"
	"encoding/json"
	"os"
	"strings"
	"testing"
)

func TestContactsPage(t *testing.T) {
	writeInto(t, nil)
	for _, name := range []string{"a.html", "b.html"} {
		if code, _, errOut := invoke(t, "contacts", "--iterations", "3", "--page", name, "--pdf", name+".pdf", "--pointing", "pointing"); code != ExitAnswer {
			t.Fatal(errOut)
		}
	}
	read := func(name string) string {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		return string(text)
	}
	same := strings.NewReplacer("a.csv", "b.csv", "a.json", "b.json").Replace(read("a.html")) == read("b.html")
	if paper := read("a.html.pdf"); !strings.HasPrefix(paper, "%PDF-1.") || paper != read("b.html.pdf") {
		t.Error("the papers of two runs differ, or are none")
	}
	if !same || read("a.json") != read("b.json") {
		t.Error("two runs differ")
	}
	var got struct {
		Worth    struct{ Bytes float64 }
		Contacts []struct{ Contact string }
		Windows  []struct{ Why string } `json:"windows_not_taken"`
		Volumes  []struct{ Bytes float64 }
		Recorder []struct {
			Points []struct {
				Stored float64 `json:"stored_bytes"`
			}
		} `json:"recorders"`
	}
	if err := json.Unmarshal([]byte(read("a.json")), &got); err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for _, v := range got.Volumes {
		sum += v.Bytes
	}
	if d := sum - got.Worth.Bytes; d < -1 || d > 1 || sum == 0 { // 1 B of some 200 GB: rows are written to 1 mB
		t.Errorf("volumes add up to %f B, the plan has %f B", sum, got.Worth.Bytes)
	}
	if len(got.Recorder) != 1 || len(got.Recorder[0].Points) < 10 || len(got.Windows) == 0 || got.Windows[0].Why == "" {
		t.Errorf("%+v", got)
	}
	files, err := os.ReadDir("pointing")
	if err != nil || len(files) != len(got.Contacts) { // in the demo every contact has one link
		t.Errorf("%v: %d pointing files for %d contacts", err, len(files), len(got.Contacts))
	}
	if head, _, _ := strings.Cut(read("pointing/"+files[0].Name()), "\n"); head != strings.Join(pointingColumns, ",") {
		t.Errorf("columns %s", head)
	}
}

// firstRound ends a search when it first tells how far it is.

type firstRound struct {
	strings.Builder
	stop func()
}

func (w *firstRound) Write(b []byte) (int, error) {
	if strings.Contains(string(b), "slantwise: round ") {
		w.stop()
	}
	return w.Builder.Write(b)
}

func TestContactsInterrupted(t *testing.T) {
	writeInto(t, nil)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	var out strings.Builder
	told := &firstRound{stop: cancel}
	if code := run(ctx, []string{"contacts", "--time-limit", "5m", "--format", "csv", "--save", "plan.csv"}, newEnv(strings.NewReader(""), &out, told)); code != ExitAnswer {
		t.Fatalf("%d %s", code, told)
	}
	if saved, err := os.ReadFile("plan.csv"); err != nil || string(saved) != out.String() || !strings.Contains(told.String(), "stopped: the plan is the best one so far, whole") {
		t.Errorf("%v %s", err, told)
	}
	if code, _, errOut := invoke(t, "contacts", "verify", "plan.csv"); code != ExitAnswer {
		t.Errorf("%d %s", code, errOut)
	}
}

func TestPlanningDay(t *testing.T) {
	writeInto(t, nil)
	if code, _, errOut := invoke(t, "new", "--planning-day", "day"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	for _, name := range []string{"day/yesterday.yaml", "day/today.yaml"} {
		if code, _, errOut := invoke(t, "check", "--scenario", name); code != ExitAnswer {
			t.Errorf("%s: %s", name, errOut)
		}
	}
	if code, _, errOut := invoke(t, "new", "--planning-day", "day"); code != ExitInput || !strings.Contains(errOut, "yesterday.yaml") {
		t.Errorf("over files that are there: %d %s", code, errOut)
	}
}
