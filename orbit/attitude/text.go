package attitude

import (
	"bufio"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strings"
)

// entry is a keyword with its value.
type entry struct {
	key, value string
	line       int
}

// row is a record: its epoch and its numbers as they are written.
type row struct {
	fields []string
	line   int
}

// block is a segment as it stands in the file.
type block struct {
	meta []entry
	rows []row
	line int
}

func (b *block) get(key string) (entry, bool) {
	for _, e := range b.meta {
		if e.key == key {
			return e, true
		}
	}
	return entry{line: b.line}, false
}

// readBlocks tells KVN and XML apart and lays a file out in segments.
func readBlocks(text string) (blocks []block, version string, faults []error) {
	if strings.HasPrefix(strings.TrimSpace(text), "<") {
		return readXML(text)
	}
	return readKVN(text)
}

func lineFault(line int, format string, args ...any) error {
	return fmt.Errorf("line %d: %s", line, fmt.Sprintf(format, args...))
}

// readKVN reads keyword = value lines, META_START to META_STOP, DATA_START to DATA_STOP.
func readKVN(text string) (blocks []block, version string, faults []error) {
	lines := bufio.NewScanner(strings.NewReader(text))
	lines.Buffer(nil, 1<<16)
	place := "header" // header, meta, between, data
	for n := 1; lines.Scan(); n++ {
		line := strings.TrimSpace(lines.Text())
		fault := func(format string, args ...any) { faults = append(faults, lineFault(n, format, args...)) }
		switch {
		case line == "" || line == "COMMENT" || strings.HasPrefix(line, "COMMENT "):
		case line == "META_START":
			if place == "meta" || place == "data" {
				fault("META_START stands inside of a block; end that first")
			}
			place = "meta"
			blocks = append(blocks, block{line: n})
		case line == "META_STOP" && place == "meta":
			place = "between"
		case line == "DATA_START" && place == "between":
			place = "data"
		case line == "DATA_STOP" && place == "data":
			place = "header"
		case place == "data":
			b := &blocks[len(blocks)-1]
			b.rows = append(b.rows, row{strings.Fields(line), n})
		default:
			key, value, ok := strings.Cut(line, "=")
			key, value = strings.TrimSpace(key), strings.TrimSpace(value)
			switch {
			case !ok:
				fault("%.60q is not allowed here; it must be KEYWORD = value, or the begin or end of a block", line)
			case place == "meta":
				b := &blocks[len(blocks)-1]
				b.meta = append(b.meta, entry{key, value, n})
			case key == "CCSDS_AEM_VERS":
				version = value
			}
		}
	}
	if err := lines.Err(); err != nil {
		faults = append(faults, errors.New("a line is longer than 65536 characters, which no attitude message is"))
	}
	if place != "header" {
		faults = append(faults, errors.New("the last block does not end: META_STOP, DATA_START or DATA_STOP is missing"))
	}
	return blocks, version, faults
}

// dataColumns are the elements of an XML record that stand for columns, in their order;
// rotation1 to rotation3 are the angles of the first edition.
var dataColumns = map[string]int{"Q1": 1, "Q2": 2, "Q3": 3, "QC": 4, "ANGLE_1": 1, "ANGLE_2": 2, "ANGLE_3": 3, "rotation1": 1, "rotation2": 2, "rotation3": 3}

// readXML gathers the leaves of each metadata and of each attitudeState.
func readXML(text string) (blocks []block, version string, faults []error) {
	d := xml.NewDecoder(strings.NewReader(text))
	var path []string
	var value strings.Builder
	fields, at := [5]string{}, 0
	inside := func(name string) bool {
		for _, p := range path {
			if p == name {
				return true
			}
		}
		return false
	}
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return nil, version, append(faults, fmt.Errorf("this is no XML: %w", err))
		}
		line, _ := d.InputPos()
		switch t := token.(type) {
		case xml.StartElement:
			name := t.Name.Local
			path = append(path, name)
			if len(path) > 32 {
				return nil, version, append(faults, lineFault(line, "the elements are nested more than 32 deep"))
			}
			value.Reset()
			switch name {
			case "aem":
				for _, a := range t.Attr {
					if a.Name.Local == "version" {
						version = a.Value
					}
				}
			case "segment":
				blocks = append(blocks, block{line: line})
			case "attitudeState":
				fields, at = [5]string{}, line
			}
		case xml.CharData:
			if value.Len()+len(t) < 1<<12 {
				value.Write(t)
			}
		case xml.EndElement:
			name, v := t.Name.Local, strings.TrimSpace(value.String())
			path = path[:len(path)-1]
			value.Reset()
			if len(blocks) == 0 {
				continue
			}
			b := &blocks[len(blocks)-1]
			column, isColumn := dataColumns[name]
			switch {
			case name == "attitudeState":
				row := row{line: at}
				for _, f := range fields {
					if f != "" {
						row.fields = append(row.fields, f)
					}
				}
				b.rows = append(b.rows, row)
			case inside("attitudeState") && name == "EPOCH":
				fields[0] = v
			case inside("attitudeState") && isColumn && !inside("quaternionDot") && !inside("quaternionRate") && !inside("rotationRates") && !inside("eulerAngleRate"):
				fields[column] = v
			case inside("metadata") && v != "" && name != "COMMENT":
				b.meta = append(b.meta, entry{name, v, line})
			}
		}
	}
	return blocks, version, faults
}
