package elements

import (
	"errors"
	"io"

	"slantwise/orbit"
)

// Read reads all element sets of a text in any of the formats; which one it is, is
// told from the content. name is the file's name for messages and Source. The sets
// come in the order of the text, at least one. Warnings say what was assumed or
// passed over. The error is a *Faults when the content is wrong; no sets are
// returned then.
func Read(r io.Reader, name string) ([]orbit.Elements, []Warning, error) {
	return nil, nil, errors.New("elements: not built yet")
}

// ReadFile reads the element sets of a file; see Read.
func ReadFile(path string) ([]orbit.Elements, []Warning, error) {
	return nil, nil, errors.New("elements: not built yet")
}
