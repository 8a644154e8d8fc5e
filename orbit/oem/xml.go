package oem

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strings"
)

// xmlDepth bounds how deep elements lie in each other; an OEM needs seven.
const xmlDepth = 16

// xmlState gathers the numbers of a state vector or a covariance by their names.
type xmlState struct {
	epoch  string
	values map[string]float64
	line   int
}

// xml reads the XML notation.
func (b *builder) xml(data []byte) {
	dec := xml.NewDecoder(bytes.NewReader(data))
	dec.CharsetReader = func(label string, in io.Reader) (io.Reader, error) {
		if strings.EqualFold(label, "utf-8") {
			return in, nil
		}
		return nil, fmt.Errorf("the encoding %q is not supported, only UTF-8 is", label)
	}
	r := xmlReader{b: b, dec: dec}
	for !b.stopped {
		token, err := dec.Token()
		if errors.Is(err, io.EOF) {
			return
		}
		if err != nil {
			line, _ := dec.InputPos()
			b.fault(line, "", "", "is not XML: "+strings.TrimPrefix(err.Error(), "XML syntax error on "), "fetch the file again")
			return
		}
		r.token(token)
	}
}

type xmlReader struct {
	b     *builder
	dec   *xml.Decoder
	open  []string
	text  strings.Builder
	units string // as the element that is open states them
	state xmlState
}

func (r *xmlReader) token(token xml.Token) {
	switch t := token.(type) {
	case xml.StartElement:
		r.start(&t)
	case xml.CharData:
		if len(t) > 0 {
			r.text.Write(t)
		}
	case xml.EndElement:
		r.end(t.Name.Local)
	}
}

func (r *xmlReader) start(t *xml.StartElement) {
	line, _ := r.dec.InputPos()
	name := t.Name.Local
	if len(r.open) == xmlDepth {
		r.b.fault(line, name, "", fmt.Sprintf("elements lie more than %d deep in each other", xmlDepth), "")
		r.b.stopped = true
		return
	}
	r.open = append(r.open, name)
	r.text.Reset()
	r.units = ""
	for _, a := range t.Attr {
		if a.Name.Local == "units" {
			r.units = strings.TrimSpace(a.Value)
		}
	}
	switch name {
	case "oem":
		version := ""
		for _, a := range t.Attr {
			if a.Name.Local == "version" {
				version = a.Value
			}
		}
		r.b.version(line, version)
	case "metadata":
		r.b.openMeta(line)
	case "stateVector", "covarianceMatrix":
		r.state = xmlState{values: map[string]float64{}, line: line}
		if name == "covarianceMatrix" {
			if r.b.where == inData {
				r.b.openCovariances(line)
			} else {
				r.b.fault(line, name, "", "stands outside a segment's data", "")
			}
		}
	}
}

// covarianceLeaves are the elements of a lower triangle, row by row.
var covarianceLeaves = [6][]string{
	{"CX_X"}, {"CY_X", "CY_Y"}, {"CZ_X", "CZ_Y", "CZ_Z"},
	{"CX_DOT_X", "CX_DOT_Y", "CX_DOT_Z", "CX_DOT_X_DOT"},
	{"CY_DOT_X", "CY_DOT_Y", "CY_DOT_Z", "CY_DOT_X_DOT", "CY_DOT_Y_DOT"},
	{"CZ_DOT_X", "CZ_DOT_Y", "CZ_DOT_Z", "CZ_DOT_X_DOT", "CZ_DOT_Y_DOT", "CZ_DOT_Z_DOT"},
}

func (r *xmlReader) end(name string) {
	line, _ := r.dec.InputPos()
	r.open = r.open[:len(r.open)-1]
	text := strings.TrimSpace(r.text.String())
	r.text.Reset()
	parent := ""
	if n := len(r.open); n > 0 {
		parent = r.open[n-1]
	}
	b := r.b
	switch {
	case name == "COMMENT":
	case name == "metadata":
		b.closeMeta(line)
	case name == "stateVector":
		r.stateVector()
	case name == "covarianceMatrix":
		r.covariance()
	case parent == "header":
		b.header(line, name, text)
	case parent == "metadata":
		b.key(line, name, text)
	case parent == "stateVector" || parent == "covarianceMatrix":
		r.leaf(line, parent, name, text)
	}
}

// leaf takes an element of a state or covariance.
func (r *xmlReader) leaf(line int, parent, name, text string) {
	switch {
	case name == "EPOCH":
		r.state.epoch = text
		if parent == "covarianceMatrix" && r.b.where == inCovariances {
			r.b.covarianceKey(line, name, text)
		}
	case name == "COV_REF_FRAME" && parent == "covarianceMatrix":
		r.b.covarianceKey(line, name, text)
	default:
		if unit := unitOf(name); r.units != "" && !strings.EqualFold(r.units, unit) {
			r.b.fault(line, name, short(r.units), "is not the unit of an OEM: "+unit, "turn the numbers into it")
		}
		if _, twice := r.state.values[name]; twice {
			r.b.fault(line, name, short(text), "stands twice in one "+parent, "keep one of the two")
		}
		v, ok := number(text)
		if !ok {
			r.b.fault(line, name, short(text), "is not a finite number", "write it in decimals")
		}
		r.state.values[name] = v
	}
}

// unitOf returns the unit of an element of a state or covariance (CCSDS 502.0-B).
func unitOf(name string) string {
	rates := strings.Count(name, "_DOT")
	switch {
	case strings.HasSuffix(name, "_DDOT"):
		return "km/s**2"
	case !strings.HasPrefix(name, "C"):
		return [...]string{"km", "km/s"}[min(rates, 1)]
	}
	return [...]string{"km**2", "km**2/s", "km**2/s**2"}[min(rates, 2)]
}

func (r *xmlReader) stateVector() {
	var x [6]float64
	for i, name := range stateNames {
		v, given := r.state.values[name]
		if !given {
			r.b.fault(r.state.line, name, "", "is missing in the state vector", "")
			return
		}
		x[i] = v
	}
	if r.b.where != inData {
		r.b.fault(r.state.line, "stateVector", "", "no metadata stand before it", "")
		return
	}
	r.b.state(r.state.line, r.state.epoch, &x)
}

func (r *xmlReader) covariance() {
	b := r.b
	if b.where != inCovariances {
		return
	}
	if b.pending.line > 0 {
		for i, row := range covarianceLeaves {
			for j, name := range row {
				v, given := r.state.values[name]
				if !given {
					b.fault(r.state.line, name, "", "is missing in the covariance", "")
				}
				b.pending.c[i][j] = v
			}
		}
		b.pending.rows = 6
	} else {
		b.fault(r.state.line, "covarianceMatrix", "", "it has no EPOCH", "")
	}
	b.closeCovariances()
}
