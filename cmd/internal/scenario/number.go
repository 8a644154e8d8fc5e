package scenario

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"slantwise/cmd/internal/scenario/tree"
)

// span is the range that a number must lie in.
type span struct {
	low, high         float64
	lowOpen, highOpen bool   // the end itself is not allowed
	unit              string // for messages; may be empty
	next              string // advice where the number lies outside; may be empty
}

// Ranges that many keys share. The far ends are far from anything that is built; they
// keep sums and powers finite.
func atLeast(low, high float64, unit string) span { return span{low: low, high: high, unit: unit} }
func above(low, high float64, unit string) span {
	return span{low: low, high: high, lowOpen: true, unit: unit}
}

func (s span) holds(v float64) bool {
	return (v > s.low || v == s.low && !s.lowOpen) && (v < s.high || v == s.high && !s.highOpen)
}

// allowed says the range in words: "greater than 0 and at most 100 m".
func (s span) allowed() string {
	unit := ""
	if s.unit != "" {
		unit = " " + s.unit
	}
	low, high := "at least ", "at most "
	if s.lowOpen {
		low = "greater than "
	}
	if s.highOpen {
		high = "less than "
	}
	if !s.lowOpen && !s.highOpen {
		return figure(s.low) + " to " + figure(s.high) + unit
	}
	return low + figure(s.low) + " and " + high + figure(s.high) + unit
}

func figure(v float64) string {
	if a := math.Abs(v); a == 0 || a > 1e-6 && a < 1e9 {
		return strconv.FormatFloat(v, 'f', -1, 64)
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

var plainNumber = regexp.MustCompile(`^[-+]?([0-9]+(_[0-9]+)*(\.([0-9]+(_[0-9]+)*)?)?|\.[0-9]+)([eE][-+]?[0-9]+)?$`)

// number returns the number of a key; ok is false where it is not there or wrong,
// and the fault is noted then.
func (o object) number(key string, in span) (v float64, ok bool) {
	n := o.get(key)
	if n == nil {
		return 0, false
	}
	return o.numberAt(n, key, in)
}

// numberOr returns the number of a key, or a default where it is not there.
func (o object) numberOr(key string, in span, otherwise float64) float64 {
	if v, ok := o.number(key, in); ok {
		return v
	}
	return otherwise
}

// numberAt reads the number of a node; name is its key, or its place below a key.
func (o object) numberAt(n *tree.Node, name string, in span) (float64, bool) {
	value := show(n)
	if in.unit != "" && n.Kind == tree.Number {
		value += " " + in.unit
	}
	if n.Kind != tree.Number && n.Kind != tree.Loose {
		o.notNumber(n, name, in)
		return 0, false
	}
	if !plainNumber.MatchString(n.Text) {
		o.notNumber(n, name, in)
		return 0, false
	}
	if whole := strings.TrimLeft(n.Text, "+-"); len(whole) > 1 && whole[0] == '0' && strings.Trim(whole, "0123456789_") == "" {
		o.fault(n, name, "%s is not allowed; some programs read a leading zero as octal", "write it without the zero", show(n))
		return 0, false
	}
	v, err := strconv.ParseFloat(strings.ReplaceAll(n.Text, "_", ""), 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) || !in.holds(v) {
		o.fault(n, name, "%s is not allowed; it must be %s", in.next, value, in.allowed())
		return 0, false
	}
	return v + 0, true // -0 becomes 0
}

// notNumber says why a value is no number, as exactly as can be told.
func (o object) notNumber(n *tree.Node, name string, in span) {
	allowed := in.allowed()
	if n.Kind == tree.Null {
		o.fault(n, name, "the key has no value; it must be a number, %s", "give one or remove the key", allowed)
		return
	}
	if n.Kind == tree.List || n.Kind == tree.Map || n.Kind == tree.Bool {
		o.fault(n, name, "%s is not allowed; it must be a number, %s", "", show(n), allowed)
		return
	}
	next := numberAdvice(n.Text)
	if _, err := ParseNumber(n.Text); n.Kind == tree.Text && err == nil {
		next = "it is text: remove the quotes"
	}
	o.fault(n, name, "%s is not allowed; it must be a number, %s", next, show(n), allowed)
}

// ParseNumber reads a finite number, written as those of a scenario are; blanks around
// it do not count.
func ParseNumber(text string) (float64, error) {
	text = strings.TrimSpace(text)
	if plainNumber.MatchString(text) {
		if v := parsePlain(text); !math.IsInf(v, 0) {
			return v + 0, nil // -0 becomes 0
		}
	}
	return 0, fmt.Errorf("%q is not allowed; it must be a number; %s", text, numberAdvice(text))
}

// numberAdvice says what to do with a text that is no finite number.
func numberAdvice(text string) string {
	text = strings.TrimSpace(text)
	switch bare := strings.ToLower(strings.Trim(text, "+-.")); {
	case bare == "nan" || bare == "inf" || bare == "infinity" || plainNumber.MatchString(text) && math.IsInf(parsePlain(text), 0):
		return "only finite numbers are"
	case strings.ContainsAny(text, "−–—‐‑‒﹣－"):
		return "it holds a dash that is no minus sign, " + dashName(text) + ": write the plain -"
	case plainNumber.MatchString(strings.Replace(text, ",", ".", 1)):
		return "write the decimal point as ."
	case leadingNumber.MatchString(text):
		return "give the number alone, the name says the unit"
	}
	return "give the number alone"
}

// leadingNumber is a number with its unit behind it.
var leadingNumber = regexp.MustCompile(`^[-+]?[0-9.]+ *[A-Za-z°%µ/]+$`)

// dashName names the first dash of a text that is not the plain one.
func dashName(text string) string {
	names := map[rune]string{
		'−': "U+2212 (mathematical minus)", '–': "U+2013 (en dash)", '—': "U+2014 (em dash)",
		'‐': "U+2010 (hyphen)", '‑': "U+2011 (non-breaking hyphen)", '‒': "U+2012 (figure dash)",
		'﹣': "U+FE63 (small minus)", '－': "U+FF0D (wide minus)",
	}
	for _, r := range text {
		if name := names[r]; name != "" {
			return name
		}
	}
	return "another dash"
}
