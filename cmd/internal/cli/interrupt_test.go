package cli

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// TestInterruptStopsAtOnce cancels a command that reads from an input which never
// comes and so cannot see that it should stop.
func TestInterruptStopsAtOnce(t *testing.T) {
	fifo := filepath.Join(t.TempDir(), "never.yaml")
	if err := syscall.Mkfifo(fifo, 0o600); err != nil {
		t.Skip("no named pipes here:", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	time.AfterFunc(50*time.Millisecond, cancel)
	var out, errOut bytes.Buffer
	start := time.Now()
	code := run(ctx, []string{"check", "--scenario", fifo}, newEnv(strings.NewReader(""), &out, &errOut))
	if code != ExitFailure || errOut.String() != "slantwise: interrupted; nothing half-written was left behind\n" {
		t.Errorf("code %d, stderr %q", code, errOut.String())
	}
	if took := time.Since(start); took > 3*time.Second {
		t.Errorf("it took %v", took)
	}
	// Let the reader that was left behind end, so that it does not outlive the test.
	w, err := os.OpenFile(fifo, os.O_WRONLY, 0)
	if err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
}

func TestExitCodes(t *testing.T) {
	for _, tt := range []struct {
		err     error
		started bool
		code    int
		says    string
	}{
		{nil, true, ExitAnswer, ""},
		{fmt.Errorf("write the CSV: %w", syscall.EPIPE), true, ExitAnswer, ""},
		{inputErrorf("wrong"), true, ExitInput, "slantwise: wrong\n"},
		{fmt.Errorf("more: %w", inputErrorf("wrong")), true, ExitInput, "slantwise: more: wrong\n"},
		{errors.New("disk full"), true, ExitFailure, "slantwise: disk full\n"},
		{errors.New("no such flag"), false, ExitInput, "slantwise: no such flag\n"},
	} {
		var out, errOut bytes.Buffer
		env := newEnv(nil, &out, &errOut)
		env.started = tt.started
		if got := exitCode(env, tt.err); got != tt.code || errOut.String() != tt.says {
			t.Errorf("%v: code %d, stderr %q; want %d, %q", tt.err, got, errOut.String(), tt.code, tt.says)
		}
	}
}
