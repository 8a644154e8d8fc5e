package fluxdensity

import (
	"bytes"
	_ "embed" // the limits
	"encoding/csv"
	"fmt"
	"strconv"
	"sync"

	"slantwise/orbit/unit"
)

// Place is where a limit holds.
type Place int

// Places.
const (
	Ground        Place = iota // the surface of the Earth
	Geostationary              // the geostationary orbit
)

// String returns "ground" or "geostationary".
func (p Place) String() string { return [...]string{"ground", "geostationary"}[p] }

// Limit is the greatest flux density that a rule allows in a band. On the ground it
// depends on the angle of arrival: LowDBWM2 up to 5°, from there a slope per degree
// up to 25°, HighDBWM2 above.
type Limit struct {
	Place               Place
	Low, High           unit.Frequency // of the band
	Service             string
	LowDBWM2, HighDBWM2 float64 // dB(W/m²) in the reference bandwidth
	SlopeDBPerDeg       float64
	Reference           unit.Frequency
	Coordination        bool   // reaching it starts a coordination; it forbids nothing by itself
	Rule                string // where it stands
	Recalled            bool   // the rule's text was not read: the row is from memory
	Note                string
}

// Angles of arrival at which the limits bend, in degrees.
const (
	lowBendDeg  = 5.0
	highBendDeg = 25.0
)

// At returns the limit in dB(W/m²) at an angle of arrival over the horizontal plane,
// in [0°, 90°]; at the geostationary orbit it is the same at all angles.
func (l *Limit) At(arrival unit.Angle) float64 {
	switch d := arrival.Degrees(); {
	case d <= lowBendDeg:
		return l.LowDBWM2
	case d < highBendDeg:
		return l.LowDBWM2 + l.SlopeDBPerDeg*(d-lowBendDeg)
	}
	return l.HighDBWM2
}

// Provenance says how the limit is known, for the user.
func (l *Limit) Provenance() string {
	s := "read in the text of the rule"
	if l.Recalled {
		s = "recalled from memory, not read: check it before relying on it"
	}
	if l.Note != "" {
		s += " (" + l.Note + ")"
	}
	return s
}

//go:embed limits.csv
var limitsCSV []byte

// Limits returns every known limit in the order of the bands. The slice is shared:
// do not write to it.
var Limits = sync.OnceValue(func() []Limit {
	rows, err := csv.NewReader(bytes.NewReader(limitsCSV)).ReadAll()
	if err != nil {
		panic(fmt.Sprintf("limits.csv: %v", err)) // it is part of the program
	}
	out := make([]Limit, 0, len(rows))
	for _, r := range rows[1:] {
		out = append(out, parseLimit(r))
	}
	return out
})

func parseLimit(r []string) Limit {
	num := func(s string) float64 {
		v, err := strconv.ParseFloat(s, 64)
		if err != nil {
			panic(fmt.Sprintf("limits.csv: %v", err))
		}
		return v
	}
	l := Limit{
		Low: unit.Frequency(num(r[1])) * unit.Megahertz, High: unit.Frequency(num(r[2])) * unit.Megahertz, Service: r[3],
		LowDBWM2: num(r[4]), SlopeDBPerDeg: num(r[5]), HighDBWM2: num(r[6]), Reference: unit.Frequency(num(r[7])),
		Coordination: r[8] == "coordination", Rule: r[9], Recalled: r[10] != "read", Note: r[11],
	}
	if r[0] == "geostationary" {
		l.Place = Geostationary
	}
	return l
}

// touches tells whether an emission reaches into the limit's band.
func (l *Limit) touches(e *Emission) bool {
	half := e.Width / 2
	return e.Centre+half >= l.Low && e.Centre-half <= l.High
}
