//go:build linux

package cli

import (
	"bufio"
	"bytes"
	"context"
	"fmt"
	"io"
	"net"
	"net/http"
	"os"
	"slices"
	"strconv"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"

	"slantwise/cmd/internal/web"
)

// loadPages is how many pages are connected at a time, each with its stream of states.
const loadPages = 200

// TestServeLoad has 200 pages connected to the program, in a process of its own, for as
// long as SLANTWISE_LOAD says ("10m"; then -timeout must be longer). Each listens to the
// stream, polls the state every two seconds, opens a contact every twenty and asks a
// question every minute; beside them are clients that listen and take nothing. Memory
// must stay flat, the median answer must come within 50 ms, and nobody's stream may stand
// still.
func TestServeLoad(t *testing.T) {
	text := os.Getenv("SLANTWISE_LOAD")
	if text == "" {
		t.Skip("SLANTWISE_LOAD is not set; it takes as long as that says")
	}
	length, err := time.ParseDuration(text)
	if err != nil || length < 5*time.Second || length > time.Hour {
		t.Fatalf("SLANTWISE_LOAD=%s: give 5s to 1h", text)
	}
	os.Unsetenv("SLANTWISE_LOAD") // the program refuses variables that it does not know
	defer os.Setenv("SLANTWISE_LOAD", text)

	address, id := serveProcess(t)
	l := &load{address: address, client: &http.Client{Transport: &http.Transport{MaxIdleConnsPerHost: 2 * loadPages}, Timeout: 30 * time.Second}}
	var contacts []web.Contact
	ask(t, address+"api/contacts", nil, &contacts)
	for _, c := range contacts {
		if c.Transmitter != "" {
			l.contacts = append(l.contacts, c.ID)
		}
	}
	ctx, stop := context.WithTimeout(t.Context(), length)
	defer stop()
	var pages sync.WaitGroup
	for i := range loadPages {
		pages.Go(func() { l.page(ctx, i) })
		pages.Go(func() { l.listen(ctx) })
	}
	for range 10 {
		pages.Go(func() { l.takeNothing(ctx) })
	}
	memory := []int{resident(t, id)}
	for tick := time.NewTicker(length / 40); ctx.Err() == nil; {
		select {
		case <-ctx.Done():
			tick.Stop()
		case <-tick.C:
			memory = append(memory, resident(t, id))
		}
	}
	pages.Wait()
	l.judge(t, memory)
}

// serveProcess starts the program and returns its address and process.
func serveProcess(t *testing.T) (address string, id int) {
	t.Helper()
	cmd, errOut := program(t, "serve", "--listen", "127.0.0.1:0", "--clock", "2026-09-15T00:45:00Z", "--speed", "60")
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	began := time.Now()
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		cmd.Process.Signal(syscall.SIGINT)
		if err := cmd.Wait(); err != nil {
			t.Errorf("%v, stderr %s", err, errOut)
		}
	})
	line, err := bufio.NewReader(out).ReadString('\n')
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("up in %v", time.Since(began).Round(time.Millisecond))
	return strings.TrimSpace(line), cmd.Process.Pid
}

// resident is the memory of a process that is in use, in kB.
func resident(t *testing.T, id int) int {
	t.Helper()
	text, err := os.ReadFile(fmt.Sprintf("/proc/%d/status", id))
	if err != nil {
		t.Fatal(err)
	}
	_, rest, _ := strings.Cut(string(text), "VmRSS:")
	kB, err := strconv.Atoi(strings.Fields(rest)[0])
	if err != nil {
		t.Fatal(err)
	}
	return kB
}

// load is what the pages ask and what they find.
type load struct {
	address  string
	client   *http.Client
	contacts []string

	mutex                      sync.Mutex
	states, details, questions []time.Duration
	gaps                       []time.Duration // between two states of a stream
	later                      int             // told to come back
	faults                     []string
}

func (l *load) note(into *[]time.Duration, took time.Duration) {
	l.mutex.Lock()
	defer l.mutex.Unlock()
	*into = append(*into, took)
}

func (l *load) fault(ctx context.Context, format string, args ...any) {
	if ctx.Err() != nil {
		return // the end cuts off what is under way
	}
	l.mutex.Lock()
	defer l.mutex.Unlock()
	l.faults = append(l.faults, fmt.Sprintf(format, args...))
}

// page polls, opens contacts and asks questions until the end; the pages are spread evenly.
func (l *load) page(ctx context.Context, i int) {
	const every = 2 * time.Second
	select {
	case <-ctx.Done():
		return
	case <-time.After(every * time.Duration(i) / loadPages):
	}
	tick := time.NewTicker(every)
	defer tick.Stop()
	for k := i; ; k++ {
		l.one(ctx, &l.states, "GET", "api/state", nil)
		contact := l.contacts[k%len(l.contacts)]
		if k%10 == 0 {
			l.one(ctx, &l.details, "GET", "api/contacts/"+contact, nil)
		}
		if k%30 == 5 {
			l.one(ctx, &l.questions, "POST", "api/what-if", fmt.Appendf(nil, `{"contact":%q,"pointing_error_deg":0.05}`, contact))
		}
		select {
		case <-ctx.Done():
			return
		case <-tick.C:
		}
	}
}

func (l *load) one(ctx context.Context, into *[]time.Duration, method, path string, body []byte) {
	r, err := http.NewRequestWithContext(ctx, method, l.address+path, bytes.NewReader(body))
	if err != nil {
		l.fault(ctx, "%s: %v", path, err)
		return
	}
	if body != nil {
		r.Header.Set("Content-Type", "application/json")
	}
	began := time.Now()
	answer, err := l.client.Do(r)
	if err != nil {
		l.fault(ctx, "%s: %v", path, err)
		return
	}
	defer answer.Body.Close()
	if _, err := io.Copy(io.Discard, answer.Body); err != nil {
		l.fault(ctx, "%s: %v", path, err)
		return
	}
	switch answer.StatusCode {
	case http.StatusOK:
		l.note(into, time.Since(began))
	case http.StatusTooManyRequests, http.StatusServiceUnavailable:
		l.mutex.Lock()
		l.later++
		l.mutex.Unlock()
	default:
		l.fault(ctx, "%s: status %d", path, answer.StatusCode)
	}
}

// listen reads the stream of states.
func (l *load) listen(ctx context.Context) {
	r, err := http.NewRequestWithContext(ctx, "GET", l.address+"events", nil)
	if err != nil {
		l.fault(ctx, "events: %v", err)
		return
	}
	answer, err := http.DefaultClient.Do(r)
	if err != nil {
		l.fault(ctx, "events: %v", err)
		return
	}
	defer answer.Body.Close()
	lines := bufio.NewReaderSize(answer.Body, 1<<16)
	for last := time.Now(); ; {
		line, err := lines.ReadString('\n')
		if err != nil {
			l.fault(ctx, "events: %v", err)
			return
		}
		if strings.HasPrefix(line, "data: ") {
			l.note(&l.gaps, time.Since(last))
			last = time.Now()
		}
	}
}

// takeNothing opens a stream with a small window and reads no byte of it.
func (l *load) takeNothing(ctx context.Context) {
	host := strings.TrimSuffix(strings.TrimPrefix(l.address, "http://"), "/")
	for ctx.Err() == nil {
		c, err := net.Dial("tcp", host)
		if err != nil {
			l.fault(ctx, "dial: %v", err)
			return
		}
		c.(*net.TCPConn).SetReadBuffer(1 << 10)
		fmt.Fprintf(c, "GET /events HTTP/1.1\r\nHost: %s\r\n\r\n", host)
		select {
		case <-ctx.Done():
		case <-time.After(20 * time.Second):
		}
		c.Close()
	}
}

// judge tells what was measured and holds it against what is promised.
func (l *load) judge(t *testing.T, memory []int) {
	t.Helper()
	busy, err := os.ReadFile("/proc/loadavg")
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("load of the machine %s", strings.TrimSpace(string(busy)))
	for _, row := range []struct {
		name string
		list []time.Duration
		most time.Duration // of the median
	}{
		{"states", l.states, 50 * time.Millisecond}, {"contacts", l.details, 0}, {"questions", l.questions, 0}, {"between two states of a stream", l.gaps, 2 * time.Second},
	} {
		if len(row.list) == 0 {
			t.Errorf("%s: none", row.name)
			continue
		}
		slices.Sort(row.list)
		at := func(share float64) time.Duration {
			return row.list[int(share*float64(len(row.list)-1))].Round(100 * time.Microsecond)
		}
		t.Logf("%s: %d, median %v, 95 %% %v, 99 %% %v, longest %v", row.name, len(row.list), at(0.5), at(0.95), at(0.99), at(1))
		if row.most > 0 && at(0.5) > row.most {
			t.Errorf("%s: the median is %v, over %v", row.name, at(0.5), row.most)
		}
	}
	if longest := l.gaps[len(l.gaps)-1]; longest > 10*time.Second {
		t.Errorf("a stream stood still for %v", longest)
	}
	t.Logf("memory in kB, evenly in time: %v", memory)
	early, late := mean(memory[len(memory)/4:len(memory)/2]), mean(memory[len(memory)*3/4:])
	t.Logf("second quarter %d kB, last quarter %d kB; %d told to come back", early, late, l.later)
	if late > early+early/10+8<<10 {
		t.Errorf("memory grows from %d to %d kB", early, late)
	}
	for _, f := range l.faults[:min(len(l.faults), 10)] {
		t.Error(f)
	}
	if n := len(l.faults); n > 10 {
		t.Errorf("and %d more", n-10)
	}
}

func mean(list []int) int {
	sum := 0
	for _, v := range list {
		sum += v
	}
	return sum / max(1, len(list))
}
