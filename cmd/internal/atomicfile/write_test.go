package atomicfile

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

func say(text string) func(io.Writer) error {
	return func(w io.Writer) error {
		_, err := io.WriteString(w, text)
		return err
	}
}

// only fails the test unless dir holds just the named files.
func only(t *testing.T, dir string, names ...string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, e := range entries {
		got = append(got, e.Name())
	}
	if strings.Join(got, " ") != strings.Join(names, " ") {
		t.Errorf("folder holds %q, want %q", got, names)
	}
}

func content(t *testing.T, path, want string) {
	t.Helper()
	got, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if string(got) != want {
		t.Errorf("%s holds %q, want %q", filepath.Base(path), got, want)
	}
}

func TestWriteNewAndOver(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.txt")
	if err := Write(path, 0o640, say("one")); err != nil {
		t.Fatal(err)
	}
	content(t, path, "one")
	info, err := os.Stat(path)
	if err != nil {
		t.Fatal(err)
	}
	if info.Mode().Perm() != 0o640 {
		t.Errorf("permissions %v, want 0640", info.Mode().Perm())
	}
	if err := os.Chmod(path, 0o600); err != nil {
		t.Fatal(err)
	}
	if err := Write(path, 0o644, say("two")); err != nil {
		t.Fatal(err)
	}
	content(t, path, "two")
	if info, err = os.Stat(path); err != nil || info.Mode().Perm() != 0o600 {
		t.Errorf("permissions %v (%v), want those of the file before, 0600", info.Mode().Perm(), err)
	}
	only(t, dir, "a.txt")
}

func TestFailureLeavesNothingHalfWritten(t *testing.T) {
	full := func(w io.Writer) error {
		// More than any buffer, so that bytes did reach the temporary file.
		if _, err := w.Write(make([]byte, 1<<20)); err != nil {
			return err
		}
		return syscall.ENOSPC
	}
	t.Run("new file", func(t *testing.T) {
		dir := t.TempDir()
		err := Write(filepath.Join(dir, "a.txt"), 0o644, full)
		if !errors.Is(err, syscall.ENOSPC) || !strings.Contains(err.Error(), "a.txt") {
			t.Errorf("error %v, want ENOSPC with the file's name", err)
		}
		only(t, dir)
	})
	t.Run("old file stays", func(t *testing.T) {
		dir := t.TempDir()
		path := filepath.Join(dir, "a.txt")
		if err := os.WriteFile(path, []byte("old"), 0o644); err != nil {
			t.Fatal(err)
		}
		if err := Write(path, 0o644, full); !errors.Is(err, syscall.ENOSPC) {
			t.Errorf("error %v, want ENOSPC", err)
		}
		content(t, path, "old")
		only(t, dir, "a.txt")
	})
	t.Run("panic", func(t *testing.T) {
		dir := t.TempDir()
		func() {
			defer func() {
				if recover() == nil {
					t.Error("the panic was swallowed")
				}
			}()
			_ = Write(filepath.Join(dir, "a.txt"), 0o644, func(io.Writer) error { panic("x") })
		}()
		only(t, dir)
	})
}

func TestRefusals(t *testing.T) {
	dir := t.TempDir()
	for name, path := range map[string]string{
		"directory":      dir,
		"missing folder": filepath.Join(dir, "no", "a.txt"),
		"device":         os.DevNull,
	} {
		t.Run(name, func(t *testing.T) {
			called := false
			err := Write(path, 0o644, func(io.Writer) error { called = true; return nil })
			if err == nil || !strings.Contains(err.Error(), path) {
				t.Errorf("error %v, want one that names %s", err, path)
			}
			if called {
				t.Error("the content was asked for although the place is wrong")
			}
		})
	}
	only(t, dir)
}

func TestSymbolicLinkStays(t *testing.T) {
	dir := t.TempDir()
	target, link := filepath.Join(dir, "target"), filepath.Join(dir, "link")
	if err := os.WriteFile(target, []byte("old"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := os.Symlink("target", link); err != nil {
		t.Skip("no symbolic links here:", err)
	}
	if err := Write(link, 0o644, say("new")); err != nil {
		t.Fatal(err)
	}
	content(t, target, "new")
	if info, err := os.Lstat(link); err != nil || info.Mode()&os.ModeSymlink == 0 {
		t.Errorf("the link is no link any more (%v)", err)
	}
}
