package scenario

import (
	"maps"
	"os"
	"path"
	"path/filepath"
	"reflect"
	"regexp"
	"strings"
	"testing"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit/unit"
)

// reload loads a text as if it stood beside a file.
func reload(t *testing.T, beside string, text []byte) *Scenario {
	t.Helper()
	s, err := load(&source{label: beside, dir: filepath.Dir(beside), format: tree.YAML, text: text}, Request{})
	if err != nil {
		t.Fatalf("%v in\n%s", err, text)
	}
	s.Assumptions, s.Warnings = nil, nil // they tell lines
	return s
}

// alike compares all of two scenarios but the functions of their atmospheres, which
// cannot be compared, and the trees, which tell lines.
func alike(a, b *Scenario) bool {
	b.root = a.root
	for i := range a.Stations {
		x, y := a.Stations[i].Climate.Atmosphere, b.Stations[i].Climate.Atmosphere
		if (x == nil) != (y == nil) || x != nil && x.Name() != y.Name() {
			return false
		}
		b.Stations[i].Climate.Atmosphere = x
	}
	return reflect.DeepEqual(a, b)
}

// TestWithChange writes the scenario that has every key, in each notation: unchanged it
// is the same scenario, changed it differs in what was asked for alone.
func TestWithChange(t *testing.T) {
	for _, file := range []string{"testdata/good/everything.yaml", "testdata/good/everything.toml", "testdata/good/everything.json"} {
		t.Run(filepath.Ext(file), func(t *testing.T) {
			want, err := Load(Request{Path: file})
			if err != nil {
				t.Fatal(err)
			}
			want.Assumptions, want.Warnings = nil, nil
			c := Change{Spacecraft: "Wagtail 1", Transmitter: "X-band", Station: want.Stations[0].Site.Name, Antenna: want.Stations[0].Antennas[0].Name, NameOfFile: file, Remark: "A test."}
			same, err := WithChange(Request{Path: file}, c)
			if err != nil {
				t.Fatal(err)
			}
			if got := reload(t, file, same.Text); !alike(got, want) {
				t.Errorf("unchanged it differs:\n%s", same.Text)
			}
			power, dish, pointing, least, exceeded := 3.5, 4.25, 0.125, 12.5, 0.1
			c.PowerW, c.DiameterM, c.PointingErrorDeg, c.LeastElevationDeg, c.ExceededPercent, c.Mode = &power, &dish, &pointing, &least, &exceeded, "safe"
			other, err := WithChange(Request{Path: file}, c)
			if err != nil {
				t.Fatal(err)
			}
			x := &want.Spacecraft[0].Transmitters[0]
			if x.Power, err = unit.LevelWatts(power); err != nil {
				t.Fatal(err)
			}
			x.Modes = x.Modes[:1]
			a := &want.Stations[0].Antennas[0]
			a.Diameter, a.PointingRMS = unit.Length(dish), unit.Angle(pointing)*unit.Degree
			want.Stations[0].Site.MinimumElevation = unit.Angle(least) * unit.Degree
			want.Path.Exceedance = 0.001
			if got := reload(t, file, other.Text); !alike(got, want) {
				t.Errorf("changed it differs in more, or in less:\n%s", other.Text)
			}
			if len(other.Told) != 6 || !strings.HasPrefix(string(other.Text), "# A test. It was made from "+filepath.Base(file)+":\n# ") {
				t.Errorf("told %q in\n%s", other.Told, other.Text[:300])
			}
		})
	}
}

// TestWithChangeRefuses asks for what the scenario does not have, or may not have.
func TestWithChangeRefuses(t *testing.T) {
	const file = "testdata/good/everything.yaml"
	high := 95.0
	for _, row := range []struct{ what, want string }{
		{"antenna", "dish 9"}, {"mode", "warp"}, {"elevation", "minimum_elevation_deg"},
	} {
		c := Change{Spacecraft: "Wagtail 1", Transmitter: "X-band", Station: "Skerry Point", Antenna: "dish", NameOfFile: "new.yaml"}
		switch row.what {
		case "antenna":
			c.Antenna = row.want
		case "mode":
			c.Mode = row.want
		case "elevation":
			c.LeastElevationDeg = &high
		}
		if _, err := WithChange(Request{Path: file}, c); err == nil || !strings.Contains(err.Error(), row.want) {
			t.Errorf("%s: %v", row.what, err)
		}
	}
}

// TestWithChangeKeepsWhatReplaces has a variable of the environment in place of the
// file's value, and anchors in the file.
func TestWithChangeKeepsWhatReplaces(t *testing.T) {
	dir := t.TempDir()
	file := filepath.Join(dir, "s.yaml")
	body, sets, err := Start("s.tle")
	if err != nil {
		t.Fatal(err)
	}
	body = strings.Replace(body, "length_h: 24", "end_utc: 2026-09-15T06:00:00Z", 1)
	body = strings.Replace(body, "kind: dish #", "kind: &kind dish #", 1)
	for name, text := range map[string]string{file: body, filepath.Join(dir, "s.tle"): sets} {
		if err := os.WriteFile(name, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	t.Setenv("SLANTWISE_WINDOW_LENGTH_H", "7.5")
	got, err := WithChange(Request{Path: file}, Change{Spacecraft: "My spacecraft", Transmitter: "downlink", Station: "My station", Antenna: "dish", NameOfFile: "n.yaml"})
	if err != nil {
		t.Fatal(err)
	}
	os.Unsetenv("SLANTWISE_WINDOW_LENGTH_H") // Setenv above brings it back to what it was
	if s := reload(t, file, got.Text); s.Window.Length().Hours() != 7.5 {
		t.Errorf("the window is %v long", s.Window.Length())
	}
}

// TestOpenedTellsEveryFile reads the scenario that has every key: each file that it
// names, and itself, is told of before it is read, one that is missing too.
func TestOpenedTellsEveryFile(t *testing.T) {
	const file = "testdata/good/everything.yaml"
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	told := map[string]bool{}
	opened := func(file string) { told[filepath.ToSlash(filepath.Clean(file))] = true }
	if _, err := Load(Request{Path: file, Opened: opened}); err != nil {
		t.Fatal(err)
	}
	want := map[string]bool{file: true}
	for _, name := range regexp.MustCompile(`\.\./[a-z0-9-]+\.[a-z]+`).FindAllString(string(text), -1) {
		want[path.Join("testdata/good", name)] = true
	}
	if len(want) < 5 || !maps.Equal(told, want) {
		t.Errorf("told of %v, want %v", told, want)
	}
	clear(told)
	if _, err := Load(Request{Path: "testdata/none.yaml", Opened: opened}); err == nil || !told["testdata/none.yaml"] {
		t.Errorf("%v; told of %v", err, told)
	}
}

// FuzzChange writes whatever scenario is accepted, unchanged and with another power: what
// is written is the same scenario, but for that.
func FuzzChange(f *testing.F) {
	for _, file := range []string{"testdata/good/everything.yaml", "testdata/good/everything.toml", "testdata/good/everything.json", "demo/slantwise.yaml"} {
		text, err := os.ReadFile(file)
		if err != nil {
			f.Fatal(err)
		}
		format, err := formatOf(file)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(text, byte(format))
	}
	start, _, err := Start("../elements.tle")
	if err != nil {
		f.Fatal(err)
	}
	f.Add([]byte(start), byte(tree.YAML))
	f.Add([]byte(strings.Replace(start, "diameter_m: 3.0", "diameter_m: &d 3.0 # anchor", 1)), byte(tree.YAML))
	files := os.DirFS("testdata")
	f.Fuzz(func(t *testing.T, text []byte, format byte) {
		src := &source{label: "fuzz", dir: "good", files: files, format: tree.Format(format % 3), text: text}
		want, err := load(src, Request{Need: NeedRadio})
		if err != nil {
			return
		}
		c := Change{NameOfFile: "fuzz", Remark: "A test."}
		for i := range want.Spacecraft {
			for k := range want.Spacecraft[i].Transmitters {
				if x := &want.Spacecraft[i].Transmitters[k]; x.EIRP == nil {
					c.Spacecraft, c.Transmitter = want.Spacecraft[i].Name, x.Name
				}
			}
		}
		for i := range want.Stations {
			for k := range want.Stations[i].Antennas {
				c.Station, c.Antenna = want.Stations[i].Site.Name, want.Stations[i].Antennas[k].Name
			}
		}
		if c.Transmitter == "" || c.Antenna == "" {
			return
		}
		power := 3.5
		for _, c.PowerW = range []*float64{nil, &power} {
			out, err := withChange(src, Request{Need: NeedRadio}, c)
			if err != nil {
				t.Fatalf("%v\n%s", err, text)
			}
			next := *src
			next.format, next.text = tree.YAML, out.Text
			got, err := load(&next, Request{Need: NeedRadio})
			if err != nil {
				t.Fatalf("%v\n%s", err, out.Text)
			}
			got.Assumptions, got.Warnings, want.Assumptions, want.Warnings = nil, nil, nil, nil
			if c.PowerW != nil {
				for i := range want.Spacecraft {
					for k := range want.Spacecraft[i].Transmitters {
						if x := &want.Spacecraft[i].Transmitters[k]; want.Spacecraft[i].Name == c.Spacecraft && x.Name == c.Transmitter {
							x.Power, err = unit.LevelWatts(power)
						}
					}
				}
			}
			if err != nil || !alike(got, want) {
				t.Fatalf("%v\n%s\nbecomes\n%s", err, text, out.Text)
			}
		}
	})
}
