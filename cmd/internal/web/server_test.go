package web

import (
	"bufio"
	"context"
	"encoding/json"
	"errors"
	"html/template"
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
func (m *fakeModel) Foot() template.HTML { return "<p>stands on nothing</p>" }

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
