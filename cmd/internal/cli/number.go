package cli

import (
	"math"
	"strconv"
	"time"
)

// appendFixed appends v with a fixed number of decimals. A number that does not
// exist (NaN, ±Inf) appends nothing; -0.00 prints as 0.00.
func appendFixed(dst []byte, v float64, decimals int) []byte {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return dst
	}
	at := len(dst)
	dst = strconv.AppendFloat(dst, v, 'f', decimals, 64)
	if dst[at] != '-' {
		return dst
	}
	for _, c := range dst[at+1:] {
		if c != '0' && c != '.' {
			return dst
		}
	}
	return append(dst[:at], dst[at+1:]...)
}

// fixed returns v with a fixed number of decimals, empty for a number that does not
// exist.
func fixed(v float64, decimals int) string {
	return string(appendFixed(make([]byte, 0, 24), v, decimals))
}

// number is a number of a JSON result: fixed decimals, null where it does not exist.
type number struct {
	v        float64
	decimals int
}

// num returns v to be written with a fixed number of decimals.
func num(v float64, decimals int) number { return number{v, decimals} }

// MarshalJSON writes the number, or null.
func (n number) MarshalJSON() ([]byte, error) {
	b := appendFixed(nil, n.v, n.decimals)
	if len(b) == 0 {
		b = append(b, "null"...)
	}
	return b, nil
}

// utcLayout is ISO 8601 in UTC with milliseconds.
const utcLayout = "2006-01-02T15:04:05.000Z"

// utc returns t in ISO 8601 with milliseconds and Z, rounded to the millisecond;
// empty for the zero time.
func utc(t time.Time) string { return string(appendUTC(nil, t)) }

// appendUTC appends what utc returns.
func appendUTC(dst []byte, t time.Time) []byte {
	if t.IsZero() {
		return dst
	}
	return t.UTC().Round(time.Millisecond).AppendFormat(dst, utcLayout)
}
