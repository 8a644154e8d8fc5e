package reports

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// listing returns the files below a folder.
func listing(t *testing.T, dir string) []string {
	t.Helper()
	var names []string
	err := filepath.WalkDir(dir, func(path string, d os.DirEntry, err error) error {
		if err == nil && !d.IsDir() {
			name, _ := filepath.Rel(dir, path)
			names = append(names, filepath.ToSlash(name))
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	slices.Sort(names)
	return names
}

func writeReport(t *testing.T, dir string, r *Report) {
	t.Helper()
	index, err := Write(context.Background(), dir, r, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if index != filepath.Join(dir, "index.html") {
		t.Errorf("the index is said to be %s", index)
	}
}

func TestWriteNewFolder(t *testing.T) {
	parent := t.TempDir()
	dir := filepath.Join(parent, "out")
	writeReport(t, dir, goldenReport())
	got := listing(t, dir)
	for _, want := range []string{"contents.txt", "index.html", "page.css", "page.js", "passes.csv", "passes/wagtail-1-skerry-point-20260310t104231z.json"} {
		if !slices.Contains(got, want) {
			t.Errorf("%s is missing", want)
		}
	}
	if entries, _ := os.ReadDir(parent); len(entries) != 1 {
		t.Errorf("beside the report lie %v", entries)
	}
	info, err := os.Stat(dir)
	if err != nil || info.Mode().Perm()&0o500 != 0o500 {
		t.Errorf("the folder's mode is %v (%v)", info.Mode(), err)
	}
}

func TestWriteOverEarlierReport(t *testing.T) {
	dir := t.TempDir()
	writeReport(t, dir, fixtureReport(4))
	mine := filepath.Join(dir, "passes", "my notes.txt")
	if err := os.WriteFile(mine, []byte("keep"), 0o600); err != nil {
		t.Fatal(err)
	}
	writeReport(t, dir, goldenReport())
	fresh := filepath.Join(t.TempDir(), "fresh")
	writeReport(t, fresh, goldenReport())
	want := append(listing(t, fresh), "passes/my notes.txt")
	slices.Sort(want)
	if got := listing(t, dir); !slices.Equal(got, want) {
		t.Errorf("the folder holds\n%v\nwant\n%v", got, want)
	}
	if text, err := os.ReadFile(mine); err != nil || string(text) != "keep" {
		t.Errorf("a file that is not of the report: %q, %v", text, err)
	}
}

func TestWriteRefusesForeignFolder(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "thesis.txt"), []byte("mine"), 0o600); err != nil {
		t.Fatal(err)
	}
	var fe *FolderError
	if _, err := Write(context.Background(), dir, goldenReport(), Options{}); !errors.As(err, &fe) {
		t.Fatalf("got %v, want a *FolderError", err)
	}
	if got := listing(t, dir); !slices.Equal(got, []string{"thesis.txt"}) {
		t.Errorf("the folder now holds %v", got)
	}
}

func TestWriteRefusesToReplaceForeignFile(t *testing.T) {
	dir := t.TempDir()
	writeReport(t, dir, fixtureReport(2))
	page := filepath.Join(dir, "passes", "wagtail-1-skerry-point-20260310t104231z.html")
	// As if the earlier report had not made this page: it is now somebody else's.
	list := filepath.Join(dir, "contents.txt")
	text, err := os.ReadFile(list)
	if err != nil {
		t.Fatal(err)
	}
	shorter := strings.Replace(string(text), "passes/wagtail-1-skerry-point-20260310t104231z.html\n", "", 1)
	if err := errors.Join(os.WriteFile(list, []byte(shorter), 0o600), os.WriteFile(page, []byte("mine"), 0o600)); err != nil {
		t.Fatal(err)
	}
	before := listing(t, dir)
	var fe *FolderError
	if _, err := Write(context.Background(), dir, goldenReport(), Options{}); !errors.As(err, &fe) || fe.Name == "" {
		t.Fatalf("got %v, want a *FolderError that names the file", err)
	}
	if got := listing(t, dir); !slices.Equal(got, before) {
		t.Errorf("the folder now holds %v", got)
	}
	if text, err := os.ReadFile(page); err != nil || string(text) != "mine" {
		t.Errorf("the file holds %q, %v", text, err)
	}
}

// A list of contents that leads out of the folder must not remove anything there.
func TestContentsStayInside(t *testing.T) {
	parent := t.TempDir()
	outside := filepath.Join(parent, "outside.txt")
	dir := filepath.Join(parent, "out")
	writeReport(t, dir, goldenReport())
	bad := contentsHead + "\n../outside.txt\n"
	if err := errors.Join(os.WriteFile(outside, nil, 0o600), os.WriteFile(filepath.Join(dir, "contents.txt"), []byte(bad), 0o600)); err != nil {
		t.Fatal(err)
	}
	var fe *FolderError
	if _, err := Write(context.Background(), dir, goldenReport(), Options{}); !errors.As(err, &fe) {
		t.Errorf("got %v, want a *FolderError", err)
	}
	if _, err := os.Stat(outside); err != nil {
		t.Error(err)
	}
}

func TestWriteLeavesNothingHalfWritten(t *testing.T) {
	trouble := errors.New("no element set")
	for name, c := range map[string]struct {
		spoil func(*Report, context.CancelFunc)
		want  error
	}{
		"a pass fails": {func(r *Report, _ context.CancelFunc) {
			r.Load = func(context.Context, int) (*Pass, error) { return nil, trouble }
		}, trouble},
		"interrupted": {func(r *Report, stop context.CancelFunc) {
			load := r.Load
			r.Load = func(ctx context.Context, i int) (*Pass, error) {
				stop()
				return load(ctx, i)
			}
		}, context.Canceled},
	} {
		t.Run(name, func(t *testing.T) {
			parent := t.TempDir()
			old := filepath.Join(parent, "old")
			writeReport(t, old, fixtureReport(2))
			before := listing(t, old)
			ctx, stop := context.WithCancel(context.Background())
			defer stop()
			r := fixtureReport(8)
			c.spoil(r, stop)
			for _, dir := range []string{old, filepath.Join(parent, "new")} {
				if _, err := Write(ctx, dir, r, Options{Workers: 1}); !errors.Is(err, c.want) {
					t.Errorf("%s: got %v, want %v", dir, err, c.want)
				}
			}
			if got := listing(t, parent); len(got) != len(before) {
				t.Errorf("the folder holds %d files, before it held %d: %v", len(got), len(before), got)
			}
		})
	}
}

func TestWriteIntoFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "out")
	if err := os.WriteFile(path, []byte("mine"), 0o600); err != nil {
		t.Fatal(err)
	}
	var folder *FolderError
	if _, err := Write(context.Background(), path, goldenReport(), Options{}); !errors.As(err, &folder) || !folder.IsFile {
		t.Errorf("got %v, want that it is a file", err)
	}
}

func TestEmptyReport(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "out")
	writeReport(t, dir, fixtureReport(0))
	page, err := os.ReadFile(filepath.Join(dir, "index.html"))
	if err != nil || !strings.Contains(string(page), "No pass in this window") {
		t.Errorf("an index without passes does not say so (%v)", err)
	}
}
