package unit

import (
	"fmt"
	"math"
)

// DB is a ratio of powers in decibels: a gain or a loss. Antenna gains in dBi and
// densities relative to a stated unit (dB/K, dBHz) are held in it too; the name of
// the variable then carries the reference.
type DB float64

// Ratio returns the power ratio 10^(d/10).
func (d DB) Ratio() float64 { return math.Pow(10, float64(d)/10) }

// RatioDB returns the decibels of a power ratio. A ratio that is not positive and
// finite has no decibels: the error is a *RangeError.
func RatioDB(ratio float64) (DB, error) {
	if !(ratio > 0) || math.IsInf(ratio, 1) {
		return 0, &RangeError{Quantity: "power ratio", Value: ratio, Allowed: "greater than 0 and finite"}
	}
	return DB(10 * math.Log10(ratio)), nil
}

// Level is a power in decibels relative to one watt. The zero value is 0 dBW. Two
// levels do not add; their difference is a ratio.
type Level struct{ dbw float64 }

// LevelDBW returns the level of v dBW.
func LevelDBW(v float64) Level { return Level{v} }

// LevelDBm returns the level of v dBm, decibels relative to one milliwatt.
func LevelDBm(v float64) Level { return Level{v - 30} }

// LevelWatts returns the level of a power in watts. A power that is not positive
// and finite has no level: the error is a *RangeError.
func LevelWatts(w float64) (Level, error) {
	if !(w > 0) || math.IsInf(w, 1) {
		return Level{}, &RangeError{Quantity: "power", Value: w, Unit: "W", Allowed: "greater than 0 and finite"}
	}
	return Level{10 * math.Log10(w)}, nil
}

// DBW returns the level in dBW.
func (l Level) DBW() float64 { return l.dbw }

// DBm returns the level in dBm.
func (l Level) DBm() float64 { return l.dbw + 30 }

// Watts returns the power in watts.
func (l Level) Watts() float64 { return math.Pow(10, l.dbw/10) }

// Plus returns the level raised by a gain.
func (l Level) Plus(g DB) Level { return Level{l.dbw + float64(g)} }

// Minus returns the level lowered by a loss.
func (l Level) Minus(loss DB) Level { return Level{l.dbw - float64(loss)} }

// Over returns how far l lies above m.
func (l Level) Over(m Level) DB { return DB(l.dbw - m.dbw) }

// String returns the level in dBW with two decimals.
func (l Level) String() string { return fmt.Sprintf("%.2f dBW", l.dbw) }
