package web

import (
	"bufio"
	"context"
	"fmt"
	"io"
	"net"
	"net/http"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"
)

// startServer serves on a free port of the loopback until the test ends and returns
// the address.
func startServer(t *testing.T, s *Server) string {
	t.Helper()
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(t.Context())
	done := make(chan error, 1)
	go func() { done <- s.Serve(ctx, l) }()
	t.Cleanup(func() {
		stop()
		select {
		case err := <-done:
			if err != nil {
				t.Error(err)
			}
		case <-time.After(5 * time.Second):
			t.Error("it serves on after the context ended")
		}
	})
	return l.Addr().String()
}

// hasty are limits that a test can wait for.
func hasty() limits {
	l := usualLimits()
	l.slowest, l.patience, l.beat = 150*time.Millisecond, 100*time.Millisecond, 20*time.Millisecond
	return l
}

func dialServer(t *testing.T, address string) net.Conn {
	t.Helper()
	c, err := net.Dial("tcp", address)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { c.Close() })
	if err := c.SetDeadline(time.Now().Add(5 * time.Second)); err != nil {
		t.Fatal(err)
	}
	return c
}

// TestDrip sends headers, or the body of a question, a byte at a time: the connection is
// ended by the time to ask, and others are answered meanwhile.
func TestDrip(t *testing.T) {
	address := startServer(t, newServer(config(), hasty()))
	for name, begin := range map[string]string{
		"headers": "GET / HTTP/1.1\r\nHost: " + address + "\r\nX-Slow: ",
		"body":    "POST /api/what-if HTTP/1.1\r\nHost: " + address + "\r\nContent-Type: application/json\r\nContent-Length: 4000\r\n\r\n{",
	} {
		t.Run(name, func(t *testing.T) {
			c := dialServer(t, address)
			if _, err := io.WriteString(c, begin); err != nil {
				t.Fatal(err)
			}
			began := time.Now()
			ended := make(chan struct{})
			go func() {
				defer close(ended)
				io.Copy(io.Discard, c) // to the end that the server makes
			}()
			for {
				select {
				case <-ended:
					if took := time.Since(began); took > 3*time.Second {
						t.Errorf("the connection was held for %v", took)
					}
					return
				case <-time.After(20 * time.Millisecond):
					io.WriteString(c, " ") // fails once the server has ended it
					if r, err := http.Get("http://" + address + "/api/state"); err != nil || r.StatusCode != http.StatusOK {
						t.Fatalf("another client: %v", err)
					} else {
						r.Body.Close()
					}
				}
			}
		})
	}
}

// TestStreamOutlivesTheTimeToAsk listens for several times as long as a request may take.
func TestStreamOutlivesTheTimeToAsk(t *testing.T) {
	l := hasty()
	address := startServer(t, newServer(config(), l))
	r, err := http.Get("http://" + address + "/events")
	if err != nil {
		t.Fatal(err)
	}
	defer r.Body.Close()
	began, lines := time.Now(), bufio.NewScanner(r.Body)
	for lines.Scan() {
		if time.Since(began) > 4*l.slowest {
			return
		}
	}
	t.Errorf("the stream ended after %v: %v", time.Since(began), lines.Err())
}

// TestReaderWhoTakesNothing opens a stream and never reads: the server lets it go, and
// whoever reads gets each state meanwhile.
func TestReaderWhoTakesNothing(t *testing.T) {
	c := config()
	c.First = &fakeModel{name: strings.Repeat("long ", 100_000)} // fills any buffer on the way
	l := hasty()
	l.slowest = time.Second // long enough for the one who reads on a busy machine
	s := newServer(c, l)
	address := startServer(t, s)
	idle := dialServer(t, address)
	fmt.Fprintf(idle, "GET /events HTTP/1.1\r\nHost: %s\r\n\r\n", address)
	r, err := http.Get("http://" + address + "/events")
	if err != nil {
		t.Fatal(err)
	}
	defer r.Body.Close()
	lines := bufio.NewReaderSize(r.Body, 1<<20)
	for states, worst, last := 0, time.Duration(0), time.Now(); ; {
		line, err := lines.ReadString('\n')
		if err != nil {
			t.Fatal(err)
		}
		if !strings.HasPrefix(line, "data: ") {
			continue
		}
		states++
		worst, last = max(worst, time.Since(last)), time.Now()
		s.hub.mu.Lock()
		left := len(s.hub.listeners)
		s.hub.mu.Unlock()
		if states > 10 && left == 1 {
			if worst > 2*time.Second {
				t.Errorf("a state came %v after the one before", worst)
			}
			return
		}
		if states > 500 {
			t.Fatalf("%d listen after %d states", left, states)
		}
	}
}

// TestTooManyStreams opens one more than there may be.
func TestTooManyStreams(t *testing.T) {
	l := hasty()
	l.listeners = 2
	address := startServer(t, newServer(config(), l))
	var got []int
	for range 3 {
		r, err := http.Get("http://" + address + "/events")
		if err != nil {
			t.Fatal(err)
		}
		defer r.Body.Close()
		got = append(got, r.StatusCode)
	}
	if fmt.Sprint(got) != "[200 200 503]" {
		t.Errorf("status %v, want [200 200 503]", got)
	}
}

// heavyModel works at a question until it is told to stop, and notes how many work at once.
type heavyModel struct {
	fakeModel
	under, most, given atomic.Int32
}

func (m *heavyModel) WhatIf(ctx context.Context, _ *Question) (*Answer, error) {
	n := m.under.Add(1)
	defer m.under.Add(-1)
	for {
		most := m.most.Load()
		if n <= most || m.most.CompareAndSwap(most, n) {
			break
		}
	}
	<-ctx.Done()
	m.given.Add(1)
	return nil, ctx.Err()
}

// TestCostlyQuestions asks many that would never end: no more work at a time than there
// are places, each is given up after its time, the rest are told to come back, and the
// state is answered meanwhile.
func TestCostlyQuestions(t *testing.T) {
	m := &heavyModel{}
	c := config()
	c.First = m
	l := hasty()
	l.slowest = usualLimits().slowest // a busy machine must not cut off those that are told to come back
	address := startServer(t, newServer(c, l))
	var wg sync.WaitGroup
	var late, failed atomic.Int32
	for range 12 {
		wg.Go(func() {
			r, err := http.Post("http://"+address+"/api/what-if", "application/json", strings.NewReader(`{"contact":"a"}`))
			if err != nil {
				return // ended by the time that an answer may take
			}
			defer r.Body.Close()
			switch r.StatusCode {
			case http.StatusTooManyRequests:
				if r.Header.Get("Retry-After") == "" {
					t.Error("it is not said when to come back")
				}
				late.Add(1)
			case http.StatusServiceUnavailable:
				failed.Add(1)
			default:
				t.Errorf("status %d", r.StatusCode)
			}
		})
	}
	began := time.Now()
	r, err := http.Get("http://" + address + "/api/state")
	if err != nil || r.StatusCode != http.StatusOK {
		t.Fatal("the state is not answered meanwhile:", err)
	}
	r.Body.Close()
	t.Logf("a state took %v", time.Since(began))
	wg.Wait()
	if m.most.Load() > 2 || late.Load() == 0 || failed.Load() == 0 {
		t.Errorf("%d at a time, %d late, %d given up", m.most.Load(), late.Load(), failed.Load())
	}
}

// TestNoTokenBeyondTheLoopback refuses to serve others without one.
func TestNoTokenBeyondTheLoopback(t *testing.T) {
	for _, host := range []string{"192.0.2.7", "127.0.0.1"} {
		l, err := net.Listen("tcp", "127.0.0.1:0")
		if err != nil {
			t.Fatal(err)
		}
		c := config()
		c.Host = host
		at := net.Addr(&net.TCPAddr{IP: net.ParseIP("192.0.2.7"), Port: 8460})
		err = New(c).Serve(t.Context(), &elsewhere{l, at})
		if err == nil || !strings.Contains(err.Error(), "no token") {
			t.Errorf("host %s: %v", host, err)
		}
		if _, err := l.Accept(); err == nil {
			t.Errorf("host %s: the listener is still open", host)
		}
	}
}

// elsewhere is a listener that says it has another address.
type elsewhere struct {
	net.Listener
	at net.Addr
}

func (l *elsewhere) Addr() net.Addr { return l.at }
