package elements

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
	"unicode/utf8"

	"slantwise/orbit"
)

// MaxSize is the largest text that is read, in bytes: about 400,000 two-line sets,
// several times all objects that are catalogued.
const MaxSize = 64_000_000

// Read reads all element sets of a text in any of the formats; which one it is, is
// told from the content. name is the file's name for messages and Source. The sets
// come in the order of the text, at least one. Warnings say what was assumed or
// passed over. The error is a *Faults when the content is wrong; no sets are
// returned then.
func Read(r io.Reader, name string) ([]orbit.Elements, []Warning, error) {
	data, err := io.ReadAll(io.LimitReader(r, MaxSize+1))
	if err != nil {
		return nil, nil, fmt.Errorf("%sreading element sets: %w", place(name, 0, 0), err)
	}
	rep := &report{file: name}
	if len(data) > MaxSize {
		rep.fault(tooLarge(""))
		return nil, nil, rep.err()
	}
	text, ok := plainText(data, rep)
	if !ok {
		return nil, nil, rep.err()
	}
	sets := parse(text, rep)
	if err := rep.err(); err != nil {
		return nil, rep.said(), err
	}
	return sets, rep.said(), nil
}

// ReadFile reads the element sets of a file; see Read.
func ReadFile(path string) ([]orbit.Elements, []Warning, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, nil, explain(path, err)
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return nil, nil, explain(path, err)
	}
	rep := &report{file: path}
	switch {
	case info.IsDir():
		rep.fault(Fault{Problem: "is a directory, not a file of element sets", Next: "name a file in it"})
	case info.Size() > MaxSize:
		rep.fault(tooLarge(fmt.Sprintf("%d bytes, ", info.Size())))
	default:
		return Read(f, path)
	}
	return nil, nil, rep.err()
}

func explain(path string, err error) error {
	next := "check that the file can be read"
	switch {
	case errors.Is(err, os.ErrNotExist):
		next = "check the name and the folder it is relative to"
	case errors.Is(err, os.ErrPermission):
		next = "give yourself the right to read it"
	}
	var pe *os.PathError
	if errors.As(err, &pe) {
		err = pe.Err
	}
	return fmt.Errorf("%s: cannot be read: %w; %s", path, err, next)
}

func tooLarge(size string) Fault {
	return Fault{
		Problem: fmt.Sprintf("holds %smore than the %d bytes that are read", size, MaxSize),
		Next:    "keep only the objects that you need, or split the file",
	}
}

// plainText checks that data is text in UTF-8, and takes off a byte order mark.
func plainText(data []byte, rep *report) (string, bool) {
	if bytes.HasPrefix(data, []byte{0xFF, 0xFE}) || bytes.HasPrefix(data, []byte{0xFE, 0xFF}) {
		rep.fault(Fault{Problem: "is text in UTF-16; only UTF-8 is read", Next: "save it as UTF-8", Unsupported: true})
		return "", false
	}
	text := string(bytes.TrimPrefix(data, []byte("\uFEFF")))
	if strings.Trim(text, " \t\r\n") == "" {
		rep.fault(Fault{Problem: "is empty", Next: "give a file with at least one element set"})
		return "", false
	}
	if i := strings.IndexByte(text, 0); i >= 0 {
		line, column := position(text, i)
		rep.fault(Fault{Line: line, Column: column, Problem: "a zero byte: this is a binary file, not text",
			Next: "give a TLE or OMM file, unpacked"})
		return "", false
	}
	if !utf8.ValidString(text) {
		line, column := position(text, invalidAt(text))
		rep.fault(Fault{Line: line, Column: column, Problem: "a byte that is not UTF-8: a binary file, or text in another encoding",
			Next: "give a TLE or OMM file, unpacked, in UTF-8"})
		return "", false
	}
	return text, true
}

func invalidAt(s string) int {
	for i, r := range s {
		if r == utf8.RuneError {
			if _, size := utf8.DecodeRuneInString(s[i:]); size == 1 {
				return i
			}
		}
	}
	return len(s)
}

// position returns line and column of a byte offset, both from 1; the column counts
// characters.
func position(text string, offset int) (line, column int) {
	before := text[:offset]
	start := strings.LastIndexByte(before, '\n') + 1
	return strings.Count(before, "\n") + 1, utf8.RuneCountInString(before[start:]) + 1
}

// parse hands the text to the parser of its format.
func parse(text string, rep *report) []orbit.Elements {
	switch kind := detect(text); kind {
	case kindTLE:
		return readTLE(text, rep)
	case kindKVN:
		return interpret(readKVN(text, rep), fullMessage, rep)
	case kindXML:
		return interpret(readXML(text, rep), fullMessage, rep)
	case kindJSON:
		return interpret(readJSON(text, rep), bareKeywords, rep)
	case kindCSV:
		return interpret(readCSV(text, rep), bareKeywords, rep)
	default:
		rep.fault(refusal(kind, text))
		return nil
	}
}
