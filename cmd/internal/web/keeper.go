package web

import (
	"context"
	"sync"
	"time"
)

// Source reads the scenario.
type Source struct {
	// Load reads and checks; the faults are those of the error, a line each.
	Load func(context.Context) (Model, error)
	// Changed tells whether a file has changed since Load began to read it. It is cheap.
	Changed func() bool
}

// keeper holds the last good model and what is wrong with a later one.
type keeper struct {
	source Source

	mu         sync.RWMutex
	model      Model
	generation int
	fault      string
}

func (k *keeper) now() (m Model, generation int, fault string) {
	k.mu.RLock()
	defer k.mu.RUnlock()
	return k.model, k.generation, k.fault
}

// look reads again where a file has changed.
func (k *keeper) look(ctx context.Context) {
	if !k.source.Changed() {
		return
	}
	m, err := k.source.Load(ctx)
	if ctx.Err() != nil {
		return
	}
	k.mu.Lock()
	defer k.mu.Unlock()
	if err != nil {
		k.fault = err.Error()
		return
	}
	k.model, k.fault = m, ""
	k.generation++
}

// watch looks every so often until ctx ends.
func (k *keeper) watch(ctx context.Context, every time.Duration) {
	tick := time.NewTicker(every)
	defer tick.Stop()
	for {
		select {
		case <-ctx.Done():
			return
		case <-tick.C:
			k.look(ctx)
		}
	}
}
