package web

import (
	"context"
	"crypto/subtle"
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"mime"
	"net/http"
	"net/url"
	"path/filepath"
	"regexp"
	"strings"
)

// File is what someone may keep.
type File struct {
	Name string
	Kind string // as Content-Type
	Body []byte
}

// saveHeader carries the key that only a page of this server knows: nothing is written
// for whoever has not read it.
const saveHeader = "Slantwise-Save-Key"

// Wish asks for a scenario with what a question changes.
type Wish struct {
	Name     string   `json:"name"` // of the file, in the folder of the scenario
	Question Question `json:"question"`
}

// kept tells where a scenario was written.
type kept struct {
	File string `json:"file"`
}

// plainName are names of files that mean the same on every system.
var plainName = regexp.MustCompile(`^[A-Za-z0-9][A-Za-z0-9_. -]{0,70}\.(yaml|yml)$`)

// checkName refuses whatever is not the plain name of a YAML file.
func checkName(name string) error {
	if !plainName.MatchString(name) || strings.Contains(name, "..") || !filepath.IsLocal(name) || filepath.Base(name) != name {
		return &RefusedError{Text: fmt.Sprintf("name: %q is not allowed; give letters, digits, spaces, dots, - and _, beginning with a letter or digit and ending in .yaml", name)}
	}
	return nil
}

// saveScenario writes a scenario into the folder of the one that is served, under a name
// that is free.
func (s *Server) saveScenario(w http.ResponseWriter, r *http.Request) {
	if subtle.ConstantTimeCompare([]byte(r.Header.Get(saveHeader)), []byte(s.saveKey)) != 1 {
		refuse(w, http.StatusForbidden, "only the page of this program may have a scenario written; load it anew and ask there")
		return
	}
	var wish Wish
	if !decode(w, r, &wish) {
		return
	}
	if err := checkName(wish.Name); err != nil {
		fail(w, err)
		return
	}
	f := s.scenario(w, r, &wish)
	if f == nil {
		return
	}
	if f.Name != wish.Name {
		refuse(w, http.StatusConflict, "the embedded demo has no folder to write into; download the scenario in place of it")
		return
	}
	switch err := s.config.Keep(f.Name, f.Body); {
	case err == nil:
		reply(w, http.StatusCreated, kept{f.Name})
	case errors.Is(err, fs.ErrExist):
		refuse(w, http.StatusConflict, fmt.Sprintf("there is a file %q already, and it is left as it is; give another name", f.Name))
	default: // the error names the folder, which is nobody's business
		var inside *fs.PathError
		if errors.As(err, &inside) {
			err = inside.Err
		}
		refuse(w, http.StatusConflict, fmt.Sprintf("the folder of the scenario cannot be written: %v; download the scenario in place of it", err))
	}
}

// getScenario hands a scenario out, to be kept by the browser.
func (s *Server) getScenario(w http.ResponseWriter, r *http.Request) {
	q, err := questionOf(r.URL.RawQuery)
	if err != nil {
		refuse(w, http.StatusBadRequest, err.Error())
		return
	}
	if f := s.scenario(w, r, &Wish{Name: "what-if.yaml", Question: *q}); f != nil {
		w.Header().Set("Content-Type", f.Kind)
		w.Header().Set("Content-Disposition", mime.FormatMediaType("attachment", map[string]string{"filename": f.Name}))
		w.Write(f.Body) // a client that has gone gets nothing
	}
}

// scenario works out the text of a scenario, nil where it has answered the request.
func (s *Server) scenario(w http.ResponseWriter, r *http.Request, wish *Wish) *File {
	if !s.turn(w, r) {
		return nil
	}
	defer func() { <-s.questions }()
	ctx, stop := context.WithTimeout(r.Context(), s.limits.patience)
	defer stop()
	m, _, _ := s.keeper.now()
	f, err := m.Scenario(ctx, wish)
	switch {
	case err != nil:
		fail(w, err)
	case f == nil:
		refuse(w, http.StatusNotFound, noContact)
	}
	return f
}

// questionOf reads the question of an address, each key once.
func questionOf(query string) (*Question, error) {
	if len(query) > maxBody {
		return nil, fmt.Errorf("the question is longer than %d bytes", maxBody)
	}
	values, err := url.ParseQuery(query)
	if err != nil {
		return nil, fmt.Errorf("the question cannot be read: %w", err)
	}
	plain := map[string]any{}
	for key, v := range values {
		if len(v) != 1 {
			return nil, fmt.Errorf("the question has %q %d times; give it once", key, len(v))
		}
		switch {
		case key == "contact" || key == "mode":
			plain[key] = v[0]
		case v[0] == "": // which the package for JSON would take for 0
			return nil, fmt.Errorf("%q has no number; give one or leave the key out", key)
		default:
			plain[key] = json.Number(v[0])
		}
	}
	body, err := json.Marshal(plain)
	if err != nil {
		return nil, fmt.Errorf("the question cannot be read: %w", err)
	}
	var q Question
	if err := exactKeys(body, &q); err != nil {
		return nil, fmt.Errorf("the question cannot be read: %w", err)
	}
	d := json.NewDecoder(strings.NewReader(string(body)))
	d.DisallowUnknownFields()
	if err := d.Decode(&q); err != nil {
		return nil, fmt.Errorf("the question cannot be read: %w", err)
	}
	return &q, nil
}
