package attitude

import (
	"errors"
	"fmt"
	"io"
	"math"
	"sort"
	"strconv"
	"strings"
	"time"

	"slantwise/orbit"
)

// fileLimit is the most bytes of a message that are read: a record each second of a week
// takes 40 MB.
const fileLimit = 64 << 20

// NormTolerance is how far the length of a quaternion may be from one: records of four
// decimals are within it. It is then scaled to one.
const NormTolerance = 1e-3

// metadata that is read, or may stand without a warning.
var metadata = map[string]bool{
	"OBJECT_NAME": true, "OBJECT_ID": true, "CENTER_NAME": true, "REF_FRAME_A": true, "REF_FRAME_B": true, "ATTITUDE_DIR": true, "TIME_SYSTEM": true,
	"START_TIME": true, "STOP_TIME": true, "USEABLE_START_TIME": true, "USEABLE_STOP_TIME": true, "ATTITUDE_TYPE": true, "QUATERNION_TYPE": true,
	"EULER_ROT_SEQ": true, "RATE_FRAME": true, "ANGVEL_FRAME": true, "INTERPOLATION_METHOD": true, "INTERPOLATION_DEGREE": true,
}

// columnsOf tells how many numbers a record of a type has, and how many of them count.
var columnsOf = map[string][2]int{
	"QUATERNION": {4, 4}, "QUATERNION/DERIVATIVE": {8, 4}, "QUATERNION/RATE": {7, 4}, "QUATERNION/ANGVEL": {7, 4},
	"EULER_ANGLE": {3, 3}, "EULER_ANGLE/DERIVATIVE": {6, 3}, "EULER_ANGLE/RATE": {6, 3}, "EULER_ANGLE/ANGVEL": {6, 3},
}

// frames by their names in the format.
var frames = map[string]orbit.Frame{
	"EME2000": orbit.J2000, "J2000": orbit.J2000, "GCRF": orbit.GCRF, "ICRF": orbit.GCRF, "TOD": orbit.TrueOfDate, "TEME": orbit.TEME,
	"ITRF": orbit.EarthFixed, "GRC": orbit.EarthFixed,
}

func frameOf(name string) (orbit.Frame, bool) {
	if strings.HasPrefix(name, "ITRF") {
		return orbit.EarthFixed, true
	}
	if strings.HasPrefix(name, "TOD") {
		return orbit.TrueOfDate, true
	}
	f, ok := frames[name]
	return f, ok
}

func isBody(name string) bool {
	return strings.HasPrefix(name, "SC_BODY") || strings.HasPrefix(name, "SC BODY")
}

// Read reads an attitude ephemeris message in KVN or XML; earth orients its frames. All
// faults come at once, with their lines; one is a keyword that must be there, a type,
// frame or time system that is not read (it says so), a time that does not rise, a
// quaternion that is not of length one, segments that overlap, or an object that changes.
func Read(r io.Reader, earth orbit.EarthOrientation) (*History, error) {
	text, err := io.ReadAll(io.LimitReader(r, fileLimit+1))
	if err != nil {
		return nil, err
	}
	if len(text) > fileLimit {
		return nil, fmt.Errorf("the message is over %d MB", fileLimit>>20)
	}
	turner, err := orbit.NewTurner(earth)
	if err != nil {
		return nil, err
	}
	blocks, version, faults := readBlocks(strings.TrimPrefix(string(text), "\ufeff"))
	if len(faults) == 0 && version == "" {
		faults = append(faults, errors.New("this is no attitude ephemeris message: CCSDS_AEM_VERS is missing"))
	}
	if len(faults) == 0 && len(blocks) == 0 {
		faults = append(faults, errors.New("the message has no segment"))
	}
	if len(faults) > 0 {
		return nil, joined(faults)
	}
	h := &History{}
	i := interpreter{turner: turner, history: h}
	methods := map[string]bool{}
	for k := range blocks {
		i.block(&blocks[k])
		if e, ok := blocks[k].get("INTERPOLATION_METHOD"); ok {
			methods[strings.ToUpper(e.value)] = true
		}
	}
	i.order()
	if len(i.faults) > 0 {
		return nil, joined(i.faults)
	}
	h.source = h.describe(methods)
	return h, nil
}

// mostFaults is how many faults are told.
const mostFaults = 20

func joined(faults []error) error {
	if n := len(faults); n > mostFaults {
		faults = append(faults[:mostFaults:mostFaults], fmt.Errorf("and %d more faults", n-mostFaults))
	}
	return errors.Join(faults...)
}

// describe says what the records are.
func (h *History) describe(methods map[string]bool) string {
	records, widest := 0, 0.0
	for i := range h.segments {
		records += len(h.segments[i].turns)
		widest = max(widest, h.segments[i].widestTurn())
	}
	s := fmt.Sprintf("%d records in %d segments, turned evenly about one axis from record to record (at most %.3g deg)", records, len(h.segments), widest)
	var asked []string
	for m := range methods {
		if m != "LINEAR" {
			asked = append(asked, m)
		}
	}
	sort.Strings(asked)
	if len(asked) > 0 {
		s += ", where the file asks for " + strings.Join(asked, " and ")
	}
	return s
}

// interpreter turns blocks into segments.
type interpreter struct {
	turner  *orbit.Turner
	history *History
	faults  []error
}

func (i *interpreter) fault(line int, format string, args ...any) {
	i.faults = append(i.faults, lineFault(line, format, args...))
}

// need returns a keyword that must be there.
func (i *interpreter) need(b *block, key string) string {
	e, ok := b.get(key)
	if !ok || e.value == "" {
		i.fault(b.line, "the segment has no %s", key)
	}
	return e.value
}

func (i *interpreter) instant(b *block, key string) (time.Time, bool) {
	e, ok := b.get(key)
	if !ok {
		return time.Time{}, false
	}
	t, err := parseTime(e.value)
	if err != nil {
		i.fault(e.line, "%s: %v", key, err)
		return t, false
	}
	return t, true
}

func (i *interpreter) block(b *block) {
	before := len(i.faults)
	for _, e := range b.meta {
		if !metadata[e.key] {
			i.history.Warnings = append(i.history.Warnings, fmt.Sprintf("line %d: the keyword %.40q is not known, and not used", e.line, e.key))
		}
	}
	if name := i.need(b, "OBJECT_NAME"); i.history.Object == "" {
		i.history.Object = name
	} else if name != i.history.Object {
		i.fault(b.line, "the segment is of %q, others of %q; give one object a file", name, i.history.Object)
	}
	if sys := i.need(b, "TIME_SYSTEM"); sys != "" && sys != "UTC" {
		e, _ := b.get("TIME_SYSTEM")
		i.fault(e.line, "TIME_SYSTEM %.20q is not read here; UTC is", sys)
	}
	frame, inverse := i.frames(b)
	from, okFrom := i.instant(b, "START_TIME")
	to, okTo := i.instant(b, "STOP_TIME")
	if !okFrom && len(i.faults) == before {
		i.need(b, "START_TIME")
	}
	if !okTo && len(i.faults) == before {
		i.need(b, "STOP_TIME")
	}
	if t, ok := i.instant(b, "USEABLE_START_TIME"); ok {
		from = t
	}
	if t, ok := i.instant(b, "USEABLE_STOP_TIME"); ok {
		to = t
	}
	read := i.reader(b)
	if len(i.faults) > before {
		return
	}
	s := segment{from: from, to: to, fixed: frame == orbit.EarthFixed}
	if to.Before(from) {
		i.fault(b.line, "the segment's useable span ends at %s, before it begins at %s", stamp(to), stamp(from))
		return
	}
	i.rows(b, &s, frame, inverse, read)
	if n := len(s.seconds); len(i.faults) == before && (n == 0 || s.seconds[0] > 1e-6 || s.seconds[n-1] < to.Sub(from).Seconds()-1e-6) {
		i.fault(b.line, "the records do not enclose the segment's useable span, %s to %s", stamp(from), stamp(to))
	}
	i.history.segments = append(i.history.segments, s)
}

// frames finds the frame that the body is turned from, and whether the records turn the
// other way.
func (i *interpreter) frames(b *block) (frame orbit.Frame, inverse bool) {
	a, c := i.need(b, "REF_FRAME_A"), i.need(b, "REF_FRAME_B")
	other := a
	if isBody(a) {
		other, inverse = c, true
	}
	if a != "" && c != "" && isBody(a) == isBody(c) {
		i.fault(b.line, "REF_FRAME_A %.40q and REF_FRAME_B %.40q: one must be the body, SC_BODY or SC_BODY_1, the other a frame", a, c)
		return
	}
	switch e, ok := b.get("ATTITUDE_DIR"); {
	case ok && e.value == "B2A":
		inverse = !inverse
	case ok && e.value != "A2B":
		i.fault(e.line, "ATTITUDE_DIR %.20q is not allowed; it must be A2B or B2A", e.value)
	}
	frame, ok := frameOf(other)
	if !ok && other != "" {
		i.fault(b.line, "the frame %.40q is not read here; EME2000, J2000, GCRF, ICRF, TOD, TEME and ITRF are", other)
	}
	return frame, inverse
}

// reader returns what makes a turn of the numbers of a record.
func (i *interpreter) reader(b *block) func(v []float64) (Quaternion, string) {
	kind := strings.ReplaceAll(i.need(b, "ATTITUDE_TYPE"), " ", "_")
	e, _ := b.get("ATTITUDE_TYPE")
	if kind == "" {
		return nil
	}
	if strings.HasPrefix(kind, "SPIN") {
		i.fault(e.line, "ATTITUDE_TYPE %s is not read: from which direction its spin angle counts is not settled here; write the attitude as QUATERNION or EULER_ANGLE, or give attitude: spin, which takes the axis and leaves the phase open", kind)
		return nil
	}
	if _, ok := columnsOf[kind]; !ok {
		i.fault(e.line, "ATTITUDE_TYPE %.40q is not known; QUATERNION and EULER_ANGLE are read, with DERIVATIVE, RATE or ANGVEL behind a stroke", kind)
		return nil
	}
	if strings.HasPrefix(kind, "EULER") {
		return i.eulerReader(b)
	}
	first := false
	if e, ok := b.get("QUATERNION_TYPE"); ok {
		first = e.value == "FIRST"
		if e.value != "FIRST" && e.value != "LAST" {
			i.fault(e.line, "QUATERNION_TYPE %.20q is not allowed; it must be FIRST or LAST", e.value)
		}
	}
	return func(v []float64) (Quaternion, string) {
		q := Quaternion{v[0], v[1], v[2], v[3]}
		if first {
			q = Quaternion{v[1], v[2], v[3], v[0]}
		}
		n := math.Sqrt(q.dot(q))
		if !(math.Abs(n-1) <= NormTolerance) {
			return q, fmt.Sprintf("the quaternion's length is %.6g; it must be 1 within %g", n, NormTolerance)
		}
		return q.scaled(1 / n), ""
	}
}

func (i *interpreter) eulerReader(b *block) func(v []float64) (Quaternion, string) {
	e, ok := b.get("EULER_ROT_SEQ")
	axes := [3]int{-1, -1, -1}
	good := ok && len(e.value) == 3
	for k := 0; good && k < 3; k++ {
		axes[k] = strings.IndexByte("123XYZ", e.value[k]) % 3
		good = axes[k] >= 0 && (k == 0 || axes[k] != axes[k-1])
	}
	if !good {
		i.fault(e.line, "EULER_ROT_SEQ %.20q is not allowed; it must be three axes, as 321 or ZYX, none twice in a row", e.value)
		return nil
	}
	return func(v []float64) (Quaternion, string) {
		q := Quaternion{C: 1}
		for k, axis := range axes {
			q = q.then(about(axis, v[k]*math.Pi/180))
		}
		return q, ""
	}
}

// rows reads the records of a segment.
func (i *interpreter) rows(b *block, s *segment, frame orbit.Frame, inverse bool, read func([]float64) (Quaternion, string)) {
	kind, _ := b.get("ATTITUDE_TYPE")
	columns := columnsOf[strings.ReplaceAll(kind.value, " ", "_")]
	for _, r := range b.rows {
		// An XML record holds what counts alone.
		if n := len(r.fields) - 1; n != columns[0] && n != columns[1] {
			i.fault(r.line, "the record has %d numbers; %s has %d", max(n, 0), kind.value, columns[0])
			continue
		}
		t, err := parseTime(r.fields[0])
		if err != nil {
			i.fault(r.line, "%v", err)
			continue
		}
		v := make([]float64, columns[1])
		for k := range v {
			x, err := strconv.ParseFloat(r.fields[k+1], 64)
			if err != nil || math.IsNaN(x) || math.Abs(x) > 1e6 {
				i.fault(r.line, "%.40q is not allowed; it must be a number", r.fields[k+1])
				return
			}
			v[k] = x
		}
		q, problem := read(v)
		if problem != "" {
			i.fault(r.line, "%s", problem)
			continue
		}
		if inverse {
			q = q.inverse()
		}
		at := t.Sub(s.from).Seconds()
		if n := len(s.seconds); n > 0 && !(at > s.seconds[n-1]) {
			i.fault(r.line, "the time %s does not rise over that of the record before", r.fields[0])
			continue
		}
		s.seconds = append(s.seconds, at)
		s.turns = append(s.turns, i.toTEME(q, frame, t))
	}
}

// toTEME turns the reference of a record; the Earth-fixed one stays.
func (i *interpreter) toTEME(q Quaternion, frame orbit.Frame, t time.Time) Quaternion {
	if frame == orbit.EarthFixed || frame == orbit.TEME {
		return q
	}
	x, y, z := q.Axes()
	turn := func(v orbit.Vec3) orbit.Vec3 {
		p, _ := i.turner.Between(frame, orbit.TEME, v, orbit.Vec3{}, t)
		return p
	}
	return ofAxes(turn(x), turn(y), turn(z))
}

// order sorts the segments and refuses those that overlap; they may touch.
func (i *interpreter) order() {
	s := i.history.segments
	sort.SliceStable(s, func(a, b int) bool { return s[a].from.Before(s[b].from) })
	for k := 1; k < len(s); k++ {
		if s[k].from.Before(s[k-1].to) {
			i.faults = append(i.faults, fmt.Errorf("the segment from %s overlaps that which ends at %s", stamp(s[k].from), stamp(s[k-1].to)))
		}
	}
}

// parseTime reads the CCSDS time codes A and B (301.0-B) in UTC, 1957 to 2056.
func parseTime(s string) (time.Time, error) {
	body := strings.TrimSuffix(s, "Z")
	for _, layout := range []string{"2006-01-02T15:04:05", "2006-002T15:04:05"} {
		if t, err := time.Parse(layout, body); err == nil && !strings.Contains(body, ",") && t.Year() >= 1957 && t.Year() <= 2056 {
			return t, nil
		}
	}
	return time.Time{}, fmt.Errorf("%.40q is not a time in the years 1957 to 2056; write it as 2026-03-10T14:05:00.5 or 2026-069T14:05:00.5", s)
}
