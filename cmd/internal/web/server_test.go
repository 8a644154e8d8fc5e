package web

import (
	"bufio"
	"context"
	"encoding/json"
	"errors"
	"io"
	"net"
	"net/http"
	"net/http/httptest"
	"strings"
	"sync/atomic"
	"testing"
	"time"
)

// fakeModel answers at once.
type fakeModel struct{ name string }

func (m *fakeModel) At(time.Time) (*State, error) {
	return &State{Scenario: m.name, Spacecraft: []Craft{}, Stations: []Place{}, Next: []Contact{}, Signals: []Signal{}}, nil
}
func (m *fakeModel) Contacts() []Contact { return []Contact{{ID: "a"}} }
func (m *fakeModel) Detail(_ context.Context, id string) (*Detail, error) {
	if id != "a" {
		return nil, nil
	}
	return &Detail{}, nil
}
func (m *fakeModel) WhatIf(_ context.Context, q *Question) (*Answer, error) {
	if q.Contact != "a" {
		return nil, nil
	}
	if q.DishM != nil && *q.DishM < 0 {
		return nil, &RefusedError{Text: "dish_m: no"}
	}
	return &Answer{Contact: q.Contact}, nil
}

func (m *fakeModel) Scenario(_ context.Context, w *Wish) (*File, error) {
	if w.Question.Contact != "a" {
		return nil, nil
	}
	return &File{Name: w.Name, Kind: "application/yaml; charset=utf-8", Body: []byte("text: 1\n")}, nil
}

var start = time.Date(2026, 9, 15, 0, 50, 0, 0, time.UTC)

func config() Config {
	return Config{
		Source: Source{Load: func(context.Context) (Model, error) { return &fakeModel{}, nil }, Changed: func() bool { return false }},
		First:  &fakeModel{name: "first"}, Keep: func(string, []byte) error { return nil }, Host: "127.0.0.1",
		Clock: Clock{Wall: func() time.Time { return start }, Began: start, Start: start, Speed: 1},
	}
}

// send asks a handler on port 8460 and returns the answer.
func send(h http.Handler, method, address, body string, head ...string) *http.Response {
	r := httptest.NewRequest(method, "http://127.0.0.1:8460"+address, strings.NewReader(body))
	for i := 0; i < len(head); i += 2 {
		if head[i] == "Host" {
			r.Host = head[i+1]
			continue
		}
		r.Header.Add(head[i], head[i+1])
	}
	w := httptest.NewRecorder()
	h.ServeHTTP(w, r)
	return w.Result()
}

// TestAttacks sends what another site, another name of the host and a clumsy or hostile
// client would send.
func TestAttacks(t *testing.T) {
	h := New(config()).Handler("8460")
	question := `{"contact":"a"}`
	js := []string{"Content-Type", "application/json"}
	with := func(more ...string) []string { return append(append([]string{}, js...), more...) }
	for _, row := range []struct {
		name, method, address, body string
		head                        []string
		want                        int
	}{
		{"the page", "GET", "/", "", nil, 200},
		{"by another of its names", "GET", "/api/state", "", []string{"Host", "LOCALHOST:8460"}, 200},
		{"rebound name", "GET", "/api/state", "", []string{"Host", "evil.example:8460"}, 421},
		{"another port", "GET", "/api/state", "", []string{"Host", "127.0.0.1:80"}, 421},
		{"no port", "GET", "/", "", []string{"Host", "127.0.0.1"}, 421},
		{"own origin", "POST", "/api/what-if", question, with("Origin", "http://127.0.0.1:8460"), 200},
		{"no origin", "POST", "/api/what-if", question, js, 200},
		{"other origin", "POST", "/api/what-if", question, with("Origin", "http://evil.example"), 403},
		{"origin of a sandbox", "POST", "/api/what-if", question, with("Origin", "null"), 403},
		{"origin with more behind", "POST", "/api/what-if", question, with("Origin", "http://127.0.0.1:8460.evil.example"), 403},
		{"second origin", "POST", "/api/what-if", question, with("Origin", "http://127.0.0.1:8460", "Origin", "http://evil.example"), 403},
		{"other scheme", "GET", "/api/state", "", []string{"Origin", "https://127.0.0.1:8460"}, 403},
		{"fetched by another site", "GET", "/api/state", "", []string{"Sec-Fetch-Site", "cross-site"}, 403},
		{"stream by another site", "GET", "/events", "", []string{"Sec-Fetch-Site", "same-site"}, 403},
		{"link on another site", "GET", "/", "", []string{"Sec-Fetch-Site", "cross-site", "Sec-Fetch-Mode", "navigate"}, 200},
		{"page as a script", "GET", "/", "", []string{"Sec-Fetch-Site", "cross-site", "Sec-Fetch-Mode", "no-cors"}, 403},
		{"simple form", "POST", "/api/what-if", question, []string{"Content-Type", "text/plain"}, 415},
		{"no kind", "POST", "/api/what-if", question, nil, 415},
		{"unknown key", "POST", "/api/what-if", `{"contact":"a","file":"/etc/passwd"}`, js, 400},
		{"two questions", "POST", "/api/what-if", question + question, js, 400},
		{"no JSON", "POST", "/api/what-if", "{", js, 400},
		{"out of the numbers", "POST", "/api/what-if", `{"contact":"a","dish_m":1e999}`, js, 400},
		{"too long", "POST", "/api/what-if", `{"contact":"` + strings.Repeat("a", maxBody) + `"}`, js, 413},
		{"refused", "POST", "/api/what-if", `{"contact":"a","dish_m":-1}`, js, 422},
		{"no such contact", "POST", "/api/what-if", `{"contact":"b"}`, js, 404},
		{"asked by GET", "GET", "/api/what-if", "", nil, 405},
		{"a file", "GET", "/slantwise.yaml", "", nil, 404},
		{"a way up", "GET", "/api/contacts/..%2f..%2f..%2fetc%2fpasswd", "", nil, 404},
		{"a way up, plain", "GET", "/api/contacts/../../etc/passwd", "", nil, 307},
		{"writing", "PUT", "/", "", nil, 405},
	} {
		t.Run(row.name, func(t *testing.T) {
			got := send(h, row.method, row.address, row.body, row.head...)
			if got.StatusCode != row.want {
				b, _ := io.ReadAll(got.Body)
				t.Errorf("status %d, want %d: %s", got.StatusCode, row.want, b)
			}
			if p := got.Header.Get("Content-Security-Policy"); !strings.HasPrefix(p, "default-src 'none'") || strings.Contains(p, "unsafe") {
				t.Errorf("policy %q", p)
			}
			for _, key := range []string{"Access-Control-Allow-Origin", "Set-Cookie"} {
				if v := got.Header.Get(key); v != "" {
					t.Errorf("%s: %s", key, v)
				}
			}
		})
	}
}

func TestNonces(t *testing.T) {
	h := New(config()).Handler("8460")
	seen := map[string]bool{}
	for range 3 {
		got := send(h, "GET", "/", "")
		b, _ := io.ReadAll(got.Body)
		_, rest, _ := strings.Cut(got.Header.Get("Content-Security-Policy"), "script-src 'nonce-")
		nonce, _, _ := strings.Cut(rest, "'")
		if len(nonce) < 20 || seen[nonce] {
			t.Fatalf("nonce %q; it must be long and new each time", nonce)
		}
		seen[nonce] = true
		page := string(b)
		for _, bare := range []string{"<script>", "<style>", " onclick=", " style=", "https://"} {
			if strings.Contains(page, bare) {
				t.Errorf("the page holds %q", bare)
			}
		}
		if n := strings.Count(page, `nonce="`+nonce+`"`); n != 2 {
			t.Errorf("%d elements carry the nonce, want 2", n)
		}
	}
}

func TestToken(t *testing.T) {
	c := config()
	c.Host, c.Token = "192.0.2.7", NewToken()
	if c.Token == NewToken() || len(c.Token) < 40 {
		t.Fatalf("token %q", c.Token)
	}
	h := New(c).Handler("8460")
	host := []string{"Host", "192.0.2.7:8460"}
	for _, row := range []struct {
		name, address string
		head          []string
		want          int
	}{
		{"none", "/", nil, 401},
		{"none, data", "/api/state", nil, 401},
		{"wrong", "/?token=x", nil, 401},
		{"in the address of the page", "/?token=" + c.Token, nil, 303},
		{"in the address of data", "/api/state?token=" + c.Token, nil, 401},
		{"cookie", "/api/state", []string{"Cookie", tokenCookie + "=" + c.Token}, 200},
		{"wrong cookie", "/api/state", []string{"Cookie", tokenCookie + "=" + c.Token[1:]}, 401},
		{"bearer", "/api/state", []string{"Authorization", "Bearer " + c.Token}, 200},
		{"empty bearer", "/api/state", []string{"Authorization", "Bearer "}, 401},
		{"by the loopback's name", "/api/state", []string{"Host", "127.0.0.1:8460", "Authorization", "Bearer " + c.Token}, 421},
	} {
		t.Run(row.name, func(t *testing.T) {
			got := send(h, "GET", row.address, "", append(append([]string{}, host...), row.head...)...)
			if got.StatusCode != row.want {
				t.Errorf("status %d, want %d", got.StatusCode, row.want)
			}
			if cookie := got.Header.Get("Set-Cookie"); row.want == 303 && (!strings.Contains(cookie, "HttpOnly") || !strings.Contains(cookie, "SameSite=Strict")) {
				t.Errorf("cookie %q", cookie)
			}
		})
	}
}

// TestReload turns the scenario wrong and right again while it is served.
func TestReload(t *testing.T) {
	changed, bad := false, false
	k := keeper{model: &fakeModel{name: "first"}, generation: 1, source: Source{
		Changed: func() bool { return changed },
		Load: func(context.Context) (Model, error) {
			if bad {
				return nil, errors.New("slantwise.yaml line 3: wrong")
			}
			return &fakeModel{name: "second"}, nil
		},
	}}
	for _, step := range []struct {
		changed    bool
		bad        bool
		name       string
		generation int
		fault      string
	}{
		{false, true, "first", 1, ""},
		{true, true, "first", 1, "slantwise.yaml line 3: wrong"},
		{true, false, "second", 2, ""},
	} {
		changed, bad = step.changed, step.bad
		k.look(t.Context())
		m, generation, fault := k.now()
		if m.(*fakeModel).name != step.name || generation != step.generation || fault != step.fault {
			t.Errorf("%+v: got %q, %d, %q", step, m.(*fakeModel).name, generation, fault)
		}
	}
}

// TestSlowListenerHoldsNobody has one page that reads nothing beside one that reads.
func TestSlowListenerHoldsNobody(t *testing.T) {
	h := hub{most: 3, listeners: map[chan []byte]struct{}{}}
	slow, quick := h.join(), h.join()
	for i := range 100 {
		h.tell([]byte{byte(i)})
		if got := <-quick; got[0] != byte(i) {
			t.Fatalf("event %d, want %d", got[0], i)
		}
	}
	if got := <-slow; got[0] != 99 {
		t.Errorf("the slow one gets %d, want the newest, 99", got[0])
	}
	h.join()
	if h.join() != nil {
		t.Error("a listener beyond the limit got in")
	}
	h.leave(slow)
	if h.join() == nil {
		t.Error("a place that was given back is not free")
	}
}

// TestServe streams over a real connection, and ends with the context.
func TestServe(t *testing.T) {
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(t.Context())
	done := make(chan error, 1)
	go func() { done <- New(config()).Serve(ctx, l) }()
	r, err := http.Get("http://" + l.Addr().String() + "/events")
	if err != nil {
		t.Fatal(err)
	}
	defer r.Body.Close()
	lines := bufio.NewScanner(r.Body)
	for states := 0; states < 2 && lines.Scan(); {
		data, ok := strings.CutPrefix(lines.Text(), "data: ")
		if !ok {
			continue
		}
		states++
		var got told
		if err := json.Unmarshal([]byte(data), &got); err != nil || got.Scenario != "first" || !got.Now.Equal(start) {
			t.Fatalf("%v: %s", err, data)
		}
	}
	stop()
	select {
	case err := <-done:
		if err != nil {
			t.Error(err)
		}
	case <-time.After(5 * time.Second):
		t.Fatal("it serves on after the context ended")
	}
}

func TestConnectionLimit(t *testing.T) {
	inner, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	l := &limitListener{Listener: inner, places: make(chan struct{}, 1)}
	defer l.Close()
	var taken atomic.Int32
	conns := make(chan net.Conn, 3)
	go func() {
		for {
			c, err := l.Accept()
			if err != nil {
				return
			}
			taken.Add(1)
			conns <- c
		}
	}()
	dial := func() net.Conn {
		c, err := net.Dial("tcp", inner.Addr().String())
		if err != nil {
			t.Fatal(err)
		}
		t.Cleanup(func() { c.Close() })
		return c
	}
	dial()
	first := <-conns
	beyond := dial()
	beyond.SetReadDeadline(time.Now().Add(5 * time.Second))
	if _, err := beyond.Read(make([]byte, 1)); err == nil || errors.Is(err, context.DeadlineExceeded) || taken.Load() != 1 {
		t.Fatalf("a connection beyond the limit stays open: %v, %d taken", err, taken.Load())
	}
	first.Close()
	first.Close() // twice gives one place back
	dial()
	<-conns
}

func TestClock(t *testing.T) {
	wall := start
	c := Clock{Wall: func() time.Time { return wall }, Began: start, Start: start.AddDate(1, 0, 0), Speed: 60}
	wall = wall.Add(10 * time.Second)
	if want := start.AddDate(1, 0, 0).Add(10 * time.Minute); !c.Now().Equal(want) {
		t.Errorf("%v, want %v", c.Now(), want)
	}
}
