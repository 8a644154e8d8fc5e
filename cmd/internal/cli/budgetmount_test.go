package cli

import (
	"encoding/json"
	"strings"
	"testing"
	"time"
)

// At an instant of a pass the budget says whether the mount follows, as the spans of the
// whole pass have it: here of the demo's pass through the keyhole.
func TestBudgetAtTellsTheMount(t *testing.T) {
	type answer struct {
		Pass *struct {
			Mount struct {
				NotFollowed []budgetInterval `json:"not_followed"`
			}
		}
		Mount *struct {
			Follows bool
			Error   float64 `json:"error_deg"`
		}
		Assumptions []budgetNoteJSON
	}
	ask := func(args ...string) (a answer) {
		t.Helper()
		code, out, errOut := invoke(t, append([]string{"budget", "--spacecraft", "Fulmar 1", "--station", "Tussock Bay", "--antenna", "dish", "--mode", "full", "--format", "json"}, args...)...)
		if code != 0 {
			t.Fatal(errOut)
		}
		if err := json.Unmarshal([]byte(out), &a); err != nil {
			t.Fatal(err)
		}
		return a
	}
	spans := ask("--pass", "2026-09-15T07:04:02Z", "--step", "300s").Pass.Mount.NotFollowed
	if len(spans) != 1 {
		t.Fatalf("the pass is not followed in %v", spans)
	}
	at := func(text string, after time.Duration) string {
		v, err := time.Parse(time.RFC3339, text)
		if err != nil {
			t.Fatal(err)
		}
		return utc(v.Add(after))
	}
	for _, x := range []struct {
		at      string
		follows bool
	}{
		{at(spans[0].FromUTC, -time.Second), true}, {at(spans[0].FromUTC, time.Second), false},
		{at(spans[0].ToUTC, -time.Second), false}, {at(spans[0].ToUTC, time.Second), true},
	} {
		a := ask("--at", x.at)
		told := false
		for _, n := range a.Assumptions {
			told = told || strings.HasPrefix(n.Text, "the mount ") && strings.Contains(n.Text, "not follow") != x.follows
		}
		if a.Mount == nil || a.Mount.Follows != x.follows || !told {
			t.Errorf("at %s: %+v, want follows %t", x.at, a.Mount, x.follows)
		}
	}
	if a := ask("--at", "2026-09-15T07:03:30Z"); a.Mount != nil {
		t.Errorf("out of any pass: %+v", a.Mount)
	}
}
