package viewing

import (
	"context"
	"fmt"
	"regexp"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/page"
	"github.com/chromedp/chromedp"
)

// Screen is how a page is looked at.
type Screen struct {
	Width  int64  // CSS pixels; under 500 it is a phone's
	Scheme string // light or dark
}

// Set gives the tab another screen and waits until the open page is drawn on it.
func Set(t *testing.T, ctx context.Context, s Screen) {
	t.Helper()
	if err := chromedp.Do(ctx, setting(s)); err != nil {
		t.Fatal(err)
	}
	Ask[int](t, ctx, `requestAnimationFrame(() => requestAnimationFrame(() => { window.drawnOn = innerWidth }))`)
	for range 200 {
		if Ask[bool](t, ctx, fmt.Sprintf(`window.drawnOn >= %d`, s.Width)) {
			return
		}
		time.Sleep(20 * time.Millisecond)
	}
	t.Fatalf("not drawn on %d px within 4 s", s.Width)
}

func setting(s Screen) chromedp.Action[chromedp.Void] {
	size := emulation.SetDeviceMetricsOverrideParams{Width: s.Width, Height: 900, DeviceScaleFactor: 1, Mobile: s.Width < 500}
	media := emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: s.Scheme}}}
	return chromedp.Func(func(ctx context.Context, target *chromedp.Target) error {
		if _, err := cdp.Call(ctx, target, emulation.SetDeviceMetricsOverride, size); err != nil {
			return err
		}
		_, err := cdp.Call(ctx, target, emulation.SetEmulatedMedia, media)
		return err
	})
}

// Show opens a page on a screen and waits until it has loaded.
func Show(t *testing.T, ctx context.Context, url string, s Screen) {
	t.Helper()
	if err := chromedp.Do(ctx, setting(s), chromedp.Navigate(url)); err != nil {
		t.Fatalf("opening %s: %v", url, err)
	}
}

// Ask evaluates an expression in the page.
func Ask[T any](t *testing.T, ctx context.Context, expression string) T {
	t.Helper()
	v, err := chromedp.Run(ctx, chromedp.Evaluate[T](expression))
	if err != nil {
		t.Fatalf("evaluating %.200s: %v", expression, err)
	}
	return v
}

var pdfPage = regexp.MustCompile(`/Type\s*/Page[^s]`)

// Print returns the page as a PDF, and on how many sheets it is.
func Print(t *testing.T, ctx context.Context) (pdf []byte, sheets int) {
	t.Helper()
	yes := true
	pdf, err := chromedp.Run(ctx, chromedp.PrintToPDF(func(p *page.PrintToPDFParams) { p.PreferCSSPageSize = &yes }))
	if err != nil {
		t.Fatal(err)
	}
	return pdf, len(pdfPage.FindAll(pdf, -1))
}
