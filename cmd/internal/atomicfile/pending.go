package atomicfile

import (
	"os"
	"sync"
)

// pending holds the temporary files and folders of writes under way.
var pending pendingPaths

type pendingPaths struct {
	mu    sync.Mutex
	paths map[string]bool
}

func (p *pendingPaths) add(path string) {
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.paths == nil {
		p.paths = map[string]bool{}
	}
	p.paths[path] = true
}

func (p *pendingPaths) drop(path string) {
	p.mu.Lock()
	defer p.mu.Unlock()
	delete(p.paths, path)
}

// RemovePending removes the temporary files of writes under way, for a program that
// is about to end in the middle of them. A write that ends meanwhile is whole.
func RemovePending() {
	pending.mu.Lock()
	defer pending.mu.Unlock()
	for path := range pending.paths {
		os.RemoveAll(path) // the program ends, and there is nobody to tell
	}
}
