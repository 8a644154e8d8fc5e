package cli

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// dishScenario is the demo's spacecraft over one site, with a sizing block of its own.
func dishScenario(t *testing.T, block string) string {
	t.Helper()
	dir := t.TempDir()
	for _, f := range []string{"elements.tle", "skyline.csv"} {
		text, err := os.ReadFile("../scenario/demo/" + f)
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(dir, f), text, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	demo, err := os.ReadFile("../scenario/demo/slantwise.yaml")
	if err != nil {
		t.Fatal(err)
	}
	before, rest, ok := strings.Cut(string(demo), "\nsizing:\n")
	_, after, ok2 := strings.Cut(rest, "\nstations:\n")
	if !ok || !ok2 {
		t.Fatal("the demo has no sizing block before its stations")
	}
	file := filepath.Join(dir, "s.yaml")
	if err := os.WriteFile(file, []byte(before+"\n"+block+"\nstations:\n"+after), 0o600); err != nil {
		t.Fatal(err)
	}
	return file
}

const dishBlock = `sizing:
  spacecraft: Wagtail 1
  transmitter: X-band
  antenna: dish
  sites: [Skerry Point]
  diameter_m: [1.0, 6.0]
  days: 10
  requirements:
`

type dishAnswer struct {
	Satisfied    bool
	Least        *float64 `json:"least_diameter_m"`
	Binding      *string  `json:"binding_requirement"`
	Answer       string
	Nearest      *struct{ Misses string }
	Requirements []struct {
		Name              string
		Required, Reached *float64
		Unit              string
		Satisfied         bool
		Least             *float64 `json:"least_diameter_m"`
	}
}

func dishOf(t *testing.T, requirements string, args ...string) dishAnswer {
	t.Helper()
	file := dishScenario(t, dishBlock+requirements)
	code, out, errOut := invoke(t, append([]string{"dish", "--scenario", file, "--format", "json"}, args...)...)
	if code != 0 {
		t.Fatalf("exit code %d: %s", code, errOut)
	}
	var a dishAnswer
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatalf("%v in %s", err, out)
	}
	return a
}

// The margin of the answer is the one of the budget at the same distance, and the least
// diameter gives just what is asked for.
func TestDishMarginIsTheBudgets(t *testing.T) {
	a := dishOf(t, "    margin_at_elevation: {elevation_deg: 10, margin_db: 8}\n")
	r := a.Requirements[0]
	if a.Satisfied != r.Satisfied || *a.Binding != "margin_at_elevation" || r.Unit != "dB" || *r.Required != 8 {
		t.Fatalf("%+v", a)
	}
	code, out, errOut := invoke(t, "budget", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--transmitter", "X-band", "--mode", "safe",
		"--range-km", "1763", "--elevation-deg", "10", "--format", "json")
	if code != 0 {
		t.Fatal(errOut)
	}
	var b struct {
		Samples []struct {
			Margin float64 `json:"margin_db"`
		}
	}
	if err := json.Unmarshal([]byte(out), &b); err != nil {
		t.Fatal(err)
	}
	// The distance at 10 deg from the mean radius, 6891 km at such latitudes; the height
	// swings by 7 km with the eccentricity, 0.1 dB.
	if d := *r.Reached - b.Samples[0].Margin; d > 0.1 || d < -0.1 {
		t.Errorf("margin %.3f dB, the budget has %.3f dB", *r.Reached, b.Samples[0].Margin)
	}
	if *a.Least <= 1 || *a.Least >= 3.7 != !a.Satisfied {
		t.Errorf("least diameter %g m with the scenario's 3.7 m satisfied %t", *a.Least, a.Satisfied)
	}
}

// What cannot be reached is answered with what comes nearest.
func TestDishTellsTheNearest(t *testing.T) {
	a := dishOf(t, "    bytes_per_day: 1.0e12\n    longest_gap_h: 20\n")
	if a.Satisfied || a.Least != nil || a.Binding == nil || *a.Binding != "bytes_per_day" || a.Nearest == nil || !strings.Contains(a.Nearest.Misses, "of 1 TB") {
		t.Errorf("%+v", a)
	}
	if len(a.Requirements) != 2 || a.Requirements[1].Least == nil || !strings.HasPrefix(a.Answer, "No, ") {
		t.Errorf("%+v", a)
	}
}

// Latency needs the recorder, and with it is told.
func TestDishLatency(t *testing.T) {
	a := dishOf(t, "    latency_p95_h: 30\n", "--days", "7")
	if r := a.Requirements[0]; r.Reached == nil || !(*r.Reached > 0.5 && *r.Reached < 100) {
		t.Errorf("%+v", a)
	}
}

func TestDishRefuses(t *testing.T) {
	for _, c := range []struct{ block, want string }{
		{"", "no such block"},
		{strings.Replace(dishBlock, "antenna: dish", "antenna: big dish", 1) + "    longest_gap_h: 20\n", "none of the sites has an antenna"},
		{strings.Replace(dishBlock, "spacecraft: Wagtail 1\n  transmitter: X-band", "spacecraft: Pipit 2\n  transmitter: UHF", 1) + "    longest_gap_h: 20\n", "lies outside its bands"},
		{strings.Replace(dishBlock, "[Skerry Point]", "[Hoarfjord]", 1) + "    longest_gap_h: 20\n", "none of the sites"},
	} {
		code, _, errOut := invoke(t, "dish", "--scenario", dishScenario(t, c.block))
		if code != 2 || !strings.Contains(errOut, c.want) {
			t.Errorf("exit code %d, %q instead of %q", code, errOut, c.want)
		}
	}
}

func TestDishFormats(t *testing.T) {
	file := dishScenario(t, dishBlock+"    bytes_per_day: 2.0e9\n")
	for _, c := range []struct{ args, want string }{
		{"--format csv", "name,required,reached,unit,satisfied,least_diameter_m,"},
		{"--show trade --format csv", "diameter_m,bytes_per_day,clear_sky_bytes_per_day,"},
		{"", "The least diameter that meets all is "},
		{"--show map --axis power --format csv", "power_change_db,diameter_m,bytes_per_day,over_worst_share,just_met_diameter_m\n-6.000,1.0000,"},
		{"--show map --axis frequency --format csv", "\n8180.000,"},
		{"--show sensitivities --format csv", "1 K more noise,-"},
		{"--show limits --diameter-m 3.7 --format csv", "greatest altitude,"},
		{"--show chances --format csv", "\nassured,95.00,"},
	} {
		code, out, errOut := invoke(t, append([]string{"dish", "--scenario", file}, strings.Fields(c.args)...)...)
		if code != 0 || !strings.Contains(out, c.want) {
			t.Errorf("%s: exit code %d, %s%s", c.args, code, out, errOut)
		}
	}
}

// The report is a page with its numbers beside it, the same bytes again.
func TestDishReport(t *testing.T) {
	file := dishScenario(t, dishBlock+"    bytes_per_day: 2.0e9\n    margin_at_elevation: {elevation_deg: 20, margin_db: 3}\n")
	dir := filepath.Join(t.TempDir(), "dish")
	write := func() map[string]string {
		code, _, errOut := invoke(t, "dish", "--scenario", file, "--report", dir, "--static", "--pdf", filepath.Join(dir, "dish.pdf"))
		if code != 0 {
			t.Fatalf("exit code %d: %s", code, errOut)
		}
		out := map[string]string{}
		for _, name := range []string{"index.html", "answer.json", "trade.csv", "trade.json", "map-power.csv", "map-frequency.json", "sensitivities.csv", "chances.json", "limits.csv", "requirements.json", "dish.pdf"} {
			text, err := os.ReadFile(filepath.Join(dir, name))
			if err != nil {
				t.Fatal(err)
			}
			out[name] = string(text)
		}
		return out
	}
	first := write()
	for name, want := range map[string]string{
		"index.html": "The least diameter that meets all is", "answer.json": `"binding_requirement": "`, "trade.csv": "diameter_m,", "map-power.csv": "power_change_db,",
		"sensitivities.csv": "1 dB less transmit power,-", "chances.json": `"probability_percent":`, "limits.csv": "greatest altitude,",
	} {
		if !strings.Contains(first[name], want) {
			t.Errorf("%s lacks %q", name, want)
		}
	}
	if strings.Contains(first["index.html"], "<script") || !strings.HasPrefix(first["dish.pdf"], "%PDF-1.") {
		t.Error("a script in the page without one, or no paper")
	}
	for name, text := range write() {
		if text != first[name] {
			t.Errorf("%s differs the second time", name)
		}
	}
	if code, _, errOut := invoke(t, "dish", "--scenario", file, "--static"); code != 2 || !strings.Contains(errOut, "--static goes with --report") {
		t.Errorf("--static alone: exit code %d, %s", code, errOut)
	}
	if code, _, errOut := invoke(t, "dish", "--scenario", file, "--report", file); code != 2 || !strings.Contains(errOut, "name a folder") {
		t.Errorf("a file for a folder: exit code %d, %s", code, errOut)
	}
}

// A spacecraft that does not fly yet: its element set is written, and read again it is
// the same orbit.
func TestDishOfASyntheticOrbit(t *testing.T) {
	file := dishScenario(t, dishBlock+"    bytes_per_day: 2.0e9\n")
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	changed := strings.Replace(string(text), "    element_set: \"99001\"\n", "    synthetic_orbit: {altitude_km: 520, eccentricity: 0.001, local_time_of_node_h: 22.5}\n", 1)
	if changed == string(text) {
		t.Fatal("the demo's first spacecraft has no element_set 99001")
	}
	if err := os.WriteFile(file, []byte(changed), 0o600); err != nil {
		t.Fatal(err)
	}
	set := filepath.Join(filepath.Dir(file), "made.tle")
	code, out, errOut := invoke(t, "dish", "--scenario", file, "--element-set", set)
	if code != 0 || !strings.Contains(errOut, "local time is held at 22.50 h") {
		t.Fatalf("exit code %d: %s%s", code, out, errOut)
	}
	before := out
	code, out, errOut = invoke(t, "elements", set, "--format", "csv")
	if code != 0 || !strings.Contains(out, "Wagtail 1") {
		t.Errorf("exit code %d: %s%s", code, out, errOut)
	}
	lines, err := os.ReadFile(set)
	if err != nil || !strings.Contains(string(lines), " 97.5021 ") || !strings.Contains(string(lines), " 15.14") {
		t.Errorf("%v: %s", err, lines)
	}
	// The same orbit from the file.
	back := strings.Replace(changed, "    synthetic_orbit: {altitude_km: 520, eccentricity: 0.001, local_time_of_node_h: 22.5}\n", "    element_set: \"Wagtail 1\"\n", 1)
	back = strings.Replace(back, "element_files: [elements.tle]", "element_files: [made.tle]", 1)
	back = back[:strings.Index(back, "  # A small satellite without")] + back[strings.Index(back, "# What a licence allows"):]
	if err := os.WriteFile(file, []byte(back), 0o600); err != nil {
		t.Fatal(err)
	}
	code, again, errOut := invoke(t, "dish", "--scenario", file)
	if code != 0 {
		t.Fatal(errOut)
	}
	head, _, _ := strings.Cut(before, "\n\n")
	if !strings.HasPrefix(again, head) {
		t.Errorf("from the file: %s\nfrom the orbit: %s", again, head)
	}
}

func TestDishFlagsRefuse(t *testing.T) {
	file := dishScenario(t, dishBlock+"    bytes_per_day: 2.0e9\n")
	for _, c := range []struct{ args, want string }{
		{"--show maps", "it must be \"answer\", \"trade\""},
		{"--axis colour", "it must be power, elevation, noise or frequency"},
		{"--diameter-m 0", "it must be greater than 0"},
		{"--diameter-m 5", "--diameter-m goes with --show sensitivities"},
		{"--show trade --diameter-m 5", "--diameter-m goes with --show sensitivities"},
		{"--days 3", "days: 3 d"},
	} {
		code, _, errOut := invoke(t, append([]string{"dish", "--scenario", file}, strings.Fields(c.args)...)...)
		if code != 2 || !strings.Contains(errOut, c.want) {
			t.Errorf("%s: exit code %d, %q instead of %q", c.args, code, errOut, c.want)
		}
	}
}
