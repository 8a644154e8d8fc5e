package reports

import "time"

// shiftView is what the sheet shows, on a screen and on paper with the same words.
type shiftView struct {
	pageView
	Station, When, Local, Source string
	Blocks                       []shiftBlock
	None                         string
	Left, Warnings               []string
	Signs                        string      // what the short forms mean
	Tell                         []shiftTell // of the causes that occur, and of what is in no budget
	Cautions                     []string
	Pages                        int    // of paper
	Beyond                       string // what found no room on it; empty: all did
	Footer                       string
}

// shiftTell says how to tell a cause.
type shiftTell struct{ Name, Text string }

// shiftBlock is a contact.
type shiftBlock struct {
	Number                    int
	ID, Begin, End, Local     string
	Spacecraft, Length, Facts string
	Heads                     []string // of the events
	Points                    []shiftRow
	Words                     []shiftTell
	Alarm                     []string // what must not be overlooked
	Signal                    []shiftRow
	SignalName                string
	Page                      int  // of paper, from 1; 0: it found no room
	Turn                      bool // the first of a page but the first
}

type shiftRow struct {
	Name  string
	Cells []string
}

const (
	mostSignalColumns = 20
	mostSheetWarnings = 4 // more would push contacts off the page
)

func newShiftView(s *Shift) *shiftView {
	v := &shiftView{Station: s.Station, None: s.None, Left: s.Left, Footer: "slantwise " + s.Version + ", scenario " + s.Title}
	v.Title = "Shift sheet, " + s.Station
	v.When = dayMinute(s.From) + " to " + dayMinute(s.To) + " UTC"
	if s.Zone != nil {
		v.Local = localMinute(s.From, s.Zone) + " to " + localMinute(s.To, s.Zone)
	} else {
		v.Local = "no local time: the station has no time zone"
	}
	v.Source = "all passes worth taking"
	if s.Plan != "" {
		v.Source = "contact plan " + s.Plan
	}
	for i := range s.Contacts {
		v.Blocks = append(v.Blocks, newShiftBlock(s, i))
	}
	for i, n := range s.Notes {
		if i == mostSheetWarnings {
			v.Warnings = append(v.Warnings, fixed(float64(len(s.Notes)-i), 0)+" more warnings: slantwise check lists them all.")
			break
		}
		v.Warnings = append(v.Warnings, "Warning: "+noteText(n))
	}
	basis := ""
	for i := range s.Contacts {
		if s.Contacts[i].Search.Assumed {
			basis = " (by the age of the elements, common practice and no measurement, where the scenario states nothing)"
		}
	}
	v.Signs = "Elevations are geometric. ± is one standard deviation" + basis + ", and the search goes to three. A time offset of + takes the spacecraft as late: the antenna runs behind on its track, toward the azimuth of AOS. Low: dB that a cause could take, at the lower end/at the highest point. Models and defaults: slantwise check."
	v.addTell(s)
	v.Cautions = shiftCautions(s)
	v.layOut(s.Pages)
	return v
}

// dayMinute writes an instant to the minute.
func dayMinute(t time.Time) string { return t.UTC().Format("2006-01-02 15:04") }

func localMinute(t time.Time, zone *time.Location) string {
	return t.In(zone).Format("2006-01-02 15:04 MST")
}

// shiftTells says how to tell causes apart, by their kind.
var shiftTells = map[ShiftCauseKind]string{
	ShiftRain:         "grows toward the horizon, and the noise with it. Wait for height, or take a slower mode.",
	ShiftPointing:     "grows toward the zenith, where the beam turns fastest. Try time offsets, then offsets of the axes.",
	ShiftAttitude:     "comes and goes within seconds or minutes at any height. Take the slowest mode, and report it.",
	ShiftIonosphere:   "fades within seconds, of every spacecraft below 1 GHz. Wait, and note when.",
	ShiftKeyhole:      "all of it, at the times that are named. It comes back by itself.",
	ShiftWrongMode:    "level as expected, no lock. Set the receiver to the mode that is named.",
	ShiftPolarisation: "the same from AOS to LOS. Look at the setting of the feed.",
}

func (v *shiftView) addTell(s *Shift) {
	for kind := ShiftRain; kind <= ShiftPolarisation; kind++ {
		for i := range s.Contacts {
			if hasCause(&s.Contacts[i], kind) {
				name := kind.Name()
				if kind == ShiftRain || kind == ShiftIonosphere {
					name += " (" + trimmed(s.RainPercent) + " % of the year)"
				}
				v.Tell = append(v.Tell, shiftTell{name, shiftTells[kind]})
				break
			}
		}
	}
	if len(s.Contacts) > 0 {
		v.Tell = append(v.Tell,
			shiftTell{"obstacle", "all at once, below one height at one azimuth. Note both: the mask lacks it."},
			shiftTell{"noise", "level as expected, C/N0 low. Interference, the Sun or the amplifier, not the spacecraft."})
	}
}

func hasCause(c *ShiftContact, kind ShiftCauseKind) bool {
	for _, k := range c.Causes {
		if k.Kind == kind {
			return true
		}
	}
	return false
}

// shiftCautions are those that fit: of radiation where the station can send.
func shiftCautions(s *Shift) []string {
	out := []string{paperCautions[1]}
	for i := range s.Contacts {
		if len(s.Contacts[i].Uplinks) > 0 {
			return append([]string{s.RadiationCaution}, out...)
		}
	}
	return out
}
