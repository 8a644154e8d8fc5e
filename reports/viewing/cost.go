package viewing

import (
	"context"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/performance"
	"github.com/chromedp/chromedp"
)

// Cost is what opening a page took.
type Cost struct {
	Work  time.Duration // of the page's own thread, which does not grow on a busy machine
	Clock time.Duration // from asking for the page until it had loaded
}

// ShowFirst is Show in a tab that has shown nothing yet, and tells what it took.
func ShowFirst(t *testing.T, ctx context.Context, url string, s Screen) Cost {
	t.Helper()
	enable := chromedp.Func(func(ctx context.Context, target *chromedp.Target) error {
		_, err := cdp.Call(ctx, target, performance.Enable, performance.EnableParams{TimeDomain: performance.EnableTimeDomainThreadTicks})
		return err
	})
	if err := chromedp.Do(ctx, enable); err != nil {
		t.Fatal(err)
	}
	Show(t, ctx, url, s)
	var c Cost
	read := chromedp.Func(func(ctx context.Context, target *chromedp.Target) error {
		r, err := cdp.Call(ctx, target, performance.GetMetrics, cdp.Empty{})
		for _, m := range r.Metrics {
			if m.Name == "TaskDuration" {
				c.Work = time.Duration(m.Value * float64(time.Second))
			}
		}
		return err
	})
	if err := chromedp.Do(ctx, read); err != nil {
		t.Fatal(err)
	}
	ms := Ask[float64](t, ctx, `performance.getEntriesByType('navigation')[0].loadEventEnd`)
	c.Clock = time.Duration(ms * float64(time.Millisecond))
	return c
}

// Bytes returns what came over all addresses that were asked for, each as it came last.
func (s *Seen) Bytes() int {
	s.mutex.Lock()
	defer s.mutex.Unlock()
	sum := 0
	for _, n := range s.bytes {
		sum += n
	}
	return sum
}
