//go:build unix

package atomicfile

import (
	"errors"
	"io"
	"path/filepath"
	"syscall"
	"testing"
)

// TestDiskFull lets the operating system itself refuse the write: the process's own
// limit on file sizes stands in for a disk that is full.
func TestDiskFull(t *testing.T) {
	var old syscall.Rlimit
	if err := syscall.Getrlimit(syscall.RLIMIT_FSIZE, &old); err != nil {
		t.Skip("no file size limit here:", err)
	}
	small := syscall.Rlimit{Cur: 1 << 16, Max: old.Max}
	if err := syscall.Setrlimit(syscall.RLIMIT_FSIZE, &small); err != nil {
		t.Skip("the file size limit cannot be set:", err)
	}
	dir := t.TempDir()
	path := filepath.Join(dir, "a.txt")
	err := Write(path, 0o644, func(w io.Writer) error {
		_, err := w.Write(make([]byte, 1<<20))
		return err
	})
	if rerr := syscall.Setrlimit(syscall.RLIMIT_FSIZE, &old); rerr != nil {
		t.Fatal(rerr)
	}
	if !errors.Is(err, syscall.EFBIG) {
		t.Errorf("error %v, want EFBIG from the operating system", err)
	}
	only(t, dir)
}
