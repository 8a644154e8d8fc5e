package reports

import (
	"context"
	"os"
	"sync"
	"testing"
	"time"

	"slantwise/reports/viewing"
)

// The browser of all tests, started by the first that needs it.
var shared struct {
	start sync.Once
	b     *viewing.Browser
	err   error
}

func TestMain(m *testing.M) {
	code := m.Run()
	if shared.b != nil {
		shared.b.Close()
	}
	os.Exit(code)
}

// browser returns a tab of its own.
func browser(t *testing.T) context.Context {
	t.Helper()
	if testing.Short() {
		t.Skip("short: without a browser")
	}
	path := viewing.Path(t)
	shared.start.Do(func() { shared.b, shared.err = viewing.Start(path) })
	if shared.err != nil {
		t.Fatal("starting chromium:", shared.err)
	}
	return shared.b.Tab(t, 50*time.Second)
}

func observe(t *testing.T, ctx context.Context) *viewing.Seen {
	t.Helper()
	return viewing.Observe(t, ctx)
}

// screen is how a page is looked at.
type screen struct {
	width  int64
	scheme string // light or dark
}

// show opens a page on a screen and waits until it has drawn.
func show(t *testing.T, ctx context.Context, url string, s screen) {
	t.Helper()
	viewing.Show(t, ctx, url, viewing.Screen{Width: s.width, Scheme: s.scheme})
}

// ask evaluates an expression in the page.
func ask[T any](t *testing.T, ctx context.Context, expression string) T {
	t.Helper()
	return viewing.Ask[T](t, ctx, expression)
}
