package planfiles

import (
	"io"
	"slices"
	"time"

	"slantwise/downlink/contacts"
)

// PlanColumns are the columns of a plan, in their order.
var PlanColumns = []string{
	"contact", "request", "station", "antenna", "spacecraft", "transmitter", "start_utc", "end_utc",
	"setup_start_utc", "teardown_end_utc", "volume_bytes", "value", "fixed",
}

// What a plan by hand must tell.
var planMust = []string{"station", "antenna", "spacecraft", "start_utc", "end_utc"}

// PlanRow is a row of a plan with what else it says, NaN where it says nothing of
// volume and value.
type PlanRow struct {
	contacts.PlanRow
	Transmitter             string    // empty where it says nothing
	SetUpStart, TearDownEnd time.Time // zero where it says nothing
	VolumeBytes, Value      float64
}

// Plan reads a plan, one of ours or one made by hand: station, antenna, spacecraft and
// the two times must be there, other columns may.
func Plan(file string, r io.Reader, clock Clock) ([]PlanRow, error) {
	may := slices.DeleteFunc(slices.Clone(PlanColumns), func(c string) bool { return slices.Contains(planMust, c) })
	t, rows, err := readTable(file, r, clock, planMust, may)
	if err != nil {
		return nil, err
	}
	out := make([]PlanRow, 0, len(rows))
	for _, r := range rows {
		p := PlanRow{Transmitter: r.text("transmitter"), VolumeBytes: r.numberOrNaN("volume_bytes"), Value: r.numberOrNaN("value"),
			SetUpStart: r.instantOrZero("setup_start_utc"), TearDownEnd: r.instantOrZero("teardown_end_utc")}
		p.PlanRow = contacts.PlanRow{
			Place: r.place(), Contact: r.text("contact"), Request: r.text("request"), Station: r.text("station"), Antenna: r.text("antenna"),
			Spacecraft: r.text("spacecraft"), Start: r.instant("start_utc"), End: r.instant("end_utc"),
		}
		switch s := r.text("fixed"); s {
		case "true":
			p.Fixed = true
		case "", "false":
		default:
			t.fault(r.line, "fixed: %q is not allowed; it must be true or false", s)
		}
		out = append(out, p)
	}
	if err := t.err(); err != nil {
		return nil, err
	}
	return out, nil
}
