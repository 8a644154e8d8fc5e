package reports

import (
	"math"
	"strconv"
)

var powersOfTen = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9}

// exactIntegers is where float64 stops to hold every integer.
const exactIntegers = 1 << 53

// finite tells whether v exists: a NaN or an infinity never gets onto a page.
func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// appendFixed appends a finite v with the given number of decimals, 0 to 9, halves
// away from zero, and never "-0". A report writes millions of numbers: by way of an
// integer that is several times faster than strconv.
func appendFixed(dst []byte, v float64, decimals int) []byte {
	scaled := math.Round(v * powersOfTen[decimals])
	if !(math.Abs(scaled) < exactIntegers) {
		return strconv.AppendFloat(dst, v, 'f', decimals, 64)
	}
	n := int64(scaled)
	if n < 0 {
		dst = append(dst, '-')
		n = -n
	}
	if decimals == 0 {
		return strconv.AppendInt(dst, n, 10)
	}
	unit := int64(powersOfTen[decimals])
	dst = strconv.AppendInt(dst, n/unit, 10)
	dst = append(dst, '.')
	part := n % unit
	for unit /= 10; unit > 0; unit /= 10 {
		dst = append(dst, byte('0'+part/unit%10))
	}
	return dst
}

// appendJSONNumber appends v as JSON: null where it does not exist.
func appendJSONNumber(dst []byte, v float64, decimals int) []byte {
	if !finite(v) {
		return append(dst, "null"...)
	}
	return appendFixed(dst, v, decimals)
}

// fixed returns v for people: a true minus sign, a dash where v does not exist.
func fixed(v float64, decimals int) string {
	if !finite(v) {
		return "–"
	}
	s := string(appendFixed(nil, v, decimals))
	if s[0] == '-' {
		return "−" + s[1:]
	}
	return s
}

// scale is a decimal multiple of a unit.
type scale struct {
	unit    string
	divisor float64
}

var (
	byteScales = []scale{{"TB", 1e12}, {"GB", 1e9}, {"MB", 1e6}, {"kB", 1e3}, {"B", 1}}
	rateScales = []scale{{"Tbit/s", 1e12}, {"Gbit/s", 1e9}, {"Mbit/s", 1e6}, {"kbit/s", 1e3}, {"bit/s", 1}}
	baudScales = []scale{{"Tbaud", 1e12}, {"Gbaud", 1e9}, {"Mbaud", 1e6}, {"kbaud", 1e3}, {"baud", 1}}
	freqScales = []scale{{"GHz", 1e9}, {"MHz", 1e6}, {"kHz", 1e3}, {"Hz", 1}}
)

// scaleFor returns the multiple in which v has one to three digits before the point.
func scaleFor(v float64, scales []scale) scale {
	v = math.Abs(v)
	for _, s := range scales {
		if v >= s.divisor {
			return s
		}
	}
	return scales[len(scales)-1]
}

// withUnit returns v with three significant digits or more and its unit.
func withUnit(v float64, scales []scale) string {
	if !finite(v) {
		return "–"
	}
	s := scaleFor(v, scales)
	x := v / s.divisor
	decimals := 2
	switch a := math.Abs(x); {
	case s.divisor == 1, a >= 100:
		decimals = 0
	case a >= 10:
		decimals = 1
	}
	return fixed(x, decimals) + " " + s.unit
}

// maxOf returns the greatest magnitude of what exists in the columns; 0 for none.
func maxOf(columns ...[]float64) float64 {
	m := 0.0
	for _, c := range columns {
		for _, v := range c {
			if a := math.Abs(v); finite(v) && a > m {
				m = a
			}
		}
	}
	return m
}

// decimalsFor returns how many decimals make four significant digits of the
// greatest value, at least 0 and at most 6.
func decimalsFor(greatest float64) int {
	d := 3
	for a := math.Abs(greatest); a >= 10 && d > 0; a /= 10 {
		d--
	}
	return d
}
