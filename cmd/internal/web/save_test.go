package web

import (
	"fmt"
	"io"
	"io/fs"
	"net/http"
	"net/url"
	"strings"
	"syscall"
	"testing"
)

// TestSave asks for a file to be written, as the page does and as nobody should.
func TestSave(t *testing.T) {
	c := config()
	written := map[string]string{}
	c.Keep = func(name string, body []byte) error {
		if _, is := written[name]; is {
			return fmt.Errorf("writing /secret/place/%s: %w", name, fs.ErrExist)
		}
		if strings.HasPrefix(name, "full") {
			return fmt.Errorf("writing: %w", &fs.PathError{Op: "open", Path: "/secret/place", Err: syscall.ENOSPC})
		}
		written[name] = string(body)
		return nil
	}
	s := New(c)
	h := s.Handler("8460")
	js, key := []string{"Content-Type", "application/json"}, []string{saveHeader, s.saveKey}
	wish := func(name string) string { return fmt.Sprintf(`{"name":%q,"question":{"contact":"a"}}`, name) }
	both := append(append([]string{}, js...), key...)
	for _, row := range []struct {
		name, body string
		head       []string
		want       int
	}{
		{"as the page does", wish("bigger dish.yaml"), both, 201},
		{"again", wish("bigger dish.yaml"), both, 409},
		{"disk full", wish("full.yaml"), both, 409},
		{"without the key", wish("b.yaml"), js, 403},
		{"an empty key", wish("b.yaml"), append([]string{saveHeader, ""}, js...), 403},
		{"part of the key", wish("b.yaml"), append([]string{saveHeader, s.saveKey[1:]}, js...), 403},
		{"as a form", wish("b.yaml"), key, 415},
		{"another site with the key", wish("b.yaml"), append([]string{"Origin", "http://evil.example"}, both...), 403},
		{"no name", wish(""), both, 422},
		{"a way up", wish("../b.yaml"), both, 422},
		{"a way up, the other way", wish(`..\b.yaml`), both, 422},
		{"a way up, encoded", wish("..%2fb.yaml"), both, 422},
		{"an absolute path", wish("/tmp/b.yaml"), both, 422},
		{"a folder", wish("plans/b.yaml"), both, 422},
		{"hidden", wish(".b.yaml"), both, 422},
		{"an option", wish("-b.yaml"), both, 422},
		{"a script", wish("b.sh"), both, 422},
		{"two dots", wish("a..yaml"), both, 422},
		{"a zero byte", `{"name":"b\u0000.yaml","question":{"contact":"a"}}`, both, 422},
		{"a line end", `{"name":"b.yaml\n","question":{"contact":"a"}}`, both, 422},
		{"a letter that looks like a dot", wish("b․yaml"), both, 422},
		{"very long", wish(strings.Repeat("b", 200) + ".yaml"), both, 422},
		{"no such contact", `{"name":"b.yaml","question":{"contact":"z"}}`, both, 404},
		{"unknown key", `{"name":"b.yaml","folder":"/","question":{"contact":"a"}}`, both, 400},
	} {
		t.Run(row.name, func(t *testing.T) {
			got := send(h, "POST", "/api/scenarios", row.body, row.head...)
			text, _ := io.ReadAll(got.Body)
			if got.StatusCode != row.want {
				t.Errorf("status %d, want %d: %s", got.StatusCode, row.want, text)
			}
			if strings.Contains(string(text), "secret") {
				t.Errorf("the answer tells a place on the machine: %s", text)
			}
		})
	}
	if len(written) != 1 || written["bigger dish.yaml"] != "text: 1\n" {
		t.Errorf("written: %q", written)
	}
	if got := send(h, "GET", "/api/scenarios", ""); got.StatusCode != http.StatusMethodNotAllowed {
		t.Errorf("a list of files is answered: %d", got.StatusCode)
	}
}

func TestDownload(t *testing.T) {
	h := New(config()).Handler("8460")
	for _, row := range []struct {
		query string
		want  int
	}{
		{"contact=a&dish_m=5&mode=fast&least_elevation_deg=-1e0", 200},
		{"contact=b", 404},
		{"contact=a&contact=a", 400},
		{"contact=a&file=/etc/passwd", 400},
		{"contact=a&dish_m=big", 400},
		{"contact=a&dish_m=1e999", 400},
		{"contact=a&dish_m=", 400},
		{"contact=a&dish_m=NaN", 400},
		{"contact=%zz", 400},
		{"contact=a;dish_m=5", 400},
		{"contact=a&disH_m=5", 400}, // another letter is another key
		{"contact=" + strings.Repeat("a", maxBody), 400},
	} {
		got := send(h, "GET", "/api/scenario?"+row.query, "")
		if got.StatusCode != row.want {
			t.Errorf("%.60s: status %d, want %d", row.query, got.StatusCode, row.want)
		}
		if to := got.Header.Get("Content-Disposition"); row.want == 200 && to != "attachment; filename=what-if.yaml" {
			t.Errorf("disposition %q", to)
		}
	}
}

// FuzzQuestion reads questions from bodies and addresses: no panic, and what is taken
// from an address is what was asked.
func FuzzQuestion(f *testing.F) {
	for _, seed := range []string{
		`{"contact":"a","dish_m":5}`, `{"contact":"a","mode":"fast","power_w":1e3,"exceeded_percent":null}`, "{", `{"contact":"a"}{}`, `[]`,
		"contact=a&dish_m=5", "contact=a&dish_m=5&dish_m=6", "contact=%00&power_w=-0", "mode=%zz", "dish_m=0x10", "contact=a&disH_m=5", `{"contact":"a","DISH_M":5}`,
	} {
		f.Add(seed)
	}
	h := New(config()).Handler("8460")
	f.Fuzz(func(t *testing.T, text string) {
		got := send(h, "POST", "/api/what-if", text, "Content-Type", "application/json")
		switch got.StatusCode {
		case 200, 400, 404, 413, 422:
		default:
			t.Errorf("status %d", got.StatusCode)
		}
		q, err := questionOf(text)
		if err != nil {
			if err.Error() == "" || q != nil {
				t.Error("a refusal without a word, or with a question")
			}
			return
		}
		v, err := url.ParseQuery(text)
		if err != nil || string([]rune(v.Get("mode"))) != q.Mode { // what is no text has U+FFFD for each byte
			t.Errorf("mode %q of %q", q.Mode, text)
		}
		if (q.DishM != nil) != v.Has("dish_m") {
			t.Errorf("dish_m is lost, or made up: %q", text)
		}
	})
}
