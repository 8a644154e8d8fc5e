package reports

import (
	"math"
	"strings"
)

// words are what to do in a contact: modes, late or early, low.
func (c *ShiftContact) words() []shiftTell {
	var out []shiftTell
	if text := c.modesText(); text != "" {
		out = append(out, shiftTell{"Modes", text})
	}
	out = append(out, shiftTell{"Late or early", c.searchText()})
	if text := c.lowText(); text != "" {
		out = append(out, shiftTell{"Low", text})
	}
	return out
}

// modesText says which mode from when.
func (c *ShiftContact) modesText() string {
	if len(c.Steps) == 0 {
		return ""
	}
	var parts []string
	for _, s := range c.Steps {
		text := clock(s.From) + " " + s.Mode
		if s.InformationRate > 0 {
			text += " " + withUnit(s.InformationRate.BitsPerSecond(), rateScales)
		}
		parts = append(parts, text)
	}
	return strings.Join(parts, ", ") + ", to " + clock(c.Steps[len(c.Steps)-1].To) + "."
}

// searchText says how to look for the spacecraft.
func (c *ShiftContact) searchText() string {
	s := &c.Search
	var parts []string
	if s.Unknown != "" {
		parts = append(parts, "How late or early it may be is not known: "+s.Unknown+".")
	} else {
		if edges := edgesText(s.AOSSeconds, s.LOSSeconds); edges != "" {
			parts = append(parts, edges+".")
		}
		if s.MayVanish {
			parts = append(parts, "It grazes the horizon, and rises at all with "+fixed(100*s.Existence, 0)+" %.")
		}
		parts = append(parts, s.offsetText())
	}
	if s.LateHzPerS > 0 {
		parts = append(parts, "Heard high by up to "+withUnit(s.LateHzPerS, freqScales)+" a second late.")
	}
	if s.Until.After(c.Start) {
		parts = append(parts, "Give up at "+clock(s.Until)+".")
	}
	return strings.Join(parts, " ")
}

// offsetText says which time offsets to try.
func (s *ShiftSearch) offsetText() string {
	most := plusMinus(s.MostSeconds)
	along := fixed(greatestOf(s.AlongDeg[:])*3, 2) + "° along the track"
	switch {
	case !finite(s.BeamDeg) || !finite(s.StepSeconds):
		return "Up to " + most + ", " + along + "; how wide the beam is, is not known."
	case s.Steps == 0:
		return "Up to " + most + ", " + along + ", which the beam of " + fixed(s.BeamDeg, 2) + "° holds: no search, look at frequency and mode."
	}
	decimals := 1
	if s.StepSeconds < 0.2 {
		decimals = 2
	}
	one := fixed(s.StepSeconds, decimals)
	text := "Up to " + most + ", " + along + "; beam " + fixed(s.BeamDeg, 2) + "°. Offset the time by +" + one + ", −" + one
	if s.Steps > 1 {
		two := fixed(2*s.StepSeconds, decimals)
		text += ", +" + two + ", −" + two
	}
	if s.Steps > 2 {
		text += " … ±" + fixed(float64(s.Steps)*s.StepSeconds, decimals)
	}
	return text + " s; then it is not the orbit."
}

// lowText lists the causes of a low signal with what each could take.
func (c *ShiftContact) lowText() string {
	var come, set []string
	for _, k := range c.Causes {
		text := k.Kind.Name() + " " + dbPair(k.LowDB, k.HighDB)
		switch {
		case k.Kind == ShiftKeyhole:
			come = append(come, k.Kind.Name()+" ("+k.Detail+")")
		case k.Kind >= ShiftWrongMode:
			set = append(set, text+" ("+k.Detail+")")
		default:
			come = append(come, text)
		}
	}
	text := strings.Join(come, ", ")
	if len(set) > 0 {
		if text != "" {
			text += "; "
		}
		text += "set wrong: " + strings.Join(set, ", ")
	}
	if text != "" {
		text += "."
	}
	return text
}

// dbPair writes dB at the lower end and at the highest point; once where they are the same.
func dbPair(low, high float64) string {
	one := func(v float64) string {
		if math.IsInf(v, 1) {
			return "all"
		}
		return fixed(v, 1)
	}
	a, b := one(low), one(high)
	if a == b {
		return a
	}
	return a + "/" + b
}

// alarm is the line of an uplink.
func (u *ShiftUplink) alarm() string {
	text := "Uplink " + u.Name + ": "
	if len(u.Works) == 0 {
		text += "does not work in this contact"
	} else {
		var spans []string
		for _, w := range u.Works {
			spans = append(spans, clock(w.From)+" to "+clock(w.To))
		}
		text += "works " + strings.Join(spans, ", ")
	}
	if finite(u.EIRPDBW) {
		text += "; EIRP " + fixed(u.EIRPDBW, 1) + " dBW"
	}
	return text + ". While it is on: nobody in the beam or near the feed."
}
