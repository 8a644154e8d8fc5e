package pass

import (
	"fmt"
	"time"

	"slantwise/orbit"
	"slantwise/station"
)

// Window is the time that passes are sought in, both ends included, UTC.
type Window struct{ From, To time.Time }

func (w Window) check() error {
	if !w.To.After(w.From) {
		return fmt.Errorf("window: its end %s is not after its start %s; give an end after the start", stamp(w.To), stamp(w.From))
	}
	return nil
}

func stamp(t time.Time) string { return t.UTC().Format("2006-01-02T15:04:05.000Z") }

// Search returns the passes of one spacecraft over one site, by rising AOS; empty,
// not nil, when there is none. decides says in which kind of elevation the site's
// minimum elevation is compared; a mask is always compared in its own kind.
//
// Times are right to 1 ms for the motion that the ephemeris gives. Nothing that lasts
// a millisecond is missed, and nothing invented; what is shorter is left out.
//
// The window is narrowed to the ephemeris: where that ends early (a decayed orbit) or
// has a gap, the pass under way is cut there, and the ephemeris tells why; a pass on both
// sides of a gap is two. The error is that of
// a site or window that is not valid, or a *orbit.SpanError when the ephemeris lies
// wholly outside the window.
func Search(e *orbit.Ephemeris, s *station.Site, w Window, decides station.ElevationKind) ([]Pass, error) {
	k, err := newSkyline(s, decides)
	if err != nil {
		return nil, err
	}
	var f finder
	spans, err := within(e, w)
	if err != nil {
		return nil, err
	}
	passes := []Pass{}
	for _, span := range spans {
		f.aimAt(e, span)
		for _, r := range f.find(k, nil) {
			passes = append(passes, r.pass())
		}
	}
	return passes, nil
}

// within returns the spans of an ephemeris that lie in the window.
func within(e *orbit.Ephemeris, w Window) ([]orbit.Span, error) {
	if err := w.check(); err != nil {
		return nil, err
	}
	all := e.Spans()
	var inside []orbit.Span
	for _, s := range all {
		s.From, s.To = max(s.From, e.Seconds(w.From)), min(s.To, e.Seconds(w.To))
		if s.To > s.From {
			inside = append(inside, s)
		}
	}
	if len(inside) == 0 {
		return nil, &orbit.SpanError{Time: w.From, Until: w.To, From: e.Reference(), To: e.Time(e.Span())}
	}
	return inside, nil
}

// aimAt prepares the finder for a span of an ephemeris.
func (f *finder) aimAt(e *orbit.Ephemeris, s orbit.Span) {
	f.clock = newClock(e.Reference())
	f.track.reset(e, s.From, s.To)
}
