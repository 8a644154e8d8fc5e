package elements

import "strings"

// readKVN splits key-value notation into messages; each begins with its version
// line.
func readKVN(text string, rep *report) []record {
	var records []record
	n := 0
	for raw := range strings.Lines(text) {
		n++
		body := strings.TrimRight(raw, " \t\r\n")
		bare := strings.TrimLeft(body, " \t")
		if bare == "" || bare == "COMMENT" || strings.HasPrefix(bare, "COMMENT ") {
			continue
		}
		key, value, found := strings.Cut(bare, "=")
		key = strings.TrimRight(key, " \t")
		if !found {
			rep.fault(Fault{Line: n, Text: bare, Problem: "is not KEYWORD = VALUE, nor COMMENT", Next: "write it as one of them, or take it out"})
			continue
		}
		if kind := lineKind(bare, false); kind == kindOEM || kind == kindOtherMessage {
			f := refusal(kind, bare)
			f.Line = n
			rep.fault(f)
			return records
		}
		if len(records) == 0 || key == "CCSDS_OMM_VERS" {
			records = append(records, record{line: n})
		}
		value = strings.Trim(value, " \t")
		e := entry{key: key, value: value, line: n, column: columnOf(raw, value)}
		splitUnit(&e)
		records[len(records)-1].add(e)
	}
	return records
}

// columnOf counts in characters where value begins behind the equals sign.
func columnOf(raw, value string) int {
	at := strings.IndexByte(raw, '=') + 1
	at += strings.Index(raw[at:], value)
	return len([]rune(raw[:at])) + 1
}

// splitUnit takes a unit in brackets off the values that may have one; a name may
// end in brackets of its own.
func splitUnit(e *entry) {
	k, ok := lookUp(e.key)
	if !ok || (k.role != numberKey && k.role != countKey) || !strings.HasSuffix(e.value, "]") {
		return
	}
	if i := strings.IndexByte(e.value, '['); i >= 0 {
		e.unit = strings.TrimSpace(e.value[i+1 : len(e.value)-1])
		e.value = strings.TrimRight(e.value[:i], " \t")
	}
}
