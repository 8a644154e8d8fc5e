package cli

import (
	"context"
	"io"
	"net/http"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// elementsServer answers every path with a text.
func elementsServer(t *testing.T, text string) string {
	t.Helper()
	s := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, _ *http.Request) { io.WriteString(w, text) }))
	t.Cleanup(s.Close)
	return s.URL + "/sets"
}

func TestElementsFromInto(t *testing.T) {
	path := filepath.Join(t.TempDir(), "sets.tle")
	// The text is kept as it came: line ends, remarks and all.
	text := "# of today\r\n" + strings.ReplaceAll(wagtailSet+pipitSet, "\n", "\r\n")
	code, out, errOut := elementsRun(t, "", "--from", elementsServer(t, text), "--into", path)
	if code != ExitAnswer || out != "" || errOut != "slantwise: "+path+": 2 element sets written\n" {
		t.Errorf("exit %d, %q, %s", code, out, errOut)
	}
	holdsText(t, path, text)
	code, _, errOut = elementsRun(t, "", "--from", elementsServer(t, wagtailLater), "--into", path)
	if code != ExitFailure || !strings.Contains(errOut, "PIPIT 2 (99002): missing; its epoch was 2026-03-10T12:00:00.000000") {
		t.Errorf("exit %d, %s", code, errOut)
	}
	holdsText(t, path, text)
	if code, _, errOut = elementsRun(t, "", "--from", elementsServer(t, pipitSet+wagtailLater), "--into", path); code != ExitAnswer {
		t.Errorf("newer sets of all objects were refused: exit %d, %s", code, errOut)
	}
	holdsText(t, path, pipitSet+wagtailLater)
	code, _, errOut = elementsRun(t, "", "--from", elementsServer(t, wagtailLater), "--into", path, "--object", "99001")
	if code != ExitInput || !strings.Contains(errOut, "--object leaves sets out") {
		t.Errorf("exit %d, %s", code, errOut)
	}
	if code, _, errOut = elementsRun(t, "", "--from", elementsServer(t, wagtailLater), "--into", path, "--allow-loss"); code != ExitAnswer {
		t.Errorf("exit %d, %s", code, errOut)
	}
	holdsText(t, path, wagtailLater)
}

func TestElementsFromConvert(t *testing.T) {
	path := filepath.Join(t.TempDir(), "sets.tle")
	_, text, _ := elementsRun(t, wagtailSet, "-", "--convert", "omm-json")
	code, _, errOut := elementsRun(t, "", "--from", elementsServer(t, text), "--convert", "tle", "--into", path)
	if code != ExitAnswer {
		t.Errorf("exit %d, %s", code, errOut)
	}
	holdsText(t, path, wagtailSet)
}

// TestElementsFromTrouble: whatever comes instead of element sets, the file stays.
func TestElementsFromTrouble(t *testing.T) {
	mux := http.NewServeMux()
	mux.HandleFunc("/page", func(w http.ResponseWriter, _ *http.Request) {
		io.WriteString(w, "<!DOCTYPE html><html><body>Please log in</body></html>")
	})
	mux.HandleFunc("/none", func(w http.ResponseWriter, _ *http.Request) { http.Error(w, "gone", http.StatusNotFound) })
	mux.HandleFunc("/nothing", func(w http.ResponseWriter, _ *http.Request) { w.WriteHeader(http.StatusNoContent) })
	mux.HandleFunc("/empty", func(http.ResponseWriter, *http.Request) {})
	mux.HandleFunc("/cut", func(w http.ResponseWriter, _ *http.Request) {
		w.Header().Set("Content-Length", "1000")
		io.WriteString(w, wagtailSet)
	})
	mux.HandleFunc("/broken", func(w http.ResponseWriter, _ *http.Request) { io.WriteString(w, wagtailSet[:120]) })
	mux.HandleFunc("/slow", func(w http.ResponseWriter, r *http.Request) {
		io.WriteString(w, wagtailSet)
		w.(http.Flusher).Flush()
		<-r.Context().Done()
	})
	mux.HandleFunc("/loop", func(w http.ResponseWriter, r *http.Request) { http.Redirect(w, r, "/loop", http.StatusFound) })
	mux.HandleFunc("/out", func(w http.ResponseWriter, r *http.Request) {
		http.Redirect(w, r, "file:///etc/hostname", http.StatusFound)
	})
	mux.HandleFunc("/announced", func(w http.ResponseWriter, _ *http.Request) { w.Header().Set("Content-Length", "200000000") })
	mux.HandleFunc("/endless", func(w http.ResponseWriter, _ *http.Request) {
		block := []byte(strings.Repeat("#\n", 1<<19))
		for range 62 {
			if _, err := w.Write(block); err != nil {
				return
			}
		}
	})
	s := httptest.NewServer(mux)
	defer s.Close()
	closed := httptest.NewServer(mux)
	closed.Close()
	for name, c := range map[string]struct {
		address string
		code    int
		want    string
	}{
		"web page":  {s.URL + "/page", ExitInput, "what was fetched is no text of element sets:\n" + s.URL + "/page:1:"},
		"not found": {s.URL + "/none", ExitFailure, `fetch ` + s.URL + `/none: the server answered "404 Not Found"; only 200 brings element sets`},
		"nothing":   {s.URL + "/nothing", ExitFailure, `the server answered "204 No Content"`},
		"empty":     {s.URL + "/empty", ExitInput, s.URL + "/empty: is empty"},
		"cut":       {s.URL + "/cut", ExitFailure, "/cut: unexpected EOF"},
		"broken":    {s.URL + "/broken", ExitInput, ":3:"},
		"slow":      {s.URL + "/slow", ExitFailure, "/slow: no whole answer within 200ms; give a longer --timeout or try again later"},
		"loop":      {s.URL + "/loop", ExitFailure, "/loop: the address points on more than 5 times"},
		"out":       {s.URL + "/out", ExitFailure, "the address points on to file:///etc/hostname, which is neither http nor https"},
		"announced": {s.URL + "/announced", ExitFailure, "the answer has 200000000 bytes, more than the 64000000 bytes that are read; ask the server for fewer objects"},
		"endless":   {s.URL + "/endless", ExitFailure, "the answer has more than the 64000000 bytes that are read"},
		"closed":    {closed.URL + "/sets", ExitFailure, "connection refused"},
		"password":  {strings.Replace(closed.URL, "http://", "http://ann:s3cret@", 1) + "/sets", ExitFailure, "ann:xxxxx@"},
	} {
		t.Run(name, func(t *testing.T) {
			path := elementsFile(t, pipitSet)
			timeout := "3m" // far from what any of these takes, the race detector on a busy machine included
			if name == "slow" {
				timeout = "200ms"
			}
			code, out, errOut := elementsRun(t, "", "--from", c.address, "--timeout", timeout, "--into", path)
			if code != c.code || out != "" || !strings.Contains(errOut, c.want) {
				t.Errorf("exit %d, %q\n got %swant %s", code, out, errOut, c.want)
			}
			if strings.Contains(errOut, "s3cret") {
				t.Errorf("the password is told: %s", errOut)
			}
			holdsText(t, path, pipitSet)
		})
	}
}

func TestElementsFromFollowsRedirects(t *testing.T) {
	target := elementsServer(t, wagtailSet)
	s := httptest.NewServer(http.RedirectHandler(target, http.StatusMovedPermanently))
	defer s.Close()
	code, out, errOut := elementsRun(t, "", "--from", s.URL, "--convert", "tle")
	if code != ExitAnswer || out != wagtailSet {
		t.Errorf("exit %d, %s%s", code, errOut, out)
	}
}

// TestRedirectToPlain: a file that was asked for over an encrypted line must not come
// over a plain one.
func TestRedirectToPlain(t *testing.T) {
	s := httptest.NewTLSServer(http.RedirectHandler(elementsServer(t, wagtailSet), http.StatusFound))
	defer s.Close()
	client := s.Client()
	client.CheckRedirect = checkRedirect
	_, err := client.Get(s.URL)
	if err == nil || !strings.Contains(err.Error(), "which is not encrypted") {
		t.Errorf("error %v", err)
	}
}

func TestElementsFromInterrupted(t *testing.T) {
	arrived := make(chan struct{})
	s := httptest.NewServer(http.HandlerFunc(func(_ http.ResponseWriter, r *http.Request) {
		close(arrived)
		<-r.Context().Done()
	}))
	defer s.Close()
	ctx, cancel := context.WithCancel(context.Background())
	go func() {
		<-arrived
		cancel()
	}()
	var errOut strings.Builder
	env := newEnv(strings.NewReader(""), io.Discard, &errOut)
	begin := time.Now()
	path := filepath.Join(t.TempDir(), "sets.tle")
	code := run(ctx, []string{"elements", "--from", s.URL, "--into", path}, env)
	if code != ExitFailure || time.Since(begin) > 5*time.Second || !strings.Contains(errOut.String(), "interrupted") {
		t.Errorf("exit %d after %v: %s", code, time.Since(begin), errOut.String())
	}
	if _, err := os.Stat(path); !os.IsNotExist(err) {
		t.Errorf("a file was written (%v)", err)
	}
}
