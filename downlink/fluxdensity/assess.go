package fluxdensity

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Track is where a spacecraft flies.
type Track struct {
	Times     []time.Time
	Positions []orbit.Vec3 // Earth-fixed, m; as many as Times, at least one
	Station   *orbit.Vec3  // Earth-fixed, m: where antennas held to the station point; nil: none
}

// Along assesses the emissions, all sent at once, at every instant of a track. There
// is a finding for each limit and each set of transmitters that meet in one reference
// bandwidth, and one without limit for each transmitter in whose band none is known.
// An antenna held to the station needs one.
func Along(track Track, emissions []Emission) ([]Finding, error) {
	if err := checkTrack(track); err != nil {
		return nil, err
	}
	checks, out, err := prepare(emissions)
	if err != nil {
		return nil, err
	}
	for i := range checks {
		c := &checks[i]
		if c.pointsAtStation() && track.Station == nil {
			return nil, fmt.Errorf("an antenna of %q is held to the station; give the station", c.names)
		}
		var all tally
		var when time.Time
		for j, p := range track.Positions {
			s := newScene(p, track.Station, station.EquatorialRadius, station.Flattening)
			t := c.scan(&s, c.scanRing)
			if t.any && (!all.any || t.worst.distance < all.worst.distance) {
				when = track.Times[j]
			}
			all.merge(&t)
		}
		f := c.finding(&all)
		f.Time = when
		out = append(out, f)
	}
	return out, nil
}

func (c *check) scan(s *scene, geostationary func(*scene) tally) tally {
	if c.limit.Place == Geostationary {
		return geostationary(s)
	}
	return c.scanGround(s)
}

func checkTrack(t Track) error {
	if len(t.Positions) == 0 || len(t.Times) != len(t.Positions) {
		return fmt.Errorf("the track has %d instants and %d positions; give as many of both, one at least", len(t.Times), len(t.Positions))
	}
	for i, p := range t.Positions {
		if !(p.Norm() > station.EquatorialRadius) || math.IsInf(p.Norm(), 1) {
			return &unit.RangeError{Quantity: "distance from the Earth's centre at " + t.Times[i].UTC().Format(time.RFC3339), Value: p.Norm() / 1000, Unit: "km", Allowed: "greater than 6378.137 km and finite"}
		}
	}
	return nil
}

// prepare makes the checks of the emissions, and the findings where there is nothing
// to check against.
func prepare(emissions []Emission) ([]check, []Finding, error) {
	if len(emissions) == 0 {
		return nil, nil, errors.New("there is no emission; give one at least")
	}
	var faults []error
	for i := range emissions {
		if err := emissions[i].Check(); err != nil {
			faults = append(faults, err)
		}
	}
	if len(faults) > 0 {
		return nil, nil, errors.Join(faults...)
	}
	var checks []check
	touched := make([]bool, len(emissions))
	limits := Limits()
	for i := range limits {
		l := &limits[i]
		var inside []int
		for j := range emissions {
			if l.touches(&emissions[j]) {
				inside = append(inside, j)
				touched[j] = true
			}
		}
		for _, set := range together(emissions, inside, l.Reference) {
			c := check{limit: l}
			for _, j := range set {
				c.names = append(c.names, emissions[j].Name)
				c.radiators = append(c.radiators, newRadiator(&emissions[j], l.Reference))
			}
			checks = append(checks, c)
		}
	}
	var out []Finding
	for j := range emissions {
		if !touched[j] {
			f := (&check{limit: &Limit{}, names: []string{emissions[j].Name}}).finding(&tally{})
			f.Limit = nil
			f.Reason = fmt.Sprintf("no limit is known here for %g MHz", emissions[j].Centre.Megahertz())
			out = append(out, f)
		}
	}
	return checks, out, nil
}

// together returns the largest sets of emissions that may fall in one reference
// bandwidth. One of unknown width meets all.
func together(emissions []Emission, of []int, reference unit.Frequency) [][]int {
	edges := func(j int) (low, high unit.Frequency) {
		e := &emissions[j]
		if e.Width == 0 {
			return unit.Frequency(math.Inf(-1)), unit.Frequency(math.Inf(1))
		}
		half := (e.Width + reference) / 2
		return e.Centre - half, e.Centre + half
	}
	var sets [][]int
	for _, j := range of { // a largest set of spans that meet begins with one of them
		from, _ := edges(j)
		var set []int
		for _, k := range of {
			if low, high := edges(k); low <= from && from <= high {
				set = append(set, k)
			}
		}
		sets = append(sets, set)
	}
	return maximal(sets)
}

// maximal leaves out the sets that another holds whole, and all but the first of
// equal ones.
func maximal(sets [][]int) [][]int {
	var out [][]int
	for i, s := range sets {
		held := false
		for j, o := range sets {
			larger := len(o) > len(s) || len(o) == len(s) && j < i
			held = held || j != i && larger && holds(o, s)
		}
		if !held {
			out = append(out, s)
		}
	}
	return out
}

// holds tells whether every member of s is one of o.
func holds(o, s []int) bool {
	for _, v := range s {
		if !slices.Contains(o, v) {
			return false
		}
	}
	return true
}
