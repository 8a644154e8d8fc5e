//go:build unix

package cli

import (
	"bytes"
	"context"
	"os"
	"os/exec"
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

// TestMain lets the test binary stand in for the program, for what only a process
// of its own can show.
func TestMain(m *testing.M) {
	if os.Getenv(asProgram) != "" {
		os.Exit(Main(os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
	}
	os.Exit(m.Run())
}

const asProgram = "RUN_AS_PROGRAM"

// program returns the command that runs the program with its arguments.
func program(t *testing.T, args ...string) (*exec.Cmd, *bytes.Buffer) {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	var errOut bytes.Buffer
	cmd := exec.Command(self, args...)
	cmd.Env = append(os.Environ(), asProgram+"=1")
	cmd.Stderr = &errOut
	return cmd, &errOut
}

func TestInterruptSignal(t *testing.T) {
	fifo := filepath.Join(t.TempDir(), "never.yaml")
	if err := syscall.Mkfifo(fifo, 0o600); err != nil {
		t.Skip("no named pipes here:", err)
	}
	cmd, errOut := program(t, "check", "--scenario", fifo)
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	w, err := os.OpenFile(fifo, os.O_WRONLY, 0) // waits until the program reads
	if err != nil {
		t.Fatal(err)
	}
	defer w.Close()
	if err := cmd.Process.Signal(syscall.SIGINT); err != nil {
		t.Fatal(err)
	}
	err = cmd.Wait()
	if cmd.ProcessState.ExitCode() != ExitFailure || !strings.Contains(errOut.String(), "interrupted") {
		t.Errorf("%v, stderr %q; want exit code %d with a word", err, errOut, ExitFailure)
	}
}

// TestReaderThatHasEnough closes the reading end, as head does.
func TestReaderThatHasEnough(t *testing.T) {
	r, w, err := os.Pipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := r.Close(); err != nil {
		t.Fatal(err)
	}
	defer w.Close()
	cmd, errOut := program(t, "check", "--format", "csv")
	cmd.Stdout = w
	if err := cmd.Run(); err != nil || strings.Count(errOut.String(), "\n") != 1 {
		t.Errorf("%v, stderr %q; want exit code 0 and the word about the demo alone", err, errOut)
	}
}

func TestFullDisk(t *testing.T) {
	full, err := os.OpenFile("/dev/full", os.O_WRONLY, 0)
	if err != nil {
		t.Skip("no device that is always full here:", err)
	}
	defer full.Close()
	for _, args := range [][]string{{"check"}, {"check", "--format", "csv"}, {"check", "--format", "json"}, {"--help"}, {"--version"}} {
		cmd, errOut := program(t, args...)
		cmd.Stdout = full
		err := cmd.Run()
		if cmd.ProcessState.ExitCode() != ExitFailure || !strings.Contains(errOut.String(), "no space left on device") {
			t.Errorf("%v: %v, stderr %q; want exit code %d and the disk named", args, err, errOut, ExitFailure)
		}
	}
}
