// Package atomicfile writes a file whole or not at all.
package atomicfile

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// Write calls fn with a writer to a temporary file beside path, flushes it to the
// disk and renames it to path. When fn or any step fails, the temporary file is
// removed, an existing file at path stays as it was, and the error names path. A
// symbolic link at path is followed, so that the link stays one. perm applies to a
// new file; an existing file keeps its own permissions.
func Write(path string, perm os.FileMode, fn func(io.Writer) error) error {
	if err := write(path, perm, fn); err != nil {
		return fmt.Errorf("writing %s: %w; nothing was changed there", path, err)
	}
	return nil
}

func write(path string, perm os.FileMode, fn func(io.Writer) error) (err error) {
	target, perm, err := resolve(path, perm)
	if err != nil {
		return err
	}
	f, err := os.CreateTemp(filepath.Dir(target), "."+filepath.Base(target)+".*.part")
	if err != nil {
		return err
	}
	pending.add(f.Name())
	defer pending.drop(f.Name())
	done := false
	// Also when fn panics: a half-written file must not stay.
	defer func() {
		if !done {
			f.Close()
			os.Remove(f.Name())
		}
	}()
	b := bufio.NewWriterSize(f, 1<<16)
	if err := fn(b); err != nil {
		return err
	}
	if err := errors.Join(b.Flush(), f.Chmod(perm)); err != nil {
		return err
	}
	if err := errors.Join(f.Sync(), f.Close()); err != nil {
		return err
	}
	if err := os.Rename(f.Name(), target); err != nil {
		return err
	}
	done = true
	return nil
}

// resolve follows a symbolic link and returns the permissions the file will have.
func resolve(path string, perm os.FileMode) (string, os.FileMode, error) {
	if target, err := filepath.EvalSymlinks(path); err == nil {
		path = target
	}
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, os.ErrNotExist):
		return path, perm, nil
	case err != nil:
		return "", 0, err
	case info.IsDir():
		return "", 0, errors.New("it is a directory; name a file")
	case !info.Mode().IsRegular():
		return "", 0, errors.New("it is not a regular file")
	}
	return path, info.Mode().Perm(), nil
}
