package cli

import (
	"encoding/csv"
	"encoding/json"
	"os"
	"strings"
	"testing"

	"slantwise/cmd/internal/planfiles"
)

const threeWindows = `request,spacecraft,station,antenna,window_start_utc,window_end_utc,minimum_s,desired_s,setup_s,teardown_s,value_per_s
r1,S1,G,A,2026-03-10T00:00:00Z,2026-03-10T01:00:00Z,60,600,120,30,1
r2,S2,G,A,2026-03-10T00:00:00Z,2026-03-10T00:12:00Z,60,600,120,30,2
r3,S1,H,B,2026-03-10T00:00:00Z,2026-03-10T00:12:00Z,60,300,120,30,2.5
`

func writeInto(t *testing.T, files map[string]string) {
	t.Helper()
	t.Chdir(t.TempDir())
	for name, text := range files {
		if err := os.WriteFile(name, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
}

// The three requests hinder each other only by antenna A, free for r1 after 00:12:30, and
// by S1: all get what they desire, 600 + 1200 + 750 (by hand).
func TestContactsWindows(t *testing.T) {
	writeInto(t, map[string]string{"w.csv": threeWindows})
	code, out, errOut := invoke(t, "contacts", "--windows", "w.csv", "--format", "json")
	if code != ExitAnswer {
		t.Fatalf("%d %s", code, errOut)
	}
	var got struct {
		Value, Bound float64
		Proven       bool `json:"proven_optimal"`
		Contacts     []map[string]any
	}
	if err := json.Unmarshal([]byte(out), &got); err != nil {
		t.Fatal(err)
	}
	if got.Value != 2550 || got.Bound != 2550 || !got.Proven || len(got.Contacts) != 3 {
		t.Errorf("%+v", got)
	}
	code, out, errOut = invoke(t, "contacts", "--windows", "w.csv", "--format", "csv", "--save", "plan.csv")
	if code != ExitAnswer {
		t.Fatalf("%d %s", code, errOut)
	}
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil || strings.Join(rows[0], ",") != strings.Join(planfiles.PlanColumns, ",") || len(rows) != 4 {
		t.Errorf("%v %q", err, out)
	}
	if saved, err := os.ReadFile("plan.csv"); err != nil || string(saved) != out {
		t.Errorf("saved %v %q", err, saved)
	}
	if code, _, errOut = invoke(t, "contacts", "verify", "plan.csv", "--windows", "w.csv"); code != ExitAnswer {
		t.Errorf("%d %s", code, errOut)
	}
}

// A plan by hand in which antenna A is not torn down and set up between r2 and r1, and S1
// is at two stations at a time.
func TestContactsVerifyFinds(t *testing.T) {
	writeInto(t, map[string]string{"w.csv": threeWindows, "plan.csv": `request,station,antenna,spacecraft,start_utc,end_utc
r2,G,A,S2,2026-03-10T00:00:00Z,2026-03-10T00:10:00Z
r1,G,A,S1,2026-03-10T00:11:00Z,2026-03-10T00:21:00Z
r3,H,B,S1,2026-03-10T00:07:00Z,2026-03-10T00:12:00Z
`})
	code, out, errOut := invoke(t, "contacts", "verify", "plan.csv", "--windows", "w.csv", "--format", "csv")
	if code != ExitFailure || !strings.Contains(errOut, "breaks rules in 2 places") {
		t.Errorf("%d %s", code, errOut)
	}
	for _, rule := range []string{"antenna,", "spacecraft,"} {
		if !strings.Contains(out, "\n"+rule) {
			t.Errorf("no %s in %s", rule, out)
		}
	}
}

func TestContactsFaults(t *testing.T) {
	swap := func(old, now string) string { return strings.Replace(threeWindows, old, now, 1) }
	const rules = `window: {start_utc: 2026-03-10T00:00:00Z, length_h: 1}
stations: [{name: G, latitude_deg: 55, longitude_deg: -4, altitude_m: 100, minimum_elevation_deg: 5, antennas: [{name: A, kind: dish, gain_dbi: 30, beamwidth_deg: 3, g_over_t_db_k: 10}]}]
spacecraft: [{name: S1, transmitters: [{name: X, frequency_mhz: 8200, eirp_dbw: 3}]}]
contact_plan: {setup_s: 0, teardown_s: 0, budget: 0, stations: [{name: G, antennas: [{name: A, price_per_contact: 5}]}]}
`
	const head = "station,antenna,spacecraft,request,start_utc,end_utc,fixed\n"
	for _, tt := range []struct {
		name  string
		files map[string]string
		args  []string
		code  int
		want  []string
	}{
		{"reversed", map[string]string{"w.csv": swap("00:00:00Z,2026-03-10T01", "01:00:00Z,2026-03-10T00")}, nil, ExitInput, []string{"w.csv: line 2: ", "are the two reversed?"}},
		{"outside the horizon", map[string]string{"w.csv": threeWindows}, []string{"--window-start", "2026-03-10T00:30:00Z", "--window-length-h", "1"}, ExitInput, []string{"w.csv: line 2: ", "w.csv: line 3: ", "is not within the horizon"}},
		{"no file", nil, nil, ExitInput, []string{"w.csv: there is no such file"}},
		{"no window", map[string]string{"w.csv": threeWindows[:strings.Index(threeWindows, "\n")+1]}, nil, ExitInput, []string{"the file holds no window"}},
		{"unknown antenna closed", map[string]string{"w.csv": threeWindows, "o.csv": "station,antenna,start_utc,end_utc\nG,Z,2026-03-10T00:00:00Z,2026-03-10T01:00:00Z\n"}, []string{"--closed", "o.csv"}, ExitInput, []string{`o.csv: line 2: antenna "Z" of station "G" is not part of the plan`}},
		{"time without zone", map[string]string{"w.csv": threeWindows, "o.csv": "station,start_utc,end_utc\nG,2026-03-10T00:00:00,2026-03-10T01:00:00Z\n"}, []string{"--closed", "o.csv"}, ExitInput, []string{"o.csv: line 2: start_utc", "has no time zone"}},
		{"fixed contradict", map[string]string{"w.csv": threeWindows, "f.csv": head + "G,A,S2,r2,2026-03-10T00:00:00Z,2026-03-10T00:10:00Z,true\nG,A,S1,r1,2026-03-10T00:05:00Z,2026-03-10T00:15:00Z,true\n"},
			[]string{"--in-force", "f.csv"}, ExitInput, []string{"f.csv", `"r2 G A`, `"r1 G A`, "contradict each other", `antenna "A" serves one at a time`}},
		{"nothing can serve", map[string]string{"w.csv": threeWindows, "o.csv": "station,start_utc,end_utc,reason\nH,2026-03-10T00:00:00Z,2026-03-10T00:08:00Z,a\nH,2026-03-10T00:05:00Z,2026-03-10T01:00:00Z,b\n"}, []string{"--closed", "o.csv"}, ExitAnswer, []string{`request "r3" cannot be served: closed times`}},
		{"a budget of zero", map[string]string{"w.csv": threeWindows, "s.yaml": rules}, []string{"--scenario", "s.yaml"}, ExitAnswer, []string{"budget: 0: only contacts without a price can be taken", "value 750"}},
		{"a window alone", map[string]string{"w.csv": threeWindows, "s.yaml": "window: {start_utc: 2026-03-10T00:00:00Z, length_h: 1}\n"}, []string{"--scenario", "s.yaml"}, ExitAnswer, []string{"value 2550"}},
		{"iterations", map[string]string{"w.csv": threeWindows}, []string{"--iterations", "-1"}, ExitInput, []string{"--iterations: -1 is not allowed"}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			writeInto(t, tt.files)
			code, _, errOut := invoke(t, append([]string{"contacts", "--windows", "w.csv"}, tt.args...)...)
			if code != tt.code {
				t.Errorf("code %d, want %d", code, tt.code)
			}
			for _, w := range tt.want {
				if !strings.Contains(errOut, w) {
					t.Errorf("no %q in\n%s", w, errOut)
				}
			}
		})
	}
}

// At 00:05 r2 is under way and stays; H is closed for the rest, so that r3 is dropped and
// nothing new begins before then. The calendar keeps what it said of r1 and r2 and tells
// that r3 is off.
func TestContactsAgain(t *testing.T) {
	writeInto(t, map[string]string{"w.csv": threeWindows, "o.csv": "station,start_utc,end_utc\nH,2026-03-10T00:05:00Z,2026-03-10T01:00:00Z\n"})
	run := func(args ...string) string {
		t.Helper()
		code, out, errOut := invoke(t, append([]string{"contacts", "--windows", "w.csv", "--format", "json", "--calendar", "p.ics", "--calendars", "all"}, args...)...)
		if code != ExitAnswer {
			t.Fatalf("%d %s", code, errOut)
		}
		return out
	}
	run("--save", "first.csv")
	out := run("--in-force", "first.csv", "--now", "2026-03-10T00:05:00Z", "--closed", "o.csv", "--save", "second.csv")
	var got struct {
		Value    float64
		Contacts []struct {
			Request string
			Start   string `json:"start_utc"`
			Fixed   bool
		}
		Changes []struct{ Kind, Request string }
	}
	if err := json.Unmarshal([]byte(out), &got); err != nil {
		t.Fatal(err)
	}
	if got.Value != 1800 || len(got.Contacts) != 2 || !got.Contacts[0].Fixed || got.Contacts[0].Request != "r2" || got.Contacts[1].Fixed {
		t.Errorf("%+v", got)
	}
	kinds := map[string]string{}
	for _, c := range got.Changes {
		kinds[c.Request] = c.Kind
	}
	if kinds["r1"] != "kept" || kinds["r2"] != "kept" || kinds["r3"] != "dropped" {
		t.Errorf("%+v", kinds)
	}
	for _, file := range []string{"p.ics", "all/H_S1.ics"} {
		text, err := os.ReadFile(file)
		if err != nil || strings.Count(string(text), "STATUS:CANCELLED") != 1 || !strings.Contains(string(text), "SEQUENCE:1\r\n") {
			t.Errorf("%s: %v\n%s", file, err, text)
		}
	}
	code, out, errOut := invoke(t, "contacts", "compare", "first.csv", "second.csv", "--changed", "--format", "csv")
	if code != ExitAnswer || strings.Count(out, "\n") != 2 || !strings.Contains(out, "\ndropped,r3,S1,H,B,") || !strings.Contains(errOut, "2 kept, 0 moved, 1 dropped, 0 added") {
		t.Errorf("%d %s %s", code, out, errOut)
	}
}

// r1 cannot have the first minutes: r2 has the antenna. Where r3 is not in the plan it can
// be added for nothing.
func TestContactsExplain(t *testing.T) {
	writeInto(t, map[string]string{"w.csv": threeWindows, "plan.csv": `request,station,antenna,spacecraft,start_utc,end_utc
r2,G,A,S2,2026-03-10T00:00:00Z,2026-03-10T00:10:00Z
r1,G,A,S1,2026-03-10T00:20:00Z,2026-03-10T00:30:00Z
`})
	code, out, errOut := invoke(t, "contacts", "explain", "plan.csv", "--windows", "w.csv", "--format", "csv")
	if code != ExitAnswer || strings.Count(out, "\n") != 2 || !strings.Contains(out, "\nr3 H B 2026-03-10T00:00:00Z,yes,750,-750,") {
		t.Errorf("%d %s %s", code, out, errOut)
	}
}

// The page, and beside it the plan as CSV and all numbers as JSON, from the demo; twice the
// same bytes. The plan's rows as the recorder and the page count them add up to the plan's
// own bytes.
// An interrupt in the middle of the search leaves the best plan, whole, and says so. In the
// demo the mounts' slews keep the bound loose, so that no proof ends the search before.
// Two spacecraft rise together and part: one degree apart at first, five at 100 s, on one
// frequency until the second is moved off. With 2 degrees they clash up to 25 s, in steps of
// 10 s and one step around.
// The files of a planning day are sound, and its two scenarios differ in the element file
// alone.
// A shift from 22:00 to 06:00 over the night of 28 to 29 March 2026 in London lasts seven
// hours, since clocks go forward at 01:00 UTC (tz database); the next one lasts eight. On the
// other side of the date line, Kiritimati, UTC+14, has Sunday from Saturday 10:00 UTC.
// The schema's lists of required fields are those of the answer.
func TestContactsSchema(t *testing.T) {
	code, out, _ := invoke(t, "contacts", "schema")
	var schema struct {
		Properties map[string]any
		Defs       map[string]struct {
			Required   []string
			Properties map[string]any
		} `json:"$defs"`
	}
	if err := json.Unmarshal([]byte(out), &schema); err != nil || code != ExitAnswer {
		t.Fatal(code, err)
	}
	writeInto(t, map[string]string{"w.csv": threeWindows})
	_, out, _ = invoke(t, "contacts", "--windows", "w.csv", "--format", "json")
	var answer map[string]any
	if err := json.Unmarshal([]byte(out), &answer); err != nil {
		t.Fatal(err)
	}
	same := func(what string, got, want map[string]any) {
		for k := range got {
			if _, ok := want[k]; !ok {
				t.Errorf("%s: the schema does not know %s", what, k)
			}
		}
		for k := range want {
			if _, ok := got[k]; !ok {
				t.Errorf("%s: the answer has no %s", what, k)
			}
		}
	}
	same("answer", answer, schema.Properties)
	same("contact", answer["contacts"].([]any)[0].(map[string]any), schema.Defs["row"].Properties)
	same("worth", answer["worth"].(map[string]any), schema.Defs["worth"].Properties)
}
