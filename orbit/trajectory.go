package orbit

import (
	"fmt"
	"math"
	"slices"
	"time"
)

// Trajectory is an orbit that is known by states at instants, as a CCSDS OEM gives it.
type Trajectory struct {
	Name       string // of the object
	ID         string // its designator, may be empty
	Segments   []TrajectorySegment
	Covariance []CovarianceAt // by time; may be empty
	Source     Source
}

// TrajectorySegment is a row of states that one interpolation runs through.
type TrajectorySegment struct {
	Frame         Frame
	States        []TimedState // by rising time, Interpolation.Points() or more
	From, To      time.Time    // the usable span, within the states
	Interpolation Interpolation
}

// TimedState is a state in a segment's frame: m and m/s.
type TimedState struct {
	Time               time.Time
	Position, Velocity Vec3
}

// InterpolationKind is how states between those given come about.
type InterpolationKind int

// The kinds, as CCSDS 502.0-B names them.
const (
	Hermite  InterpolationKind = iota // a polynomial through positions and velocities
	Lagrange                          // polynomials through positions, and through velocities
	Linear                            // straight lines, in position and in velocity
)

// String returns the kind's name in the standard.
func (k InterpolationKind) String() string {
	return [...]string{"HERMITE", "LAGRANGE", "LINEAR"}[k]
}

// Interpolation is a kind with the degree of its polynomial.
type Interpolation struct {
	Kind   InterpolationKind
	Degree int // 1 to MostDegree; of Linear 1
}

// MostDegree is the highest degree that is followed.
const MostDegree = 27

// Points returns how many states the polynomial takes.
func (i Interpolation) Points() int {
	switch i.Kind {
	case Hermite:
		return max(2, (i.Degree+2)/2)
	case Linear:
		return 2
	}
	return i.Degree + 1
}

// String returns "HERMITE of degree 7".
func (i Interpolation) String() string { return fmt.Sprintf("%v of degree %d", i.Kind, i.Degree) }

// Spans returns the usable spans by time; those that touch are one.
func (t *Trajectory) Spans() []TimeSpan {
	out := make([]TimeSpan, 0, len(t.Segments))
	for i := range t.Segments {
		out = append(out, TimeSpan{t.Segments[i].From, t.Segments[i].To})
	}
	slices.SortStableFunc(out, func(a, b TimeSpan) int { return a.From.Compare(b.From) })
	n := 0
	for _, s := range out {
		if n > 0 && !s.From.After(out[n-1].To) {
			if s.To.After(out[n-1].To) {
				out[n-1].To = s.To
			}
			continue
		}
		out[n] = s
		n++
	}
	return out[:n]
}

// Shift moves an orbit in time.
type Shift struct {
	// Late is how much later the spacecraft comes by on its own orbit, which stands
	// still in space: the Earth turns below it meanwhile.
	Late time.Duration
	// Slip moves the orbit in time and turns it with the Earth: the track over the
	// ground is the same, later. It is for a launch that is late.
	Slip time.Duration
}

// Of returns the elements moved in time. The slip turns the node by what the Earth
// turns; that the Moon and the Sun stand elsewhere by then is left out, at most a day of
// their motion.
func (s Shift) Of(el Elements, earth EarthOrientation) Elements {
	if s.Slip != 0 {
		turned := GMST(el.Epoch.Add(s.Slip), earth) - GMST(el.Epoch, earth)
		el.RAAN = (el.RAAN + turned).Wrapped()
	}
	el.Epoch = el.Epoch.Add(s.Late + s.Slip)
	return el
}

// StateAt returns the state in TEME at an instant of a usable span, in m and m/s.
// It fails with a *SpanError elsewhere.
func (t *Trajectory) StateAt(at time.Time, earth EarthOrientation) (position, velocity Vec3, err error) {
	k, err := NewTurner(earth)
	if err != nil {
		return Vec3{}, Vec3{}, err
	}
	for i := range t.Segments {
		if s := &t.Segments[i]; !at.Before(s.From) && !at.After(s.To) {
			c := newCurve(s)
			p, v := c.at(at.Sub(s.States[0].Time).Seconds())
			p, v = k.Between(s.Frame, TEME, p, v, at)
			return p, v, nil
		}
	}
	spans := t.Spans()
	e := &SpanError{Time: at, Object: t.Name, Spans: spans}
	if len(spans) > 0 {
		e.From, e.To = spans[0].From, spans[len(spans)-1].To
	}
	return Vec3{}, Vec3{}, e
}

// Validate returns nil, or what makes a trajectory unusable: no segment, too few states,
// times that do not rise, values that are not finite, spans that overlap or lie beyond
// the states. Readers tell the same with its line.
func (t *Trajectory) Validate() error {
	if len(t.Segments) == 0 {
		return fmt.Errorf("trajectory: it has no segment")
	}
	for i := range t.Segments {
		if err := t.Segments[i].validate(); err != nil {
			return fmt.Errorf("trajectory: segment %d: %w", i+1, err)
		}
		if i > 0 && t.Segments[i].From.Before(t.Segments[i-1].To) {
			return fmt.Errorf("trajectory: segment %d: it begins at %s, before segment %d ends at %s", i+1,
				t.Segments[i].From.UTC().Format(timeLayout), i, t.Segments[i-1].To.UTC().Format(timeLayout))
		}
	}
	return nil
}

func (s *TrajectorySegment) validate() error {
	if d := s.Interpolation.Degree; d < 1 || d > MostDegree {
		return fmt.Errorf("a degree of %d is not allowed; it must be 1 to %d", d, MostDegree)
	}
	if n := s.Interpolation.Points(); len(s.States) < n {
		return fmt.Errorf("%d states are too few for %v, which takes %d", len(s.States), s.Interpolation, n)
	}
	for i := range s.States {
		if !finite(s.States[i].Position) || !finite(s.States[i].Velocity) {
			return fmt.Errorf("state %d is not finite", i+1)
		}
		if i > 0 && !s.States[i].Time.After(s.States[i-1].Time) {
			return fmt.Errorf("state %d does not come after the one before it", i+1)
		}
	}
	if s.From.Before(s.States[0].Time) || s.To.After(s.States[len(s.States)-1].Time) || !s.To.After(s.From) {
		return fmt.Errorf("its usable span is not within its states")
	}
	return nil
}

// meanSpacing returns the mean time between states in s.
func (s *TrajectorySegment) meanSpacing() float64 {
	return s.States[len(s.States)-1].Time.Sub(s.States[0].Time).Seconds() / math.Max(1, float64(len(s.States)-1))
}
