package licence

import (
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Check returns every fault of the licence at once.
func (l *Licence) Check() error {
	var faults []error
	check := func(what string, v float64, u, allowed string, fine bool) {
		if !fine {
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("licence %q: %s", l.Name, what), Value: v, Unit: u, Allowed: allowed})
		}
	}
	elevation := func(what string, a *unit.Angle) {
		if a != nil {
			check(what, round(a.Degrees()), "deg", "-5 to 90 deg", *a >= -5*unit.Degree && *a <= 90*unit.Degree)
		}
	}
	elevation("least elevation to radiate", l.LeastToRadiate)
	elevation("least elevation to receive", l.LeastToReceive)
	for i, s := range l.Sectors {
		azimuth := func(what string, a unit.Angle) {
			check(fmt.Sprintf("blocked sector %d: %s", i+1, what), round(a.Degrees()), "deg", "0 to 360 deg", a >= 0 && a <= 360*unit.Degree)
		}
		azimuth("first azimuth", s.From)
		azimuth("last azimuth", s.To)
		check(fmt.Sprintf("blocked sector %d: elevation", i+1), round(s.Below.Degrees()), "deg", "greater than -5 and at most 90 deg", s.Below > -5*unit.Degree && s.Below <= 90*unit.Degree)
		if s.From == s.To {
			faults = append(faults, fmt.Errorf("licence %q: blocked sector %d: it begins and ends at %g deg; write 0 to 360 deg for all around", l.Name, i+1, round(s.From.Degrees())))
		}
	}
	for i, h := range l.Hours {
		hour := func(what string, d time.Duration) {
			check(fmt.Sprintf("hours %d: %s", i+1, what), d.Hours(), "h", "0 to 24 h", d >= 0 && d <= 24*time.Hour)
		}
		hour("begin", h.From)
		hour("end", h.To)
		if h.From == h.To {
			faults = append(faults, fmt.Errorf("licence %q: hours %d: they begin and end at %s; write 00:00 to 24:00 for the whole day", l.Name, i+1, clock(h.From)))
		}
	}
	if l.HighestEIRP != nil {
		check("highest EIRP", l.HighestEIRP.DBW(), "dBW", "-200 to 200 dBW", math.Abs(l.HighestEIRP.DBW()) <= 200)
	}
	check("widest bandwidth", l.Widest.Megahertz(), "MHz", "0 to 1e6 MHz", l.Widest >= 0 && l.Widest.Megahertz() <= 1e6)
	check("band", l.Low.Megahertz(), "MHz", "0 to 1e6 MHz", l.Low >= 0 && l.Low.Megahertz() <= 1e6)
	check("band", l.High.Megahertz(), "MHz", "greater than its lower edge and at most 1e6 MHz", l.High == 0 && l.Low == 0 || l.High > l.Low && l.High.Megahertz() <= 1e6)
	return errors.Join(faults...)
}

// round takes off what the way to radians and back has left behind.
func round(v float64) float64 { return math.Round(v*1e9) / 1e9 }
