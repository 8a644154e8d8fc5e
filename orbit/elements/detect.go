package elements

import (
	"regexp"
	"strings"
)

// textKind is what a text looks like.
type textKind int

const (
	kindUnknown textKind = iota
	kindTLE
	kindKVN
	kindXML
	kindJSON
	kindCSV
	kindOEM
	kindOtherMessage
	kindSemicolons
)

// versionLine is the first line of every CCSDS navigation data message in KVN.
var versionLine = regexp.MustCompile(`^\s*CCSDS_([A-Z]+)_VERS\s*=`)

// detect tells the format from the first characters or, for the line formats, from
// the first line that can only belong to one of them.
func detect(text string) textKind {
	first := strings.TrimLeft(text, " \t\r\n")
	if named(first) {
		return kindTLE
	}
	switch first[0] {
	case '<':
		return kindXML
	case '{', '[':
		return kindJSON
	}
	header := true
	for line := range strings.Lines(text) {
		line = strings.Trim(line, " \t\r\n")
		if line == "" || line[0] == '#' {
			continue
		}
		if kind := lineKind(line, header); kind != kindUnknown {
			return kind
		}
		header = false
	}
	return kindUnknown
}

// named tells whether the text begins with any line and a line 1 below it: then the
// first line is a name, whatever it looks like. A comma tells a CSV row from a line 1.
func named(text string) bool {
	_, rest, _ := strings.Cut(text, "\n")
	second, _, _ := strings.Cut(strings.TrimLeft(rest, " \t\r\n"), "\n")
	second = strings.TrimRight(second, " \t\r")
	return tleKind(second) == lineOne && dataLine.MatchString(second) && !strings.Contains(second, ",")
}

func lineKind(line string, header bool) textKind {
	if m := versionLine.FindStringSubmatch(line); m != nil {
		switch m[1] {
		case "OMM":
			return kindKVN
		case "OEM":
			return kindOEM
		}
		return kindOtherMessage
	}
	if k := tleKind(line); k == lineOne || k == lineTwo {
		return kindTLE
	}
	if key, _, found := strings.Cut(line, "="); found && isKeyword(strings.TrimSpace(key)) {
		return kindKVN
	}
	if header && hasKeyword(line, ",") {
		return kindCSV
	}
	if header && hasKeyword(line, ";") {
		return kindSemicolons
	}
	return kindUnknown
}

// hasKeyword tells whether two or more fields of the line are OMM keywords; one
// alone may be a name.
func hasKeyword(line, comma string) bool {
	n := 0
	for _, f := range strings.Split(line, comma) {
		if isKeyword(strings.Trim(f, " \t\"")) {
			n++
		}
	}
	return n >= 2
}

// refusal is what is said of a text that is not read.
func refusal(kind textKind, text string) Fault {
	text = strings.TrimLeft(text, " \t\r\n")
	line, _, _ := strings.Cut(text, "\n")
	f := Fault{Text: strings.TrimRight(line, " \t\r"), Next: "give a TLE file, or an OMM as KVN, XML, JSON or CSV"}
	switch kind {
	case kindOEM:
		f.Problem = "an orbit ephemeris message (OEM) is valid, but not supported here"
		f.Next = "name it under element_files of a scenario, which flies it; elements fit makes an element set of it"
		f.Unsupported = true
	case kindOtherMessage:
		f.Problem = "this CCSDS message holds no SGP4 elements; it is not supported here"
		f.Unsupported = true
	case kindSemicolons:
		f.Problem = "the columns are separated by semicolons; a CSV of element sets uses commas"
		f.Next = "save it with commas"
	default:
		f.Problem = "no element set was found: the text is neither TLE nor OMM"
	}
	return f
}
