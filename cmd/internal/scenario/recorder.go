package scenario

import (
	"slantwise/downlink/recorder"
)

var (
	recorderKeys = []string{
		"capacity_bytes", "when_full", "without_uplink", "copies", "housekeeping_percent",
		"acknowledge_every_s", "acknowledge_delay_s", "lock_on_s", "frame_loss", "data",
	}
	recorderDataKeys = []string{
		"name", "rate_bps", "bytes_per_orbit", "after_node_s", "lasting_s", "on_board_bytes", "on_board_age_s",
	}
)

// Recorder is the on-board recorder of a spacecraft.
type Recorder struct {
	Capacity      float64 // bytes
	WhenFull      recorder.FullRule
	WithoutUplink recorder.WithoutUplink
	Copies        int
	Housekeeping  float64 // share of every contact's rate
	Acknowledge   recorder.Acknowledge
	LockOn        float64 // seconds at each begin of reception
	FrameLoss     float64 // share of what is sent
	Data          []RecorderData
}

// RecorderData is data of one priority; the first of the list is sent first.
type RecorderData struct {
	Name           string
	BytesPerSecond float64 // made all the time; 0: by orbit
	BytesPerOrbit  float64 // made in each orbit
	AfterNode      float64 // seconds after the ascending node
	Lasting        float64 // seconds
	OnBoard        float64 // bytes at the start of the window
	OnBoardAge     float64 // seconds
}

// Defaults of a recorder, each told where it is taken.
const (
	defaultAcknowledgeEvery = 10.0
	secondsInAWeek          = 604_800
)

// recorder reads a spacecraft's recorder; nil: none is given.
func (o object) recorder() *Recorder {
	r := o.child("recorder", recorderKeys)
	if r.node == nil {
		return nil
	}
	r.about = o.about + ", recorder"
	out := &Recorder{Capacity: r.bytesOr("capacity_bytes", above(0, 1e15, "B"), 0)}
	if !r.has("capacity_bytes") {
		r.missing("capacity_bytes", "what it holds, "+above(0, 1e15, "B").allowed())
	}
	if w, _ := r.word("when_full", "lose_new", "overwrite_oldest"); w == "overwrite_oldest" {
		out.WhenFull = recorder.Overwrite
	}
	if !r.has("when_full") {
		r.assume("when_full left out: new data are lost when it is full")
	}
	if w, _ := r.word("without_uplink", "delete_when_sent", "keep"); w == "keep" {
		out.WithoutUplink = recorder.KeepForUplink
	}
	if !r.has("without_uplink") {
		r.assume("without_uplink left out: over a station without uplink data are deleted when they are sent")
	}
	out.Copies = int(r.numberOr("copies", atLeast(1, 100, ""), 1))
	if v, ok := r.number("copies", atLeast(1, 100, "")); ok && v != float64(out.Copies) {
		r.fault(r.get("copies"), "copies", "%g is not allowed; it must be a whole number", "", v)
	}
	if out.WithoutUplink == recorder.KeepForUplink {
		r.useless("where data are kept until they are acknowledged", "copies")
	}
	out.Housekeeping = r.numberOr("housekeeping_percent", span{low: 0, high: 100, highOpen: true, unit: "%"}, 0) / 100
	out.Acknowledge.Every = r.numberOr("acknowledge_every_s", span{low: 0.1, high: 86_400, unit: "s"}, defaultAcknowledgeEvery)
	if !r.has("acknowledge_every_s") {
		r.assume("acknowledge_every_s left out: %g s over a station with uplink", defaultAcknowledgeEvery)
	}
	out.Acknowledge.Delay = r.numberOr("acknowledge_delay_s", atLeast(0, 86_400, "s"), 0)
	out.LockOn = r.zeroLeftOut("lock_on_s", atLeast(0, 86_400, "s"))
	out.FrameLoss = r.numberOr("frame_loss", span{low: 0, high: 1, highOpen: true}, 0)
	out.Data = r.recorderData()
	return out
}

// Class is the data as a recorder takes them through a time of so many seconds, in which
// orbits begin at nodes.
func (d *RecorderData) Class(nodes []float64, length float64) recorder.Class {
	k := recorder.Class{Name: d.Name, OnBoard: d.OnBoard, OnBoardAge: d.OnBoardAge}
	switch {
	case d.BytesPerSecond > 0:
		k.Made = recorder.ByTime(length, d.BytesPerSecond)
	case d.BytesPerOrbit > 0:
		k.Made = recorder.ByOrbit(nodes, d.AfterNode, d.Lasting, d.BytesPerOrbit)
	}
	return k
}

func (o object) recorderData() []RecorderData {
	items := o.objects("data", "kinds of data, the first of which is sent first", maxParts, recorderDataKeys)
	if !o.has("data") {
		o.missing("data", "the kinds of data, the first of which is sent first")
	}
	called := names("kind of data", items)
	var out []RecorderData
	for i, it := range items {
		d := RecorderData{Name: called[i]}
		which, given := it.exclusive("rate_bps", "bytes_per_orbit")
		switch {
		case !given && !it.has("on_board_bytes"):
			it.missing("rate_bps", "the rate at which the data are made, or bytes_per_orbit")
		case which == "rate_bps":
			d.BytesPerSecond = it.numberOr(which, bitsASecond, 0) / 8
			it.useless("beside rate_bps: the data are made all the time", "after_node_s", "lasting_s")
		case which == "bytes_per_orbit":
			d.BytesPerOrbit = it.bytesOr(which, above(0, 1e15, "B"), 0)
			d.AfterNode = it.numberOr("after_node_s", atLeast(0, secondsInAWeek, "s"), 0)
			d.Lasting = it.required("lasting_s", above(0, secondsInAWeek, "s"), "for how long they are made in each orbit")
		default:
			it.useless("without bytes_per_orbit", "after_node_s", "lasting_s")
		}
		d.OnBoard = it.bytesOr("on_board_bytes", atLeast(0, 1e15, "B"), 0)
		d.OnBoardAge = it.numberOr("on_board_age_s", atLeast(0, 1e8, "s"), 0)
		out = append(out, d)
	}
	return out
}
