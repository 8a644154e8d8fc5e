package viewing

import (
	"context"
	"os"
	"os/exec"
	"testing"
	"time"

	"github.com/chromedp/chromedp"
)

// Browser is a headless Chromium with an empty profile. Tabs may be opened by several
// goroutines.
type Browser struct {
	ctx  context.Context
	stop []func()
}

// ownFrame is what Chromium draws of its own frame by pages, in a process that works as
// much as the page that is looked at.
const ownFrame = "InitialWebUI,WebUIReloadButton,PreloadTopChromeWebUI,WebUIToolbar,WebUILocationBar,WebUIHomeButton," +
	"WebUISplitTabsButton,WebUIOmniboxPopup,WebUIOmniboxFullPopup,WebUIOmniboxAimPopup"

// Path returns where Chromium is. Without one the test is skipped, but not on the
// machine that decides about a change (CI=true).
func Path(t *testing.T) string {
	t.Helper()
	path, err := exec.LookPath("chromium")
	if err != nil {
		if os.Getenv("CI") == "true" {
			t.Fatal("no chromium here, and with CI=true the browser tests must run")
		}
		t.Skip("no chromium here")
	}
	return path
}

// Start starts the Chromium at path. Close ends it.
func Start(path string) (*Browser, error) {
	profile, err := os.MkdirTemp("", "profile")
	if err != nil {
		return nil, err
	}
	alloc, stop := chromedp.NewExecAllocator(context.Background(),
		chromedp.ExecPath(path), chromedp.NoFirstRun, chromedp.NoSandbox, chromedp.Headless, chromedp.DisableGPU,
		chromedp.Flag("disable-quic", true), chromedp.Flag("disable-background-networking", true),
		chromedp.Flag("disable-features", ownFrame),
		chromedp.Flag("disable-extensions", true), chromedp.Flag("disable-component-update", true), chromedp.Flag("disable-sync", true),
		chromedp.Flag("host-resolver-rules", "MAP * ~NOTFOUND, EXCLUDE 127.0.0.1"), // nothing may leave the machine
		chromedp.Flag("enable-blink-features", "ComputedAccessibilityInfo"),        // computedName and computedRole
		chromedp.UserDataDir(profile))
	ctx, end := chromedp.NewContext(alloc)
	b := &Browser{ctx: ctx, stop: []func(){end, stop, func() { os.RemoveAll(profile) }}}
	if err := chromedp.Do(ctx); err != nil {
		b.Close()
		return nil, err
	}
	return b, nil
}

// Close ends the browser and removes its profile.
func (b *Browser) Close() {
	for _, f := range b.stop {
		f()
	}
}

// Tab opens a tab that is closed at the end of the test, and after limit at the latest.
func (b *Browser) Tab(t *testing.T, limit time.Duration) context.Context {
	t.Helper()
	ctx, end := chromedp.NewContext(b.ctx)
	t.Cleanup(end)
	if err := chromedp.Do(ctx); err != nil {
		t.Fatal("opening a tab:", err)
	}
	ctx, over := context.WithTimeout(ctx, limit)
	t.Cleanup(over)
	return ctx
}
