package viewing

import (
	"context"
	"strings"
	"sync"
	"testing"

	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
)

// Seen is what the pages of a tab said and asked for since Observe.
type Seen struct {
	mutex       sync.Mutex
	said, asked []string
	bytes       map[string]int // by address, as they came last
	address     map[network.RequestID]string
}

// Observe records console messages, faults and requests of the pages shown in ctx.
func Observe(t *testing.T, ctx context.Context) *Seen {
	t.Helper()
	s := &Seen{bytes: map[string]int{}, address: map[network.RequestID]string{}}
	if err := chromedp.Listen(ctx, s.hear); err != nil {
		t.Fatal(err)
	}
	return s
}

func (s *Seen) hear(ev any) {
	s.mutex.Lock()
	defer s.mutex.Unlock()
	switch e := ev.(type) {
	case *runtime.EventConsoleAPICalled:
		for _, a := range e.Args {
			s.said = append(s.said, string(a.Value)+a.Description)
		}
	case *runtime.EventExceptionThrown:
		s.said = append(s.said, e.ExceptionDetails.Text+" "+e.ExceptionDetails.URL)
	case *log.EventEntryAdded:
		s.said = append(s.said, e.Entry.Text+" "+e.Entry.URL)
	case *network.EventRequestWillBeSent:
		s.asked = append(s.asked, e.Request.URL)
		s.address[e.RequestID] = e.Request.URL
		s.bytes[e.Request.URL] = 0
	case *network.EventDataReceived:
		s.bytes[s.address[e.RequestID]] += int(e.DataLength)
	}
}

// Said returns what the pages wrote to the console, faults included.
func (s *Seen) Said() []string {
	s.mutex.Lock()
	defer s.mutex.Unlock()
	return append([]string(nil), s.said...)
}

// Quiet fails when a page said anything, or asked for something that neither begins
// with one of the prefixes nor holds its own content (data:).
func (s *Seen) Quiet(t *testing.T, prefixes ...string) {
	t.Helper()
	s.mutex.Lock()
	defer s.mutex.Unlock()
	for _, w := range s.said {
		t.Errorf("the page said: %s", w)
	}
	if len(s.asked) == 0 {
		t.Error("no request was seen, not even that for the page")
	}
	for _, a := range s.asked {
		fits := strings.HasPrefix(a, "data:")
		for _, p := range prefixes {
			fits = fits || strings.HasPrefix(a, p)
		}
		if !fits {
			t.Errorf("the page asked for %s", a)
		}
	}
}
