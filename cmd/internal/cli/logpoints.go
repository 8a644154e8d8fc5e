package cli

import (
	"math"

	"slantwise/cmd/internal/logbook"
	"slantwise/downlink/measured"
)

// quantityNamed finds a quantity by the name of its column.
func quantityNamed(name string) (measured.Quantity, bool) {
	for q := range measured.All() {
		if q.String() == name {
			return q, true
		}
	}
	return 0, false
}

// sampleStates are the states of samples by their word.
var sampleStates = func() map[string]measured.State {
	out := map[string]measured.State{}
	for _, s := range append(measured.LeftOut(), measured.Used, measured.Outlier) {
		out[s.String()] = s
	}
	return out
}()

// pointsOf returns the measurements of an entry of the logbook over what was predicted for
// them when they were taken into it, a point an instant. What is not known is NaN: of an entry from
// before version 3 the direction, where no angle was logged. Quantities that this program does not
// know are left out.
func pointsOf(e *logbook.Entry) []measured.Point {
	var out []measured.Point
	for i := range e.Values {
		v := &e.Values[i]
		q, ok := quantityNamed(v.Quantity)
		if !ok {
			continue
		}
		if n := len(out); n == 0 || !out[n-1].At.Equal(v.At) {
			out = append(out, emptyPoint(v))
		}
		p := &out[len(out)-1]
		p.Values[q] = v.Measured
		switch q {
		case measured.PowerDBm, measured.RelativePowerDB:
			p.PowerDBm = v.Predicted
		case measured.CN0DBHz:
			p.CN0DBHz = v.Predicted
		case measured.EbN0DB:
			p.EbN0DB = v.Predicted
		case measured.FrequencyHz:
			p.PredictedFrequencyHz = v.Predicted
		case measured.AzimuthDeg:
			p.AzimuthDeg = v.Predicted
		case measured.ElevationDeg:
			p.ElevationDeg = v.Predicted
		}
	}
	return out
}

func emptyPoint(v *logbook.Value) measured.Point {
	none := math.NaN()
	p := measured.Point{State: sampleStates[v.State], AzimuthDeg: v.AzimuthDeg, ElevationDeg: v.ElevationDeg,
		PredictedFrequencyHz: none, FrequencyRateHzS: none, AzimuthRateDegS: none, ElevationRateDegS: none,
		PowerDBm: none, CN0DBHz: none, EbN0DB: none, NoiseK: none, MarginDB: none}
	p.At = v.At
	for q := range measured.All() {
		p.Values[q] = none
	}
	return p
}

// quantityWords are how a page calls a quantity, and its unit.
var quantityWords = map[measured.Quantity][2]string{
	measured.PowerDBm: {"Received power", "dBm"}, measured.RelativePowerDB: {"Relative power", "dB"},
	measured.CN0DBHz: {"C/N0", "dBHz"}, measured.EbN0DB: {"Eb/N0", "dB"}, measured.FrequencyHz: {"Received frequency", "Hz"},
	measured.AzimuthDeg: {"Azimuth", "deg"}, measured.ElevationDeg: {"Elevation", "deg"},
}
