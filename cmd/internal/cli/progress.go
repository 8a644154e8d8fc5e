package cli

import (
	"io"
	"sync"
	"sync/atomic"
	"time"

	"github.com/schollz/progressbar/v3"
)

// progress shows how far a long job is, on stderr, only where that is a terminal and
// the job lasts over two seconds. It is safe for use by many goroutines.
type progress struct {
	done  atomic.Int64
	ended chan struct{}
	drawn sync.WaitGroup
}

// patienceBeforeBar is how long a job may last before a bar is worth drawing.
const patienceBeforeBar = 2 * time.Second

// startProgress begins a job of total steps. The caller must call stop.
func (e *Env) startProgress(what string, total int) *progress {
	p := &progress{ended: make(chan struct{})}
	if e.errIsTerminal() {
		p.drawn.Go(func() { p.draw(e.Err, what, total) })
	}
	return p
}

// add tells that n more steps are done.
func (p *progress) add(n int) { p.done.Add(int64(n)) }

// stop takes the bar off the terminal.
func (p *progress) stop() {
	close(p.ended)
	p.drawn.Wait()
}

func (p *progress) draw(w io.Writer, what string, total int) {
	select {
	case <-p.ended:
		return
	case <-time.After(patienceBeforeBar):
	}
	bar := progressbar.NewOptions(total,
		progressbar.OptionSetWriter(w),
		progressbar.OptionSetDescription(what),
		progressbar.OptionSetWidth(30),
		progressbar.OptionShowCount(),
		progressbar.OptionClearOnFinish(),
	)
	tick := time.NewTicker(200 * time.Millisecond)
	defer tick.Stop()
	for {
		// A bar that cannot be drawn must not end the job that it tells of.
		_ = bar.Set64(min(p.done.Load(), int64(total)))
		select {
		case <-p.ended:
			_ = bar.Clear()
			return
		case <-tick.C:
		}
	}
}

// shares is a progress that is told how much of a total is done.
type shares struct{ *progress }

// startShares begins a job whose total comes with what is told; the bar counts percent.
func (e *Env) startShares(what string) shares { return shares{e.startProgress(what+", percent", 100)} }

// tell sets how much is done.
func (p shares) tell(done, total int) { p.done.Store(int64(100 * done / total)) }
