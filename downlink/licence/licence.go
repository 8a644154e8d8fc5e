package licence

import (
	"fmt"
	"slices"
	"strings"
	"time"

	"slantwise/orbit/unit"
)

// Licence is what one licence allows. What is left out is not limited.
type Licence struct {
	Name        string
	Spacecraft  string   // that it is for; empty: all
	Transmitter string   // that it is for; empty: all
	Stations    []string // that may be used; empty: all

	LeastToRadiate *unit.Angle // elevation; nil: any
	LeastToReceive *unit.Angle
	Sectors        []Sector
	Hours          []Hours // when it may be used; empty: always

	HighestEIRP *unit.Level
	Widest      unit.Frequency // occupied bandwidth; 0: any
	Low, High   unit.Frequency // between which all of it must lie; 0: any
}

// Sector is a part of the sky that is blocked.
type Sector struct {
	From, To unit.Angle // azimuth, clockwise from From to To, [0°, 360°]
	Below    unit.Angle // elevation under which it is blocked; 90°: all of it
}

// Hours is a time of day, UTC, from From up to To; where To is not after From it goes
// through midnight to To on the next day.
type Hours struct {
	From, To time.Duration  // since midnight, [0, 24 h]
	Days     []time.Weekday // on which From lies; empty: every day
}

// String returns the sector as a message has it.
func (s Sector) String() string {
	t := fmt.Sprintf("blocked sector %g to %g deg", round(s.From.Degrees()), round(s.To.Degrees()))
	if s.Below < 90*unit.Degree {
		t += fmt.Sprintf(" below %g deg", round(s.Below.Degrees()))
	}
	return t
}

// String returns the hours as a message has them.
func (h Hours) String() string {
	t := clock(h.From) + " to " + clock(h.To) + " UTC"
	for i, d := range h.Days {
		if i == 0 {
			t += " on "
		} else {
			t += ", "
		}
		t += d.String()
	}
	return t
}

func clock(d time.Duration) string {
	d = d.Round(time.Second)
	return fmt.Sprintf("%02d:%02d:%02d", int(d.Hours()), int(d.Minutes())%60, int(d.Seconds())%60)
}

// For tells whether the licence is about a transmitter of a spacecraft.
func (l *Licence) For(spacecraft, transmitter string) bool {
	return (l.Spacecraft == "" || l.Spacecraft == spacecraft) && (l.Transmitter == "" || l.Transmitter == transmitter)
}

// Emission is what a transmitter sends.
type Emission struct {
	EIRP   *unit.Level    // the greatest in any direction; nil: not known
	Centre unit.Frequency // of the carrier
	Width  unit.Frequency // occupied bandwidth; 0: not known
}

// Breach is a rule that a transmitter does not keep, or that cannot be checked.
type Breach struct {
	Licence string
	Rule    string  // "EIRP at most 3 dBW"
	Found   string  // "4.2 dBW"
	Over    unit.DB // of the EIRP, how far above; 0 for other rules
	Unknown bool    // what the rule is about is not known: neither kept nor broken
}

// String returns a sentence.
func (b Breach) String() string {
	if b.Unknown {
		return fmt.Sprintf("licence %q: %s cannot be checked, since %s", b.Licence, b.Rule, b.Found)
	}
	return fmt.Sprintf("licence %q: %s is not kept: %s", b.Licence, b.Rule, b.Found)
}

// Breaches tells what of a transmitter's emission the licence does not allow.
func (l *Licence) Breaches(e Emission) []Breach {
	var out []Breach
	add := func(rule, found string, over unit.DB, unknown bool) {
		out = append(out, Breach{l.Name, rule, found, over, unknown})
	}
	if l.HighestEIRP != nil {
		rule := fmt.Sprintf("EIRP at most %g dBW", round(l.HighestEIRP.DBW()))
		switch {
		case e.EIRP == nil:
			add(rule, "the greatest EIRP is not known", 0, true)
		case e.EIRP.Over(*l.HighestEIRP) > 1e-9: // the way to dB and back leaves digits behind
			add(rule, fmt.Sprintf("%.2f dBW", e.EIRP.DBW()), e.EIRP.Over(*l.HighestEIRP), false)
		}
	}
	wide := fmt.Sprintf("%.6g MHz", e.Width.Megahertz())
	if l.Widest > 0 {
		rule := fmt.Sprintf("occupied bandwidth at most %g MHz", l.Widest.Megahertz())
		switch {
		case e.Width == 0:
			add(rule, "the occupied bandwidth is not known", 0, true)
		case e.Width > l.Widest:
			add(rule, wide, 0, false)
		}
	}
	if l.High > 0 {
		rule := fmt.Sprintf("emission within %g to %g MHz", l.Low.Megahertz(), l.High.Megahertz())
		low, high := e.Centre-e.Width/2, e.Centre+e.Width/2
		switch {
		case low < l.Low || high > l.High:
			add(rule, fmt.Sprintf("%.6f to %.6f MHz", low.Megahertz(), high.Megahertz()), 0, false)
		case e.Width == 0:
			add(rule, "the occupied bandwidth is not known", 0, true)
		}
	}
	return out
}

// allows tells whether the station may be used; rule says why not.
func (l *Licence) allows(station string) (rule string, ok bool) {
	if len(l.Stations) == 0 || slices.Contains(l.Stations, station) {
		return "", true
	}
	return "stations allowed: " + strings.Join(l.Stations, ", "), false
}
