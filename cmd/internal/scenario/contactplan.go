package scenario

import (
	"time"

	"slantwise/cmd/internal/planfiles"
	"slantwise/orbit/unit"
)

// ContactPlan is what the plan of contacts must respect and is worth, beside the passes
// themselves. Names are the scenario's.
type ContactPlan struct {
	Step            time.Duration // begins and ends lie on whole multiples of it
	SetUp, TearDown time.Duration // of stations that state none
	Least, Greatest time.Duration // length of a contact; Greatest 0: the pass
	Split           bool          // a pass may get several contacts

	Share, Price, Change float64 // weights
	SameBeam             unit.Angle

	Stations   []PlanStation    // in the order of the block
	Spacecraft []PlanSpacecraft // in the order of the block
	Limits     []PlanLimit
	Shared     []PlanShared
	Closed     []planfiles.Outage // of the block and its files
}

// PlanStation is what a plan must respect at a station.
type PlanStation struct {
	Name            string
	SetUp, TearDown time.Duration
	Lead, Notice    time.Duration
	Operators       int // contacts at a time, set-up to tear-down; 0: any
	Shifts          []Shift
	Antennas        []PlanAntenna
}

// PlanAntenna is what a plan must respect of an antenna.
type PlanAntenna struct {
	Name                  string
	Contract              string
	PerContact, PerMinute float64
	SetUp, TearDown       time.Duration
}

// Shift is the time of a day in which a station is staffed, by its own clock. One that
// ends before it begins ends on the next day.
type Shift struct {
	Days     []time.Weekday // on which it begins; empty: all
	From, To time.Duration  // after midnight
}

// PlanSpacecraft is what a plan must respect of a spacecraft.
type PlanSpacecraft struct {
	Name         string
	Contract     string
	Transmitters []string // that may be used; empty: all
	AtOnce       int
	Between      time.Duration
	Repoint      time.Duration
	Overlap      [2]time.Duration // least, greatest; both 0: any
	SameData     bool
	UplinkShare  float64       // of a contact's time, taken from the downlink: half duplex
	PerOrbit     time.Duration // most contact time in any orbit; 0: any
	Share        float64       // value that it gets first
	ValuePerByte float64       // of data without a class of their own
	Data         []PlanData
	Commands     *PlanCommands // nil: no downlink needs one
}

// PlanData is what data of a recorder are worth.
type PlanData struct {
	Name         string // of the recorder's data
	ValuePerByte float64
	Due, Fade    time.Duration
}

// PlanCommands is the need to load commands before a downlink.
type PlanCommands struct {
	Lead, Valid time.Duration
	Loaded      []time.Time
}

// Spans of a PlanLimit.
const (
	UTCDay    = "utc_day"
	LocalDay  = "local_day"
	Any24h    = "any_24_h"
	WholePlan = "whole_plan"
)

// PlanLimit is so much and no more in each of its spans.
type PlanLimit struct {
	Name       string
	Stations   []string
	Antenna    string // of the only station; empty: all
	Spacecraft []string
	Contract   string
	In         string
	Zone       *time.Location // of a local day
	Contacts   *int
	Minutes    *float64
	Price      *float64
}

// PlanShared is something of which a station has fewer than antennas.
type PlanShared struct {
	Name      string
	Station   string
	Antennas  []string // empty: all
	AtOnce    int
	FromSetUp bool
}

// Station returns what the plan says of a station; the zero value with the plan's own
// times where it says nothing.
func (p *ContactPlan) Station(name string) PlanStation {
	for _, s := range p.Stations {
		if s.Name == name {
			return s
		}
	}
	return PlanStation{Name: name, SetUp: p.SetUp, TearDown: p.TearDown}
}

// Antenna returns what the plan says of an antenna.
func (s *PlanStation) Antenna(name string) PlanAntenna {
	for _, a := range s.Antennas {
		if a.Name == name {
			return a
		}
	}
	return PlanAntenna{Name: name, SetUp: s.SetUp, TearDown: s.TearDown}
}

// Craft returns what the plan says of a spacecraft.
func (p *ContactPlan) Craft(name string) PlanSpacecraft {
	for _, c := range p.Spacecraft {
		if c.Name == name {
			return c
		}
	}
	return PlanSpacecraft{Name: name, AtOnce: 1, ValuePerByte: 1}
}
