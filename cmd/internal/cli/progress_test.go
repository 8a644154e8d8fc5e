package cli

import (
	"bytes"
	"strings"
	"sync"
	"testing"
	"testing/synctest"
	"time"
)

// TestProgressOnlyOnATerminal: a pipe gets no bar, however long the work lasts.
func TestProgressOnlyOnATerminal(t *testing.T) {
	var errOut bytes.Buffer
	env := newEnv(nil, nil, &errOut)
	p := env.startProgress("passes", 10)
	p.add(5)
	p.stop()
	if errOut.Len() != 0 {
		t.Errorf("wrote %q to what is no terminal", errOut.String())
	}
}

// lockedBuffer is written by the bar and read by the test.
type lockedBuffer struct {
	mu sync.Mutex
	b  bytes.Buffer
}

func (l *lockedBuffer) Write(p []byte) (int, error) {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.Write(p)
}

func (l *lockedBuffer) String() string {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.String()
}

func TestProgressAfterTwoSeconds(t *testing.T) {
	for _, tt := range []struct {
		lasts time.Duration
		drawn bool
	}{{1900 * time.Millisecond, false}, {3 * time.Second, true}} {
		synctest.Test(t, func(t *testing.T) {
			var out lockedBuffer
			p := &progress{ended: make(chan struct{})}
			p.drawn.Go(func() { p.draw(&out, "passes", 10) })
			p.add(4)
			time.Sleep(tt.lasts)
			p.stop()
			if drawn := strings.Contains(out.String(), "passes"); drawn != tt.drawn {
				t.Errorf("after %v: drawn %v, want %v: %q", tt.lasts, drawn, tt.drawn, out.String())
			}
			if tt.drawn && !strings.Contains(out.String(), "(4/10)") {
				t.Errorf("the bar does not tell 4 of 10: %q", out.String())
			}
		})
	}
}
