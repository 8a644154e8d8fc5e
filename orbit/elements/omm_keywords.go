package elements

import (
	"slices"
	"strings"
)

// role is what a keyword is read for.
type role int

const (
	headerKey  role = iota // required in a full message
	fixedKey               // metadata with an only possible value
	textKey                // name, designator, class
	numberKey              // a number that goes into the elements
	countKey               // a whole number that goes into the elements
	epochKey               // EPOCH
	specialKey             // read for a check
	passedKey              // not used by SGP4
	xpKey                  // only SGP4-XP has it
	commentKey             // COMMENT
)

// keyword is one keyword of CCSDS 502.0-B for an OMM.
type keyword struct {
	name     string
	role     role
	required bool
	unit     string // as in KVN brackets; empty: none
}

// keywords are the keywords of an OMM but for the covariance (CX_X and so on) and
// USER_DEFINED_ keywords, in the order in which they are written.
var keywords = []keyword{
	{name: "CCSDS_OMM_VERS", role: headerKey},
	{name: "COMMENT", role: commentKey},
	{name: "CLASSIFICATION", role: passedKey},
	{name: "CREATION_DATE", role: headerKey},
	{name: "ORIGINATOR", role: headerKey},
	{name: "MESSAGE_ID", role: passedKey},
	{name: "OBJECT_NAME", role: textKey, required: true},
	{name: "OBJECT_ID", role: textKey, required: true},
	{name: "CENTER_NAME", role: fixedKey},
	{name: "REF_FRAME", role: fixedKey},
	{name: "REF_FRAME_EPOCH", role: passedKey},
	{name: "TIME_SYSTEM", role: fixedKey},
	{name: "MEAN_ELEMENT_THEORY", role: fixedKey},
	{name: "EPOCH", role: epochKey, required: true},
	{name: "SEMI_MAJOR_AXIS", role: numberKey, unit: "km"},
	{name: "MEAN_MOTION", role: numberKey, unit: "rev/day"},
	{name: "ECCENTRICITY", role: numberKey, required: true},
	{name: "INCLINATION", role: numberKey, required: true, unit: "deg"},
	{name: "RA_OF_ASC_NODE", role: numberKey, required: true, unit: "deg"},
	{name: "ARG_OF_PERICENTER", role: numberKey, required: true, unit: "deg"},
	{name: "MEAN_ANOMALY", role: numberKey, required: true, unit: "deg"},
	{name: "GM", role: numberKey, unit: "km**3/s**2"},
	{name: "EPHEMERIS_TYPE", role: specialKey},
	{name: "CLASSIFICATION_TYPE", role: textKey},
	{name: "NORAD_CAT_ID", role: countKey, required: true},
	{name: "ELEMENT_SET_NO", role: countKey, required: true},
	{name: "REV_AT_EPOCH", role: countKey, required: true},
	{name: "BSTAR", role: numberKey, required: true, unit: "1/ER"},
	{name: "BTERM", role: xpKey},
	{name: "MEAN_MOTION_DOT", role: numberKey, required: true, unit: "rev/day**2"},
	{name: "MEAN_MOTION_DDOT", role: numberKey, required: true, unit: "rev/day**3"},
	{name: "AGOM", role: xpKey},
	{name: "MASS", role: passedKey},
	{name: "SOLAR_RAD_AREA", role: passedKey},
	{name: "SOLAR_RAD_COEFF", role: passedKey},
	{name: "DRAG_AREA", role: passedKey},
	{name: "DRAG_COEFF", role: passedKey},
	{name: "COV_REF_FRAME", role: passedKey},
}

var keywordByName = func() map[string]keyword {
	m := make(map[string]keyword, len(keywords))
	for _, k := range keywords {
		m[k.name] = k
	}
	return m
}()

// lookUp finds a keyword; the covariance and what users define are passed over.
func lookUp(name string) (keyword, bool) {
	if k, ok := keywordByName[name]; ok {
		return k, true
	}
	if strings.HasPrefix(name, "USER_DEFINED") || isCovariance(name) {
		return keyword{name: name, role: passedKey}, true
	}
	return keyword{}, false
}

func isKeyword(name string) bool {
	_, ok := lookUp(name)
	return ok
}

// isCovariance matches CX_X, CX_DOT_Y, CZ_DOT_Z_DOT and the others of the matrix.
func isCovariance(name string) bool {
	rest, ok := strings.CutPrefix(name, "C")
	if !ok {
		return false
	}
	parts := strings.Split(strings.ReplaceAll(rest, "_DOT", ""), "_")
	axes := []string{"X", "Y", "Z"}
	return len(parts) == 2 && slices.Contains(axes, parts[0]) && slices.Contains(axes, parts[1])
}

func keywordNames() []string {
	names := make([]string, len(keywords))
	for i, k := range keywords {
		names[i] = k.name
	}
	return names
}

// unitNames are other spellings of the units, in lower case.
var unitNames = map[string][]string{
	"deg":        {"deg"},
	"km":         {"km"},
	"rev/day":    {"rev/day"},
	"rev/day**2": {"rev/day**2"},
	"rev/day**3": {"rev/day**3"},
	"km**3/s**2": {"km**3/s**2"},
	"1/ER":       {"1/er", "1/[earth radii]", "1/earth radii"},
}

// unitFits tells whether a unit that was given is the keyword's.
func (k keyword) unitFits(given string) bool {
	return given == "" || slices.Contains(unitNames[k.unit], strings.ToLower(given))
}
