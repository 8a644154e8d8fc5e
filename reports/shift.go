package reports

import (
	"time"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// Shift is what the people at a station need for the contacts of some hours: a sheet to work
// by and to write on. A number that does not exist is NaN.
type Shift struct {
	Title    string // the scenario
	Version  string // of the program
	Station  string
	From, To time.Time
	Zone     *time.Location // of the local times; nil: UTC alone
	Plan     string         // the file of the contact plan; empty: every pass worth taking

	Contacts []ShiftContact // by start
	Left     []string       // what else there is in these hours and why it is not here
	None     string         // what stands in place of contacts where there are none
	Notes    []Note
	Pages    int // how many pages of paper may be filled, 1 or more

	RainPercent      float64 // of an average year, of the causes ShiftRain and ShiftIonosphere
	RadiationCaution string
	Basis            Basis
}

// ShiftContact is one contact.
type ShiftContact struct {
	Name                string // in the plan; empty: none
	Spacecraft, Antenna string
	Start, End          time.Time
	AOS, LOS            time.Time
	Transmitter         string // the main one; empty: nothing is received
	Frequency           unit.Frequency
	Others              []ShiftCarrier // received beside it
	Bytes               float64
	Orbit               string // by which it was computed, with its age

	Events   [3]ShiftEvent // start, highest, end
	Minutes  []ShiftMinute
	Steps    []PlanStep // of the rate plan, within the contact
	Uplinks  []ShiftUplink
	Search   ShiftSearch
	Causes   []ShiftCause        // of a low signal: those that come by themselves, then what is set wrong, each the greatest first
	Lost     []downlink.Interval // the mount does not follow
	Cautions []string            // of this contact alone
}

// ShiftCarrier is a carrier at the three events.
type ShiftCarrier struct {
	Name string
	Hz   [3]float64
}

// ShiftEvent is an instant of a contact. Elevations are geometric.
type ShiftEvent struct {
	Name                                                   string // "AOS", "start", "culmination", "highest", ...
	Time                                                   time.Time
	AzimuthDeg, ElevationDeg, RangeKm, ReceivedHz, ShiftHz float64
}

// ShiftMinute is what is expected at an instant: at each whole minute of UTC, and at both ends.
type ShiftMinute struct {
	Time                                                     time.Time
	AzimuthDeg, ElevationDeg, ReceivedDBm, CN0DBHz, MarginDB float64
	Mode                                                     string // of the rate plan; empty: none
}

// ShiftUplink is an uplink that the station can send in a contact.
type ShiftUplink struct {
	ShiftCarrier // what to send, so that the spacecraft receives its own frequency
	Frequency    unit.Frequency
	Works        []downlink.Interval
	EIRPDBW      float64
}

// ShiftSearch tells how to look for a spacecraft that is late or early. Times along the track are
// one standard deviation; late is positive.
type ShiftSearch struct {
	Unknown string // why nothing is known; empty: the rest holds
	Basis   string
	Assumed bool // the scenario states nothing, and the default rule by age is taken

	AOSSeconds, LOSSeconds float64 // plus-minus of the pass's ends, NaN where the window cuts
	Existence              float64 // probability that the pass takes place
	MayVanish              bool

	TrackSeconds    float64    // how late or early the spacecraft is, plus-minus
	AlongDeg        [3]float64 // how far that is along the track, by event
	TotalDeg        [3]float64 // over both axes
	BeamDeg         float64    // half-power width; NaN: not known
	MostSeconds     float64    // three standard deviations: beyond it there is no use in looking
	StepSeconds     float64    // half a beam where the spacecraft moves fastest
	Steps           int        // of StepSeconds to each side that cover MostSeconds; 0: the beam holds it
	LateHzPerS      float64    // how much higher it is received for each second that it is late, at most
	Until           time.Time  // after it less is left than the shortest contact
	ShortestSeconds float64
}

// ShiftCauseKind is a reason for a low signal.
type ShiftCauseKind int

// Causes. Those before ShiftWrongMode come by themselves.
const (
	ShiftRain ShiftCauseKind = iota
	ShiftPointing
	ShiftAttitude
	ShiftKeyhole
	ShiftIonosphere
	ShiftWrongMode
	ShiftPolarisation
)

// ShiftCause is how much a cause could take off what is expected, in dB.
type ShiftCause struct {
	Kind          ShiftCauseKind
	LowDB, HighDB float64 // at the lower end of the contact and at its highest point; +Inf: all of it
	Detail        string  // what is assumed, or which mode
}

// Name is what the sheet calls the cause.
func (k ShiftCauseKind) Name() string {
	return [...]string{"rain", "pointing", "attitude", "keyhole", "ionosphere", "wrong mode", "polarisation"}[k]
}
