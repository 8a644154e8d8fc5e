package elements

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"encoding/xml"
	"errors"
	"fmt"
	"io"

	"slantwise/orbit"
)

// WriteOMM writes the sets as OMM in one of the four OMM formats: messages one after
// the other in KVN, an ndm element in XML, an array of flat objects in JSON, a header
// row and a set a row in CSV (the last two without the header of the message, as they
// are in use). Numbers are written with the fewest digits that give the same value
// back, epochs to the microsecond or, where need be, the nanosecond; a name or
// designator that is not known, as UNKNOWN. Nothing is written when a set is not
// valid; the error holds a *WriteError for each. An OMM holds all that Elements does,
// so that nothing is rounded.
func WriteOMM(w io.Writer, sets []orbit.Elements, f Format, h Header) error {
	var errs []error
	for i := range sets {
		errs = append(errs, writable(sets[i], f))
	}
	if err := errors.Join(errs...); err != nil {
		return err
	}
	if h.Created.IsZero() && (f == OMMKVN || f == OMMXML) {
		return fmt.Errorf("writing %s: the time of creation is not given; the message must have one", f)
	}
	var out bytes.Buffer
	var err error
	switch f {
	case OMMKVN:
		writeKVN(&out, sets, h)
	case OMMXML:
		err = writeXML(&out, sets, h)
	case OMMJSON:
		err = writeJSON(&out, sets)
	case OMMCSV:
		err = writeCSV(&out, sets)
	default:
		return fmt.Errorf("%s is no OMM format; give one of omm-kvn, omm-xml, omm-json, omm-csv", f)
	}
	if err != nil {
		return fmt.Errorf("writing %s: %w", f, err)
	}
	if _, err := w.Write(out.Bytes()); err != nil {
		return fmt.Errorf("writing %s: %w", f, err)
	}
	return nil
}

func writeKVN(out *bytes.Buffer, sets []orbit.Elements, h Header) {
	for i := range sets {
		if i > 0 {
			out.WriteByte('\n')
		}
		line(out, "CCSDS_OMM_VERS", ommVersion, "")
		group := "header"
		for _, f := range append(headerFields(h), fields(&sets[i])...) {
			if f.group != group {
				out.WriteByte('\n')
				group = f.group
			}
			line(out, f.key, f.value, f.unit)
		}
	}
}

func line(out *bytes.Buffer, key, value, unit string) {
	fmt.Fprintf(out, "%-19s = %s", key, value)
	if unit != "" {
		fmt.Fprintf(out, " [%s]", unit)
	}
	out.WriteByte('\n')
}

// writeJSON puts the objects together itself: encoding/json would sort the keywords.
func writeJSON(out *bytes.Buffer, sets []orbit.Elements) error {
	out.WriteString("[")
	for i := range sets {
		if i > 0 {
			out.WriteString(",")
		}
		out.WriteString("\n  {")
		for j, f := range fields(&sets[i]) {
			value := []byte(f.value)
			if f.text {
				var err error
				if value, err = json.Marshal(f.value); err != nil {
					return err
				}
			}
			if j > 0 {
				out.WriteString(",")
			}
			fmt.Fprintf(out, "\n    %q: %s", f.key, value)
		}
		out.WriteString("\n  }")
	}
	out.WriteString("\n]\n")
	return nil
}

// writeCSV always has the column of the class, since all rows share one header.
func writeCSV(out *bytes.Buffer, sets []orbit.Elements) error {
	w := csv.NewWriter(out)
	heads := csvHeads()
	if err := w.Write(heads); err != nil {
		return err
	}
	row := make([]string, len(heads))
	for i := range sets {
		byKey := map[string]string{}
		for _, f := range fields(&sets[i]) {
			byKey[f.key] = f.value
		}
		for j, key := range heads {
			row[j] = byKey[key]
		}
		if err := w.Write(row); err != nil {
			return err
		}
	}
	w.Flush()
	return w.Error()
}

func csvHeads() []string {
	var heads []string
	for _, f := range fields(&orbit.Elements{Classification: "U"}) {
		heads = append(heads, f.key)
	}
	return heads
}

// writeXML writes NDM/XML: the groups of one message lie in the order of fields.
func writeXML(out *bytes.Buffer, sets []orbit.Elements, h Header) error {
	out.WriteString(xml.Header + "<ndm>\n")
	for i := range sets {
		fmt.Fprintf(out, "  <omm id=\"CCSDS_OMM_VERS\" version=%q>\n", ommVersion)
		all := append(headerFields(h), fields(&sets[i])...)
		if err := xmlGroup(out, "    ", "header", all); err != nil {
			return err
		}
		out.WriteString("    <body>\n      <segment>\n")
		if err := xmlGroup(out, "        ", "metadata", all); err != nil {
			return err
		}
		out.WriteString("        <data>\n")
		for _, group := range []string{"meanElements", "tleParameters"} {
			if err := xmlGroup(out, "          ", group, all); err != nil {
				return err
			}
		}
		out.WriteString("        </data>\n      </segment>\n    </body>\n  </omm>\n")
	}
	out.WriteString("</ndm>\n")
	return nil
}

func xmlGroup(out *bytes.Buffer, indent, group string, all []field) error {
	fmt.Fprintf(out, "%s<%s>\n", indent, group)
	for _, f := range all {
		if f.group != group {
			continue
		}
		fmt.Fprintf(out, "%s  <%s>", indent, f.key)
		if err := xml.EscapeText(out, []byte(f.value)); err != nil {
			return err
		}
		fmt.Fprintf(out, "</%s>\n", f.key)
	}
	fmt.Fprintf(out, "%s</%s>\n", indent, group)
	return nil
}
