package measured

import (
	"fmt"
	"iter"
	"math"
	"slices"
	"sort"
	"time"
)

// Quantity is what a column of a log holds; the unit is in the name.
type Quantity int

// Quantities.
const (
	PowerDBm        Quantity = iota // at the input of the first amplifier
	RelativePowerDB                 // AGC steps and the like: only changes have meaning
	CN0DBHz
	EbN0DB
	FrequencyHz // received carrier
	AzimuthDeg
	ElevationDeg
	Locked      // 1 or 0
	RainMmH     // at the station
	HumidityPct // relative
	BeaconDB    // of a beacon that is always up, relative
	quantities
)

var quantityNames = [quantities]string{"received_power_dbm", "relative_power_db", "cn0_dbhz", "ebn0_db",
	"frequency_hz", "azimuth_deg", "elevation_deg", "locked", "rain_mm_h", "humidity_pct", "beacon_db"}

// String returns the name of the quantity's column.
func (q Quantity) String() string { return quantityNames[q] }

// Sample is what was logged at an instant; NaN: not logged.
type Sample struct {
	At     time.Time
	Line   int // in the file
	Values [quantities]float64
}

// Get returns a value, NaN where it was not logged.
func (s *Sample) Get(q Quantity) float64 { return s.Values[q] }

func newSample(at time.Time, line int) Sample {
	s := Sample{At: at, Line: line}
	for i := range s.Values {
		s.Values[i] = math.NaN()
	}
	return s
}

// Log is a file of measurements, by time. Notes tell what was passed over.
type Log struct {
	Name    string
	Samples []Sample
	Notes   []string
}

// Has tells whether any sample holds the quantity.
func (l *Log) Has(q Quantity) bool {
	for i := range l.Samples {
		if !math.IsNaN(l.Samples[i].Values[q]) {
			return true
		}
	}
	return false
}

// span is what a value may be.
var spans = [quantities][2]float64{PowerDBm: {-250, 60}, RelativePowerDB: {-300, 300}, CN0DBHz: {-50, 200}, EbN0DB: {-50, 100},
	FrequencyHz: {1e3, 1e12}, AzimuthDeg: {-360, 720}, ElevationDeg: {-90, 180}, Locked: {0, 1}, RainMmH: {0, 500}, HumidityPct: {0, 100}, BeaconDB: {-300, 300}}

func (s *Sample) set(q Quantity, v float64) error {
	if r := spans[q]; !(v >= r[0] && v <= r[1]) {
		return fmt.Errorf("%s: %g is not allowed; it must be %g to %g", q, v, r[0], r[1])
	}
	if q == Locked && v != 0 && v != 1 {
		return fmt.Errorf("locked: %g is not allowed; it must be 1 or 0", v)
	}
	s.Values[q] = v
	return nil
}

// tidy sorts by time and takes each instant once: rows that say the same count once, and
// what different quantities say of one instant comes together.
func (l *Log) tidy(f *faults) {
	sort.SliceStable(l.Samples, func(i, j int) bool { return l.Samples[i].At.Before(l.Samples[j].At) })
	doubled := 0
	out := l.Samples[:0]
	for _, s := range l.Samples {
		if n := len(out); n > 0 && out[n-1].At.Equal(s.At) {
			same, where := true, ""
			if l := out[n-1].Line; l > 0 {
				where = fmt.Sprintf(" in line %d", l)
			}
			for q, v := range s.Values {
				had := out[n-1].Values[q]
				switch {
				case math.IsNaN(v):
				case math.IsNaN(had):
					out[n-1].Values[q], same = v, false
				case had != v:
					same = false
					f.add(s.Line, "%s at %s is %g, and %g%s; leave one of the two out", Quantity(q), s.At.Format(time.RFC3339Nano), v, had, where)
				}
			}
			if same {
				doubled++
			}
			continue
		}
		out = append(out, s)
	}
	l.Samples = out
	if doubled > 0 {
		l.Notes = append(l.Notes, fmt.Sprintf("%d doubled rows say the same as another and count once", doubled))
	}
}

// All goes through the quantities.
func All() iter.Seq[Quantity] {
	return func(yield func(Quantity) bool) {
		for q := range quantities {
			if !yield(q) {
				return
			}
		}
	}
}

// Reading is one measured number with the name of its quantity.
type Reading struct {
	At       time.Time
	Quantity string
	Value    float64
}

// Gather makes a log of readings, as Read does of a file.
func Gather(name string, readings []Reading) (*Log, error) {
	f := &faults{name: name}
	l := &Log{Name: name}
	for _, r := range readings {
		q := Quantity(slices.Index(quantityNames[:], r.Quantity))
		s := newSample(r.At, 0)
		if q < 0 {
			f.add(0, "quantity %q is not known", r.Quantity)
		} else if err := s.set(q, r.Value); err != nil {
			f.add(0, "%s: %w", r.At.Format(time.RFC3339Nano), err)
		}
		l.Samples = append(l.Samples, s)
	}
	l.tidy(f)
	if len(l.Samples) == 0 {
		f.add(0, "there is no measurement in it")
	}
	if err := f.err(); err != nil {
		return nil, err
	}
	return l, nil
}
