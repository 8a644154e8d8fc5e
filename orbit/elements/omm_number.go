package elements

import (
	"math"
	"regexp"
	"strconv"
	"strings"
)

var plainNumber = regexp.MustCompile(`^[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)([eEdD][+-]?[0-9]+)?$`)

// parseNumber reads a decimal number; hexadecimal, NaN and infinity are refused.
// problem is empty when it succeeded.
func parseNumber(s string) (v float64, problem, next string) {
	if !plainNumber.MatchString(s) {
		problem, next = notANumber(s)
		return 0, problem, next
	}
	// Fortran programs write a D for the exponent.
	v, err := strconv.ParseFloat(strings.NewReplacer("d", "e", "D", "e").Replace(s), 64)
	if err != nil || math.IsInf(v, 0) {
		return 0, "is larger than any number that can be held", "check its exponent"
	}
	return v + 0, "", "" // -0 is 0
}

func notANumber(s string) (problem, next string) {
	for _, r := range s {
		if problem, next := oddCharacter(r); problem != "" {
			return problem, next
		}
	}
	if strings.Contains(s, ",") {
		return "is not a number; a comma stands in it", "write the decimal point as a point"
	}
	switch strings.ToLower(strings.TrimLeft(s, "+-")) {
	case "nan", "inf", "infinity":
		return "must be a finite number", "fetch the message again"
	}
	return "is not a number", "write it in decimals, as 15.27989249 or 8.4553e-5"
}

// parseCount reads a whole number from 0 to most.
func parseCount(s string, most int) (n int, problem, next string) {
	n, err := digitsOnly(strings.TrimPrefix(s, "+"))
	if err == nil && n <= most {
		return n, "", ""
	}
	problem = "must be a whole number from 0 to " + strconv.Itoa(most)
	if number, err := parseAlpha5(s); err == nil && number >= 100_000 {
		return 0, problem, "write the catalogue number in full: " + strconv.Itoa(number)
	}
	for _, r := range s {
		if odd, fix := oddCharacter(r); odd != "" {
			return 0, odd, fix
		}
	}
	return 0, problem, "write digits only"
}
