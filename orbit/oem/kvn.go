package oem

import (
	"strconv"
	"strings"
)

// kvn reads key-value notation.
func (b *builder) kvn(text string) {
	for n := 1; text != ""; n++ {
		line := text
		if i := strings.IndexByte(text, '\n'); i >= 0 {
			line, text = text[:i], text[i+1:]
		} else {
			text = ""
		}
		b.line(n, strings.Trim(line, " \t\r"))
		if b.stopped {
			return
		}
	}
	b.closeCovariances()
	if b.where == inMeta {
		b.fault(b.meta.line, "META_START", "", "no META_STOP follows", "the file may be cut off; fetch it again")
	}
}

// line takes one line of KVN.
func (b *builder) line(n int, s string) {
	if s == "" || s == "COMMENT" || strings.HasPrefix(s, "COMMENT ") || strings.HasPrefix(s, "COMMENT\t") {
		return
	}
	if c := s[0]; c >= '0' && c <= '9' && b.where == inData {
		b.stateLine(n, s)
		return
	}
	switch s {
	case "META_START":
		b.openMeta(n)
		return
	case "META_STOP":
		b.closeMeta(n)
		return
	case "COVARIANCE_START":
		b.openCovariances(n)
		return
	case "COVARIANCE_STOP":
		b.closeCovariances()
		return
	}
	if key, value, found := strings.Cut(s, "="); found {
		b.key(n, strings.TrimSpace(key), strings.TrimSpace(value))
		return
	}
	if b.where == inCovariances {
		b.covarianceRow(n, s)
		return
	}
	b.fault(n, "", short(s), "is neither KEYWORD = VALUE, a state, nor COMMENT", "write it as one of them, or take it out")
}

// stateLine takes epoch, position, velocity and perhaps acceleration.
func (b *builder) stateLine(n int, s string) {
	var fields [10]string
	count := 0
	for s != "" {
		end := strings.IndexAny(s, " \t")
		if end < 0 {
			end = len(s)
		}
		if count == len(fields) {
			count++
			break
		}
		fields[count] = s[:end]
		count++
		s = strings.TrimLeft(s[end:], " \t")
	}
	if count != 7 && count != 10 {
		b.fault(n, "state", "", "it has "+strconv.Itoa(count)+" fields where an epoch, three of position, three of velocity and perhaps three of acceleration belong", "")
		return
	}
	var x [6]float64
	for i := range x {
		v, ok := number(fields[i+1])
		if !ok {
			b.fault(n, stateNames[i], short(fields[i+1]), "is not a finite number", "write it in decimals")
			return
		}
		x[i] = v
	}
	b.state(n, fields[0], &x)
}

var stateNames = [6]string{"X", "Y", "Z", "X_DOT", "Y_DOT", "Z_DOT"}

// number reads a finite decimal number; Fortran's exponent letter D is taken, too.
func number(s string) (float64, bool) {
	for _, c := range []byte(s) {
		switch {
		case c >= '0' && c <= '9', c == '.', c == '-', c == '+', c == 'e', c == 'E':
		case c == 'd' || c == 'D':
			s = strings.NewReplacer("d", "e", "D", "e").Replace(s)
			v, err := strconv.ParseFloat(s, 64)
			return v, err == nil
		default:
			return 0, false
		}
	}
	v, err := strconv.ParseFloat(s, 64)
	return v, err == nil
}
