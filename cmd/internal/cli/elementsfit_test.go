package cli

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/oem"
)

// samplePositions is a day of an invented low orbit by numerical integration, Earth-fixed.
//
//go:embed testdata/positions.csv
var samplePositions string

func fitRun(t *testing.T, in string, args ...string) (code int, out, errOut string) {
	t.Helper()
	return elementsRun(t, in, append([]string{"fit"}, args...)...)
}

// A fit to the states of a set of the demo, at the set's own epoch, writes its second line up
// to the number of the revolution.
func TestElementsFitGivesTheDemoSetBack(t *testing.T) {
	_, text, _ := elementsRun(t, "", "--object", "99001", "--convert", "tle")
	sets, _, err := elements.Read(strings.NewReader(text), "demo")
	if err != nil {
		t.Fatal(err)
	}
	code, out, errOut := fitRun(t, "", "--spacecraft", "Wagtail 1", "--epoch", utc(sets[0].Epoch), "--step", "5m", "--convert", "tle")
	lines, want := strings.Split(out, "\n"), strings.Split(text, "\n")
	if code != ExitAnswer || len(lines) != 4 || lines[0] != want[0] || lines[2][:63] != want[2][:63] {
		t.Errorf("exit %d, %s\n got\n%swant\n%s", code, errOut, out, text)
	}
	if !strings.Contains(errOut, "spacecraft Wagtail 1: SGP4 elements fitted to 289 positions and velocities of 2026-09-15T00:00:00.000Z to 2026-09-16T00:00:00.000Z; RMS distance 0.0") {
		t.Errorf("stderr %s", errOut)
	}
}

func TestElementsFitTable(t *testing.T) {
	code, out, errOut := fitRun(t, samplePositions, "-", "--name", "WAGTAIL 9", "--catalog-number", "99009", "--designator", "2026-101A")
	for _, want := range []string{"standard input: SGP4 elements fitted to 289 positions of ", "\nepoch 2026-09-15T00:00:00.000Z, TEME, UTC\n",
		"B* (fitted) ", "1/Earth radii\n", "residual ", "across m\n", "\nWAGTAIL 9\n1 99009U 26101A   26258.00000000  .00000000  00000-0 ", " m from the fit over the data\n"} {
		if !strings.Contains(out, want) {
			t.Errorf("exit %d, stderr %s\nwant %q in\n%s", code, errOut, want, out)
		}
	}
	for _, want := range []string{"positions in the frame Earth-fixed are turned into TEME\n", "UT1-UTC and polar motion are taken as 0", "data count as one in the standard deviations\n", "a TLE cannot hold all of it: "} {
		if !strings.Contains(errOut, want) {
			t.Errorf("want %q in\n%s", want, errOut)
		}
	}
}

func TestElementsFitJSON(t *testing.T) {
	code, out, _ := fitRun(t, samplePositions, "-", "--format", "json", "--b-star", "4e-4", "--epoch", "middle", "--reject-beyond", "5")
	var got struct {
		EpochUTC  string             `json:"epoch_utc"`
		Elements  map[string]float64 `json:"elements"`
		Sigmas    map[string]float64 `json:"standard_deviations"`
		BStar     string             `json:"b_star"`
		RMS       float64            `json:"rms_m"`
		Residuals map[string]struct {
			RMS  float64 `json:"rms"`
			Unit string  `json:"unit"`
		} `json:"residuals"`
		Covariance struct {
			Parameters []string    `json:"parameters"`
			Matrix     [][]float64 `json:"matrix"`
		} `json:"covariance"`
		Spread []struct {
			Along float64 `json:"along_m"`
		} `json:"spread"`
		TwoLine struct {
			Lines []string `json:"lines"`
		} `json:"two_line"`
		LeftOut []any `json:"left_out"`
	}
	if err := json.Unmarshal([]byte(out), &got); err != nil || code != ExitAnswer {
		t.Fatalf("exit %d, %v in\n%s", code, err, out)
	}
	if got.EpochUTC != "2026-09-14T12:00:00.000Z" || got.BStar != "stated" || got.Elements["b_star_per_earth_radius"] != 4e-4 || got.Sigmas["b_star_per_earth_radius"] != 0 ||
		math.Abs(got.Elements["inclination_deg"]-97.45) > 0.01 || got.LeftOut == nil || len(got.TwoLine.Lines) != 2 {
		t.Errorf("got %+v", got)
	}
	sum := 0.0
	for _, axis := range []string{"radial", "along", "across"} {
		sum += got.Residuals[axis].RMS * got.Residuals[axis].RMS
	}
	if math.Abs(math.Sqrt(sum)-got.RMS) > 1e-3 || got.RMS > 700 {
		t.Errorf("RMS %g m, of the components %g m", got.RMS, math.Sqrt(sum))
	}
	if len(got.Covariance.Parameters) != 7 || len(got.Covariance.Matrix) != 7 || got.Covariance.Matrix[0][0] <= 0 || got.Covariance.Matrix[6][6] != 0 {
		t.Errorf("covariance %+v", got.Covariance)
	}
	if len(got.Spread) != 6 || !(got.Spread[1].Along > got.Spread[0].Along) {
		t.Errorf("spread %+v", got.Spread)
	}
}

func TestElementsFitCSV(t *testing.T) {
	code, out, _ := fitRun(t, samplePositions, "-", "--format", "csv")
	lines := strings.Split(strings.TrimSpace(out), "\n")
	if code != ExitAnswer || len(lines) != 290 || lines[0] != "utc,line,radial_m,along_m,across_m,radial_m_s,along_m_s,across_m_s,left_out,far_off" ||
		!strings.HasPrefix(lines[1], "2026-09-14T00:00:00.000Z,3,") || !strings.HasSuffix(lines[1], ",,,,no,no") {
		t.Errorf("exit %d, %d lines\n%s\n%s", code, len(lines), lines[0], lines[1])
	}
}

// A file of sets is not replaced by a set of another object, nor left half written.
func TestElementsFitInto(t *testing.T) {
	path := filepath.Join(t.TempDir(), "sets.tle")
	args := []string{"-", "--convert", "tle", "--into", path, "--name", "WAGTAIL 9", "--catalog-number", "99009"}
	if code, out, errOut := fitRun(t, samplePositions, args...); code != ExitAnswer || !strings.Contains(out, "B* (fitted)") || !strings.Contains(errOut, "1 element set written") {
		t.Fatalf("exit %d, %s\n%s", code, errOut, out)
	}
	first, err := os.ReadFile(path)
	if err != nil || !strings.HasPrefix(string(first), "WAGTAIL 9\n1 99009U ") {
		t.Fatalf("%v\n%s", err, first)
	}
	args[len(args)-1] = "99010"
	code, _, errOut := fitRun(t, samplePositions, args...)
	if code != ExitFailure || !strings.Contains(errOut, "holds more than the new sets:\n  WAGTAIL 9 (99009): missing") {
		t.Errorf("exit %d, %s", code, errOut)
	}
	if again, _ := os.ReadFile(path); string(again) != string(first) {
		t.Error("the file was changed")
	}
}

func TestElementsFitRefusals(t *testing.T) {
	head, rows, _ := strings.Cut(samplePositions[strings.Index(samplePositions, "utc"):], "\n")
	few := head + "\n" + strings.Join(strings.SplitN(rows, "\n", 5)[:4], "\n") + "\n"
	for name, c := range map[string]struct {
		in   string
		args []string
		want string
	}{
		"no file":        {"", []string{"none.csv"}, "none.csv: cannot be read: no such file or directory; check the name and the folder it is relative to"},
		"two files":      {"", []string{"a.csv", "b.csv"}, "slantwise elements fit takes one FILE, 2 are given"},
		"both":           {"", []string{"a.csv", "--spacecraft", "Wagtail 1"}, "--spacecraft is about a scenario's spacecraft, and FILE is given; give one of them"},
		"step":           {"", []string{"a.csv", "--step", "1m"}, "--step is about positions of a spacecraft, and FILE has its own"},
		"frame alone":    {"", []string{"--frame", "teme"}, "--frame is about a FILE, which is not given"},
		"frame":          {"", []string{"-", "--frame", "b1950"}, `--frame: frame "b1950" is not known; it must be one of teme, earth-fixed, pseudo-earth-fixed, true-of-date, mean-of-date, j2000, gcrf`},
		"into":           {"", []string{"-", "--into", "x.tle"}, "--into needs --convert, which says in which format"},
		"format":         {"", []string{"-", "--convert", "tle", "--format", "json"}, "--format is about the report, and --convert without --into writes the set in its place; give --into, too"},
		"loss":           {"", []string{"-", "--allow-loss"}, "--allow-loss is about --into, which is not given"},
		"to":             {"", []string{"-", "--from", "2026-09-15T00:00:00Z", "--to", "2026-09-14T00:00:00Z"}, "--to: 2026-09-14T00:00:00.000Z is not after --from 2026-09-15T00:00:00.000Z"},
		"reject":         {"", []string{"-", "--reject-beyond", "0.5"}, "--reject-beyond: 0.5 is not allowed; it must be 1 or more standard deviations"},
		"rms":            {"", []string{"-", "--most-rms-km", "0"}, "--most-rms-km: 0 is not allowed; it must be greater than 0"},
		"B*":             {"", []string{"-", "--b-star", "4"}, "--b-star: 4 is not allowed; it must be -1 to 1 per Earth radius"},
		"number":         {"", []string{"-", "--catalog-number", "1.5"}, "--catalog-number: 1.5 is not allowed; it must be a whole number, 0 to 999999999"},
		"kind":           {"", []string{"-", "--convert", "oem"}, `--convert: element format "oem" is not known; it must be one of tle, omm-kvn, omm-xml, omm-json, omm-csv`},
		"epoch":          {"", []string{"-", "--epoch", "noon"}, `--epoch: "noon" is neither last, middle, first nor an instant: `},
		"table":          {head + "\n2026,teme,1,2,3\n", []string{"-"}, `standard input:2: utc: "2026" is no instant of 1957 to 2056`},
		"too few":        {few, []string{"-"}, "standard input: the data do not carry B*: it "},
		"half a day":     {samplePositions, []string{"-", "--to", "2026-09-14T12:00:00Z"}, "standard input: the data do not carry B*: it comes out as -0.002289 ± 0.0003"},
		"nothing inside": {samplePositions, []string{"-", "--from", "2027-01-01T00:00:00Z"}, "standard input: too few data: there are none in the span; give positions, or a wider span"},
		"residuals":      {samplePositions, []string{"-", "--most-rms-km", "0.1"}, "standard input: residuals beyond what SGP4 can carry: the RMS distance is 0."},
		"many":           {"", []string{"--spacecraft", "Wagtail 1", "--step", "1ms"}, "2026-09-15T00:00:00.000Z to 2026-09-16T00:00:00.000Z in steps of 1ms are not 1 to 1000000 positions; give another --to or --step"},
	} {
		t.Run(name, func(t *testing.T) {
			code, out, errOut := fitRun(t, c.in, c.args...)
			if code != ExitInput || out != "" || !strings.Contains(errOut, "slantwise: "+c.want) {
				t.Errorf("exit %d, %q\n got %swant slantwise: %s", code, out, errOut, c.want)
			}
		})
	}
}

// What the report prints for a scenario is taken by one.
func TestElementsFitRuleIsTaken(t *testing.T) {
	_, out, _ := fitRun(t, samplePositions, "-")
	at := strings.Index(out, "\nposition_uncertainty: {")
	if at < 0 {
		t.Fatalf("no rule in\n%s", out)
	}
	rule, _, _ := strings.Cut(out[at+1:], "\n")
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new", "a.yaml"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	text, err := os.ReadFile("a.yaml")
	if err != nil {
		t.Fatal(err)
	}
	if strings.Contains(string(text), "\nposition_uncertainty:") {
		t.Fatal("the starting scenario has a rule of its own")
	}
	if err := os.WriteFile("a.yaml", append(text, []byte("\n"+rule+"\n")...), 0o600); err != nil {
		t.Fatal(err)
	}
	if code, _, errOut := invoke(t, "check", "--scenario", "a.yaml"); code != ExitAnswer {
		t.Errorf("%s: exit %d, %s", rule, code, errOut)
	}
}

// The states of an OEM give the set back that they were made from, whatever frame and
// notation they are written in.
func TestElementsFitOEM(t *testing.T) {
	sets, _, err := elements.Read(strings.NewReader(wagtailSet), "wagtail")
	if err != nil {
		t.Fatal(err)
	}
	el := sets[0]
	eph, err := orbit.NewEphemeris(el, el.Epoch, el.Epoch.Add(24*time.Hour), orbit.EarthOrientation{})
	if err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct {
		frame    orbit.Frame
		notation oem.Notation
	}{"J2000 as KVN": {orbit.J2000, oem.KVN}, "Earth-fixed as XML": {orbit.EarthFixed, oem.XML}} {
		t.Run(name, func(t *testing.T) {
			sampled, err := oem.Sample(eph, "WAGTAIL 1", "2026-001A", c.frame, 5*time.Minute, orbit.EarthOrientation{})
			if err != nil {
				t.Fatal(err)
			}
			var text bytes.Buffer
			if err := oem.Write(&text, sampled, c.notation, oem.Header{Created: el.Epoch}); err != nil {
				t.Fatal(err)
			}
			code, out, errOut := fitRun(t, text.String(), "-", "--catalog-number", "99001", "--epoch", "first", "--convert", "tle")
			want, got := strings.Split(wagtailSet, "\n"), strings.Split(out, "\n")
			if code != ExitAnswer || len(got) != 4 || got[0] != want[0] || got[1][:32] != want[1][:32] || got[2][:63] != want[2][:63] {
				t.Errorf("exit %d, %s\n got\n%swant\n%s", code, errOut, out, wagtailSet)
			}
			code, _, errOut = fitRun(t, text.String(), "-", "--object", "WAGTAIL 2")
			if code != ExitInput || !strings.Contains(errOut, `--object: "WAGTAIL 2" is not in standard input; did you mean "WAGTAIL 1"; it holds "WAGTAIL 1"`) {
				t.Errorf("exit %d, %s", code, errOut)
			}
			if code, _, errOut = fitRun(t, text.String(), "-", "--frame", "teme"); code != ExitInput || !strings.Contains(errOut, "standard input is an OEM, which names its own") {
				t.Errorf("exit %d, %s", code, errOut)
			}
		})
	}
	if code, _, errOut := fitRun(t, samplePositions, "-", "--object", "x"); code != ExitInput || !strings.Contains(errOut, "--object is about an OEM of several, and standard input is a table") {
		t.Errorf("exit %d, %s", code, errOut)
	}
}
