package elements

import (
	"errors"
	"fmt"
	"strconv"
	"strings"
)

// maxAlpha5 is the largest catalogue number that the five columns of a TLE hold.
const maxAlpha5 = 339_999

// alpha5Letters stand for 10 to 33 in the first column; I and O are left out, since
// they look like 1 and 0.
const alpha5Letters = "ABCDEFGHJKLMNPQRSTUVWXYZ"

// parseAlpha5 reads a catalogue number of up to five columns: digits, or a letter
// and four digits.
func parseAlpha5(s string) (int, error) {
	if s == "" {
		return 0, errors.New("is blank; it must be up to five digits, or a letter and four digits")
	}
	if len(s) > 5 {
		return 0, errors.New("is longer than five characters")
	}
	first := 0
	digits := s
	if c := s[0]; c < '0' || c > '9' {
		i := strings.IndexByte(alpha5Letters, c)
		switch {
		case c == 'I' || c == 'O':
			return 0, fmt.Errorf("the letters I and O are not used in catalogue numbers; 1 or 0 may be meant")
		case i < 0:
			return 0, errors.New("must be up to five digits, or a capital letter and four digits")
		case len(s) != 5:
			return 0, errors.New("a letter must be followed by four digits")
		}
		first, digits = (i+10)*10_000, s[1:]
	}
	n, err := digitsOnly(digits)
	if err != nil {
		return 0, errors.New("must be up to five digits, or a capital letter and four digits")
	}
	return first + n, nil
}

// digitsOnly reads a number of plain digits: no sign, no blank.
func digitsOnly(s string) (int, error) {
	for _, c := range []byte(s) {
		if c < '0' || c > '9' {
			return 0, strconv.ErrSyntax
		}
	}
	return strconv.Atoi(s)
}

// formatAlpha5 writes a catalogue number in five columns; ok is false when it has
// no such form.
func formatAlpha5(n int) (s string, ok bool) {
	if n < 0 || n > maxAlpha5 {
		return "", false
	}
	if n < 100_000 {
		return fmt.Sprintf("%05d", n), true
	}
	return fmt.Sprintf("%c%04d", alpha5Letters[n/10_000-10], n%10_000), true
}
