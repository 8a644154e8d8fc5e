package mount

import (
	"math"
	"time"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// Options say what a pass is planned for.
type Options struct {
	// From is where the mount rests before, and Lead how many seconds before the course
	// begins it is free to move. nil: it has all the time that it needs.
	From *station.AxisAngles
	Lead float64
	// Worth is what following is worth at an instant of the course, as the data rate
	// there, 0 or greater; nil: every second the same.
	Worth func(seconds float64) float64
	// Tolerance is the error on the sky up to which the pass counts as followed; 0: none.
	Tolerance unit.Angle
	// Fine is the step in seconds of the search near the limits of the mount, between whose
	// samples only the ends of slews are sought; 0: a tenth of a second.
	Fine float64
}

// Span is a time of a course, in seconds after its beginning.
type Span struct{ From, To float64 }

// Seconds returns the length of the span.
func (s Span) Seconds() float64 { return s.To - s.From }

// Plan is how a mount takes a pass.
type Plan struct {
	// Reached is false where the mount never gets on track; Start and End are then where
	// it stands.
	Reached    bool
	Start, End station.AxisAngles // as it gets on track, and as it leaves it for good
	StartsOver bool               // it begins over the top, the upper axis past 90°
	Slews      []Slew             // between, in which it leaves the track on purpose
	Chases     bool               // it turns after the target all the while, with no slew planned
	OnTrack    Span               // from the first to the last instant on track
	Lost       []Span             // in which the error on the sky is greater than the tolerance, in order
	Largest    unit.Angle         // the largest error on the sky while on track or slewing

	GreatestLower, GreatestUpper unit.AngularRate // commanded, without sign

	drive  *Drive
	course *Course
	pieces []piece
	search *search
	first  int // the way that it begins in
}

// Slew is a move in which the mount leaves the track to take it up again.
type Slew struct {
	Span
	TurnOver bool // it comes out another turn of the cable on, or over the top
}

// LostSeconds returns how long the pass is not followed.
func (p *Plan) LostSeconds() float64 {
	sum := 0.0
	for _, s := range p.Lost {
		sum += s.Seconds()
	}
	return sum
}

// ErrorRun is the error on the sky over a part of a plan in which the mount is not on track
// by following, at rising instants.
type ErrorRun struct {
	Seconds []float64
	Error   []unit.Angle
}

// Errors returns the error wherever the mount does not follow exactly, every tenth of a second, in order. A
// plan for no tolerance so serves every other: it follows at least as much exactly, and
// loses a little more than one that is planned for the tolerance.
func (p *Plan) Errors() []ErrorRun {
	var out []ErrorRun
	for i := range p.pieces {
		part := &p.pieces[i]
		if part.follows() {
			continue
		}
		n := min(max(1, int(math.Ceil(part.Seconds()/fineStep))), 4*mostSamples)
		var run ErrorRun
		for k := 0; k <= n; k++ {
			t := part.From + part.Seconds()*float64(k)/float64(n)
			if k == n {
				t = math.Nextafter(part.To, part.From) // this piece's own end
			}
			run.Seconds, run.Error = append(run.Seconds, t), append(run.Error, p.ErrorAt(t))
		}
		out = append(out, run)
	}
	return out
}

// Over returns the spans in which an error is greater than a tolerance, straight between its
// instants.
func Over(runs []ErrorRun, tolerance unit.Angle) []Span {
	var out []Span
	tolerance = max(tolerance, exact)
	for r := range runs {
		t, e := runs[r].Seconds, runs[r].Error
		for i := 1; i < len(t); i++ {
			a, b := float64(e[i-1]-tolerance), float64(e[i]-tolerance)
			from, to := t[i-1], t[i]
			switch {
			case a <= 0 && b <= 0:
				continue
			case a <= 0:
				from += (to - from) * -a / (b - a)
			case b <= 0:
				to -= (to - from) * -b / (a - b)
			}
			out = append(out, Span{from, to})
		}
	}
	return joined(out)
}

// OffTrackSeconds returns how long the mount is not exactly on track, within the
// tolerance or not. It never grows with the rates and accelerations of the axes.
func (p *Plan) OffTrackSeconds() float64 {
	if p.Chases {
		sum := 0.0
		for _, s := range p.lost(exact) {
			sum += s.Seconds()
		}
		return sum
	}
	off := p.course.length - p.OnTrack.Seconds()
	for _, s := range p.Slews {
		off += s.Seconds()
	}
	return off
}

// Followed returns the times that are followed, the rest of Lost.
func (p *Plan) Followed() []Span {
	out, from := []Span{}, 0.0
	for _, l := range p.Lost {
		if l.From > from {
			out = append(out, Span{from, l.From})
		}
		from = l.To
	}
	if from < p.course.length {
		out = append(out, Span{from, p.course.length})
	}
	return out
}

// Plan returns the way to take a pass that follows most of it: in which turn of the cable
// to begin, where to slew ahead through the keyhole, and where a turn-over costs least. Of ways that
// follow alike it takes the one whose beginning is reached soonest from where the mount
// rests.
func (d *Drive) Plan(c *Course, o Options) *Plan {
	return d.planFrom(d.prepare(c, o), c, o, -1).orChased(o.Tolerance)
}

// Choices returns the best plan for each way in which the pass can be begun, in the order
// of the lower angle; empty where it cannot. A chain of passes picks one of each, with
// SlewTime from the End of one to the Start of the next between them.
func (d *Drive) Choices(c *Course, o Options) []*Plan {
	s := d.prepare(c, o)
	var out []*Plan
	for w := range s.ways {
		if p := d.planFrom(s, c, o, w).orChased(o.Tolerance); p.Reached {
			out = append(out, p)
		}
	}
	return out
}

// Ready returns how long before the course begins the mount must leave a position where
// it rests, to be on track when the plan first is.
func (p *Plan) Ready(from station.AxisAngles) time.Duration {
	if !p.Reached {
		return 0
	}
	lower, upper := p.motions(p.OnTrack.From)
	need := max(quickest(p.drive.mount.Lower, motion{at: from.Lower.Radians()}, lower),
		quickest(p.drive.mount.Upper, motion{at: from.Upper.Radians()}, upper))
	return max(0, seconds(need+p.drive.mount.Settle-p.OnTrack.From))
}

// Mount returns the mount that is planned for.
func (p *Plan) Mount() station.Mount { return p.drive.mount }
