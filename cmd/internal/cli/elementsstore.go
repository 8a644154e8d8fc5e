package cli

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"strings"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// convertElements writes the sets in another format.
func convertElements(env *Env, o elementsOptions, sets []orbit.Elements) error {
	f, err := elements.ParseFormat(o.convert)
	if err != nil {
		return &InputError{Err: err}
	}
	var text bytes.Buffer
	warnings, err := elements.Write(&text, sets, f, elements.Header{Created: env.Now()})
	if err != nil {
		return fmt.Errorf("convert: %w", err)
	}
	for _, w := range warnings {
		env.note("warning: %s", printable(w.String()))
	}
	if o.into == "" {
		if _, err := env.Out.Write(text.Bytes()); err != nil {
			return fmt.Errorf("write the sets: %w", err)
		}
		return nil
	}
	return storeElements(env, o, text.Bytes(), sets)
}

// keepFetched writes the text as it came.
func keepFetched(env *Env, o elementsOptions, g gathered) error {
	if len(o.objects) > 0 {
		return inputErrorf("--object leaves sets out, so that the text cannot be kept as it came; give --convert too")
	}
	return storeElements(env, o, g.text, g.sets)
}

// storeElements replaces the file, when nothing is lost by it.
func storeElements(env *Env, o elementsOptions, text []byte, sets []orbit.Elements) error {
	if !o.loss {
		if err := guard(o.into, sets); err != nil {
			return err
		}
	}
	err := atomicfile.Write(o.into, 0o644, func(w io.Writer) error {
		_, err := w.Write(text)
		return err
	})
	if err != nil {
		return err
	}
	env.note("%s: %s written", o.into, setCount(len(sets)))
	return nil
}

// guard refuses to replace a file that holds something else, objects that are
// missing from the new sets, or newer epochs.
func guard(path string, sets []orbit.Elements) error {
	const next = "it was left as it is; name another FILE, or give --allow-loss"
	before, _, err := elements.ReadFile(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		if info, statErr := os.Stat(path); statErr == nil && info.Mode().IsRegular() && info.Size() == 0 {
			return nil // an empty file has nothing to lose
		}
		return fmt.Errorf("--into: what is there cannot be compared with the new sets: %w\n%s", err, next)
	}
	losses := elements.Losses(before, sets)
	if len(losses) == 0 {
		return nil
	}
	var lines []string
	for i, l := range losses {
		if i == listLimit {
			lines = append(lines, fmt.Sprintf("  and %d more", len(losses)-i))
			break
		}
		lines = append(lines, "  "+l.String())
	}
	return fmt.Errorf("--into: %s holds more than the new sets:\n%s\n%s", path, strings.Join(lines, "\n"), next)
}
