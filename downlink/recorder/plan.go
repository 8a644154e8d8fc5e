package recorder

import "time"

// Plan is what a recorder goes through.
type Plan struct {
	Start  time.Time
	Length float64 // seconds, greater than 0

	Capacity float64 // bytes, greater than 0
	WhenFull FullRule
	Classes  []Class // in the order in which they are sent

	Contacts     []Contact // in order, apart from one another
	Housekeeping float64   // share of every contact's rate that real-time housekeeping takes, [0, 1)

	Acknowledge   Acknowledge
	WithoutUplink WithoutUplink
	Copies        int // how often each byte is sent in a row where it is deleted when sent; 0: once

	Lines []Line // ground lines; a station without one passes its data on at once
}

// FullRule says what is lost when the recorder is full.
type FullRule int

// Rules for a full recorder. The last class of the order loses first by either.
const (
	LoseNew   FullRule = iota // what is made finds no room
	Overwrite                 // what is made takes the room of the oldest unsent data of the last class that has any
)

// String returns the rule as the scenario writes it.
func (r FullRule) String() string { return [...]string{"lose_new", "overwrite_oldest"}[r] }

// WithoutUplink says what becomes of data that are sent in a contact without uplink.
type WithoutUplink int

// Rules for contacts without uplink.
const (
	DeleteWhenSent WithoutUplink = iota // what fails is lost
	KeepForUplink                       // data stay until a later contact with an uplink acknowledges them
)

// String returns the rule as the scenario writes it.
func (r WithoutUplink) String() string { return [...]string{"delete_when_sent", "keep"}[r] }

// Acknowledge is how the ground acknowledges over an uplink: at the begin of a contact,
// then every Every seconds, and at its end, all that arrived at least Delay seconds
// before, in this contact or an earlier one.
type Acknowledge struct{ Every, Delay float64 }

// Class is data of one priority.
type Class struct {
	Name       string
	Made       []Made  // any order; where they overlap they add
	OnBoard    float64 // bytes on board at the start
	OnBoardAge float64 // seconds, of those bytes
}

// Made is data made at an even rate.
type Made struct {
	From, To       float64 // seconds after the start; what lies outside the plan is left out
	BytesPerSecond float64
}

// Contact is a time in which a station hears the spacecraft.
type Contact struct {
	Station  string
	From, To float64
	Uplink   bool   // the station can acknowledge
	Steps    []Step // in order, within the contact; between them nothing is sent
}

// Step is a stretch with one rate.
type Step struct {
	From, To       float64
	BytesPerSecond float64 // information, after all overheads
	Loss           float64 // share of it that does not get through, [0, 1]
}

// Line is the ground line of a station.
type Line struct {
	Station        string
	BytesPerSecond float64 // greater than 0
}

// ByTime returns data made at one rate over a plan's length.
func ByTime(length, bytesPerSecond float64) []Made { return []Made{{0, length, bytesPerSecond}} }

// ByOrbit returns data made in each orbit: bytes an orbit, evenly over a time that
// begins after each of the instants that start an orbit.
func ByOrbit(starts []float64, after, lasting, bytes float64) []Made {
	out := make([]Made, len(starts))
	for i, s := range starts {
		out[i] = Made{s + after, s + after + lasting, bytes / lasting}
	}
	return out
}
