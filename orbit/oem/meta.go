package oem

import (
	"fmt"
	"strconv"
	"strings"
	"time"

	"slantwise/orbit"
)

// instantAt is an instant with the line of its keyword; 0: not given.
type instantAt struct {
	time.Time
	line int
}

// meta is the metadata of a segment.
type meta struct {
	line     int // of META_START; 0: none is open
	object   object
	frame    orbit.Frame
	scale    scale
	how      orbit.Interpolation
	howGiven bool

	start, stop, useFrom, useTo instantAt
	raw                         map[string]keyed
	faulty                      bool
	told                        int // faults when the data began
}

type keyed struct {
	value string
	line  int
}

func (b *builder) openMeta(line int) {
	if b.where == inMeta {
		b.fault(line, "META_START", "", "a second one before META_STOP", "")
	}
	b.closeCovariances()
	b.closeSegment()
	b.where, b.meta = inMeta, meta{line: line, raw: map[string]keyed{}}
}

// metaKeys are the keywords of the metadata, and whether each must be there.
var metaKeys = map[string]bool{
	"OBJECT_NAME": true, "OBJECT_ID": true, "CENTER_NAME": true, "REF_FRAME": true, "REF_FRAME_EPOCH": false, "TIME_SYSTEM": true,
	"START_TIME": true, "USEABLE_START_TIME": false, "USEABLE_STOP_TIME": false, "STOP_TIME": true,
	"INTERPOLATION": false, "INTERPOLATION_DEGREE": false,
}

// needed are those that must be there, in the order of the standard.
var needed = []string{"OBJECT_NAME", "OBJECT_ID", "CENTER_NAME", "REF_FRAME", "TIME_SYSTEM", "START_TIME", "STOP_TIME"}

// key takes KEYWORD = VALUE.
func (b *builder) key(line int, key, value string) {
	switch b.where {
	case inHeader:
		b.header(line, key, value)
	case inMeta:
		if _, known := metaKeys[key]; !known {
			b.warn(line, "the keyword %q is not one of an OEM's metadata and is passed over", short(key))
			return
		}
		if before, twice := b.meta.raw[key]; twice {
			b.fault(line, key, short(value), fmt.Sprintf("stands twice, first in line %d", before.line), "remove one of the two")
			return
		}
		b.meta.raw[key] = keyed{value, line}
	case inCovariances:
		b.covarianceKey(line, key, value)
	default:
		b.warn(line, "the keyword %q among the states is passed over", short(key))
	}
}

func (b *builder) header(line int, key, value string) {
	switch key {
	case "CCSDS_OEM_VERS":
		b.version(line, value)
	case "CREATION_DATE":
		if t, problem := instant(value); problem == "" {
			b.file.Created = t
		} else {
			b.warn(line, "CREATION_DATE %q %s", short(value), problem)
		}
	case "ORIGINATOR":
		b.file.Originator = short(value)
	case "CLASSIFICATION", "MESSAGE_ID":
	default:
		b.warn(line, "the keyword %q is not one of an OEM's header and is passed over", short(key))
	}
}

func (b *builder) version(line int, value string) {
	if b.file.Version != "" {
		b.fault(line, "CCSDS_OEM_VERS", short(value), "a second message in the file", "give one message a file")
		b.stopped = true
		return
	}
	b.file.Version = short(value)
	if value != "1.0" && value != "2.0" && value != "3.0" {
		b.fault(line, "CCSDS_OEM_VERS", short(value), "is not a version that is read: 1.0, 2.0 or 3.0", "")
	}
}

// closeMeta checks the metadata as a whole.
func (b *builder) closeMeta(line int) {
	if b.where != inMeta {
		b.fault(line, "META_STOP", "", "no META_START stands before it", "")
		return
	}
	b.where = inData
	m := &b.meta
	before := b.faults.Total
	for _, k := range needed {
		if m.raw[k].value == "" {
			b.fault(m.line, k, "", "is missing in the metadata that begin here", "")
		}
	}
	m.object = object{short(m.raw["OBJECT_NAME"].value), short(m.raw["OBJECT_ID"].value)}
	if v := m.raw["CENTER_NAME"]; v.value != "" && !strings.EqualFold(v.value, "EARTH") {
		b.fault(v.line, "CENTER_NAME", short(v.value), "is valid, but only EARTH is supported", "")
	}
	if v := m.raw["REF_FRAME"]; v.value != "" {
		var ok bool
		if m.frame, ok = ParseFrame(v.value); !ok {
			b.fault(v.line, "REF_FRAME", short(v.value), "is not a frame that is read: "+FrameNames, "turn the states into one of them")
		}
	}
	if v, given := m.raw["REF_FRAME_EPOCH"]; given && m.frame != orbit.J2000 && m.frame != orbit.GCRF && m.frame != orbit.EarthFixed {
		b.fault(v.line, "REF_FRAME_EPOCH", short(v.value), "a frame held at an epoch is not supported", "turn the states into EME2000 or the frame of date")
	}
	b.metaScale(m)
	b.metaTimes(m)
	b.metaInterpolation(m)
	m.faulty, m.told = b.faults.Total > before, b.faults.Total
}

func (b *builder) metaScale(m *meta) {
	m.scale = utc
	v := m.raw["TIME_SYSTEM"]
	switch s := scale(strings.ToUpper(v.value)); s {
	case "":
	case utc, tai, tt, gps, ut1:
		m.scale = s
	case "TDT":
		m.scale = tt // the older name
	default:
		b.fault(v.line, "TIME_SYSTEM", short(v.value), "is not a time scale that is read: UTC, TAI, TT, GPS, UT1", "")
	}
}

func (b *builder) metaTimes(m *meta) {
	for _, k := range []struct {
		key  string
		into *instantAt
	}{{"START_TIME", &m.start}, {"STOP_TIME", &m.stop}, {"USEABLE_START_TIME", &m.useFrom}, {"USEABLE_STOP_TIME", &m.useTo}} {
		key, into := k.key, k.into
		v := m.raw[key]
		if v.value == "" {
			continue
		}
		t, problem := instant(v.value)
		if problem == "" {
			t, problem = m.scale.utcOf(t, b.earth.UT1MinusUTC)
		}
		if problem != "" {
			b.fault(v.line, key, short(v.value), problem, "")
			continue
		}
		*into = instantAt{t, v.line}
	}
	if m.start.line > 0 && m.stop.line > 0 && !m.stop.After(m.start.Time) {
		b.fault(m.stop.line, "STOP_TIME", stamp(m.stop.Time), "does not come after START_TIME, "+stamp(m.start.Time), "")
	}
	if m.useFrom.line > 0 && m.useTo.line > 0 && !m.useTo.After(m.useFrom.Time) {
		b.fault(m.useTo.line, "USEABLE_STOP_TIME", stamp(m.useTo.Time), "does not come after USEABLE_START_TIME, "+stamp(m.useFrom.Time), "")
	}
}

func (b *builder) metaInterpolation(m *meta) {
	v, given := m.raw["INTERPOLATION"]
	degree, degreeGiven := m.raw["INTERPOLATION_DEGREE"]
	if !given {
		if degreeGiven {
			b.warn(degree.line, "INTERPOLATION_DEGREE without INTERPOLATION is passed over")
		}
		return
	}
	m.howGiven = true
	switch strings.ToUpper(v.value) {
	case "HERMITE":
		m.how.Kind = orbit.Hermite
	case "LAGRANGE":
		m.how.Kind = orbit.Lagrange
	case "LINEAR":
		m.how = orbit.Interpolation{Kind: orbit.Linear, Degree: 1}
		return
	default:
		b.fault(v.line, "INTERPOLATION", short(v.value), "is not an interpolation that is read: HERMITE, LAGRANGE, LINEAR", "")
		return
	}
	n, err := strconv.Atoi(degree.value)
	switch {
	case !degreeGiven:
		b.fault(v.line, "INTERPOLATION_DEGREE", "", "is missing beside INTERPOLATION", "give the degree, as 7")
	case err != nil || n < 1 || n > orbit.MostDegree:
		b.fault(degree.line, "INTERPOLATION_DEGREE", short(degree.value), fmt.Sprintf("must be a whole number from 1 to %d", orbit.MostDegree), "")
	default:
		m.how.Degree = n
		if m.how.Kind == orbit.Hermite && n%2 == 0 {
			m.how.Degree++
			b.warn(degree.line, "a Hermite polynomial through positions and velocities has an odd degree: %d is taken in place of %d", n+1, n)
		}
	}
}
