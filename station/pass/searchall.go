package pass

import (
	"cmp"
	"context"
	"fmt"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"

	"golang.org/x/sync/errgroup"

	"slantwise/orbit"
	"slantwise/station"
)

// Job is a search over many spacecraft and sites.
type Job struct {
	Spacecraft int // how many
	// Ephemeris returns the ephemeris of spacecraft i, [0, Spacecraft). It is called
	// once for each, from the workers, and what it returns is dropped after use, so
	// that few ephemerides are in memory at a time. Scratch is the worker's own, never
	// nil, and may be rebuilt and returned, which saves its memory. Nil without an
	// error passes the spacecraft over; an error ends the job.
	Ephemeris func(i int, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error)
	Sites     []*station.Site
	Window    Window
	Decides   station.ElevationKind
	// Keep tells whether a pass belongs into the list; nil keeps all. It is called from
	// the workers while the ephemeris is at hand.
	Keep     func(e *orbit.Ephemeris, f *Found) bool
	Workers  int            // 0: as many as the machine runs at once
	Progress func(done int) // spacecraft done; may be nil; never called by two goroutines at a time
}

// SearchAll runs the job. The list is the same for any number of workers. It stops
// with the context's error when ctx ends.
func SearchAll(ctx context.Context, j Job) (*List, error) {
	if err := j.Window.check(); err != nil {
		return nil, err
	}
	if j.Workers < 0 {
		return nil, fmt.Errorf("workers: %d is not allowed; it must be 0 (as many as the machine runs at once) or more", j.Workers)
	}
	skylines := make([]*skyline, len(j.Sites))
	for i, s := range j.Sites {
		k, err := newSkyline(s, j.Decides)
		if err != nil {
			return nil, err
		}
		skylines[i] = k
	}
	found := make([][]record, j.Spacecraft)
	if err := j.run(ctx, skylines, found); err != nil {
		return nil, err
	}
	return newList(found), nil
}

// run shares the spacecraft out to the workers, which leave what they find by
// spacecraft.
func (j *Job) run(ctx context.Context, skylines []*skyline, found [][]record) error {
	workers := j.Workers
	if workers == 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	var next atomic.Int64
	var told sync.Mutex
	done := 0
	group, ctx := errgroup.WithContext(ctx)
	for range max(1, min(workers, j.Spacecraft)) {
		group.Go(func() error {
			w := worker{job: j, skylines: skylines}
			for {
				i := int(next.Add(1)) - 1
				if i >= j.Spacecraft {
					return nil
				}
				if err := ctx.Err(); err != nil {
					return err
				}
				var err error
				if found[i], err = w.spacecraft(i); err != nil {
					return err
				}
				if j.Progress != nil {
					told.Lock()
					done++
					j.Progress(done)
					told.Unlock()
				}
			}
		})
	}
	return group.Wait()
}

// worker holds what one goroutine uses again from spacecraft to spacecraft.
type worker struct {
	job      *Job
	skylines []*skyline
	finder   finder
	scratch  orbit.Ephemeris
	records  []record
}

// spacecraft returns the passes of spacecraft i, by site and AOS.
func (w *worker) spacecraft(i int) ([]record, error) {
	e, err := w.job.Ephemeris(i, &w.scratch)
	if err != nil || e == nil {
		return nil, err
	}
	spans, err := within(e, w.job.Window)
	if err != nil {
		return nil, err
	}
	w.records = w.records[:0]
	for _, span := range spans {
		w.finder.aimAt(e, span)
		for site, k := range w.skylines {
			first := len(w.records)
			w.records = w.finder.find(k, w.records)
			for n := first; n < len(w.records); n++ {
				w.records[n].craft, w.records[n].site = uint32(i), uint32(site)
			}
			w.records = w.kept(e, w.records, first)
		}
	}
	if len(spans) > 1 {
		slices.SortStableFunc(w.records, func(a, b record) int { return cmp.Compare(a.site, b.site) })
	}
	return slices.Clone(w.records), nil
}

// kept drops from first on what the job does not keep.
func (w *worker) kept(e *orbit.Ephemeris, records []record, first int) []record {
	if w.job.Keep == nil {
		return records
	}
	n := first
	for i := first; i < len(records); i++ {
		f := records[i].found()
		if w.job.Keep(e, &f) {
			records[n] = records[i]
			n++
		}
	}
	return records[:n]
}
