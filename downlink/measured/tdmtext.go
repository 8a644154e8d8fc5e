package measured

import (
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"strings"
)

// readKVN reads the key-value notation of a TDM.
func readKVN(text string, l *Log, f *faults) {
	d := newTDM(l, f)
	where := "header"
	n := 0
	for s := range strings.SplitSeq(text, "\n") {
		n++
		s = strings.TrimSpace(s)
		if s == "" || strings.HasPrefix(s, "COMMENT") {
			continue
		}
		switch s {
		case "META_START":
			d.open(n)
			where = "meta"
			continue
		case "META_STOP":
			if d.seg.system == "" {
				f.add(n, "TIME_SYSTEM is missing in the metadata that begin in line %d; add it", d.seg.line)
			}
			where = "between"
			continue
		case "DATA_START":
			if where != "between" {
				f.add(n, "DATA_START without metadata before it; META_START to META_STOP come first")
			}
			where = "data"
			continue
		case "DATA_STOP":
			where = "after"
			continue
		}
		key, value, ok := strings.Cut(s, "=")
		key, value = strings.TrimSpace(key), strings.TrimSpace(value)
		switch {
		case !ok || key == "" || strings.ContainsAny(key, " \t"):
			f.add(n, "%.40q is not KEYWORD = value", s)
		case where == "meta":
			d.meta(n, key, value)
		case where == "data":
			parts := strings.Fields(value)
			if len(parts) != 2 {
				f.add(n, "%.40s: %d fields after the equals sign where epoch and value are two", key, len(parts))
				continue
			}
			d.datum(n, key, parts[0], parts[1])
		case where != "header":
			f.add(n, "%.40s stands outside of metadata and data", key)
		}
	}
	if where == "meta" || where == "data" {
		f.add(n, "the end comes within the %s; the file may be cut off", where)
	}
	d.finish()
}

// readXML reads the XML form of a TDM.
func readXML(data []byte, l *Log, f *faults) {
	d := newTDM(l, f)
	dec := xml.NewDecoder(bytes.NewReader(data))
	var path []string
	var text, epoch string
	seen := false
	for {
		tok, err := dec.Token()
		line, _ := dec.InputPos()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			f.add(line, "the XML does not hold together: %w", err)
			return
		}
		switch t := tok.(type) {
		case xml.StartElement:
			path = append(path, t.Name.Local)
			text = ""
			switch t.Name.Local {
			case "tdm":
				seen = true
			case "metadata":
				d.open(line)
			case "observation":
				epoch = ""
			}
		case xml.CharData:
			text += string(t)
		case xml.EndElement:
			parent := ""
			if len(path) > 1 {
				parent = path[len(path)-2]
			}
			value := strings.TrimSpace(text)
			switch {
			case t.Name.Local == "COMMENT":
			case t.Name.Local == "metadata" && d.seg.system == "":
				f.add(line, "TIME_SYSTEM is missing in the metadata; add it")
			case parent == "metadata":
				d.meta(line, t.Name.Local, value)
			case parent == "observation" && t.Name.Local == "EPOCH":
				epoch = value
			case parent == "observation":
				d.datum(line, t.Name.Local, epoch, value)
			}
			path, text = path[:len(path)-1], ""
		}
	}
	if !seen {
		f.add(1, "there is no element tdm; give a tracking data message, or a table in CSV")
	}
	d.finish()
}
