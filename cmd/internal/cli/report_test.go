package cli

import (
	"bytes"
	"context"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/station"
)

// files returns the content of every file below a folder, by its name there.
func files(t *testing.T, dir string) map[string][]byte {
	t.Helper()
	out := map[string][]byte{}
	err := filepath.WalkDir(dir, func(path string, d os.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		name, _ := filepath.Rel(dir, path)
		out[filepath.ToSlash(name)], err = os.ReadFile(path)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func TestReportOfTheDemo(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "out")
	code, out, errOut := invoke(t, "report", "--into", dir, "--spacecraft", "Wagtail 1", "--spacecraft", "Pipit 2", "--station", "Skerry Point", "--workers", "1")
	if code != ExitAnswer {
		t.Fatalf("exit code %d: %s", code, errOut)
	}
	if want := filepath.Join(dir, "index.html") + "\n"; out != want {
		t.Errorf("stdout is %q, want %q", out, want)
	}
	one := files(t, dir)
	var links, geometry int
	for name, text := range one {
		if strings.HasPrefix(name, "passes/") && strings.HasSuffix(name, ".csv") {
			if bytes.Contains(text, []byte("margin_db")) {
				links++
			} else {
				geometry++
			}
		}
		if bytes.Contains(text, []byte(dir)) {
			t.Errorf("%s names the folder that it lies in", name)
		}
	}
	// X-band of Wagtail 1 reaches the dish; nothing at Skerry Point takes Pipit 2.
	if links == 0 || geometry == 0 {
		t.Errorf("%d pages with a link and %d without, want some of both", links, geometry)
	}
	again := filepath.Join(t.TempDir(), "again")
	invoke(t, "report", "--into", again, "--spacecraft", "Wagtail 1", "--spacecraft", "Pipit 2", "--station", "Skerry Point", "--workers", "3")
	two := files(t, again)
	if len(one) != len(two) {
		t.Errorf("%d files with one worker, %d with three", len(one), len(two))
	}
	for name := range one {
		if !bytes.Equal(one[name], two[name]) {
			t.Errorf("%s differs between one worker and three", name)
		}
	}
}

func TestReportWrongInput(t *testing.T) {
	full := t.TempDir()
	if err := os.WriteFile(filepath.Join(full, "mine.txt"), nil, 0o600); err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct {
		args []string
		want string
	}{
		"unknown spacecraft": {[]string{"--spacecraft", "Wagtial 1"}, `did you mean "Wagtail 1"`},
		"unknown station":    {[]string{"--station", "Skery Point"}, `did you mean "Skerry Point"`},
		"unknown mode":       {[]string{"--mode", "fsat"}, `did you mean "fast"`},
		"workers":            {[]string{"--workers", "-1"}, `--workers: "-1" is not allowed`},
		"empty folder name":  {[]string{"--into", ""}, "--into: the name of the folder is empty"},
		"a file":             {[]string{"--into", filepath.Join(full, "mine.txt"), "--station", "Hoarfjord"}, "mine.txt: this is a file; name a folder"},
		"foreign folder":     {[]string{"--into", full, "--station", "Hoarfjord"}, "holds no report of ours"},
	} {
		t.Run(name, func(t *testing.T) {
			args := append([]string{"report", "--into", filepath.Join(t.TempDir(), "out")}, c.args...)
			code, out, errOut := invoke(t, args...)
			if code != ExitInput || out != "" || !strings.Contains(errOut, c.want) {
				t.Errorf("exit code %d, stdout %q, stderr %q; want code %d and %q", code, out, errOut, ExitInput, c.want)
			}
		})
	}
}

func TestReportTakesTheNamedMode(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "out")
	if code, _, errOut := invoke(t, "report", "--into", dir, "--spacecraft", "Wagtail 1", "--mode", "safe"); code != ExitAnswer {
		t.Fatalf("exit code %d: %s", code, errOut)
	}
	text := string(files(t, dir)["passes.csv"])
	if !strings.Contains(text, ",safe,") || strings.Contains(text, ",fast,") {
		t.Errorf("the modes of the report are not all safe:\n%s", text)
	}
}

// What a page says of the volume at its last sample is the pass's volume, and every
// mode's bytes are at most those of the chosen one.
func TestReportVolumes(t *testing.T) {
	env := newEnv(strings.NewReader(""), &bytes.Buffer{}, &bytes.Buffer{})
	s, err := env.load(needOrbits)
	if err != nil {
		t.Fatal(err)
	}
	plan, err := planReport(context.Background(), s, reportOptions{})
	if err != nil {
		t.Fatal(err)
	}
	seen := 0
	for i := range plan.pages {
		p, err := plan.load(context.Background(), i)
		if err != nil {
			t.Fatal(err)
		}
		if p.Radio == nil {
			continue
		}
		seen++
		last, v := len(p.Profile.Seconds)-1, p.Profile.Volume
		near := func(what string, got, want float64) {
			// The sums run in another order: rounding of some thousand additions.
			if math.Abs(got-want) > 1e-9*math.Abs(want) {
				t.Errorf("%s over %s: %s ends at %v bytes, the volume is %v", p.Spacecraft, p.Site.Name, what, got, want)
			}
		}
		near("achievable", p.Radio.AchievableBytes[last], v.AchievableBytes)
		near("mode", p.Radio.ModeBytes[last], v.ModeBytes)
		for _, m := range p.Radio.Modes {
			if m.Bytes > v.ModeBytes {
				t.Errorf("%s over %s: mode %s brings %v bytes, the chosen one %v", p.Spacecraft, p.Site.Name, m.Name, m.Bytes, v.ModeBytes)
			}
		}
		for i, power := range p.Profile.ReceivedPowerDBm {
			rest := 0.0
			for k, term := range p.Profile.Terms {
				if !ofThePath(term) {
					rest += float64(term.Sign) * p.Profile.TermValues[k][i]
				}
			}
			if math.Abs(rest-p.Radio.PathTotalDB[i]-power) > 1e-9 { // rounding of some twenty terms near 200 dB
				t.Fatalf("%s over %s, sample %d: %v dBm without the path, %v dB of path, %v dBm received", p.Spacecraft, p.Site.Name, i, rest, p.Radio.PathTotalDB[i], power)
			}
		}
		if d := p.Radio.LeastMargin; math.Abs(float64(d.Margin)-p.Radio.Least.Value) > 1e-6 {
			t.Errorf("%s over %s: the budget at least margin has %v dB, the least margin is %v", p.Spacecraft, p.Site.Name, d.Margin, p.Radio.Least.Value)
		}
	}
	if seen == 0 {
		t.Error("the demo has no pass with a link")
	}
}

func TestReportNotesConcernThePage(t *testing.T) {
	link := &chosenLink{transmitter: &downlink.Transmitter{Name: "X-band"}, antenna: &station.Antenna{Name: "dish"}}
	for about, want := range map[string]bool{
		"spacecraft Wagtail 1":                         true,
		"spacecraft Wagtail 1, transmitter X-band":     true,
		"spacecraft Wagtail 1, transmitter S-band":     false,
		"spacecraft Wagtail 12":                        false,
		"station Skerry Point, antenna dish":           true,
		"station Skerry Point, antenna dish, extra":    true,
		"station Skerry Point, antenna crossed yagi":   false,
		"station Hoarfjord":                            false,
		"spacecraft Pipit 2, transmitter X-band":       false,
		"spacecraft Wagtail 1, transmitter X-band two": false,
	} {
		if got := concerns(about, "Wagtail 1", "Skerry Point", link); got != want {
			t.Errorf("%q concerns the page: %v, want %v", about, got, want)
		}
	}
	if concerns("spacecraft Wagtail 1, transmitter X-band", "Wagtail 1", "Skerry Point", nil) {
		t.Error("a page without a link shows a transmitter's note")
	}
}

func TestSampleStep(t *testing.T) {
	for _, c := range []struct{ length, want time.Duration }{
		{10 * time.Minute, time.Second}, {2 * time.Hour, time.Second}, {2*time.Hour + time.Second, 2 * time.Second}, {72 * time.Hour, 36 * time.Second},
	} {
		if got := sampleStep(c.length); got != c.want {
			t.Errorf("a pass of %v has a sample every %v, want %v", c.length, got, c.want)
		}
	}
}
