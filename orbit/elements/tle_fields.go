package elements

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"time"
)

// tleFields reads the fields of one line.
type tleFields struct {
	l      tleLine
	which  string // "line 1"
	rep    *report
	failed bool // anything was at fault
}

func (f *tleFields) place(a, b int, field, problem, next string) Fault {
	f.failed = true
	return Fault{Line: f.l.number, Column: f.l.indent + a, Field: f.which + ", " + field,
		Text: f.l.cols(a, b), Problem: problem, Next: next}
}

func (f *tleFields) fault(a, b int, field, problem, next string) {
	f.rep.fault(f.place(a, b, field, problem, next))
}

func (f *tleFields) unsupported(a, b int, field, problem, next string) {
	x := f.place(a, b, field, problem, next)
	x.Unsupported = true
	f.rep.fault(x)
}

// separators checks the columns that must be blank; a digit there means that the
// fields have slipped.
func (f *tleFields) separators(columns ...int) {
	for _, c := range columns {
		if f.l.cols(c, c) != " " {
			f.fault(c, c, fmt.Sprintf("column %d", c), "must be blank between two fields: the columns have slipped", nextFetch)
		}
	}
}

type need bool

const (
	requiredField need = true
	optionalField need = false
)

var decimalField = regexp.MustCompile(`^[+-]?([0-9]+\.[0-9]*|\.[0-9]+)$`)

// decimal reads a number with a decimal point and blanks in front of it.
func (f *tleFields) decimal(a, b int, field string, n need) float64 {
	s := strings.Trim(f.l.cols(a, b), " ")
	if s == "" {
		f.blank(a, b, field, n)
		return 0
	}
	if !decimalField.MatchString(s) {
		f.fault(a, b, field, "must be a number with a decimal point", nextFetch)
		return 0
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		f.fault(a, b, field, "is not a number that can be held", nextFetch)
	}
	return v
}

// blank answers a field without a character in it.
func (f *tleFields) blank(a, b int, field string, n need) {
	if n == requiredField {
		f.fault(a, b, field, "is blank; a number must stand here", nextFetch)
		return
	}
	f.rep.warn(f.l.number, f.which+", "+field+": is blank; taken as 0")
}

// integer reads digits with blanks in front. A field of blanks is 0: the two
// numbers written so count sets and revolutions, and nothing is computed from them.
func (f *tleFields) integer(a, b int, field string) int {
	s := strings.TrimLeft(f.l.cols(a, b), " ")
	if s == "" {
		return 0
	}
	n, err := digitsOnly(s)
	if err != nil {
		f.fault(a, b, field, "must be digits, blanks only in front", nextFetch)
	}
	return n
}

func (f *tleFields) eccentricity() float64 {
	const a, b = 27, 33
	s := strings.TrimLeft(f.l.cols(a, b), " ")
	if s == "" {
		f.blank(a, b, "eccentricity", requiredField)
		return 0
	}
	if _, err := digitsOnly(s); err != nil {
		f.fault(a, b, "eccentricity", "must be seven digits, the decimal point implied in front of them", nextFetch)
		return 0
	}
	v, err := strconv.ParseFloat("0."+strings.Repeat("0", b-a+1-len(s))+s, 64)
	if err != nil {
		f.fault(a, b, "eccentricity", "is not a number that can be held", nextFetch)
	}
	return v
}

var exponentialField = regexp.MustCompile(`^([ +-])( *[0-9]+)([ +-])([0-9])$`)

// exponential reads sign, five digits with the decimal point implied in front, sign
// and digit of the power of ten. A blank sign is plus.
func (f *tleFields) exponential(a, b int, field string) float64 {
	s := f.l.cols(a, b)
	if strings.Trim(s, " ") == "" {
		f.blank(a, b, field, optionalField)
		return 0
	}
	m := exponentialField.FindStringSubmatch(s)
	if m == nil {
		f.fault(a, b, field, `must be sign, five digits, sign and one digit, as " 12345-4" for 0.12345e-4`, nextFetch)
		return 0
	}
	plain := strings.ReplaceAll(m[2], " ", "0")
	v, err := strconv.ParseFloat(strings.Trim(m[1], " ")+"0."+plain+"e"+strings.Trim(m[3], " ")+m[4], 64)
	if err != nil {
		f.fault(a, b, field, "is not a number that can be held", nextFetch)
	}
	return v + 0 // a mantissa of zero with a minus sign is zero
}

// dayOfYear reads columns 21 to 32: whole days from 1, and the part of a day.
func (f *tleFields) dayOfYear() (whole int, fraction time.Duration, ok bool) {
	const a, b = 21, 32
	s := strings.Trim(f.l.cols(a, b), " ")
	days, part, _ := strings.Cut(s, ".")
	whole, err := digitsOnly(days)
	if err == nil && part != "" {
		_, err = digitsOnly(part)
	}
	if err != nil || days == "" {
		f.fault(a, b, "epoch day", "must be the day of the year with its fraction, as 069.50000000", nextFetch)
		return 0, 0, false
	}
	return whole, partOfDay(part), true
}

// partOfDay turns the digits behind the decimal point of a day into a duration. At
// most ten digits fit the columns, and 1e-10 day is 8640 ns exactly.
func partOfDay(digits string) time.Duration {
	d, scale := time.Duration(0), 24*time.Hour
	for _, c := range []byte(digits) {
		scale /= 10
		d += time.Duration(c-'0') * scale
	}
	return d
}
