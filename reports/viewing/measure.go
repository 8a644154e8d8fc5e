package viewing

import (
	"context"
	_ "embed"
	"fmt"
	"testing"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/input"
	"github.com/chromedp/chromedp"
)

//go:embed measure.js
var measure string

// What of a page Faults measures; the criteria stand in measure.js.
const (
	Contrast = "contrast" // of text against what it stands on
	Overflow = "overflow" // of the page over its screen
	Outline  = "outline"  // headings, title, language, ids
	Names    = "names"    // of charts and controls, and where a chart's numbers stand
	Drawn    = "drawn"    // something stands in every chart
)

// Faults measures the page that is open and returns what is wrong with it, in words.
func Faults(t *testing.T, ctx context.Context, what string) []string {
	t.Helper()
	return Ask[[]string](t, ctx, measure+"."+what+"()")
}

// Charts returns how many charts the page shows.
func Charts(t *testing.T, ctx context.Context) int {
	t.Helper()
	return Ask[int](t, ctx, measure+".charts()")
}

// Fold opens what the page has folded away, or folds it again.
func Fold(t *testing.T, ctx context.Context, open bool) {
	t.Helper()
	Ask[bool](t, ctx, fmt.Sprintf("(%s.fold(%t), true)", measure, open))
}

// Walk goes through the page with the Tab key until it is through, and returns what is
// wrong with the way, in words.
func Walk(t *testing.T, ctx context.Context) []string {
	t.Helper()
	stops := Ask[int](t, ctx, measure+".watch()")
	tab := input.DispatchKeyEventParams{Type: input.DispatchKeyEventTypeRawKeyDown, Key: "Tab", Code: "Tab", WindowsVirtualKeyCode: 9, NativeVirtualKeyCode: 9}
	up := tab
	up.Type = input.DispatchKeyEventTypeKeyUp
	err := chromedp.Do(ctx, chromedp.Func(func(ctx context.Context, target *chromedp.Target) error {
		for range stops + 2 { // what scrolls by itself is a stop of its own, now and then
			for _, k := range []input.DispatchKeyEventParams{tab, up} {
				if _, err := cdp.Call(ctx, target, input.DispatchKeyEvent, k); err != nil {
					return err
				}
			}
		}
		return nil
	}))
	if err != nil {
		t.Fatal(err)
	}
	return Faults(t, ctx, "walked")
}
