package web

import (
	"context"
	"net/http"
	"sync"
	"time"
)

// hub hands each state to all who listen. Who is slow misses states and holds nobody.
type hub struct {
	mu        sync.Mutex
	most      int // listeners at a time
	listeners map[chan []byte]struct{}
}

// join returns a channel that holds the newest state, nil where the house is full.
func (h *hub) join() chan []byte {
	h.mu.Lock()
	defer h.mu.Unlock()
	if len(h.listeners) >= h.most {
		return nil
	}
	c := make(chan []byte, 1)
	h.listeners[c] = struct{}{}
	return c
}

func (h *hub) leave(c chan []byte) {
	h.mu.Lock()
	defer h.mu.Unlock()
	delete(h.listeners, c)
}

func (h *hub) empty() bool {
	h.mu.Lock()
	defer h.mu.Unlock()
	return len(h.listeners) == 0
}

// tell replaces what a listener has not yet taken.
func (h *hub) tell(event []byte) {
	h.mu.Lock()
	defer h.mu.Unlock()
	for c := range h.listeners {
		select {
		case <-c:
		default:
		}
		c <- event // there is room: nobody else sends
	}
}

// beat tells a state every so often while someone listens.
func (s *Server) beat(ctx context.Context, every time.Duration) {
	tick := time.NewTicker(every)
	defer tick.Stop()
	for {
		select {
		case <-ctx.Done():
			return
		case <-tick.C:
			if s.hub.empty() {
				continue
			}
			if state, err := s.state(); err == nil {
				s.hub.tell(event(state))
			}
		}
	}
}

func event(state []byte) []byte {
	return append(append([]byte("event: state\ndata: "), state...), "\n\n"...)
}

// events streams the states to one page.
func (s *Server) events(w http.ResponseWriter, r *http.Request) {
	c := s.hub.join()
	if c == nil {
		refuse(w, http.StatusServiceUnavailable, "too many pages listen; close some")
		return
	}
	defer s.hub.leave(c)
	first, err := s.state()
	if err != nil {
		fail(w, err)
		return
	}
	w.Header().Set("Content-Type", "text/event-stream")
	out := http.NewResponseController(w)
	send := func(b []byte) bool {
		if out.SetWriteDeadline(time.Now().Add(s.limits.slowest)) != nil {
			return false
		}
		if _, err := w.Write(b); err != nil {
			return false
		}
		return out.Flush() == nil
	}
	for b := event(first); send(b); {
		select {
		case <-r.Context().Done():
			return
		case <-s.closing:
			return
		case b = <-c:
		}
	}
}
