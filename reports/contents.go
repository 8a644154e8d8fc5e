package reports

import (
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// contentsHead is the first line of a list of contents; the number is the list's
// format.
const contentsHead = "slantwise report, list of contents 1"

func contentsText(names []string) []byte {
	return []byte(contentsHead + "\n" + strings.Join(names, "\n") + "\n")
}

// readContents returns what an earlier report put into a folder, in order, empty for an
// empty folder. A folder that holds something and no list of ours is refused.
func readContents(root *os.Root, dir string) ([]string, error) {
	text, err := root.ReadFile(contentsFile)
	if errors.Is(err, fs.ErrNotExist) {
		entries, err := os.ReadDir(dir)
		if err != nil {
			return nil, err
		}
		if len(entries) > 0 {
			return nil, &FolderError{Dir: dir}
		}
		return nil, nil
	}
	if err != nil {
		return nil, err
	}
	lines := strings.Split(strings.TrimRight(string(text), "\n"), "\n")
	if lines[0] != contentsHead {
		return nil, &FolderError{Dir: dir}
	}
	for _, name := range lines[1:] {
		if !filepath.IsLocal(filepath.FromSlash(name)) {
			return nil, &FolderError{Dir: dir}
		}
	}
	names := lines[1:]
	slices.Sort(names)
	return names, nil
}

// listed tells whether a name is in a list that is in order.
func listed(names []string, name string) bool {
	_, is := slices.BinarySearch(names, name)
	return is
}
