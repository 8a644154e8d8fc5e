package cli

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// shiftAnswer is the JSON of the command, as far as tests read it.
type shiftAnswer struct {
	From     string   `json:"from_utc"`
	To       string   `json:"to_utc"`
	Zone     *string  `json:"time_zone"`
	None     *string  `json:"no_contact"`
	Left     []string `json:"left_out"`
	Contacts []struct {
		Spacecraft, Antenna, Transmitter string
		Contact                          *string
		Start                            string  `json:"start_utc"`
		End                              string  `json:"end_utc"`
		AOS                              string  `json:"aos_utc"`
		LOS                              string  `json:"los_utc"`
		Highest                          string  `json:"highest_utc"`
		Received                         float64 `json:"highest_received_hz"`
		Azimuth                          float64 `json:"highest_azimuth_deg"`
		Elevation                        float64 `json:"highest_elevation_deg"`
		AOSPlusMinus                     float64 `json:"aos_plus_minus_s"`
		Most                             float64 `json:"late_or_early_at_most_s"`
		Step                             float64 `json:"offset_step_s"`
		OffsetSteps                      float64 `json:"offset_steps"`
		Volume                           float64 `json:"volume_bytes"`
		Minutes                          []struct {
			UTC       string   `json:"utc"`
			Elevation float64  `json:"elevation_deg"`
			Received  float64  `json:"received_power_dbm"`
			CN0       float64  `json:"cn0_dbhz"`
			Mode      *string  `json:"mode"`
			Margin    *float64 `json:"margin_db"`
		}
		Steps []struct {
			From   string `json:"from_utc"`
			To     string `json:"to_utc"`
			Mode   string
			Margin float64 `json:"least_margin_db"`
		}
		Causes []struct {
			Cause, Detail string
			Low           *float64 `json:"low_end_db"`
			High          *float64 `json:"highest_db"`
		}
		Uplinks []struct {
			Name string
			Hz   [3]float64
		}
		Search struct {
			Along [3]float64 `json:"along_track_plus_minus_deg"`
			Beam  float64    `json:"beamwidth_deg"`
		} `json:"late_or_early"`
		Cautions []string
	}
}

func askShift(t *testing.T, args ...string) shiftAnswer {
	t.Helper()
	code, out, errOut := invoke(t, append(append([]string{"shift"}, args...), "--format", "json")...)
	if code != ExitAnswer {
		t.Fatalf("code %d, stderr %s", code, errOut)
	}
	var a shiftAnswer
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	return a
}

// rowsOf runs a command and returns its CSV by column.
func rowsOf(t *testing.T, args ...string) []map[string]string {
	t.Helper()
	code, out, errOut := invoke(t, append(args, "--format", "csv")...)
	if code != ExitAnswer {
		t.Fatalf("%v: code %d, stderr %s", args, code, errOut)
	}
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var list []map[string]string
	for _, r := range rows[1:] {
		one := map[string]string{}
		for i, name := range rows[0] {
			one[name] = r[i]
		}
		list = append(list, one)
	}
	return list
}

// nearTo compares a number with a cell of another command, to the digits of both.
func nearTo(t *testing.T, what string, got float64, cell string, tolerance float64) {
	t.Helper()
	want, err := strconv.ParseFloat(cell, 64)
	if err != nil || !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %v, and %q elsewhere (tolerance %g)", what, got, cell, tolerance)
	}
}

// Every number of the sheet is that of the command which is there for it: half the last digit
// that either writes, and for what pointing has of an ephemeris of its own 1e-4 deg.
func TestShiftEqualsTheOtherCommands(t *testing.T) {
	a := askShift(t, "--station", "Skerry Point", "--hours", "1")
	if len(a.Contacts) != 1 {
		t.Fatalf("%d contacts, want 1", len(a.Contacts))
	}
	c := a.Contacts[0]
	link := []string{"--spacecraft", "Wagtail 1", "--station", "Skerry Point"}
	with := func(command string, more ...string) []string {
		return append(append([]string{command}, link...), more...)
	}

	var found map[string]string
	for _, r := range rowsOf(t, with("passes", "--plus-minus")...) {
		if r["aos_utc"] == c.AOS {
			found = r
		}
	}
	if found == nil || found["los_utc"] != c.LOS || found["culmination_utc"] != c.Highest || c.Start != c.AOS || c.End != c.LOS {
		t.Errorf("passes has no such pass: %+v, %v", c, found)
	}
	nearTo(t, "AOS ±", c.AOSPlusMinus, found["aos_plus_minus_s"], 1e-9)

	at := rowsOf(t, with("pointing", "--transmitter", "X-band", "--plus-minus", "--from", c.Highest, "--to", c.Highest)...)[0]
	nearTo(t, "azimuth", c.Azimuth, at["azimuth_deg"], 1e-4)
	nearTo(t, "elevation", c.Elevation, at["elevation_deg"], 1e-4)
	nearTo(t, "along the track", c.Search.Along[1], at["pointing_along_plus_minus_deg"], 1e-5)
	nearTo(t, "received by pointing", c.Received, at["received_frequency_hz"], 0.01)

	tuned := rowsOf(t, with("tuning", "--transmitter", "X-band", "--uplink", "command", "--list-every", "600s")...)
	nearTo(t, "sent at AOS", c.Uplinks[0].Hz[0], tuned[0]["sent_frequency_hz"], 1e-3)
	nearTo(t, "sent at LOS", c.Uplinks[0].Hz[2], tuned[len(tuned)-1]["sent_frequency_hz"], 1e-3)

	steps := rowsOf(t, with("rates", "--transmitter", "X-band", "--pass", c.AOS)...)
	if len(steps) != len(c.Steps) || len(steps) < 3 {
		t.Fatalf("%d steps, rates has %d", len(c.Steps), len(steps))
	}
	bytes := 0.0
	for i, s := range c.Steps {
		if s.From != steps[i]["start_utc"] || s.To != steps[i]["end_utc"] || s.Mode != steps[i]["mode"] {
			t.Errorf("step %d is %+v, rates has %v", i, s, steps[i])
		}
		nearTo(t, "least margin", s.Margin, steps[i]["least_margin_db"], 0.00501)
		b, _ := strconv.ParseFloat(steps[i]["bytes"], 64)
		bytes += b
	}
	if math.Abs(bytes-c.Volume) > 3 { // each step is written to a byte
		t.Errorf("volume %v, the steps bring %v", c.Volume, bytes)
	}

	for i, m := range c.Minutes {
		if m.Mode == nil {
			t.Errorf("%s: no mode", m.UTC)
			continue
		}
		if i%3 != 0 || i == len(c.Minutes)-1 { // at LOS, 5 deg, two formulas of P.618 meet with a step of 4 mdB
			continue
		}
		b := askBudget(t, with("budget", "--mode", *m.Mode, "--at", m.UTC)...).Samples[0]
		if math.Abs(b.CN0-m.CN0) > 6e-4 || math.Abs(*b.ReceivedPower-m.Received) > 6e-4 || math.Abs(*b.Margin-*m.Margin) > 6e-4 {
			t.Errorf("%s: power %v, C/N0 %v, margin %v; the budget has %v, %v, %v", m.UTC, m.Received, m.CN0, *m.Margin, *b.ReceivedPower, b.CN0, *b.Margin)
		}
	}
	if n := len(c.Minutes); n != 11 || c.Minutes[1].UTC != "2026-09-15T00:51:00.000Z" || c.Minutes[n-1].UTC != c.LOS {
		t.Errorf("minutes %+v", c.Minutes)
	}
}

// Causes are losses; those that come by themselves stand before those that are set wrong, each the
// greatest first.
func TestShiftCausesAreRanked(t *testing.T) {
	a := askShift(t, "--station", "Skerry Point")
	seen := map[string]bool{}
	for _, c := range a.Contacts {
		last, set := math.Inf(1), false
		for _, k := range c.Causes {
			seen[k.Cause] = true
			most := max(*k.Low, *k.High)
			if wrong := k.Cause == "wrong mode" || k.Cause == "polarisation"; wrong != set {
				if set {
					t.Errorf("%s: %s after what is set wrong", c.AOS, k.Cause)
				}
				set, last = wrong, math.Inf(1)
			}
			if !(most > 0 && most <= last) {
				t.Errorf("%s: %s with %v dB after %v", c.AOS, k.Cause, most, last)
			}
			last = most
		}
	}
	for _, kind := range []string{"rain", "pointing", "attitude", "wrong mode", "polarisation"} {
		if !seen[kind] {
			t.Errorf("no contact has the cause %s", kind)
		}
	}
}

// The search covers three standard deviations, by steps of half a beam that overlap.
func TestShiftSearchCoversTheOrbitsError(t *testing.T) {
	wide := false
	for _, args := range [][]string{{"--station", "Skerry Point"}, {"--station", "Hoarfjord", "--window-start", "2026-09-25T00:00:00Z"}} {
		for _, c := range askShift(t, args...).Contacts {
			if c.Step == 0 {
				continue // no beam
			}
			if reach := (c.OffsetSteps + 1) * c.Step; reach < c.Most-1e-3 || c.OffsetSteps > 0 && reach-c.Step > c.Most+1e-3 {
				t.Errorf("%s: %v steps of %v s for %v s", c.AOS, c.OffsetSteps, c.Step, c.Most)
			}
			wide = wide || c.OffsetSteps > 0
		}
	}
	if !wide {
		t.Error("no contact has to be searched for, not even with elements ten days old")
	}
}

const shiftPlan = `contact,request,station,antenna,spacecraft,transmitter,start_utc,end_utc,setup_start_utc,teardown_end_utc,volume_bytes,value,fixed
first,,Skerry Point,dish,Wagtail 1,X-band,2026-09-15T00:52:00Z,2026-09-15T00:58:00Z,,,900000000,1,false
elsewhere,,Hoarfjord,big dish,Fulmar 1,Ka-band,2026-09-15T00:28:37Z,2026-09-15T00:43:35Z,,,1,1,false
late,,Skerry Point,dish,Wagtail 1,X-band,2026-09-15T02:25:00Z,2026-09-15T02:30:00Z,,,,1,false
`

func TestShiftOfAPlan(t *testing.T) {
	writeInto(t, map[string]string{"plan.csv": shiftPlan, "one.csv": strings.Join(strings.SplitAfter(shiftPlan, "\n")[:2], "")})
	a := askShift(t, "--station", "Skerry Point", "--plan", "plan.csv", "--time-zone", "Pacific/Auckland")
	if len(a.Contacts) != 2 || *a.Zone != "Pacific/Auckland" {
		t.Fatalf("%+v", a)
	}
	c := a.Contacts[0]
	if *c.Contact != "first" || c.Start != "2026-09-15T00:52:00.000Z" || c.End != "2026-09-15T00:58:00.000Z" || c.Volume != 9e8 || c.AOS != "2026-09-15T00:50:33.974Z" {
		t.Errorf("%+v", c)
	}
	if c.Steps[0].From != c.Start || c.Steps[len(c.Steps)-1].To != c.End || len(c.Minutes) != 7 {
		t.Errorf("steps %+v, %d minutes", c.Steps, len(c.Minutes))
	}
	// The second begins 33.8 s before AOS, which the sheet tells and cuts off.
	if c := a.Contacts[1]; c.Start != c.AOS || len(c.Cautions) != 1 || !strings.Contains(c.Cautions[0], "begins 33.8s before AOS") || !(c.Volume > 1e8) {
		t.Errorf("%+v", c)
	}
	if one := askShift(t, "--plan", "one.csv"); len(one.Contacts) != 1 {
		t.Errorf("the only station of a plan need not be named: %+v", one)
	}
}

func TestShiftWrongInput(t *testing.T) {
	writeInto(t, map[string]string{
		"foreign.csv": strings.NewReplacer("Skerry Point,dish", "Skerry Pont,dish", "Fulmar 1", "Fulmar 9").Replace(shiftPlan),
		"moved.csv":   strings.ReplaceAll(shiftPlan, "T00:5", "T11:5"), "plan.csv": shiftPlan,
	})
	for name, c := range map[string]struct {
		args []string
		want []string
	}{
		"no station":      {nil, []string{`--station: left out, and the scenario holds 5; name one of`}},
		"unknown station": {[]string{"--station", "Skery Point"}, []string{`did you mean "Skerry Point"`}},
		"unknown antenna": {[]string{"--station", "Skerry Point", "--antenna", "dosh"}, []string{`did you mean "dish"`}},
		"no hours":        {[]string{"--hours", "0"}, []string{"--hours: 0 h is not allowed; it must be greater than 0 and at most 72 h"}},
		"NaN hours":       {[]string{"--hours", "NaN"}, []string{"--hours: NaN h is not allowed"}},
		"no pages":        {[]string{"--pages", "0"}, []string{"--pages: 0 is not allowed; it must be 1 to 20"}},
		"show":            {[]string{"--show", "minuts"}, []string{`--show: "minuts" is not allowed; it must be "contacts", "minutes"`}},
		"zone":            {[]string{"--station", "Skerry Point", "--time-zone", "Mars/Base"}, []string{`--time-zone: "Mars/Base" is not in the table of time zones`}},
		"local zone":      {[]string{"--station", "Skerry Point", "--time-zone", "Local"}, []string{"would be another zone on each machine"}},
		"outside":         {[]string{"--station", "Skerry Point", "--from", "2027-01-01T00:00:00Z"}, []string{"--from: 2027-01-01T00:00:00.000Z is outside of the window"}},
		"foreign plan": {[]string{"--station", "Skerry Point", "--plan", "foreign.csv"}, []string{
			`foreign.csv: line 2: station "Skerry Pont" is not in the scenario; did you mean "Skerry Point"`, `foreign.csv: line 3: spacecraft "Fulmar 9" is not in the scenario`, "is the plan of another one?"}},
		"moved plan": {[]string{"--station", "Skerry Point", "--plan", "moved.csv"}, []string{
			"moved.csv: line 2: Wagtail 1 has no pass over Skerry Point, dish, from 2026-09-15T11:52:00.000Z to 2026-09-15T11:58:00.000Z; was the plan made of other elements"}},
		"no plan":       {[]string{"--plan", "none.csv"}, []string{"none.csv: there is no such file"}},
		"no such place": {[]string{"--station", "Skerry Point", "--into", "no/such/shift.html"}, []string{"--into: "}},
	} {
		t.Run(name, func(t *testing.T) {
			code, out, errOut := invoke(t, append([]string{"shift"}, c.args...)...)
			if code != ExitInput || out != "" {
				t.Errorf("exit code %d, stdout %q", code, out)
			}
			for _, w := range c.want {
				if !strings.Contains(errOut, w) {
					t.Errorf("stderr %q lacks %q", errOut, w)
				}
			}
		})
	}
}

func TestShiftWithoutContacts(t *testing.T) {
	writeInto(t, map[string]string{"plan.csv": shiftPlan})
	a := askShift(t, "--station", "Skerry Point", "--from", "2026-09-15T03:00:00Z", "--hours", "1")
	if len(a.Contacts) != 0 || a.None == nil || !strings.Contains(*a.None, "the next is Dunlin 1, AOS 2026-09-15 05:46:27 UTC") {
		t.Errorf("%+v", a.None)
	}
	a = askShift(t, "--station", "Skerry Point", "--plan", "plan.csv", "--from", "2026-09-15T03:00:00Z", "--hours", "1")
	if a.None == nil || !strings.Contains(*a.None, "in the plan") {
		t.Errorf("%+v", a.None)
	}
	// The last pass of the window is over before its end.
	a = askShift(t, "--station", "Skerry Point", "--window-length-h", "5", "--from", "2026-09-15T04:50:00Z")
	if a.None == nil || !strings.Contains(*a.None, "none to the end of the window, 2026-09-15 05:00:00 UTC") || a.To != "2026-09-15T05:00:00.000Z" {
		t.Errorf("%+v to %s", a.None, a.To)
	}
	for _, name := range []string{"a.html", "a.pdf"} {
		flag := map[string]string{"a.html": "--into", "a.pdf": "--pdf"}[name]
		code, _, errOut := invoke(t, "shift", "--station", "Skerry Point", "--from", "2026-09-15T03:00:00Z", "--hours", "1", flag, name)
		if text, err := os.ReadFile(name); code != ExitAnswer || err != nil || len(text) < 1000 {
			t.Errorf("%s: %d %s %v", name, code, errOut, err)
		}
	}
}

// A pass that is under way when the window begins says so, and its start is not called AOS.
func TestShiftOfACutPass(t *testing.T) {
	args := []string{"shift", "--station", "Skerry Point", "--window-start", "2026-09-15T00:53:00Z", "--hours", "0.5"}
	code, out, errOut := invoke(t, args...)
	if code != ExitAnswer || !strings.Contains(out, "The window cuts this pass") || !strings.Contains(strings.Join(strings.Fields(out), " "), "start culmination LOS") {
		t.Errorf("%d %s\n%s", code, errOut, out)
	}
	if strings.Contains(out, "AOS ±") {
		t.Error("the window's edge has a plus-minus")
	}
}

// The sheet for a terminal, and each of its lists.
func TestShiftGolden(t *testing.T) {
	args := []string{"shift", "--station", "Skerry Point", "--hours", "3"}
	for name, more := range map[string][]string{
		"shift.txt": nil, "shift-contacts.csv": {"--format", "csv"}, "shift-causes.csv": {"--format", "csv", "--show", "causes"},
		"shift-minutes.csv": {"--format", "csv", "--show", "minutes"}, "shift-steps.csv": {"--format", "csv", "--show", "steps"},
	} {
		code, out, errOut := invoke(t, append(args, more...)...)
		if code != ExitAnswer {
			t.Fatalf("%s: %d %s", name, code, errOut)
		}
		golden(t, name, out)
	}
}
