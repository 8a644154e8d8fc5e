package mount

import (
	"math"
	"time"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// Drive is a mount made ready. It is immutable and may be shared between goroutines.
type Drive struct {
	mount station.Mount
	frame frame
}

// New makes a mount ready. It fails with every fault of the mount.
func New(m *station.Mount) (*Drive, error) {
	if err := m.Validate(); err != nil {
		return nil, err
	}
	return &Drive{mount: *m, frame: newFrame(m)}, nil
}

// Mount returns what the drive was made of.
func (d *Drive) Mount() station.Mount { return d.mount }

// SlewTime returns how long the mount takes from rest at one position of its axes to
// rest at another: the longer of its axes, which turn together, and the settling time.
// The cable is in it: 350° and -10° look the same way and lie a turn apart. Positions
// outside the ranges are taken as they are.
func (d *Drive) SlewTime(from, to station.AxisAngles) time.Duration {
	if from == to {
		return 0
	}
	lower := quickest(d.mount.Lower, motion{at: from.Lower.Radians()}, motion{at: to.Lower.Radians()})
	upper := quickest(d.mount.Upper, motion{at: from.Upper.Radians()}, motion{at: to.Upper.Radians()})
	return seconds(max(lower, upper) + d.mount.Settle)
}

// Stow returns where the mount stands when it is not used: as the mount says, else
// looking up with the lower axis in the middle of its range.
func (d *Drive) Stow() station.AxisAngles {
	if d.mount.Stow != nil {
		return *d.mount.Stow
	}
	a := station.AxisAngles{Lower: (d.mount.Lower.Low + d.mount.Lower.High) / 2}
	if d.mount.Kind == station.ElevationOverAzimuth {
		a.Upper = min(90*unit.Degree, d.mount.Upper.High)
	}
	return a
}

// Looks returns where the mount looks with its axes at given angles.
func (d *Drive) Looks(a station.AxisAngles) station.Direction {
	return directionOf(d.frame.direction(a))
}

// Positions returns every position of the axes, within their ranges, in which the mount
// looks in a direction: each turn of the cable, and over the top where the upper axis
// goes past 90°; in the order of the lower angle, empty where it cannot look there.
func (d *Drive) Positions(at station.Direction) []station.AxisAngles {
	base := d.frame.angles(vector(at))
	var out []station.AxisAngles
	for _, w := range d.ways(float64(base.Lower), float64(base.Lower)) {
		p := w.of(float64(base.Lower), float64(base.Upper))
		if d.mount.Upper.Holds(unit.Angle(p.upper)) && d.mount.Lower.Holds(unit.Angle(p.lower)) {
			out = append(out, station.AxisAngles{Lower: unit.Angle(p.lower), Upper: unit.Angle(p.upper)})
		}
	}
	return out
}

// way is one of the ways in which the axes can stand for the same direction.
type way struct {
	over bool // over the top: the lower axis half a turn on, the upper one past 90°
	turn int  // whole turns of the lower axis
}

// place is a position of the axes, rad.
type place struct{ lower, upper float64 }

// of returns the position for a target's axis angles.
func (w way) of(lower, upper float64) place {
	lower += 2 * math.Pi * float64(w.turn)
	if w.over {
		return place{lower + math.Pi, math.Pi - upper}
	}
	return place{lower, upper}
}

// ways lists the ways whose lower angle touches the axis' range for targets whose own
// goes from least to most, in the order of that angle.
func (d *Drive) ways(least, most float64) []way {
	low, high := float64(d.mount.Lower.Low)-float64(slack), float64(d.mount.Lower.High)+float64(slack)
	var out []way
	first := int(math.Floor((low-most)/(2*math.Pi))) - 1
	last := int(math.Ceil((high-least)/(2*math.Pi))) + 1
	for k := first; k <= last; k++ {
		for _, w := range []way{{turn: k}, {turn: k, over: true}} {
			if w.over && float64(d.mount.Upper.High) <= math.Pi/2+float64(slack) {
				continue
			}
			if w.of(most, 0).lower >= low && w.of(least, 0).lower <= high {
				out = append(out, w)
			}
		}
	}
	return out
}

const slack = 1e-6 * unit.Degree

// seconds rounds up to the millisecond: what is ready then is ready.
func seconds(s float64) time.Duration {
	return time.Duration(math.Ceil(s*1000-1e-6)) * time.Millisecond
}
