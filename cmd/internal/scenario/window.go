package scenario

import (
	"time"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit"
	"slantwise/orbit/unit"
)

var (
	windowKeys = []string{"start_utc", "length_h", "end_utc"}
	earthKeys  = []string{"ut1_minus_utc_s", "polar_motion_arcsec"}
)

// maxWindowHours is ten years: far more than element sets hold.
const maxWindowHours = 87_672

func (r *reader) window(top object) Window {
	if !top.has("window") {
		if r.need == NeedOrbits {
			top.missing("window", "start_utc and length_h below it")
		}
		return Window{}
	}
	o := top.child("window", windowKeys)
	start, ok := o.instant("start_utc")
	if !o.has("start_utc") {
		o.missing("start_utc", "the start of the window as in 2026-03-10T00:00:00Z")
	}
	which, _ := o.exclusive("length_h", "end_utc")
	switch which {
	case "length_h":
		hours, okLength := o.number("length_h", above(0, maxWindowHours, "h"))
		if ok && okLength {
			return Window{Start: start, End: start.Add(time.Duration(hours * float64(time.Hour)))}
		}
	case "end_utc":
		end, okEnd := o.instant("end_utc")
		switch {
		case !ok || !okEnd:
		case !end.After(start):
			o.fault(o.get("end_utc"), "end_utc", "%s is not allowed; it must be after start_utc, %s", "swap the two if they are reversed", show(o.get("end_utc")), start.Format(time.RFC3339))
		case end.Sub(start).Hours() > maxWindowHours:
			o.fault(o.get("end_utc"), "end_utc", "the window is longer than %d h", "shorten it", maxWindowHours)
		default:
			return Window{Start: start, End: end}
		}
	default:
		o.missing("length_h", "the length of the window in hours")
	}
	return Window{}
}

// instant returns the instant of a key.
func (o object) instant(key string) (time.Time, bool) {
	s, ok := o.text(key)
	if !ok {
		return time.Time{}, false
	}
	t, err := ParseUTC(s)
	if err != nil {
		o.fault(o.get(key), key, "%s", "", err)
		return time.Time{}, false
	}
	return t, true
}

func (r *reader) earth(top object) orbit.EarthOrientation {
	o := top.child("earth", earthKeys)
	o.about = "earth"
	var e orbit.EarthOrientation
	if v, ok := o.number("ut1_minus_utc_s", span{low: -0.9, high: 0.9, unit: "s", next: "UTC is kept within 0.9 s of UT1"}); ok {
		e.UT1MinusUTC = time.Duration(v * float64(time.Second))
	} else if !o.has("ut1_minus_utc_s") {
		o.assume("ut1_minus_utc_s left out: UT1 is taken as UTC (at most 0.9 s of the Earth's rotation, 420 m at the equator)")
	}
	if !o.has("polar_motion_arcsec") {
		o.assume("polar_motion_arcsec left out: the pole is taken where the reference pole is (at most about 20 m)")
		return e
	}
	if xy, ok := o.two("polar_motion_arcsec", span{low: -1, high: 1, unit: "arcsec"}); ok {
		e.PolarMotionX, e.PolarMotionY = unit.Angle(xy[0])*unit.Arcsecond, unit.Angle(xy[1])*unit.Arcsecond
	}
	return e
}

// two reads a list of two numbers.
func (o object) two(key string, in span) (out [2]float64, ok bool) {
	n := o.get(key)
	if n == nil {
		return out, false
	}
	return o.twoAt(n, key, in)
}

func (o object) twoAt(n *tree.Node, name string, in span) (out [2]float64, ok bool) {
	if n.Kind != tree.List || len(n.Items) != 2 {
		o.fault(n, name, "%s is not allowed; it must be a list of two numbers", "", showRow(n))
		return out, false
	}
	a, okA := o.numberAt(n.Items[0], name+"[0]", in)
	b, okB := o.numberAt(n.Items[1], name+"[1]", in)
	return [2]float64{a, b}, okA && okB
}
