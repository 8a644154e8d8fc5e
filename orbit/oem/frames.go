package oem

import (
	"strings"

	"slantwise/orbit"
)

// frameNames are the frames that are read, by their names in files.
var frameNames = map[string]orbit.Frame{
	"TEME": orbit.TEME, "TOD": orbit.TrueOfDate, "MOD": orbit.MeanOfDate,
	"EME2000": orbit.J2000, "J2000": orbit.J2000, "GCRF": orbit.GCRF, "ICRF": orbit.GCRF,
	"GRC": orbit.PseudoEarthFixed, "TDR": orbit.PseudoEarthFixed,
}

// FrameNames lists the names for messages.
const FrameNames = "TEME, ITRF (any realisation), GRC, TDR, TOD, MOD, EME2000, J2000, GCRF, ICRF"

// ParseFrame returns the frame of a name as REF_FRAME has it, in any case.
func ParseFrame(s string) (orbit.Frame, bool) {
	name := strings.ToUpper(strings.TrimSpace(s))
	if rest, is := strings.CutPrefix(name, "ITRF"); is {
		if _, ok := digits(strings.TrimPrefix(rest, "-")); ok && len(rest) <= 5 {
			return orbit.EarthFixed, true
		}
		return 0, false
	}
	f, ok := frameNames[name]
	return f, ok
}

// nameOf returns the name that a frame is written by.
func nameOf(f orbit.Frame) string {
	return map[orbit.Frame]string{orbit.EarthFixed: "ITRF", orbit.PseudoEarthFixed: "TDR", orbit.TEME: "TEME",
		orbit.TrueOfDate: "TOD", orbit.MeanOfDate: "MOD", orbit.J2000: "EME2000", orbit.GCRF: "GCRF"}[f]
}
