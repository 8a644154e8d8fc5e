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

// browser starts a headless Chromium with an empty profile. Where there is none the
// test is skipped, but not on the machine that decides about a change.
func browser(t *testing.T) context.Context {
	t.Helper()
	path, err := exec.LookPath("chromium")
	if err != nil {
		if os.Getenv("CI") == "true" {
			t.Fatal("no chromium here, and with CI=true the browser tests must run")
		}
		t.Skip("no chromium here")
	}
	alloc, stop := chromedp.NewExecAllocator(context.Background(),
		chromedp.ExecPath(path), chromedp.NoFirstRun, chromedp.NoSandbox, chromedp.Headless, chromedp.DisableGPU,
		chromedp.Flag("disable-quic", true), chromedp.Flag("disable-background-networking", true),
		chromedp.Flag("disable-component-update", true), chromedp.Flag("disable-sync", true),
		chromedp.UserDataDir(t.TempDir()))
	t.Cleanup(stop)
	ctx, end := chromedp.NewContext(alloc)
	t.Cleanup(end)
	if err := chromedp.Do(ctx); err != nil {
		t.Fatal("starting chromium:", err)
	}
	ctx, over := context.WithTimeout(ctx, 50*time.Second)
	t.Cleanup(over)
	return ctx
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
