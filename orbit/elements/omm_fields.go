package elements

import (
	"strconv"
	"strings"
	"time"

	"slantwise/orbit"
)

// field is one keyword as it is written.
type field struct {
	key, value string
	unit       string
	group      string // the NDM/XML element around it
	text       bool   // text in JSON, else a number
}

const (
	ommVersion        = "2.0"
	defaultOriginator = "SLANTWISE"
)

// headerFields are what a full message says of itself.
func headerFields(h Header) []field {
	originator := h.Originator
	if originator == "" {
		originator = defaultOriginator
	}
	return []field{
		{key: "CREATION_DATE", value: formatEpoch(h.Created), group: "header", text: true},
		{key: "ORIGINATOR", value: originator, group: "header", text: true},
	}
}

// fields returns the keywords of a set in the order of CCSDS 502.0-B; the class is
// left out where it is not known.
func fields(el *orbit.Elements) []field {
	const meta, mean, tle = "metadata", "meanElements", "tleParameters"
	out := []field{
		{key: "OBJECT_NAME", value: known(el.Name), group: meta, text: true},
		{key: "OBJECT_ID", value: known(el.InternationalDesignator), group: meta, text: true},
		{key: "CENTER_NAME", value: "EARTH", group: meta, text: true},
		{key: "REF_FRAME", value: "TEME", group: meta, text: true},
		{key: "TIME_SYSTEM", value: "UTC", group: meta, text: true},
		{key: "MEAN_ELEMENT_THEORY", value: "SGP4", group: meta, text: true},
		{key: "EPOCH", value: formatEpoch(el.Epoch), group: mean, text: true},
		{key: "MEAN_MOTION", value: shortest(el.MeanMotion), group: mean},
		{key: "ECCENTRICITY", value: shortest(el.Eccentricity), group: mean},
		{key: "INCLINATION", value: shortestDegrees(el.Inclination), group: mean},
		{key: "RA_OF_ASC_NODE", value: shortestDegrees(el.RAAN), group: mean},
		{key: "ARG_OF_PERICENTER", value: shortestDegrees(el.ArgPerigee), group: mean},
		{key: "MEAN_ANOMALY", value: shortestDegrees(el.MeanAnomaly), group: mean},
		{key: "EPHEMERIS_TYPE", value: "0", group: tle},
	}
	if el.Classification != "" {
		out = append(out, field{key: "CLASSIFICATION_TYPE", value: el.Classification, group: tle, text: true})
	}
	out = append(out,
		field{key: "NORAD_CAT_ID", value: strconv.Itoa(el.CatalogNumber), group: tle},
		field{key: "ELEMENT_SET_NO", value: strconv.Itoa(el.ElementSetNo), group: tle},
		field{key: "REV_AT_EPOCH", value: strconv.Itoa(el.RevolutionAtEpoch), group: tle},
		field{key: "BSTAR", value: shortest(el.BStar), group: tle},
		field{key: "MEAN_MOTION_DOT", value: shortest(el.MeanMotionDot), group: tle},
		field{key: "MEAN_MOTION_DDOT", value: shortest(el.MeanMotionDDot), group: tle})
	for i := range out {
		out[i].unit = keywordByName[out[i].key].unit
	}
	return out
}

func known(s string) string {
	if s == "" {
		return unknownText
	}
	return s
}

// formatEpoch writes a time to the microsecond, or to the nanosecond where it has
// one.
func formatEpoch(t time.Time) string {
	s := t.UTC().Format("2006-01-02T15:04:05.000000000")
	return strings.TrimSuffix(s, "000")
}
