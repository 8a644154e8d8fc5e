package atomicfile

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"testing"
)

func TestCreateNeverReplaces(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.txt")
	if err := Create(path, 0o644, say("first")); err != nil {
		t.Fatal(err)
	}
	if err := Create(path, 0o644, say("second")); !errors.Is(err, fs.ErrExist) {
		t.Errorf("second Create: %v, want fs.ErrExist", err)
	}
	content(t, path, "first")
	// The name may be taken while the text is made.
	other := filepath.Join(dir, "b.txt")
	err := Create(other, 0o644, func(io.Writer) error { return os.WriteFile(other, []byte("theirs"), 0o600) })
	if !errors.Is(err, fs.ErrExist) {
		t.Errorf("Create beside another writer: %v, want fs.ErrExist", err)
	}
	content(t, other, "theirs")
	only(t, dir, "a.txt", "b.txt")
}

func TestRemovePending(t *testing.T) {
	stop := errors.New("interrupted")
	for name, write := range map[string]func(string, os.FileMode, func(io.Writer) error) error{"write": Write, "create": Create} {
		t.Run(name, func(t *testing.T) {
			dir := t.TempDir()
			err := write(filepath.Join(dir, "a.txt"), 0o644, func(io.Writer) error {
				RemovePending()
				only(t, dir)
				return stop
			})
			if !errors.Is(err, stop) {
				t.Errorf("error %v, want %v", err, stop)
			}
		})
	}
}
