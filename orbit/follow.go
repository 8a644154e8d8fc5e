package orbit

import (
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/orbit/unit"
)

// Follow makes e the ephemeris of a trajectory over [from, to], shifted in time, and
// uses its memory again; see Rebuild. Reference is then the first instant with a state.
// Outside the usable spans there is no state: see Spans and Gaps.
//
// Between knots it runs within MaxPositionError of the interpolation that the segments
// state, except where that bends at its own states: see Bend.
//
// It fails as Trajectory.Validate and EarthOrientation.Validate do, with a
// *unit.RangeError for a span that is reversed, and with a *SpanError where no state lies in it.
func (e *Ephemeris) Follow(tr *Trajectory, shift Shift, from, to time.Time, earth EarthOrientation) error {
	*e = Ephemeris{knots: e.knots[:0], later: e.later[:0], spans: e.spans[:0], sun: SunTrack{knots: e.sun.knots}}
	turner, err := NewTurner(earth)
	if err != nil {
		return err
	}
	if err := tr.Validate(); err != nil {
		return err
	}
	if err := checkOrder(from, to); err != nil {
		return err
	}
	moved := shift.Late + shift.Slip
	f := follower{e: e, turner: turner, shift: shift}
	for i := range tr.Segments {
		s := &tr.Segments[i]
		start, end := later(s.From.Add(moved), from), earlier(s.To.Add(moved), to)
		if start.Before(end) || start.Equal(end) && from.Equal(to) {
			f.parts = append(f.parts, part{curve: newCurve(s), start: start, end: end})
		}
	}
	spans := tr.Spans()
	for i := range spans {
		spans[i].From, spans[i].To = spans[i].From.Add(moved), spans[i].To.Add(moved)
	}
	if len(f.parts) == 0 {
		return &SpanError{Object: tr.Name, Time: from, Until: to, From: spans[0].From, To: spans[len(spans)-1].To, Spans: spans}
	}
	e.reference = f.parts[0].start.UTC()
	e.gaps = gapsBetween(spans, from, to)
	f.build()
	for _, s := range spans {
		if a, b := later(s.From, from), earlier(s.To, to); !b.Before(a) {
			e.spans = append(e.spans, Span{e.Seconds(a), e.Seconds(b)})
		}
	}
	e.sun.prepare(e.reference, f.parts[len(f.parts)-1].end, newRotation(e.reference, earth))
	return nil
}

// Bend returns how far positions are at most from the interpolation that a trajectory
// states, as far as was looked: halfway between knots. It is 0 for element sets, and over
// MaxPositionError where a trajectory's polynomials do not join smoothly.
func (e *Ephemeris) Bend() unit.Length { return e.bend }

func later(a, b time.Time) time.Time {
	if a.After(b) {
		return a
	}
	return b
}

func earlier(a, b time.Time) time.Time {
	if a.Before(b) {
		return a
	}
	return b
}

// Gaps returns the parts of [from, to] that lie outside the usable spans, shifted.
func (t *Trajectory) Gaps(shift Shift, from, to time.Time) []Gap {
	spans := t.Spans()
	for i := range spans {
		spans[i].From, spans[i].To = spans[i].From.Add(shift.Late+shift.Slip), spans[i].To.Add(shift.Late+shift.Slip)
	}
	return gapsBetween(spans, from, to)
}

// gapsBetween returns what the spans leave of [from, to].
func gapsBetween(spans []TimeSpan, from, to time.Time) []Gap {
	var gaps []Gap
	add := func(a, b time.Time, reason string) {
		if a, b = later(a, from), earlier(b, to); a.Before(b) {
			gaps = append(gaps, Gap{From: a.UTC(), To: b.UTC(), Reason: reason})
		}
	}
	add(from, spans[0].From, "the ephemeris begins only then")
	for i := range spans[1:] {
		add(spans[i].To, spans[i+1].From, "there is a gap in the ephemeris")
	}
	add(spans[len(spans)-1].To, to, "the ephemeris has ended")
	return gaps
}

// part is the part of a segment that is followed.
type part struct {
	curve      *curve
	start, end time.Time
}

// follower fills the knots from a trajectory.
type follower struct {
	e      *Ephemeris
	turner *Turner
	shift  Shift
	parts  []part
}

const (
	// leastFollowStep bounds the knots from above: 120 bytes a second at most.
	leastFollowStep = 1.0
	// mostFollowKnots bounds the memory of one ephemeris to half a gigabyte.
	mostFollowKnots = 4_000_000
)

// build fills the knots, halving the step as long as that brings them nearer to the
// curves.
func (f *follower) build() {
	step := f.firstStep()
	total := 0.0
	for _, p := range f.parts {
		total += p.end.Sub(p.start).Seconds()
	}
	for {
		f.fill(step)
		f.e.bend = f.worst()
		if f.e.bend <= closeEnough || step/2 < leastFollowStep || total/(step/2) > mostFollowKnots {
			return
		}
		step /= 2
	}
}

// firstStep is the step that suits the orbit, and no curve reaches less far than the
// knots beyond its ends do.
func (f *follower) firstStep() float64 {
	step := 3600.0
	for i := range f.parts {
		p := &f.parts[i]
		s := p.curve.seg
		step = math.Min(step, s.meanSpacing()*float64(p.curve.points-1)/reach)
		pos, vel := f.turner.Between(s.Frame, TEME, s.States[0].Position, s.States[0].Velocity, s.States[0].Time)
		if el, err := osculatingElements(phase{pos, vel}); err == nil {
			step = math.Min(step, knotStep(&el, el.Eccentricity))
		}
	}
	return math.Max(leastFollowStep, step)
}

func (f *follower) fill(step float64) {
	e := f.e
	e.step, e.rate = step, 1/step
	e.later, e.knots = e.later[:0], e.knots[:0]
	for i := range f.parts {
		p := &f.parts[i]
		r := run{from: e.Seconds(p.start), end: e.Seconds(p.end), base: len(e.knots)}
		r.last = max(0, int(math.Ceil((r.end-r.from)/step))-1)
		count := r.last + 2 + 2*reach
		e.knots = slices.Grow(e.knots, count)[:r.base+count]
		for k := range count {
			st := f.state(p, r.from+float64(k-reach)*step)
			e.knots[r.base+k].p, e.knots[r.base+k].v = st.Position, st.Velocity
		}
		for k := reach; k <= r.last+1+reach; k++ {
			differentiate(e.knots[r.base:], k)
		}
		if i == 0 {
			e.end, e.first = r.end, r.from
		} else {
			e.later = append(e.later, r)
		}
		e.last = r.base + r.last // of all runs: see elsewhere
	}
}

// state returns the Earth-fixed state of a part's curve at s seconds after the
// reference.
func (f *follower) state(p *part, s float64) State {
	seg := p.curve.seg
	// Of the file: late on the orbit, and the whole of it slipped.
	slipped := f.e.Time(s).Add(-f.shift.Slip)
	told := slipped.Add(-f.shift.Late)
	pos, vel := p.curve.at(s + f.e.reference.Sub(seg.States[0].Time).Seconds() - (f.shift.Late + f.shift.Slip).Seconds())
	if f.shift.Late == 0 {
		return f.turner.ToEarthFixed(seg.Frame, pos, vel, told)
	}
	pos, vel = f.turner.Between(seg.Frame, TEME, pos, vel, told)
	return f.turner.ToEarthFixed(TEME, pos, vel, slipped)
}

// worst returns the greatest distance from the curves in the middle between knots.
func (f *follower) worst() unit.Length {
	e, worst := f.e, 0.0
	look := func(p *part, r *run) {
		for i := range r.last + 1 {
			s := r.from + (float64(i)+0.5)*e.step
			if s > r.end {
				break
			}
			k := r.base + i + reach
			d := between(&e.knots[k], &e.knots[k+1], 0.5).Sub(f.state(p, s).Position).Norm()
			worst = math.Max(worst, d)
		}
	}
	look(&f.parts[0], &run{end: e.end, last: max(0, int(math.Ceil(e.end/e.step))-1)})
	for i := range e.later {
		look(&f.parts[i+1], &e.later[i])
	}
	return unit.Length(worst)
}

// BendNote returns a sentence where the ephemeris does not keep to the interpolation
// that its trajectory states, else nothing.
func (e *Ephemeris) BendNote() string {
	if e.bend <= MaxPositionError {
		return ""
	}
	return fmt.Sprintf("the interpolation that the ephemeris states bends at its own states; positions are within %.3g m of it", e.bend.Metres())
}
