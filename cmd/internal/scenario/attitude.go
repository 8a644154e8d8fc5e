package scenario

import (
	"math"
	"time"

	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/orbit/attitude"
	"slantwise/orbit/unit"
)

var spinKeys = []string{"axis_right_ascension_deg", "axis_declination_deg", "axis_frame", "counts_as"}

// attitudes are the words of the key, the first for one that is left out.
var attitudes = map[string]downlink.Attitude{
	"nadir": downlink.AttitudeNadir, "station": downlink.AttitudeStation, "tumbling": downlink.AttitudeTumbling,
	"sun": downlink.AttitudeSun, "spin": downlink.AttitudeSpin, "yaw_steering": downlink.AttitudeYawSteering,
	"history": downlink.AttitudeHistory,
}

// attitude reads how the antenna is held. It must be there where the pattern has a
// direction and the spacecraft is flown.
func (o object) attitude(t *downlink.Transmitter, n Need) {
	word, given := o.word("attitude", "nadir", "station", "tumbling", "sun", "spin", "yaw_steering", "history")
	if given {
		t.Attitude = attitudes[word]
	}
	directed := t.EIRP == nil && t.Pattern.Kind != downlink.Isotropic
	if !o.has("attitude") && directed && n == NeedOrbits {
		o.missing("attitude", "nadir, station, tumbling, sun, spin, yaw_steering or history, since the antenna's gain depends on the direction")
	}
	o.spin(t)
	o.history(t)
	if b := t.Body.Boresight; (t.Attitude == downlink.AttitudeStation || t.Attitude == downlink.AttitudeTumbling) && b.OffZ != 0 {
		o.fault(o.get("antenna"), "antenna", "a boresight on the body has no effect with attitude: %s", "leave the antenna's boresight keys out", word)
	}
	probable := t.Attitude == downlink.AttitudeTumbling || t.Attitude == downlink.AttitudeSpin && t.Body.SpinGain == downlink.SpinExceeded
	if !probable {
		why := "without attitude: tumbling or spin"
		switch {
		case t.Attitude == downlink.AttitudeSpin:
			why = "beside counts_as: " + t.Body.SpinGain.String()
		case o.has("attitude"):
			why = "unless attitude is tumbling or spin"
		}
		o.useless(why, "attitude_probability")
		return
	}
	if !o.has("attitude_probability") {
		o.assume("attitude_probability left out: the gain exceeded with probability %g counts", downlink.DefaultAttitudeProbability)
	}
	t.AttitudeProbability = o.numberOr("attitude_probability", span{low: 0, high: 1, lowOpen: true, highOpen: true}, downlink.DefaultAttitudeProbability)
}

// spin reads the axis of a spinning spacecraft and what its turning counts as.
func (o object) spin(t *downlink.Transmitter) {
	if t.Attitude != downlink.AttitudeSpin {
		o.useless("unless attitude is spin", "spin")
		return
	}
	if !o.has("spin") {
		o.missing("spin", "its axis, as spin: {axis_right_ascension_deg: 40, axis_declination_deg: -10}")
		return
	}
	c := o.child("spin", spinKeys)
	ra := c.required("axis_right_ascension_deg", span{low: -180, high: 360, unit: "deg"}, "the right ascension of the spin axis")
	dec := c.required("axis_declination_deg", span{low: -90, high: 90, unit: "deg"}, "the declination of the spin axis")
	sinR, cosR := math.Sincos(ra * unit.Degree.Radians())
	sinD, cosD := math.Sincos(dec * unit.Degree.Radians())
	t.Body.SpinAxis = orbit.Vec3{X: cosD * cosR, Y: cosD * sinR, Z: sinD}
	c.turnSpinAxis(t)
	word, _ := c.word("counts_as", "exceeded", "mean", "worst")
	t.Body.SpinGain = map[string]downlink.SpinGain{"exceeded": downlink.SpinExceeded, "mean": downlink.SpinMean, "worst": downlink.SpinWorst}[word]
	if c.node != nil && !c.has("counts_as") {
		c.assume("counts_as left out: a spin counts as the gain reached or exceeded with attitude_probability over a turn")
	}
}

// turnSpinAxis brings the axis from the frame that it is given in to that of the window's
// middle; precession moves it by 0.014 degrees a year.
func (o object) turnSpinAxis(t *downlink.Transmitter) {
	frame, _ := o.word("axis_frame", "of_date", "j2000")
	if o.node != nil && !o.has("axis_frame") {
		o.assume("axis_frame left out: the spin axis is given for the true equator and mean equinox of date")
	}
	turner, err := orbit.NewTurner(o.r.earthTurn)
	if err != nil || frame != "j2000" || o.r.span.Start.IsZero() { // the Earth's own fault is told already
		return
	}
	middle := o.r.span.Start.Add(o.r.span.Length() / 2)
	axis, _ := turner.Between(orbit.J2000, orbit.TEME, t.Body.SpinAxis, orbit.Vec3{}, middle)
	t.Body.SpinAxis = axis.Unit()
	o.assume("the spin axis of J2000 understood as right ascension %.4f deg and declination %.4f deg of date", math.Atan2(axis.Y, axis.X)*180/math.Pi, math.Asin(axis.Unit().Z)*180/math.Pi)
}

// history reads the attitude history of a spacecraft.
func (o object) history(t *downlink.Transmitter) {
	if t.Attitude != downlink.AttitudeHistory {
		o.useless("unless attitude is history", "attitude_file")
		return
	}
	if !o.has("attitude_file") {
		o.missing("attitude_file", "a CCSDS attitude ephemeris message")
		return
	}
	name, ok := o.text("attitude_file")
	if !ok {
		return
	}
	f := o.file("attitude_file", name)
	if f == nil {
		return
	}
	defer f.Close()
	h, err := attitude.Read(f, o.r.earthTurn)
	if err != nil {
		o.fileFaults("attitude_file", name, err)
		return
	}
	t.Body.History = h
	var spans []string
	for _, s := range h.Spans() {
		spans = append(spans, s[0].Format(time.RFC3339)+" to "+s[1].Format(time.RFC3339))
	}
	o.assume("attitude_file %s understood as the attitude of %s, useable from %s: %s", quote(name), quote(h.Object), list(spans), h.Source())
	if all := h.Spans(); !o.r.span.Start.IsZero() && (all[0][0].After(o.r.span.Start) || all[len(all)-1][1].Before(o.r.span.End)) {
		o.warn("attitude_file %s does not hold the whole window: a budget outside its spans is refused", quote(name))
	}
	for _, w := range h.Warnings {
		o.warn("attitude_file %s: %s", quote(name), w)
	}
}

// fileFaults adds the faults of a file that a key names, each on its own.
func (o object) fileFaults(key, name string, err error) {
	list := []error{err}
	if joined, ok := err.(interface{ Unwrap() []error }); ok {
		list = joined.Unwrap()
	}
	for _, e := range list {
		o.fault(o.get(key), key, "%s: %v", "", name, e)
	}
}

var mountingKeys = []string{"boresight_body", "boresight_off_z_deg", "boresight_around_z_deg", "pattern_turn_deg"}

// mounting reads where the antenna sits on its body; o is the antenna.
func (o object) mounting() downlink.Body {
	var b downlink.Body
	which, given := o.exclusive("boresight_body", "boresight_off_z_deg")
	switch {
	case !given:
		o.useless("without boresight_off_z_deg", "boresight_around_z_deg")
	case which == "boresight_body":
		o.useless("beside boresight_body", "boresight_around_z_deg")
		b.Boresight = o.bodyDirection(which)
	default:
		b.Boresight.OffZ = unit.Angle(o.numberOr(which, atLeast(0, 180, "deg"), 0)) * unit.Degree
		b.Boresight.AroundZ = unit.Angle(o.numberOr("boresight_around_z_deg", atLeast(-180, 360, "deg"), 0)) * unit.Degree
		if !o.has("boresight_around_z_deg") && b.Boresight.OffZ != 0 {
			o.assume("boresight_around_z_deg left out: 0 deg, toward body x")
		}
	}
	b.Turn = unit.Angle(o.numberOr("pattern_turn_deg", atLeast(-180, 360, "deg"), 0)) * unit.Degree
	return b
}

// bodyDirection reads a direction [x, y, z] in body axes, of any length but none.
func (o object) bodyDirection(key string) downlink.BodyDirection {
	n := o.get(key)
	items := o.items(key, "three numbers [x, y, z], body axes", 3)
	if items == nil {
		return downlink.BodyDirection{}
	}
	if len(items) != 3 {
		o.fault(n, key, "%s is not allowed; it must be three numbers [x, y, z], body axes", "", showRow(n))
		return downlink.BodyDirection{}
	}
	var v [3]float64
	for i, it := range items {
		x, ok := o.numberAt(it, key+[...]string{"[0]", "[1]", "[2]"}[i], span{low: -1000, high: 1000})
		if !ok {
			return downlink.BodyDirection{}
		}
		v[i] = x
	}
	d := downlink.BodyDirectionOf(orbit.Vec3{X: v[0], Y: v[1], Z: v[2]})
	if v == [3]float64{} {
		o.fault(n, key, "[0, 0, 0] points nowhere", "give the direction that the boresight has in body axes")
		return downlink.BodyDirection{}
	}
	o.assume("%s [%g, %g, %g] understood as %s deg off body z, %s deg around it from x toward y", key, v[0], v[1], v[2], figure(roundTo(d.OffZ.Degrees(), 1e4)), figure(roundTo(d.AroundZ.Degrees(), 1e4)))
	return d
}
