package atomicfile

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
)

// Create is Write for a file that must not be there yet, not even when it appears
// while fn runs; otherwise the error wraps fs.ErrExist and the file stays as it was.
func Create(path string, perm os.FileMode, fn func(io.Writer) error) error {
	// A look first, so that fn need not run for nothing.
	if _, err := os.Lstat(path); err == nil {
		return fmt.Errorf("writing %s: %w; nothing was changed there", path, fs.ErrExist)
	}
	// The new text is written whole beside path, then linked to it: unlike a rename,
	// a link fails where the name is taken.
	dir, err := os.MkdirTemp(filepath.Dir(path), "."+filepath.Base(path)+".*.part")
	if err != nil {
		return fmt.Errorf("writing %s: %w", path, err)
	}
	pending.add(dir)
	defer pending.drop(dir)
	defer os.RemoveAll(dir)
	whole := filepath.Join(dir, "text")
	if err := write(whole, perm, fn); err != nil {
		return fmt.Errorf("writing %s: %w; nothing was changed there", path, err)
	}
	if err := os.Link(whole, path); err != nil {
		if errors.Is(err, fs.ErrExist) {
			err = fs.ErrExist
		}
		return fmt.Errorf("writing %s: %w; nothing was changed there", path, err)
	}
	return nil
}
