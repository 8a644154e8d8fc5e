package contacts

import "time"

// Problem is all that a plan must respect and is worth. Indices point into its slices.
// Check it before it is solved.
type Problem struct {
	Start  time.Time // UTC
	Length Ms        // greater than 0; contacts lie in [0, Length]
	Now    Ms        // instant of planning, from which lead times count; before Start it is negative
	Step   Ms        // contacts begin and end on whole multiples of it; 0: 1 s
	Split  bool      // a request may get several contacts, and a pass too

	Spacecraft []Spacecraft
	Stations   []Station
	Antennas   []Antenna
	Requests   []Request
	Candidates []Candidate

	Held    []Contact // must be in the plan, exactly so: fixed by agreement or under way
	InForce []Contact // the plan in force, of which every change has a price; Held is part of it

	Limits  []Limit
	Shared  []Shared
	Clashes []Clash
	Weights Weights
}

// Resolution returns the step of begins and ends.
func (p *Problem) Resolution() Ms {
	if p.Step <= 0 {
		return Second
	}
	return p.Step
}

// Spacecraft is one of those that the plan serves.
type Spacecraft struct {
	Name     string
	Contract string // named by limits; may be empty
	AtOnce   int    // stations it can talk to at the same time; 0: 1

	Between  Ms       // least time from the end of a contact to the begin of the next
	Repoint  Ms       // the same where the station changes: the time in which it turns to the next one
	HandOver HandOver // for AtOnce of 2 and more
	SameData bool     // contacts at the same time carry the same data: counted once, from the one that brings most

	Command  *Command  // downlinks need their commands loaded first; nil: they do not
	Recorder *Recorder // nil: a contact finds on board what it can carry
	Share    float64   // value that it should have before others get more, as counted by Weights.Share
	Closed   []Span    // times without contacts: manoeuvres, safe mode
}

// HandOver says how two contacts of a spacecraft may overlap. Contacts that overlap must
// do so for at least Least and at most Greatest; those that do not keep Between and
// Repoint. Greatest 0: any overlap.
type HandOver struct{ Least, Greatest Ms }

// Command is the need of an earlier uplink: a downlink contact must begin at least Lead
// after the end and at most Valid after the end of a contact with an uplink. Loaded are
// ends of such contacts before the plan. Valid 0: for good.
type Command struct {
	Lead, Valid Ms
	Loaded      []Ms
}

// Recorder is the memory of a spacecraft. Data are made at even rates, sent in the order
// of the classes, each oldest first, and freed as they are sent. What finds no room is
// lost, the last class first.
type Recorder struct {
	Capacity float64 // bytes, greater than 0
	Classes  []Class
}

// Class is data of one priority.
type Class struct {
	Name    string
	OnBoard float64 // bytes at the start of the problem, taken as made then
	Made    []Made  // in order, apart from one another
	Weight  float64 // value a byte
	Due     Ms      // age up to which a byte is worth all its weight
	Fade    Ms      // time after Due in which the worth goes straight to nothing; 0: it never fades
}

// Made is data made at an even rate.
type Made struct {
	Span
	BytesPerSecond float64
}

// Station is a place with antennas.
type Station struct {
	Name    string
	Zone    *time.Location // of its local day; nil: UTC
	Lead    Ms             // least time from Now to the start of the set-up of a new contact
	Notice  Ms             // a contact in force that still stands and whose set-up starts sooner after Now cannot be dropped or changed
	Staffed []Span         // set-up to tear-down lie in one of them; nil: always
	Closed  []Span         // outages and reserved times
}

// Antenna serves one contact at a time, from set-up to tear-down.
type Antenna struct {
	Name       string
	Station    int
	Contract   string
	Slew       *Slew   // nil: the way to the next target is part of the set-up
	PerContact float64 // price of a contact, in money
	PerMinute  float64 // price of a minute of contact, in money
	Closed     []Span
}

// Slew is how an antenna gets from one target to the next: from the end of the
// tear-down it turns to where the next contact begins, both axes at once, then the
// set-up starts. The azimuth of the cable is kept from contact to contact.
type Slew struct {
	AzimuthDegPerS, ElevationDegPerS float64 // greater than 0
	FromDeg, ToDeg                   float64 // azimuths that the cable reaches, 0 true north, clockwise; at least 360 deg apart
}

// Request asks for contact time. It gets one contact, or several where Problem.Split.
type Request struct {
	Name    string
	Desired Ms // seconds beyond it are worth nothing
}

// Limit is so much and no more, over the contacts that it names, in each of its spans or
// in any time of a length. Lists that are empty name all; a contact counts where every
// list names it.
type Limit struct {
	Name       string
	Stations   []int
	Antennas   []int
	Spacecraft []int
	Contract   string // of the antenna or of the spacecraft; empty: any

	Spans   []Span // days; empty and Rolling 0: the whole plan
	Rolling Ms     // any time of this length, an orbit or 24 h

	Contacts *int     // contacts that begin in the span
	Time     *Ms      // contact time within the span
	Price    *float64 // money of the contacts that begin in the span; not for Rolling
}

// Shared is something of which a station has fewer than antennas: radio chains,
// operators. At most Capacity contacts on its antennas at any instant.
type Shared struct {
	Name     string
	Antennas []int
	Capacity int
	Busy     bool // counted from set-up to tear-down, else the contact alone
}

// Clash is two candidates that disturb one another: two spacecraft in one beam on one
// frequency. Contacts in A and B may not both run at any instant of the spans.
type Clash struct {
	A, B  int
	Spans []Span
}

// Weights say what counts how much; the value of a plan is the worth of its contacts,
// plus Share times what each spacecraft has of its share, minus the priced terms.
type Weights struct {
	Share  float64 // value for each unit of value up to a spacecraft's Share
	Price  float64 // value for each unit of money
	Change float64 // value for each contact that is dropped, added or moved against the plan in force
}
