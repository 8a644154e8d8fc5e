//go:build unix

package logbook

import (
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// TestReadOnly reads a logbook that nobody may write, in a folder that nobody may write. Root may
// write everything, so the test runs itself again as nobody.
func TestReadOnly(t *testing.T) {
	if path := os.Getenv("SLANTWISE_TEST_READONLY"); path != "" {
		if list, err := everything(t, path); err != nil || len(list) != 2 || len(list[1].Values) != 200 {
			t.Errorf("to read: %v, %v", list, err)
		}
		if _, err := Open(t.Context(), path, false); !errors.Is(err, ErrReadOnly) || !strings.Contains(err.Error(), path) {
			t.Errorf("to write: %v", err)
		}
		return
	}
	book := bookOf(t, 2)
	folder, err := os.MkdirTemp("", "readonly")
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { os.Chmod(folder, 0o755); os.RemoveAll(folder) }) // it is the test's own
	copies := map[string]string{book: "book", os.Args[0]: "test"}
	for from, name := range copies {
		data, err := os.ReadFile(from)
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(folder, name), data, 0o444); err != nil {
			t.Fatal(err)
		}
	}
	if err := os.Chmod(filepath.Join(folder, "test"), 0o555); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(folder, 0o555); err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(filepath.Join(folder, "test"), "-test.run", "^TestReadOnly$")
	cmd.Dir = "/"
	cmd.Env = append(os.Environ(), "SLANTWISE_TEST_READONLY="+filepath.Join(folder, "book"))
	if os.Getuid() == 0 {
		cmd.SysProcAttr = &syscall.SysProcAttr{Credential: &syscall.Credential{Uid: 65534, Gid: 65534}}
	}
	if out, err := cmd.CombinedOutput(); err != nil {
		t.Errorf("%v\n%s", err, out)
	}
}
