package reports

import (
	"context"
	"os"
	"os/exec"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// The browser of all tests, started by the first that needs it.
var shared struct {
	start sync.Once
	ctx   context.Context
	stop  []func()
	err   error
}

func TestMain(m *testing.M) {
	code := m.Run()
	for i := len(shared.stop) - 1; i >= 0; i-- {
		shared.stop[i]()
	}
	os.Exit(code)
}

// browser returns a tab of its own in a headless Chromium with an empty profile.
// Where there is none the test is skipped, but not on the machine that decides about
// a change.
func browser(t *testing.T) context.Context {
	t.Helper()
	if testing.Short() {
		t.Skip("short: without a browser")
	}
	path, err := exec.LookPath("chromium")
	if err != nil {
		if os.Getenv("CI") == "true" {
			t.Fatal("no chromium here, and with CI=true the browser tests must run")
		}
		t.Skip("no chromium here")
	}
	shared.start.Do(func() { startBrowser(path) })
	if shared.err != nil {
		t.Fatal("starting chromium:", shared.err)
	}
	ctx, end := chromedp.NewContext(shared.ctx)
	t.Cleanup(end)
	if err := chromedp.Do(ctx); err != nil {
		t.Fatal("opening a tab:", err)
	}
	ctx, over := context.WithTimeout(ctx, 50*time.Second)
	t.Cleanup(over)
	return ctx
}

func startBrowser(path string) {
	profile, err := os.MkdirTemp("", "profile")
	if err != nil {
		shared.err = err
		return
	}
	alloc, stop := chromedp.NewExecAllocator(context.Background(),
		chromedp.ExecPath(path), chromedp.NoFirstRun, chromedp.NoSandbox, chromedp.Headless, chromedp.DisableGPU,
		chromedp.Flag("disable-quic", true), chromedp.Flag("disable-background-networking", true),
		chromedp.Flag("disable-component-update", true), chromedp.Flag("disable-sync", true),
		chromedp.Flag("host-resolver-rules", "MAP * ~NOTFOUND"), // nothing may leave the machine
		chromedp.UserDataDir(profile))
	ctx, end := chromedp.NewContext(alloc)
	shared.ctx = ctx
	shared.stop = []func(){func() { os.RemoveAll(profile) }, stop, end}
	shared.err = chromedp.Do(ctx)
}

// observed is what a page said and asked for.
type observed struct {
	mutex       sync.Mutex
	said, asked []string
}

// observe records console messages, faults and requests of the pages shown in ctx.
func observe(t *testing.T, ctx context.Context) *observed {
	t.Helper()
	o := &observed{}
	err := chromedp.Listen(ctx, func(ev any) {
		o.mutex.Lock()
		defer o.mutex.Unlock()
		switch e := ev.(type) {
		case *runtime.EventConsoleAPICalled:
			for _, a := range e.Args {
				o.said = append(o.said, string(a.Value)+a.Description)
			}
		case *runtime.EventExceptionThrown:
			o.said = append(o.said, e.ExceptionDetails.Text+" "+e.ExceptionDetails.URL)
		case *log.EventEntryAdded:
			o.said = append(o.said, e.Entry.Text+" "+e.Entry.URL)
		case *network.EventRequestWillBeSent:
			o.asked = append(o.asked, e.Request.URL)
		}
	})
	if err != nil {
		t.Fatal(err)
	}
	return o
}

// screen is how a page is looked at.
type screen struct {
	width  int64
	scheme string // light or dark
}

// show opens a page on a screen and waits until it has drawn.
func show(t *testing.T, ctx context.Context, url string, s screen) {
	t.Helper()
	size := emulation.SetDeviceMetricsOverrideParams{Width: s.width, Height: 900, DeviceScaleFactor: 1, Mobile: s.width < 500}
	media := emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: s.scheme}}}
	err := chromedp.Do(ctx, chromedp.Func(func(ctx context.Context, target *chromedp.Target) error {
		if _, err := cdp.Call(ctx, target, emulation.SetDeviceMetricsOverride, size); err != nil {
			return err
		}
		_, err := cdp.Call(ctx, target, emulation.SetEmulatedMedia, media)
		return err
	}), chromedp.Navigate(url))
	if err != nil {
		t.Fatalf("opening %s: %v", url, err)
	}
}

// ask evaluates an expression in the page.
func ask[T any](t *testing.T, ctx context.Context, expression string) T {
	t.Helper()
	v, err := chromedp.Run(ctx, chromedp.Evaluate[T](expression))
	if err != nil {
		t.Fatalf("evaluating %s: %v", expression, err)
	}
	return v
}
