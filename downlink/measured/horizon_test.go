package measured

import (
	"math"
	"math/rand/v2"
	"testing"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// TestMaskKeepsWhatNothingTells corrects a known skyline where signals vanish, and leaves it elsewhere.
func TestMaskKeepsWhatNothingTells(t *testing.T) {
	var east []Point
	for _, p := range skylinePasses(rand.New(rand.NewPCG(4, 1)), 120) {
		if p.AzimuthDeg > 30 && p.AzimuthDeg < 200 {
			east = append(east, p)
		}
	}
	had := func(azimuth unit.Angle) unit.Angle {
		return unit.Angle(skylineAt(azimuth.Wrapped().Degrees())-2) * unit.Degree
	}
	h, err := FitHorizon([][]Point{east}, HorizonOptions{Had: had, Knots: 12})
	if err != nil {
		t.Fatal(err)
	}
	points, kept := h.Mask([]unit.Angle{45 * unit.Degree, 120 * unit.Degree})
	if kept < 5 || kept > 8 || len(points) != 13 {
		t.Errorf("%d of 12 directions kept, %d points", kept, len(points))
	}
	mask, err := station.NewMask(points, station.Apparent)
	if err != nil {
		t.Fatal(err)
	}
	for azimuth, over := range map[float64]float64{90: 2, 120: 2, 150: 2, 270: 0, 300: 0} {
		want := skylineAt(azimuth) - 2 + over
		if got := mask.At(unit.Angle(azimuth) * unit.Degree).Degrees(); math.Abs(got-want) > 0.5 {
			t.Errorf("at %g deg: %.2f deg, want %.2f", azimuth, got, want)
		}
	}
}

// TestWeakSignalsTellNoSkyline leaves out what vanished for want of margin.
func TestWeakSignalsTellNoSkyline(t *testing.T) {
	points := skylinePasses(rand.New(rand.NewPCG(5, 1)), 30)
	for i := range points {
		points[i].MarginDB = 2
	}
	h, err := FitHorizon([][]Point{points}, HorizonOptions{LevelDB: -0.5})
	if err != nil || h.Weak != 0 || h.Seen+h.Alone < 50 {
		t.Fatalf("%+v, %v", h, err)
	}
	if _, err := FitHorizon([][]Point{points}, HorizonOptions{LevelDB: -1.5}); err == nil {
		t.Error("signals that are 0.5 dB above the threshold tell a skyline")
	}
}

// TestLateReceiverIsNoEdge has a log that begins when the signal was there already.
func TestLateReceiverIsNoEdge(t *testing.T) {
	points := skylinePasses(rand.New(rand.NewPCG(6, 1)), 1)
	if n := len(edgesOf(points)); n != 2 {
		t.Errorf("%d edges of a pass", n)
	}
	first := 0
	for i := range points {
		if points[i].Get(Locked) == 1 {
			first = i
			break
		}
	}
	if n := len(edgesOf(points[first:])); n != 1 {
		t.Errorf("%d edges where the log begins with the lock, want that of its end", n)
	}
}
