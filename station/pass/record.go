package pass

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// record is a pass as it is kept in a list of millions: without pointers, so that the
// collector does not look into it, and in 80 bytes.
type record struct {
	aos, culmination, los               int64   // ms since 1970, UTC
	maxElevation                        float64 // rad, as the angles below
	aosAzimuth, culmAzimuth, losAzimuth float32 // 1e-5 deg of rounding at most
	aosElevation, losElevation          float32
	minRange                            float64 // m
	craft, site                         uint32
	cut                                 Cut
}

// pass unpacks the record.
func (r *record) pass() Pass {
	return Pass{
		AOS: instant(r.aos), Culmination: instant(r.culmination), LOS: instant(r.los),
		MaxElevation:       unit.Angle(r.maxElevation),
		AOSAzimuth:         unit.Angle(r.aosAzimuth),
		CulminationAzimuth: unit.Angle(r.culmAzimuth),
		LOSAzimuth:         unit.Angle(r.losAzimuth),
		AOSElevation:       unit.Angle(r.aosElevation),
		LOSElevation:       unit.Angle(r.losElevation),
		MinRange:           unit.Length(r.minRange),
		Cut:                r.cut,
	}
}

// found unpacks the record with its indices.
func (r *record) found() Found {
	return Found{Spacecraft: int(r.craft), Site: int(r.site), Pass: r.pass()}
}

func instant(ms int64) time.Time { return time.UnixMilli(ms).UTC() }

// clock turns seconds of the ephemeris into milliseconds since 1970.
type clock struct {
	ms   int64   // of the ephemeris's reference, rounded down
	rest float64 // ms that were rounded off
}

func newClock(reference time.Time) clock {
	ms := reference.UnixMilli()
	return clock{ms: ms, rest: float64(reference.Sub(time.UnixMilli(ms))) / float64(time.Millisecond)}
}

// at rounds to the nearest millisecond, halves upwards.
func (c clock) at(s float64) int64 { return c.ms + int64(math.Floor(s*1000+c.rest+0.5)) }
