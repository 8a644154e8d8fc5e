package scenario

import (
	"time"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink"
	"slantwise/downlink/licence"
	"slantwise/downlink/measured"
	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// DefaultFile is the scenario file that is read where none is named and it is there.
const DefaultFile = "slantwise.yaml"

// Scenario is a checked scenario: every value in range, every name found.
type Scenario struct {
	Label string // the file as it was named, or "embedded demo"
	Demo  bool   // the embedded demo was read

	Window  Window
	Earth   orbit.EarthOrientation
	Horizon station.ElevationKind // which elevation decides AOS and LOS

	Path PathChoice // which models of the path apply, and for what share of the year

	Choice elements.Choice
	Sets   []orbit.Elements // every element set of the element files, in their order
	// Trajectories are the ephemerides of the element files, in their order.
	Trajectories []TrajectoryFile

	Spacecraft []Spacecraft // in the order of the file
	Stations   []Station    // in the order of the file

	Licences    []licence.Licence // what may be sent and received, in the order of the file
	Sizing      *Sizing           // which dish is sought; nil: none
	ContactPlan ContactPlan       // what the plan of contacts must respect
	Control     Control           // tolerances and criteria; empty where none are given

	// Measurements are kinds of tables that receivers write, in the order of the file.
	Measurements []measured.Layout

	Assumptions []Note // every default taken
	Warnings    []Note // what may make an answer wrong: old elements, …

	root *tree.Node // as it was read, with what replaced keys of the file
}

// Window is the span of time that a scenario is about.
type Window struct{ Start, End time.Time } // UTC, End after Start; both zero where a stated geometry needs none

// Length returns End - Start.
func (w Window) Length() time.Duration { return w.End.Sub(w.Start) }

// Spacecraft is a spacecraft with its orbit and transmitters.
type Spacecraft struct {
	Name         string
	Elements     elements.Chosen        // for the middle of the window; zero where the element files stayed unread
	Candidates   []orbit.Elements       // all sets of the object, in the order of the files
	Choice       elements.Choice        // how Elements was chosen
	Trajectory   *orbit.Trajectory      // flown in place of Elements, which then only describe it; nil: none
	Orbit        OrbitKind              // what it flies on
	Shift        orbit.Shift            // of the orbit in time; Elements and Candidates have it already, Trajectory has not
	ValidUntil   time.Time              // after it there are no passes; zero: no end is given
	Transmitters []downlink.Transmitter // may be empty: passes and pointing only
	Uplinks      []downlink.Receiver    // may be empty: nothing is known of commanding
	LinkSets     []LinkSet              // how links share a pass; may be empty
	Recorder     *Recorder              // nil: none is given
	RatePlan     RatePlan               // one mode a pass where none is given
	Uncertainty  *Uncertainty           // of its position; nil: the scenario states nothing
}

// Uplink returns the uplink of a name, nil where there is none.
func (s *Spacecraft) Uplink(name string) *downlink.Receiver {
	for i := range s.Uplinks {
		if s.Uplinks[i].Name == name {
			return &s.Uplinks[i]
		}
	}
	return nil
}

// ElementsAt returns the element set to be used at t by the scenario's choice, with
// its age at t.
func (s *Spacecraft) ElementsAt(t time.Time) elements.Chosen {
	if s.Trajectory != nil {
		out := s.Elements // no age tells how good an ephemeris is
		out.Age = out.Elements.Age(t)
		return out
	}
	if chosen := elements.Choose(s.Candidates, s.Choice, t); len(chosen) > 0 {
		return chosen[0]
	}
	return elements.Chosen{}
}

// Station is a site with its antennas.
type Station struct {
	Site    station.Site
	Climate propagation.Climate
	// Environment is the class of man-made noise around the station, by its climate or
	// the scenario's path; nil: none is counted.
	Environment *propagation.Environment
	Antennas    []station.Antenna // may be empty: passes and pointing only
	Uplink      bool              // it can acknowledge
	Line        unit.BitRate      // of the ground line to the user; 0: data are passed on at once
}

// Note is a sentence that belongs to every answer from the scenario.
type Note struct {
	About string // what it is about, "station Skerry Point"
	Text  string
}

// String returns "about: text".
func (n Note) String() string { return n.About + ": " + n.Text }
