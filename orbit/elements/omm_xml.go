package elements

import (
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strings"
)

// xmlGroups are the elements of NDM/XML around the keywords of an OMM.
var xmlGroups = map[string]bool{
	"ndm": true, "omm": true, "header": true, "body": true, "segment": true, "metadata": true, "data": true, "meanElements": true,
	"tleParameters": true, "spacecraftParameters": true, "covarianceMatrix": true, "userDefinedParameters": true,
}

// xmlMessages are other messages of the same family, refused by name.
var xmlMessages = map[string]string{
	"oem": "orbit ephemeris message (OEM)", "opm": "orbit parameter message (OPM)", "ocm": "orbit comprehensive message (OCM)",
	"aem": "attitude ephemeris message (AEM)", "apm": "attitude parameter message (APM)", "acm": "attitude comprehensive message (ACM)",
	"tdm": "tracking data message (TDM)", "cdm": "conjunction data message (CDM)", "rdm": "re-entry data message (RDM)",
}

const xmlDepth = 16 // an OMM needs eight

// xmlLeaf is the element that is being read.
type xmlLeaf struct {
	name         string
	unit         string
	line, column int
	text         strings.Builder
	parent       bool // it holds elements
}

type xmlReader struct {
	dec     *xml.Decoder
	rep     *report
	open    []*xmlLeaf
	inside  bool // in an omm element
	records []record
}

func readXML(text string, rep *report) []record {
	r := &xmlReader{dec: xml.NewDecoder(strings.NewReader(text)), rep: rep}
	r.dec.CharsetReader = func(label string, in io.Reader) (io.Reader, error) {
		return nil, fmt.Errorf("the encoding %q is not supported, only UTF-8 is", label)
	}
	for {
		token, err := r.dec.Token()
		if errors.Is(err, io.EOF) {
			return r.records
		}
		if err != nil {
			r.syntax(err)
			return r.finished()
		}
		if !r.token(token) {
			return r.finished()
		}
	}
}

// finished returns the records whose end was read; of the one in which reading
// stopped, nothing can be said.
func (r *xmlReader) finished() []record {
	if r.inside {
		return r.records[:len(r.records)-1]
	}
	return r.records
}

// token takes one token; false ends the reading after a fault.
func (r *xmlReader) token(token xml.Token) bool {
	switch t := token.(type) {
	case xml.StartElement:
		return r.start(t)
	case xml.CharData:
		if len(r.open) > 0 {
			r.open[len(r.open)-1].text.Write(t)
		}
	case xml.EndElement:
		r.end()
	}
	return true
}

func (r *xmlReader) start(t xml.StartElement) bool {
	name := t.Name.Local
	if problem := refusedElement(name); problem != "" && !r.inside {
		return r.stop(name, problem)
	}
	if name == "omm" && r.inside {
		return r.stop(name, "an omm lies inside another one")
	}
	if len(r.open) == xmlDepth {
		return r.stop(name, fmt.Sprintf("elements lie more than %d deep in each other", xmlDepth))
	}
	if len(r.open) > 0 {
		r.open[len(r.open)-1].parent = true
	}
	line, column := r.dec.InputPos()
	leaf := &xmlLeaf{name: name, line: line, column: column}
	for _, a := range t.Attr {
		switch a.Name.Local {
		case "units":
			leaf.unit = a.Value
		case "parameter":
			leaf.name += "_" + a.Value
		}
	}
	r.open = append(r.open, leaf)
	if name == "omm" {
		r.begin(t, line, column)
	}
	return true
}

// refusedElement says why an element outside an omm is not read; empty: it is.
func refusedElement(name string) string {
	if what, ok := xmlMessages[name]; ok {
		return "the " + what + " is valid, but not supported here"
	}
	if strings.EqualFold(name, "html") {
		return "this is a web page, not a file of element sets"
	}
	if !xmlGroups[name] && !isKeyword(name) {
		return "this XML is no OMM; it must begin with ndm or omm"
	}
	return ""
}

func (r *xmlReader) stop(name, problem string) bool {
	line, column := r.dec.InputPos()
	_, other := xmlMessages[name]
	r.rep.fault(Fault{Line: line, Column: column, Field: "element", Text: name, Problem: problem,
		Next: "give a TLE file, or an OMM as KVN, XML, JSON or CSV", Unsupported: other})
	return false
}

// begin starts a record; the version stands in an attribute.
func (r *xmlReader) begin(t xml.StartElement, line, column int) {
	r.inside = true
	rec := record{line: line}
	for _, a := range t.Attr {
		if a.Name.Local == "version" {
			rec.add(entry{key: "CCSDS_OMM_VERS", value: a.Value, line: line, column: column})
		}
	}
	r.records = append(r.records, rec)
}

func (r *xmlReader) end() {
	leaf := r.open[len(r.open)-1]
	r.open = r.open[:len(r.open)-1]
	if leaf.name == "omm" {
		r.inside = false
	}
	if leaf.parent || xmlGroups[leaf.name] || !r.inside {
		return
	}
	r.records[len(r.records)-1].add(entry{key: leaf.name, value: strings.Trim(leaf.text.String(), " \t\r\n"),
		unit: leaf.unit, line: leaf.line, column: leaf.column})
}

func (r *xmlReader) syntax(err error) {
	line, column := r.dec.InputPos()
	problem := err.Error()
	var se *xml.SyntaxError
	if errors.As(err, &se) {
		line, problem = se.Line, se.Msg
	}
	r.rep.fault(Fault{Line: line, Column: column, Problem: "is not XML: " + problem, Next: "fetch the file again"})
}
