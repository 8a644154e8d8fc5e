package cli

import "sync"

// mostFlights is how many flown contacts are kept: those under way at a time, and those
// that people look at.
const mostFlights = 64

// liveFlight is a contact flown when it is first asked for.
type liveFlight struct {
	once sync.Once
	best *modeOnPass // nil: there is no budget, err may say why
	err  error

	used int // when, by the count of liveFlights
}

// liveFlights keeps the contacts that were asked for last, so that a long window does
// not fill the memory.
type liveFlights struct {
	mutex sync.Mutex
	kept  map[int]*liveFlight // by contact
	count int
}

// of returns the flight of a contact, a new one where it is not kept. Who still uses one
// that is dropped may do so.
func (l *liveFlights) of(i int) *liveFlight {
	l.mutex.Lock()
	defer l.mutex.Unlock()
	l.count++
	if f := l.kept[i]; f != nil {
		f.used = l.count
		return f
	}
	if l.kept == nil {
		l.kept = map[int]*liveFlight{}
	}
	for len(l.kept) >= mostFlights {
		oldest := -1
		for k, f := range l.kept {
			if oldest < 0 || f.used < l.kept[oldest].used {
				oldest = k
			}
		}
		delete(l.kept, oldest)
	}
	f := &liveFlight{used: l.count}
	l.kept[i] = f
	return f
}
