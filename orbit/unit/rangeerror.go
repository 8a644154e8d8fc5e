package unit

import (
	"fmt"
	"strconv"
)

// RangeError says that a value lies outside what a function or a key allows.
type RangeError struct {
	Quantity string  // what the value is, "elevation"
	Value    float64 // as given, in Unit
	Unit     string  // may be empty
	Allowed  string  // "0 to 90 deg"
	Next     string  // what to do, may be empty
}

// Error returns "elevation: 95 deg is not allowed; it must be 0 to 90 deg; <next>".
func (e *RangeError) Error() string {
	v := strconv.FormatFloat(e.Value, 'g', -1, 64)
	if e.Unit != "" {
		v += " " + e.Unit
	}
	s := fmt.Sprintf("%s: %s is not allowed; it must be %s", e.Quantity, v, e.Allowed)
	if e.Next != "" {
		s += "; " + e.Next
	}
	return s
}
