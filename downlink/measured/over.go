package measured

import (
	"fmt"
	"math"
	"time"

	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// State tells how a sample is used.
type State int

// States.
const (
	Used      State = iota
	Outside         // the spacecraft is below the horizon, or the orbit does not cover the instant
	Dropout         // not locked, or far below the rest
	Saturated       // the receiver shows its greatest value though the signal changes
	Wet             // it rained, or the samples look like rain
	Outlier         // farther from the fit than the noise explains
	Astray          // the antenna looks elsewhere
)

// String returns the state in a word.
func (s State) String() string {
	return [...]string{"used", "outside any pass", "dropout", "saturated", "wet", "outlier", "antenna elsewhere"}[s]
}

// Point is a sample over what was predicted for its instant.
type Point struct {
	Sample
	State                State
	AzimuthDeg           float64
	ElevationDeg         float64
	PredictedFrequencyHz float64
	FrequencyRateHzS     float64 // of the predicted frequency along the orbit, the Earth held
	// AzimuthRateDegS and ElevationRateDegS are of the prediction; NaN at the ends of the orbit.
	AzimuthRateDegS, ElevationRateDegS float64
	PowerDBm, CN0DBHz                  float64 // predicted; NaN outside
	EbN0DB                             float64
	NoiseK                             float64 // predicted system noise; NaN where a measured G/T without the gain stands in its place
	MarginDB                           float64 // predicted, over the code's threshold; NaN without a mode
}

// Predicted returns what was predicted for a quantity, NaN where nothing was; for
// relative power it is the power, whose changes compare.
func (p *Point) Predicted(q Quantity) float64 {
	switch q {
	case PowerDBm, RelativePowerDB:
		return p.PowerDBm
	case CN0DBHz:
		return p.CN0DBHz
	case EbN0DB:
		return p.EbN0DB
	case FrequencyHz:
		return p.PredictedFrequencyHz
	case AzimuthDeg:
		return p.AzimuthDeg
	case ElevationDeg:
		return p.ElevationDeg
	}
	return math.NaN()
}

// Residual returns measured less predicted, an azimuth the short way round.
func (p *Point) Residual(q Quantity) float64 {
	d := p.Get(q) - p.Predicted(q)
	if q == AzimuthDeg {
		d = math.Remainder(d, 360)
	}
	return d
}

// Prediction is what samples are put over.
type Prediction struct {
	Link       *downlink.Link // nil: only frequencies and angles of Carrier
	Orbit      *orbit.Ephemeris
	Frame      station.Frame
	Refraction *station.Refraction                 // nil: angles are geometric
	Carrier    func(time.Time) unit.Frequency      // transmitted
	Least      func(azimuth unit.Angle) unit.Angle // horizon; nil: 0
}

// Over puts the samples over the prediction. Samples outside any pass stay in the list
// as Outside. It fails where a budget has no value.
func (p *Prediction) Over(samples []Sample) ([]Point, error) {
	out := make([]Point, len(samples))
	for i := range samples {
		pt := &out[i]
		*pt = Point{Sample: samples[i], AzimuthDeg: math.NaN(), ElevationDeg: math.NaN(), PredictedFrequencyHz: math.NaN(),
			FrequencyRateHzS: math.NaN(), AzimuthRateDegS: math.NaN(), ElevationRateDegS: math.NaN(), NoiseK: math.NaN(), MarginDB: math.NaN(), PowerDBm: math.NaN(), CN0DBHz: math.NaN(), EbN0DB: math.NaN()}
		state, err := p.Orbit.At(pt.At)
		if err != nil {
			pt.State = Outside
			continue
		}
		look := p.Frame.Look(state)
		elevation := look.Elevation
		if p.Refraction != nil {
			if seen, ok := p.Refraction.Apparent(elevation); ok {
				elevation = seen
			}
		}
		pt.AzimuthDeg, pt.ElevationDeg = look.Azimuth.Degrees(), elevation.Degrees()
		p.rates(pt)
		least := unit.Angle(0)
		if p.Least != nil {
			least = p.Least(look.Azimuth)
		}
		if look.Elevation < min(least, 0) {
			pt.State = Outside
			continue
		}
		if pt.Get(Locked) == 0 {
			pt.State = Dropout
		}
		if p.Link == nil {
			continue
		}
		g, _ := p.Link.GeometryOf(pt.At, state)
		b, err := p.Link.At(g)
		if err != nil {
			return nil, fmt.Errorf("prediction for %s: %w", pt.At.Format(time.RFC3339), err)
		}
		pt.PowerDBm, pt.CN0DBHz, pt.EbN0DB = b.ReceivedPowerDBm, float64(b.CN0), float64(b.EbN0)
		pt.NoiseK, pt.MarginDB = float64(b.SystemNoise), float64(b.Margin)
	}
	return out, nil
}

// rates fills in what is received to first order, f (1 - ṙ/c), how fast it changes along the orbit
// with the Earth held, which is what a late spacecraft shifts, and how fast the direction changes;
// rates are NaN at the ends of the orbit.
func (p *Prediction) rates(pt *Point) {
	at := func(t time.Time) (look station.Look, ok bool) {
		s, err := p.Orbit.At(t)
		if err != nil {
			return look, false
		}
		return p.Frame.Look(s), true
	}
	pt.PredictedFrequencyHz, pt.FrequencyRateHzS = math.NaN(), math.NaN()
	if f, _, ok := p.lateAt(pt.At, 0); ok {
		pt.PredictedFrequencyHz = f
	}
	const half = 500 * time.Millisecond
	before, ok0 := at(pt.At.Add(-half))
	after, ok1 := at(pt.At.Add(half))
	if !ok0 || !ok1 {
		return
	}
	pt.ElevationRateDegS = (after.Elevation - before.Elevation).Degrees()
	pt.AzimuthRateDegS = math.Remainder((after.Azimuth - before.Azimuth).Degrees(), 360)
	f0, _, ok0 := p.lateAt(pt.At, half.Seconds())
	f1, _, ok1 := p.lateAt(pt.At, -half.Seconds())
	if ok0 && ok1 {
		pt.FrequencyRateHzS = f1 - f0
	}
}

// LeftOut lists the states of samples that are not used for a fit, outliers apart.
func LeftOut() []State { return []State{Outside, Dropout, Saturated, Wet, Astray} }
