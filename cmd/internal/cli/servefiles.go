package cli

import (
	"io/fs"
	"os"
	"sync"
)

// watchedFiles are the files of the machine that the scenario was read from, wherever
// they lie, as they were just before they were read; nil stands for one that was not there.
type watchedFiles struct {
	mutex sync.Mutex
	seen  map[string]fs.FileInfo
}

// restart forgets all files before the scenario is read again.
func (w *watchedFiles) restart() {
	w.mutex.Lock()
	defer w.mutex.Unlock()
	w.seen = map[string]fs.FileInfo{}
}

// opened keeps how a file is before it is read.
func (w *watchedFiles) opened(file string) {
	w.mutex.Lock()
	defer w.mutex.Unlock()
	if _, known := w.seen[file]; !known {
		w.seen[file] = lookAt(file)
	}
}

// changed tells whether a file is another one now, or of another size or time, has come
// or has gone.
func (w *watchedFiles) changed() bool {
	w.mutex.Lock()
	defer w.mutex.Unlock()
	for file, before := range w.seen {
		now := lookAt(file)
		if (now == nil) != (before == nil) {
			return true
		}
		if now != nil && (!os.SameFile(now, before) || now.Size() != before.Size() || !now.ModTime().Equal(before.ModTime())) {
			return true
		}
	}
	return false
}

// lookAt follows links and returns nil for what cannot be looked at.
func lookAt(file string) fs.FileInfo {
	info, err := os.Stat(file)
	if err != nil {
		return nil
	}
	return info
}
