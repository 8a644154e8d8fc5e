package oem

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"io"
	"strings"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Notation is how a message is written.
type Notation int

// The notations.
const (
	KVN Notation = iota
	XML
)

// ParseNotation reads "kvn" or "xml".
func ParseNotation(s string) (Notation, error) {
	switch s {
	case "kvn":
		return KVN, nil
	case "xml":
		return XML, nil
	}
	return 0, fmt.Errorf("%q is not allowed; it must be kvn or xml", s)
}

// Header is what a message says of itself.
type Header struct {
	Created    time.Time // CREATION_DATE, UTC
	Originator string    // ORIGINATOR; empty: "SLANTWISE"
	Comments   []string
}

// writtenDegree is the degree of the Lagrange polynomial that messages state: positions
// and velocities apart, since SGP4's velocity is not the derivative of its position.
const writtenDegree = 9

// MostStates is how many states are written at most.
const MostStates = 500_000

// Sample makes a trajectory of an ephemeris: a state every step within its spans, their ends
// included. A span that has too few steps for the polynomial is sampled more finely. It
// fails with a *unit.RangeError for a step that is not positive or gives too many states.
func Sample(e *orbit.Ephemeris, name, id string, f orbit.Frame, step time.Duration, earth orbit.EarthOrientation) (*orbit.Trajectory, error) {
	turner, err := orbit.NewTurner(earth)
	if err != nil {
		return nil, err
	}
	total := 0.0
	for _, s := range e.Spans() {
		total += s.To - s.From
	}
	if step <= 0 || total/step.Seconds() > MostStates {
		return nil, &unit.RangeError{Quantity: "step between states", Value: step.Seconds(), Unit: "s",
			Allowed: fmt.Sprintf("above %.3g s, for %d states", total/MostStates, MostStates), Next: "take a longer one"}
	}
	t := &orbit.Trajectory{Name: name, ID: id}
	for _, s := range e.Spans() {
		if !(s.To > s.From) {
			continue
		}
		h := min(step.Seconds(), (s.To-s.From)/(writtenDegree+1))
		seg := orbit.TrajectorySegment{Frame: f, Interpolation: orbit.Interpolation{Kind: orbit.Lagrange, Degree: writtenDegree}}
		for i := 0; ; i++ {
			at := s.From + float64(i)*h
			last := at >= s.To-1e-6
			if last {
				at = s.To
			}
			now, st := e.Time(at), e.StateAt(at)
			p, v := turner.FromEarthFixed(f, st, now)
			seg.States = append(seg.States, orbit.TimedState{Time: now, Position: p, Velocity: v})
			if last {
				break
			}
		}
		seg.From, seg.To = seg.States[0].Time, seg.States[len(seg.States)-1].Time
		t.Segments = append(t.Segments, seg)
	}
	return t, t.Validate()
}

// Write writes a trajectory as a message of version 2.0 in UTC, positions to 0.1 mm and
// velocities to 1 µm/s. Covariances are left out.
func Write(w io.Writer, t *orbit.Trajectory, n Notation, h Header) error {
	if err := t.Validate(); err != nil {
		return fmt.Errorf("writing an OEM: %w", err)
	}
	if h.Created.IsZero() {
		return fmt.Errorf("writing an OEM: the time of creation is not given; the message must have one")
	}
	if h.Originator == "" {
		h.Originator = "SLANTWISE"
	}
	var out bytes.Buffer
	if n == XML {
		writeXML(&out, t, h)
	} else {
		writeKVN(&out, t, h)
	}
	if _, err := w.Write(out.Bytes()); err != nil {
		return fmt.Errorf("writing an OEM: %w", err)
	}
	return nil
}

// oneLine makes a text fit for a value: no line ends, not empty.
func oneLine(s string) string {
	if s = strings.Join(strings.Fields(s), " "); s == "" {
		return "UNKNOWN"
	}
	return s
}

// moment is a time with as many decimals of the second as it has, milliseconds at least.
func moment(t time.Time) string {
	if t.Nanosecond()%1_000_000 == 0 {
		return t.UTC().Format("2006-01-02T15:04:05.000")
	}
	return t.UTC().Format("2006-01-02T15:04:05.000000000")
}

// metadata lists the keywords of a segment.
func metadata(t *orbit.Trajectory, s *orbit.TrajectorySegment) [][2]string {
	out := [][2]string{
		{"OBJECT_NAME", oneLine(t.Name)}, {"OBJECT_ID", oneLine(t.ID)}, {"CENTER_NAME", "EARTH"}, {"REF_FRAME", nameOf(s.Frame)},
		{"TIME_SYSTEM", "UTC"}, {"START_TIME", moment(s.States[0].Time)},
	}
	if !s.From.Equal(s.States[0].Time) || !s.To.Equal(s.States[len(s.States)-1].Time) {
		out = append(out, [2]string{"USEABLE_START_TIME", moment(s.From)}, [2]string{"USEABLE_STOP_TIME", moment(s.To)})
	}
	return append(out, [2]string{"STOP_TIME", moment(s.States[len(s.States)-1].Time)},
		[2]string{"INTERPOLATION", s.Interpolation.Kind.String()}, [2]string{"INTERPOLATION_DEGREE", fmt.Sprint(s.Interpolation.Degree)})
}

// numbers are the six of a state, in km and km/s.
func numbers(s *orbit.TimedState) (out [6]string) {
	for i, v := range [6]float64{s.Position.X, s.Position.Y, s.Position.Z, s.Velocity.X, s.Velocity.Y, s.Velocity.Z} {
		digits := 7
		if i >= 3 {
			digits = 9
		}
		out[i] = fmt.Sprintf("%.*f", digits, v/1000)
	}
	return out
}

func writeKVN(out *bytes.Buffer, t *orbit.Trajectory, h Header) {
	fmt.Fprintf(out, "CCSDS_OEM_VERS = 2.0\n")
	for _, c := range h.Comments {
		fmt.Fprintf(out, "COMMENT %s\n", oneLine(c))
	}
	fmt.Fprintf(out, "CREATION_DATE = %s\nORIGINATOR = %s\n", moment(h.Created), oneLine(h.Originator))
	for i := range t.Segments {
		s := &t.Segments[i]
		out.WriteString("\nMETA_START\n")
		for _, kv := range metadata(t, s) {
			fmt.Fprintf(out, "%-20s = %s\n", kv[0], kv[1])
		}
		out.WriteString("META_STOP\n\n")
		for k := range s.States {
			n := numbers(&s.States[k])
			fmt.Fprintf(out, "%s %s\n", moment(s.States[k].Time), strings.Join(n[:], " "))
		}
	}
}

func writeXML(out *bytes.Buffer, t *orbit.Trajectory, h Header) {
	leaf := func(indent, name, value string) {
		fmt.Fprintf(out, "%s<%s>", indent, name)
		_ = xml.EscapeText(out, []byte(value)) // a bytes.Buffer takes all
		fmt.Fprintf(out, "</%s>\n", name)
	}
	out.WriteString(xml.Header + "<oem id=\"CCSDS_OEM_VERS\" version=\"2.0\">\n  <header>\n")
	for _, c := range h.Comments {
		leaf("    ", "COMMENT", oneLine(c))
	}
	leaf("    ", "CREATION_DATE", moment(h.Created))
	leaf("    ", "ORIGINATOR", oneLine(h.Originator))
	out.WriteString("  </header>\n  <body>\n")
	for i := range t.Segments {
		s := &t.Segments[i]
		out.WriteString("    <segment>\n      <metadata>\n")
		for _, kv := range metadata(t, s) {
			leaf("        ", kv[0], kv[1])
		}
		out.WriteString("      </metadata>\n      <data>\n")
		for k := range s.States {
			out.WriteString("        <stateVector>\n")
			leaf("          ", "EPOCH", moment(s.States[k].Time))
			for j, v := range numbers(&s.States[k]) {
				leaf("          ", stateNames[j], v)
			}
			out.WriteString("        </stateVector>\n")
		}
		out.WriteString("      </data>\n    </segment>\n")
	}
	out.WriteString("  </body>\n</oem>\n")
}
