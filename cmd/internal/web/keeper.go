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
	// Stamp changes whenever a file of the scenario does. It is cheap.
	Stamp func() string
}

// keeper holds the last good model and what is wrong with a later one.
type keeper struct {
	source Source
	stamp  string

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
	stamp := k.source.Stamp()
	if stamp == k.stamp {
		return
	}
	m, err := k.source.Load(ctx)
	if ctx.Err() != nil {
		return
	}
	k.stamp = stamp
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
