package oem

import (
	"bytes"
	"fmt"
	"io"
	"os"
	"regexp"
	"strings"
	"time"
	"unicode/utf8"

	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// MaxSize is the largest text that is read, in bytes: a million states.
const MaxSize = 160_000_000

// File is what a message holds.
type File struct {
	Version    string
	Created    time.Time // zero: not given, or no time
	Originator string
	// Trajectories has one for each object, in the order in which they first occur.
	Trajectories []orbit.Trajectory
	Warnings     []elements.Warning // what was assumed or passed over
}

// versionLine is the line that a KVN message begins with.
var versionLine = regexp.MustCompile(`^\s*CCSDS_OEM_VERS\s*=`)

// xmlRoot finds the element oem before any other but ndm.
var xmlRoot = regexp.MustCompile(`^(?:\s|<\?[^>]*>|<!--(?s:.*?)-->|<!DOCTYPE[^>\[]*(?:\[[^\]]*\]\s*)?>|<ndm\b[^>]*>)*<oem\b`)

// Looks tells whether a text is an OEM by its beginning.
func Looks(text []byte) bool {
	text = bytes.TrimPrefix(text, []byte("\uFEFF"))
	head := text[:min(len(text), 4096)]
	return versionLine.Match(head) || xmlRoot.Match(head)
}

// LooksFile tells whether a file is an OEM by its beginning; false where it cannot be read.
func LooksFile(path string) bool {
	f, err := os.Open(path)
	if err != nil {
		return false
	}
	defer f.Close()
	head := make([]byte, 4096)
	n, _ := io.ReadFull(f, head)
	return Looks(head[:n])
}

// Read reads an OEM. name is the file's name for messages; earth gives UT1-UTC, for times in
// UT1, and the pole, for covariances. The error is an *elements.Faults with file and line where the content is
// wrong; nothing is returned then.
func Read(r io.Reader, name string, earth orbit.EarthOrientation) (*File, error) {
	data, err := io.ReadAll(io.LimitReader(r, MaxSize+1))
	if err != nil {
		return nil, fmt.Errorf("%s: reading an OEM: %w", name, err)
	}
	b := &builder{name: name, earth: earth}
	data = bytes.TrimPrefix(data, []byte("\uFEFF"))
	switch {
	case len(data) > MaxSize:
		b.fault(0, "", "", fmt.Sprintf("holds more than the %d bytes that are read", MaxSize), "split the file")
	case !utf8.Valid(data):
		b.fault(0, "", "", "holds a byte that is not UTF-8: a binary file, or text in another encoding", "give an OEM in UTF-8, unpacked")
	case !Looks(data):
		b.fault(0, "", "", "does not begin as an OEM: with CCSDS_OEM_VERS, or in XML with the element oem", "give an orbit ephemeris message")
	case bytes.HasPrefix(bytes.TrimLeft(data, " \t\r\n"), []byte("<")):
		b.xml(data)
	default:
		b.kvn(string(data))
	}
	return b.finish()
}

// ReadFile reads the OEM of a file; see Read.
func ReadFile(path string, earth orbit.EarthOrientation) (*File, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, fmt.Errorf("%s: cannot be read: %w; check the name and the folder it is relative to", path, err)
	}
	defer f.Close()
	return Read(f, path, earth)
}

// fault notes what is wrong in a line.
func (b *builder) fault(line int, field, text, problem, next string) {
	b.faults.Total++
	const most = 20
	if len(b.faults.List) < most {
		b.faults.List = append(b.faults.List, &elements.Fault{File: b.name, Line: line, Field: field, Text: text, Problem: problem, Next: next})
	}
}

// warn notes what was assumed; the same words are noted once, with the first line.
func (b *builder) warn(line int, format string, args ...any) {
	text := fmt.Sprintf(format, args...)
	for _, w := range b.file.Warnings {
		if w.Text == text {
			return
		}
	}
	const most = 50
	if len(b.file.Warnings) < most {
		b.file.Warnings = append(b.file.Warnings, elements.Warning{File: b.name, Line: line, Text: text})
	}
}

// short quotes no more of a text than a message can bear.
func short(s string) string {
	s = strings.TrimSpace(s)
	if r := []rune(s); len(r) > 60 {
		return string(r[:60]) + "…"
	}
	return s
}
