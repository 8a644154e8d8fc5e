package cli

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"slantwise/orbit/elements"
)

// Invented spacecraft; the epochs are noon of 10 March 2026 and two days later.
const (
	wagtailSet = `WAGTAIL 1
1 99001U 26001A   26069.50000000  .00001234  00000-0  84553-4 0  9995
2 99001  97.4012 120.3456 0012345  85.6789 274.5432 15.21987654 12348
`
	wagtailLater = `WAGTAIL 1
1 99001U 26001A   26071.50000000  .00001234  00000-0  84553-4 0  9998
2 99001  97.4012 130.3456 0012345  85.6789 274.5432 15.21987654 12349
`
	pipitSet = `PIPIT 2
1 99002U 26001B   26069.50000000  .00001234  00000-0  84553-4 0  9996
2 99002  97.4012 120.3456 0012345  85.6789 274.5432 14.21987654 12348
`
)

// elementsRun runs the command line in a folder of its own and returns what it wrote.
func elementsRun(t *testing.T, in string, args ...string) (code int, out, errOut string) {
	t.Helper()
	var stdout, stderr bytes.Buffer
	env := newEnv(strings.NewReader(in), &stdout, &stderr)
	env.Now = func() time.Time { return time.Date(2026, 3, 12, 0, 0, 0, 0, time.UTC) }
	code = run(context.Background(), append([]string{"elements"}, args...), env)
	return code, stdout.String(), stderr.String()
}

func elementsFile(t *testing.T, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "sets.tle")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

func holdsText(t *testing.T, path, want string) {
	t.Helper()
	got, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if string(got) != want {
		t.Errorf("the file holds\n%s\nwant\n%s", got, want)
	}
	entries, err := os.ReadDir(filepath.Dir(path))
	if err != nil || len(entries) != 1 {
		t.Errorf("%d files in the folder (%v), want the one", len(entries), err)
	}
}

func TestElementsFlags(t *testing.T) {
	for name, c := range map[string]struct {
		args []string
		want string
	}{
		"file and address": {[]string{"a.tle", "--from", "http://localhost/a"}, "--from and FILE are both given; give one of them"},
		"into alone":       {[]string{"a.tle", "--into", "b.tle"}, "--into needs --convert or --from: without them there is nothing to write"},
		"loss alone":       {[]string{"a.tle", "--allow-loss"}, "--allow-loss is about --into, which is not given"},
		"timeout alone":    {[]string{"--timeout", "3s"}, "--timeout is about --from, which is not given"},
		"format":           {[]string{"a.tle", "--format", "csv", "--convert", "omm-csv"}, "--format is about the list of sets, which is not written here; --convert chooses the format of the sets"},
		"kind": {[]string{"a.tle", "--convert", "omm-yaml"},
			`--convert: element format "omm-yaml" is not known; it must be one of tle, omm-kvn, omm-xml, omm-json, omm-csv; did you mean "omm-xml"?`},
		"scenario": {[]string{"a.tle", "--scenario", "s.yaml"}, "--scenario is about a scenario, and none is read with FILE or --from; --at names the instant of age and node"},
		"choice":   {[]string{"a.tle", "--element-choice", "oldest"}, `--element-choice: "oldest" is not allowed; it must be newest or nearest; did you mean "newest"?`},
		"scheme":   {[]string{"--from", "ftp://localhost/a"}, `--from: "ftp://localhost/a" is no address that can be fetched; give one that begins with http:// or https:// and names a host`},
		"host":     {[]string{"--from", "http:///a"}, `--from: "http:///a" is no address that can be fetched; give one that begins with http:// or https:// and names a host`},
	} {
		t.Run(name, func(t *testing.T) {
			code, out, errOut := elementsRun(t, "", c.args...)
			if code != ExitInput || out != "" || errOut != "slantwise: "+c.want+"\n" {
				t.Errorf("exit %d\n got %swant slantwise: %s", code, errOut, c.want)
			}
		})
	}
}

func TestElementsBadFile(t *testing.T) {
	path := elementsFile(t, strings.Replace(wagtailSet, "9995", "9994", 1))
	code, out, errOut := elementsRun(t, "", path)
	want := "slantwise: " + path + ":2:69: checksum \"4\": the line adds up to 5: a character was changed or lost; fetch the set again, or copy it whole\n"
	if code != ExitInput || out != "" || errOut != want {
		t.Errorf("exit %d, %q\n got %swant %s", code, out, errOut, want)
	}
	code, _, errOut = elementsRun(t, "", filepath.Join(t.TempDir(), "none.tle"))
	if code != ExitInput || !strings.Contains(errOut, "no such file or directory; check the name") {
		t.Errorf("exit %d, %s", code, errOut)
	}
}

func TestElementsConvert(t *testing.T) {
	for f := elements.TLE; f <= elements.OMMCSV; f++ {
		t.Run(f.String(), func(t *testing.T) {
			code, text, errOut := elementsRun(t, wagtailSet+pipitSet, "-", "--convert", f.String())
			if code != ExitAnswer || errOut != "" {
				t.Fatalf("exit %d, %s", code, errOut)
			}
			code, back, errOut := elementsRun(t, text, "-", "--convert", "tle")
			if code != ExitAnswer || errOut != "" || back != wagtailSet+pipitSet {
				t.Errorf("exit %d, %s, came back as\n%s", code, errOut, back)
			}
		})
	}
	code, out, _ := elementsRun(t, wagtailSet+pipitSet+wagtailLater, "-", "--convert", "tle", "--object", "wagtail 1")
	if code != ExitAnswer || out != wagtailSet+wagtailLater {
		t.Errorf("exit %d, of one object\n%s", code, out)
	}
	code, _, errOut := elementsRun(t, wagtailSet+pipitSet, "-", "--convert", "tle", "--object", "wagtail 2")
	if code != ExitInput || errOut != "slantwise: --object: no element set has the catalogue number or name \"wagtail 2\"; did you mean \"WAGTAIL 1\"?\n" {
		t.Errorf("exit %d, %s", code, errOut)
	}
}

func TestElementsConvertRefusesNineDigits(t *testing.T) {
	_, text, _ := elementsRun(t, wagtailSet, "-", "--convert", "omm-csv")
	text = strings.Replace(text, ",99001,", ",799500123,", 1)
	code, out, errOut := elementsRun(t, text, "-", "--convert", "tle")
	want := "slantwise: convert: WAGTAIL 1 (799500123) cannot be written as tle: the catalogue number 799500123 is above 339999, the last that its five columns hold; write an OMM\n"
	if code != ExitFailure || out != "" || errOut != want {
		t.Errorf("exit %d, %q\n got %swant %s", code, out, errOut, want)
	}
	text = strings.Replace(text, ",799500123,", ",339999,", 1)
	code, out, _ = elementsRun(t, strings.Replace(text, "15.21987654", "15.219876543", 1), "-", "--convert", "tle")
	if code != ExitAnswer || !strings.Contains(out, "1 Z9999U 26001A ") {
		t.Errorf("exit %d\n%s", code, out)
	}
}

func TestElementsInto(t *testing.T) {
	path := filepath.Join(t.TempDir(), "sets.tle")
	code, out, errOut := elementsRun(t, wagtailSet, "-", "--convert", "tle", "--into", path)
	if code != ExitAnswer || out != "" || errOut != "slantwise: "+path+": 1 element set written\n" {
		t.Errorf("exit %d, %q, %s", code, out, errOut)
	}
	holdsText(t, path, wagtailSet)
	code, _, errOut = elementsRun(t, wagtailLater, "-", "--convert", "tle", "--into", path)
	if code != ExitAnswer {
		t.Errorf("newer sets were refused: %s", errOut)
	}
	holdsText(t, path, wagtailLater)
	code, _, errOut = elementsRun(t, wagtailSet, "-", "--convert", "tle", "--into", path)
	want := "slantwise: --into: " + path + " holds more than the new sets:\n" +
		"  WAGTAIL 1 (99001): older; its epoch was 2026-03-12T12:00:00.000000 and would be 2026-03-10T12:00:00.000000\n" +
		"it was left as it is; name another FILE, or give --allow-loss\n"
	if code != ExitFailure || errOut != want {
		t.Errorf("exit %d\n got %swant %s", code, errOut, want)
	}
	holdsText(t, path, wagtailLater)
	if code, _, errOut = elementsRun(t, pipitSet, "-", "--convert", "tle", "--into", path, "--allow-loss"); code != ExitAnswer {
		t.Errorf("exit %d, %s", code, errOut)
	}
	holdsText(t, path, pipitSet)
}

func TestElementsIntoSomethingElse(t *testing.T) {
	path := elementsFile(t, "a letter to my aunt\n")
	code, _, errOut := elementsRun(t, wagtailSet, "-", "--convert", "tle", "--into", path)
	if code != ExitFailure || !strings.Contains(errOut, "--into: what is there cannot be compared with the new sets: "+path+": \"a letter to my aunt\"") {
		t.Errorf("exit %d, %s", code, errOut)
	}
	holdsText(t, path, "a letter to my aunt\n")
	empty := elementsFile(t, "")
	if code, _, errOut = elementsRun(t, wagtailSet, "-", "--convert", "tle", "--into", empty); code != ExitAnswer {
		t.Errorf("an empty file was not replaced: exit %d, %s", code, errOut)
	}
	holdsText(t, empty, wagtailSet)
}

func TestElementsOptions(t *testing.T) {
	var got elementsOptions
	env := newEnv(strings.NewReader(""), nil, nil)
	cmd := newElementsRunning(env, func(_ context.Context, _ *Env, o elementsOptions) error { got = o; return nil })
	cmd.SetArgs([]string{"a.tle", "b.xml", "--at", "2026-03-10T00:00:00Z", "--object", "99001", "--object", "A, B", "--format", "json"})
	if err := cmd.Execute(); err != nil {
		t.Fatal(err)
	}
	if strings.Join(got.files, "|") != "a.tle|b.xml" || strings.Join(got.objects, "|") != "99001|A, B" || got.format != formatJSON ||
		!got.at.Equal(time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)) || got.timeout != 30*time.Second || got.choice != elements.Newest {
		t.Errorf("options %+v", got)
	}
}
