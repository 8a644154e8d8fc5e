package elements

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"
)

// jsonReader walks the tokens of an array of flat objects, or of one object.
type jsonReader struct {
	text    string
	dec     *json.Decoder
	rep     *report
	line    int // at offset
	offset  int
	start   int // of the line
	records []record
}

// errStop ends the walk after a fault that was told already.
var errStop = errors.New("told")

func readJSON(text string, rep *report) []record {
	r := &jsonReader{text: text, dec: json.NewDecoder(strings.NewReader(text)), rep: rep, line: 1}
	r.dec.UseNumber()
	if err := r.document(); err != nil && !errors.Is(err, errStop) {
		r.syntax(err)
	}
	return r.records
}

func (r *jsonReader) document() error {
	token, err := r.dec.Token()
	if err != nil {
		return err
	}
	if token == json.Delim('[') {
		if err := r.array(); err != nil {
			return err
		}
	} else if err := r.object(); err != nil {
		return err
	}
	if _, err := r.dec.Token(); !errors.Is(err, io.EOF) {
		return r.stop("there is text after the end of the JSON value", "keep one array with all objects")
	}
	return nil
}

func (r *jsonReader) array() error {
	for r.dec.More() {
		token, err := r.dec.Token()
		if err != nil {
			return err
		}
		if token != json.Delim('{') {
			return r.stop("the array must hold objects, one for each set", "give an array of flat objects")
		}
		if err := r.object(); err != nil {
			return err
		}
	}
	_, err := r.dec.Token()
	return err
}

func (r *jsonReader) object() error {
	line, _ := r.here()
	rec := record{line: line}
	for r.dec.More() {
		key, err := r.dec.Token()
		if err != nil {
			return err
		}
		name, ok := key.(string)
		if !ok {
			return fmt.Errorf("a keyword must be text, not %v", key)
		}
		if err := r.member(&rec, name); err != nil {
			return err
		}
	}
	if _, err := r.dec.Token(); err != nil {
		return err
	}
	r.records = append(r.records, rec)
	return nil
}

// member reads the value of one keyword. null counts as not given.
func (r *jsonReader) member(rec *record, name string) error {
	line, column := r.valueStart()
	token, err := r.dec.Token()
	if err != nil {
		return err
	}
	e := entry{key: name, line: line, column: column}
	switch v := token.(type) {
	case nil:
		return nil
	case string:
		e.value = strings.Trim(v, " ")
	case json.Number:
		e.value = v.String()
	case bool:
		e.value = fmt.Sprint(v)
	case json.Delim:
		if err := r.skip(); err != nil {
			return err
		}
		if k, known := lookUp(name); known && k.role != passedKey {
			r.rep.fault(Fault{Line: line, Column: column, Field: name, Problem: "must be a number or text, not an object or array", Next: "give flat objects"})
			return nil
		}
	}
	rec.add(e)
	return nil
}

// skip reads to the end of the object or array that was just begun.
func (r *jsonReader) skip() error {
	for depth := 1; depth > 0; {
		token, err := r.dec.Token()
		if err != nil {
			return err
		}
		switch token {
		case json.Delim('{'), json.Delim('['):
			depth++
		case json.Delim('}'), json.Delim(']'):
			depth--
		}
	}
	return nil
}

// here returns the place of the token read last, without looking at a line twice.
func (r *jsonReader) here() (line, column int) { return r.at(int(r.dec.InputOffset())) }

// valueStart returns the place of the value that follows the keyword just read.
func (r *jsonReader) valueStart() (line, column int) {
	at := int(r.dec.InputOffset())
	for at < len(r.text) && strings.IndexByte(" \t\r\n:", r.text[at]) >= 0 {
		at++
	}
	return r.at(at)
}

func (r *jsonReader) at(offset int) (line, column int) {
	for ; r.offset < min(offset, len(r.text)); r.offset++ {
		if r.text[r.offset] == '\n' {
			r.line++
			r.start = r.offset + 1
		}
	}
	return r.line, utf8.RuneCountInString(r.text[min(r.start, offset):min(offset, len(r.text))]) + 1
}

func (r *jsonReader) stop(problem, next string) error {
	line, column := r.here()
	r.rep.fault(Fault{Line: line, Column: max(column-1, 1), Problem: problem, Next: next})
	return errStop
}

func (r *jsonReader) syntax(err error) {
	at := int(r.dec.InputOffset())
	problem := err.Error()
	var se *json.SyntaxError
	if errors.As(err, &se) {
		at = int(se.Offset) - 1
	}
	if errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		at, problem = len(r.text), "the text ends in the middle"
	}
	line, column := position(r.text, min(max(at, 0), len(r.text)))
	r.rep.fault(Fault{Line: line, Column: column, Problem: "is not JSON: " + problem, Next: "fetch the file again"})
}
