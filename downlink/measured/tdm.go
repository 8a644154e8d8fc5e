package measured

import (
	"fmt"
	"sort"
	"strconv"
	"strings"
	"time"
)

// tdmSegment is what the metadata of a segment say.
type tdmSegment struct {
	system, angles string
	mode           string
	offset         float64 // Hz, added to RECEIVE_FREQ
	line           int
}

// tdm gathers data lines.
type tdm struct {
	seg     tdmSegment
	log     *Log
	f       *faults
	unused  map[string]int
	unknown map[string]int
}

func newTDM(l *Log, f *faults) *tdm {
	return &tdm{log: l, f: f, unused: map[string]int{}, unknown: map[string]int{}}
}

// tdmUnused are data keywords of the standard that are not used here.
var tdmUnused = []string{"CARRIER_PHASE", "CLOCK_BIAS", "CLOCK_DRIFT", "DOPPLER_INSTANTANEOUS", "DOPPLER_INTEGRATED", "DOPPLER_COUNT", "DOR", "MAG", "PR_N0", "PRESSURE", "RANGE",
	"RCS", "RECEIVE_PHASE_CT", "STEC", "TEMPERATURE", "TRANSMIT_FREQ", "TRANSMIT_FREQ_RATE", "TRANSMIT_PHASE_CT", "TROPO_DRY", "TROPO_WET", "VLBI_DELAY"}

// tdmMeta are metadata keywords of the standard; an index _n may follow.
var tdmMeta = []string{"TRACK_ID", "DATA_TYPES", "TIME_SYSTEM", "START_TIME", "STOP_TIME", "PARTICIPANT", "MODE", "PATH", "EPHEMERIS_NAME", "TRANSMIT_BAND", "RECEIVE_BAND",
	"TURNAROUND_NUMERATOR", "TURNAROUND_DENOMINATOR", "TIMETAG_REF", "INTEGRATION_INTERVAL", "INTEGRATION_REF", "FREQ_OFFSET", "RANGE_MODE", "RANGE_MODULUS", "RANGE_UNITS",
	"ANGLE_TYPE", "REFERENCE_FRAME", "INTERPOLATION", "INTERPOLATION_DEGREE", "DOPPLER_COUNT_BIAS", "DOPPLER_COUNT_SCALE", "DOPPLER_COUNT_ROLLOVER", "TRANSMIT_DELAY", "RECEIVE_DELAY",
	"DATA_QUALITY", "CORRECTION_ANGLE", "CORRECTION_DOPPLER", "CORRECTION_MAG", "CORRECTION_RANGE", "CORRECTION_RCS", "CORRECTION_RECEIVE", "CORRECTION_TRANSMIT",
	"CORRECTION_ABERRATION_YEARLY", "CORRECTION_ABERRATION_DIURNAL", "CORRECTIONS_APPLIED"}

func (d *tdm) open(line int) { d.seg = tdmSegment{line: line} }

// meta takes a keyword of the metadata.
func (d *tdm) meta(line int, key, value string) {
	switch key {
	case "TIME_SYSTEM":
		d.seg.system = value
		if value != "UTC" {
			d.f.add(line, "TIME_SYSTEM: %q is valid but not supported; give times in UTC", value)
		}
	case "ANGLE_TYPE":
		d.seg.angles = value
	case "MODE":
		d.seg.mode = value
	case "FREQ_OFFSET":
		v, err := strconv.ParseFloat(value, 64)
		if err != nil || !(v >= -1e12 && v <= 1e12) {
			d.f.add(line, "FREQ_OFFSET: %q is not a number of Hz", value)
			return
		}
		d.seg.offset = v
	case "PATH":
		if n := strings.Count(value, ","); n > 1 {
			d.f.add(line, "PATH: %q is a two-way or relayed path, valid but not supported; give one-way data", value)
		}
	default:
		if !isKeyword(key, tdmMeta) {
			d.unknown[key]++
		}
	}
}

// datum takes one measurement.
func (d *tdm) datum(line int, key, epoch, value string) {
	var q Quantity
	shift := 0.0
	switch base := strings.TrimRight(key, "_12345"); {
	case key == "CARRIER_POWER":
		q, shift = PowerDBm, 30
	case key == "PC_N0":
		q = CN0DBHz
	case base == "RECEIVE_FREQ":
		q, shift = FrequencyHz, d.seg.offset
	case key == "ANGLE_1" && d.seg.angles == "AZEL":
		q = AzimuthDeg
	case key == "ANGLE_2" && d.seg.angles == "AZEL":
		q = ElevationDeg
	case key == "RHUMIDITY":
		q = HumidityPct
	case isKeyword(key, tdmUnused) || strings.HasPrefix(key, "ANGLE_"):
		d.unused[key]++
		return
	default:
		d.unknown[key]++
		return
	}
	at, err := parseEpoch(epoch)
	if err != nil {
		d.f.add(line, "%s: %w", key, err)
		return
	}
	v, err := strconv.ParseFloat(value, 64)
	if err != nil {
		d.f.add(line, "%s: %q is not a number", key, value)
		return
	}
	s := newSample(at, line)
	if err := s.set(q, v+shift); err != nil {
		d.f.add(line, "%w", err)
		return
	}
	d.log.Samples = append(d.log.Samples, s)
}

// finish tells what was not used.
func (d *tdm) finish() {
	for _, set := range []struct {
		text string
		keys map[string]int
	}{{"is not a keyword of CCSDS 503.0-B; kept in the file, not used", d.unknown}, {"is a keyword that is not used here", d.unused}} {
		names := make([]string, 0, len(set.keys))
		for k := range set.keys {
			names = append(names, k)
		}
		sort.Strings(names)
		for _, k := range names {
			d.log.Notes = append(d.log.Notes, fmt.Sprintf("%s (%d times) %s", k, set.keys[k], set.text))
		}
	}
}

// isKeyword tells whether a key is in the list, an index _n left out.
func isKeyword(key string, list []string) bool {
	if n := len(key); n > 2 && key[n-2] == '_' && key[n-1] >= '1' && key[n-1] <= '5' {
		key = key[:n-2]
	}
	for _, k := range list {
		if k == key {
			return true
		}
	}
	return false
}

// parseEpoch reads a time of CCSDS 301.0-B in calendar or day-of-year form, UTC.
func parseEpoch(s string) (time.Time, error) {
	text := strings.TrimSuffix(s, "Z")
	for _, layout := range []string{"2006-01-02T15:04:05.999999999", "2006-002T15:04:05.999999999"} {
		if t, err := time.Parse(layout, text); err == nil && t.Year() >= 1957 && t.Year() <= 2200 {
			return t, nil
		}
	}
	return time.Time{}, fmt.Errorf("%q is not an epoch; write 2026-03-10T14:05:00 or 2026-069T14:05:00", s)
}
