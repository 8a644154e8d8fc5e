package reports

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"slices"
	"sync"
)

// FolderError says that a folder cannot take a report because of what is in it.
type FolderError struct {
	Dir, Name string // Name: the entry that is in the way; empty: the folder as a whole
	IsFile    bool   // Dir is no folder at all
}

// Error tells what is in the way and what to do.
func (e *FolderError) Error() string {
	if e.IsFile {
		return e.Dir + ": this is a file; name a folder"
	}
	if e.Name == "" {
		return fmt.Sprintf("%s: the folder is not empty and holds no report of ours (no %s); name another folder, nothing was changed there", e.Dir, contentsFile)
	}
	return fmt.Sprintf("%s: %s is not part of the report that is there, and the new report has a file of that name; move it away or name another folder, nothing was changed there", e.Dir, e.Name)
}

// Write writes the report into the folder dir and returns the path of its index.
//
// A folder that is not there appears whole, in one step. In a folder that holds an
// earlier report, each file is replaced whole, the index last, and pages that the
// new report does not have any more are removed. Files that no report put there stay
// untouched: contents.txt lists what is the report's own, and a folder that holds
// anything else without such a list is refused with a *FolderError. When writing
// fails or ctx ends, the folder is as it was.
func Write(ctx context.Context, dir string, r *Report, o Options) (string, error) {
	index := filepath.Join(dir, indexFile)
	info, err := os.Stat(dir)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return index, writeNew(ctx, dir, r, o)
	case err != nil:
		return "", fmt.Errorf("report: %w", err)
	case !info.IsDir():
		return "", &FolderError{Dir: dir, IsFile: true}
	}
	return index, writeOver(ctx, dir, r, o)
}

// writeNew makes the folder beside its place and moves it there.
func writeNew(ctx context.Context, dir string, r *Report, o Options) error {
	clean := filepath.Clean(dir)
	aside, err := os.MkdirTemp(filepath.Dir(clean), "."+filepath.Base(clean)+".*.part")
	if err != nil {
		return fmt.Errorf("report: %w", err)
	}
	defer os.RemoveAll(aside)
	// A folder inside, since the outer one is closed to others by its making.
	made := filepath.Join(aside, "report")
	names, err := fill(ctx, made, r, o)
	if err != nil {
		return err
	}
	if err := os.WriteFile(filepath.Join(made, contentsFile), contentsText(names), 0o666); err != nil {
		return fmt.Errorf("report: %w", err)
	}
	if err := os.Rename(made, clean); err != nil {
		return fmt.Errorf("report: %w", err)
	}
	return nil
}

// writeOver brings a new report into a folder that is there.
func writeOver(ctx context.Context, dir string, r *Report, o Options) error {
	root, err := os.OpenRoot(dir) // so that no link in the folder leads out of it
	if err != nil {
		return fmt.Errorf("report: %w", err)
	}
	defer root.Close()
	old, err := readContents(root, dir)
	if err != nil {
		return err
	}
	aside, err := os.MkdirTemp(dir, ".report.*.part")
	if err != nil {
		return fmt.Errorf("report: %w", err)
	}
	defer os.RemoveAll(aside)
	names, err := fill(ctx, filepath.Join(aside, "report"), r, o)
	if err != nil {
		return err
	}
	for _, name := range names {
		if _, err := root.Lstat(name); err == nil && !listed(old, name) {
			return &FolderError{Dir: dir, Name: name}
		}
	}
	return replace(root, path.Join(filepath.Base(aside), "report"), old, names)
}

// replace moves the files of a new report into place. The list of contents holds old
// and new names until all is done, so that a stop half-way loses track of none.
func replace(root *os.Root, from string, old, names []string) error {
	put := func(list []string) error {
		part := path.Join(from, contentsFile)
		if err := root.WriteFile(part, contentsText(list), 0o666); err != nil {
			return err
		}
		return root.Rename(part, contentsFile)
	}
	both := append(slices.Clone(old), names...)
	slices.Sort(both)
	if err := put(slices.Compact(both)); err != nil {
		return fmt.Errorf("report: %w", err)
	}
	if err := root.MkdirAll(passFolder, 0o777); err != nil {
		return fmt.Errorf("report: %w", err)
	}
	for _, name := range append(slices.DeleteFunc(slices.Clone(names), func(n string) bool { return n == indexFile }), indexFile) {
		if err := root.Rename(path.Join(from, name), name); err != nil {
			return fmt.Errorf("report: %w", err)
		}
	}
	for _, name := range old {
		if !listed(names, name) {
			if err := root.Remove(name); err != nil && !errors.Is(err, fs.ErrNotExist) {
				return fmt.Errorf("report: %w", err)
			}
		}
	}
	if err := put(names); err != nil {
		return fmt.Errorf("report: %w", err)
	}
	return nil
}

// fill writes the report into a folder of its own and returns the names in it, in
// order.
func fill(ctx context.Context, dir string, r *Report, o Options) ([]string, error) {
	if err := os.MkdirAll(filepath.Join(dir, passFolder), 0o777); err != nil {
		return nil, fmt.Errorf("report: %w", err)
	}
	var listing sync.Mutex
	var names []string
	put := func(name string, content []byte) error {
		if err := os.WriteFile(filepath.Join(dir, filepath.FromSlash(name)), content, 0o666); err != nil {
			return fmt.Errorf("report: %w", err)
		}
		listing.Lock()
		names = append(names, name)
		listing.Unlock()
		return nil
	}
	if err := newWriter(r, o, chartScript(), put).write(ctx); err != nil {
		return nil, err
	}
	slices.Sort(names)
	return names, nil
}
