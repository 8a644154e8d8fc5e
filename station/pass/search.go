package pass

import (
	"context"
	"errors"
	"iter"
	"time"

	"slantwise/orbit"
	"slantwise/station"
)

// Window is the time that passes are sought in, both ends included, UTC.
type Window struct{ From, To time.Time }

// Search returns the passes of one spacecraft over one site, by rising AOS; empty,
// not nil, when there is none. decides says in which kind of elevation the site's
// minimum elevation is compared; a mask is always compared in its own kind.
//
// The window is narrowed to the ephemeris: where that ends early (a decayed orbit),
// the pass under way is cut there, and the ephemeris tells why.
func Search(e *orbit.Ephemeris, s *station.Site, w Window, decides station.ElevationKind) ([]Pass, error) {
	return nil, errors.New("pass: the search is not built yet")
}

// Job is a search over many spacecraft and sites.
type Job struct {
	Spacecraft int // how many
	// Ephemeris returns the ephemeris of spacecraft i, [0, Spacecraft). It is called
	// once for each, from the workers, and what it returns is dropped after use, so
	// that few ephemerides are in memory at a time. An error ends the job.
	Ephemeris func(i int) (*orbit.Ephemeris, error)
	Sites     []*station.Site
	Window    Window
	Decides   station.ElevationKind
	Workers   int            // 0: as many as the machine runs at once
	Progress  func(done int) // spacecraft done; may be nil; never called by two goroutines at a time
}

// Found is a pass with the indices of its spacecraft and site in the job.
type Found struct {
	Spacecraft, Site int
	Pass
}

// List holds the passes of a job compactly, ordered by AOS, then spacecraft, then
// site, whatever the number of workers.
type List struct{}

// Len returns the number of passes.
func (l *List) Len() int { return 0 }

// At returns pass i, [0, Len()).
func (l *List) At(i int) Found { panic("pass: the search is not built yet") }

// All yields the passes in order.
func (l *List) All() iter.Seq[Found] { return func(func(Found) bool) {} }

// SearchAll runs the job. It stops with the context's error when ctx ends.
func SearchAll(ctx context.Context, j Job) (*List, error) {
	return nil, errors.New("pass: the search is not built yet")
}
