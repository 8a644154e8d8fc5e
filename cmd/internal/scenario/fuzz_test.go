package scenario

import (
	"math"
	"os"
	"path/filepath"
	"testing"
	"testing/fstest"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit/unit"
)

// FuzzScenario feeds any text in any notation to the whole reader. It must not
// panic; what it accepts must hold the properties that the domain relies on.
func FuzzScenario(f *testing.F) {
	for _, pattern := range []string{"testdata/good/*.*", "testdata/bad/*.yaml", "testdata/bad/*.toml", "testdata/bad/*.json"} {
		files, err := filepath.Glob(pattern)
		if err != nil {
			f.Fatal(err)
		}
		for _, file := range files {
			if filepath.Base(file) == "alias-bomb.yaml" {
				continue // a second each time
			}
			text, err := os.ReadFile(file)
			if err != nil {
				f.Fatal(err)
			}
			format, err := formatOf(file)
			if err == nil {
				f.Add(text, byte(format))
			}
		}
	}
	sets, err := os.ReadFile("testdata/elements.tle")
	if err != nil {
		f.Fatal(err)
	}
	codings, err := os.ReadFile("testdata/codings.csv")
	if err != nil {
		f.Fatal(err)
	}
	files := fstest.MapFS{"elements.tle": {Data: sets}, "codings.csv": {Data: codings}, "skyline.csv": {Data: []byte("azimuth_deg,elevation_deg\n0,2\n")}}
	f.Fuzz(func(t *testing.T, text []byte, format byte) {
		src := &source{label: "fuzz", dir: "good", files: files, format: tree.Format(format % 3), text: text}
		for _, n := range []Need{NeedOrbits, NeedRadio} {
			s, err := load(src, Request{Need: n})
			if err == nil {
				holds(t, s, n)
			} else if err.Error() == "" {
				t.Fatal("a fault without a word")
			}
		}
	})
}

// holds checks what every accepted scenario must be.
func holds(t *testing.T, s *Scenario, n Need) {
	t.Helper()
	if n == NeedOrbits && !s.Window.End.After(s.Window.Start) {
		t.Fatalf("window %v", s.Window)
	}
	finite(t, "exceedance", float64(s.Path.Exceedance), 1e-5, 0.5)
	seen := map[string]bool{}
	for _, c := range s.Spacecraft {
		if c.Name == "" || seen[c.Name] {
			t.Fatalf("spacecraft named %q", c.Name)
		}
		seen[c.Name] = true
		if n == NeedOrbits && len(c.Candidates) == 0 {
			t.Fatalf("%s has no element set", c.Name)
		}
		for _, x := range c.Transmitters {
			finite(t, "frequency", x.Frequency.Hertz(), 1e-300, 1e12)
			finite(t, "power", x.Power.DBW(), -400, 100)
			finite(t, "line loss", float64(x.LineLoss), 0, 100)
			finite(t, "peak gain", float64(x.Pattern.PeakGain), -200, 200)
			for _, m := range x.Modes {
				finite(t, "rate", float64(m.DataRate)+float64(m.SymbolRate), 1e-300, 1e15)
			}
		}
	}
	for _, st := range s.Stations {
		if st.Site.Name == "" {
			t.Fatal("a station without a name")
		}
		if err := st.Site.Validate(); err != nil {
			t.Fatal(err)
		}
		for _, a := range st.Antennas {
			if err := a.Validate(); err != nil {
				t.Fatal(err)
			}
			for _, b := range a.Bands {
				finite(t, "band", float64(b.High-b.Low), 0, 1e12)
			}
		}
		finite(t, "height above the sea", st.Climate.Height.Metres(), -1000, 10_000)
		if r := st.Climate.Rate001; r != nil {
			finite(t, "rain rate", float64(*r), 0, 300)
		}
		if m := st.Site.Mask; m != nil {
			finite(t, "mask", m.At(123*unit.Degree).Degrees(), -10.001, 90)
		}
	}
}

func finite(t *testing.T, what string, v, low, high float64) {
	t.Helper()
	if math.IsNaN(v) || !(v >= low && v <= high) {
		t.Fatalf("%s is %g, outside %g to %g", what, v, low, high)
	}
}
