package cli

import (
	"errors"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit"
	"slantwise/orbit/attitude"
)

// ended tells whether an orbit was given up, by the scenario's own word, before the time
// asked for: that is an answer, no fault.
func ended(err error) bool {
	var e *scenario.EndedError
	return errors.As(err, &e)
}

// untold tells whether a budget fails because nothing is stated of a time: it lies outside
// an attitude history, or beyond what covariances say. Where several passes are asked
// for, the others have an answer all the same.
func untold(err error) bool {
	var turned *attitude.SpanError
	var spread *orbit.UncertaintySpanError
	return errors.As(err, &turned) || errors.As(err, &spread)
}
