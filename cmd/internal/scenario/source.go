package scenario

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"strings"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// maxFile is the largest scenario file that is read, in bytes.
const maxFile = 8 << 20

// source is where a scenario and the files that it names are read from.
type source struct {
	label  string // the file as it was named
	dir    string // names in the scenario are relative to it; in files for the demo
	files  fs.FS  // nil: the file system of the machine
	format tree.Format
	text   []byte
	opened func(file string) // told of each file before it is read
}

// find reads the scenario file of a request.
func find(req Request) (*source, error) {
	file, opened := req.Path, req.Opened
	if opened == nil {
		opened = func(string) {}
	}
	if file == "" {
		file = DefaultFile
	}
	opened(file)
	if req.Path == "" {
		if _, err := os.Stat(file); errors.Is(err, fs.ErrNotExist) {
			return demo()
		}
	}
	format, err := formatOf(file)
	if err != nil {
		return nil, err
	}
	f, err := os.Open(file)
	if err != nil {
		return nil, unreadable(file, err)
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return nil, unreadable(file, err)
	}
	if info.IsDir() {
		return nil, &Fault{Place: file, Problem: "this is a directory", Next: "name the scenario file in it"}
	}
	if info.Size() > maxFile {
		return nil, tooBig(file)
	}
	text, err := io.ReadAll(io.LimitReader(f, maxFile+1))
	if err != nil {
		return nil, unreadable(file, err)
	}
	if len(text) > maxFile {
		return nil, tooBig(file)
	}
	return &source{label: file, dir: filepath.Dir(file), format: format, text: text, opened: opened}, nil
}

func tooBig(path string) error {
	return &Fault{Place: path, Problem: fmt.Sprintf("the file is larger than %d MB, which no scenario is", maxFile>>20), Next: "name a scenario; element sets belong under element_files"}
}

// formatOf tells a file's notation by its name; one without an extension is YAML.
func formatOf(path string) (tree.Format, error) {
	switch ext := strings.ToLower(filepath.Ext(path)); ext {
	case ".yaml", ".yml", "":
		return tree.YAML, nil
	case ".toml":
		return tree.TOML, nil
	case ".json":
		return tree.JSON, nil
	}
	return 0, &Fault{Place: path, Problem: "the name does not tell YAML, TOML or JSON", Next: "let it end in .yaml, .toml or .json"}
}

// unreadable says in plain words why a file cannot be read.
func unreadable(path string, err error) error {
	f := &Fault{Place: path}
	switch {
	case errors.Is(err, fs.ErrNotExist):
		f.Problem, f.Next = "there is no such file", "check the name, or write a new scenario with: slantwise new"
	case errors.Is(err, fs.ErrPermission):
		f.Problem, f.Next = "there is no permission to read it", "give yourself the right to read it"
	default:
		f.Problem = "it cannot be read: " + err.Error()
	}
	return f
}

// elementSets reads an element file that the scenario names.
func (s *source) elementSets(name string) ([]orbit.Elements, []elements.Warning, error) {
	if s.files == nil {
		return elements.ReadFile(s.told(name))
	}
	f, err := s.files.Open(s.place(name))
	if err != nil {
		return nil, nil, err
	}
	defer f.Close()
	return elements.Read(f, name)
}

// open opens a file that the scenario names.
func (s *source) open(name string) (fs.File, error) {
	if s.files == nil {
		return os.Open(s.told(name))
	}
	return s.files.Open(s.place(name))
}

// told is place for a file of the machine that is about to be read.
func (s *source) told(name string) string {
	file := s.place(name)
	if s.opened != nil {
		s.opened(file)
	}
	return file
}

func (s *source) place(name string) string {
	if s.files != nil {
		return path.Join(s.dir, name)
	}
	if filepath.IsAbs(name) {
		return name
	}
	return filepath.Join(s.dir, name)
}
