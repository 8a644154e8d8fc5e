package cli

import (
	"crypto/sha256"
	"fmt"
	"hash"
	"os"
	"path/filepath"

	"slantwise/cmd/internal/scenario"
)

// mostWatched is how many files of the scenario's folder are looked at for changes.
const mostWatched = 10_000

// watchedFiles tells whether a file in the scenario's folder, or below it, has changed.
type watchedFiles struct{ folder, file string }

func newWatchedFiles(named string) watchedFiles {
	if named == "" {
		named = scenario.DefaultFile
	}
	return watchedFiles{folder: filepath.Dir(named), file: filepath.Base(named)}
}

// stamp is a digest of names, sizes and times of the scenario file and of the files
// of its folder and of the folders right below that one.
func (f watchedFiles) stamp() string {
	sum, left := sha256.New(), mostWatched
	stampFile(sum, filepath.Join(f.folder, f.file))
	stampFolder(sum, f.folder, 1, &left)
	return string(sum.Sum(nil))
}

func stampFolder(sum hash.Hash, folder string, below int, left *int) {
	entries, err := os.ReadDir(folder)
	if err != nil { // what cannot be read does not change
		return
	}
	for _, e := range entries {
		if *left--; *left < 0 {
			return
		}
		path := filepath.Join(folder, e.Name())
		switch {
		case !e.IsDir():
			stampFile(sum, path)
		case below > 0:
			stampFolder(sum, path, below-1, left)
		}
	}
}

func stampFile(sum hash.Hash, path string) {
	if info, err := os.Stat(path); err == nil && info.Mode().IsRegular() {
		fmt.Fprintf(sum, "%q %d %d\n", path, info.Size(), info.ModTime().UnixNano())
	}
}
