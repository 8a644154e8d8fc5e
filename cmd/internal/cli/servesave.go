package cli

import (
	"archive/zip"
	"bytes"
	"context"
	"fmt"
	"io"
	"path/filepath"
	"strings"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/scenario"
	"slantwise/cmd/internal/web"
)

// Scenario gives the text of the scenario with what a question changes. Of the embedded
// demo it is an archive, with the files that the text names.
func (m *liveModel) Scenario(ctx context.Context, w *web.Wish) (*web.File, error) {
	i, ok := m.places[w.Question.Contact]
	if !ok {
		return nil, nil
	}
	if _, err := m.WhatIf(ctx, &w.Question); err != nil { // it refuses what has no answer
		return nil, err
	}
	c, q := m.contacts[i], &w.Question
	s, err := scenario.WithChange(m.request, scenario.Change{
		Spacecraft: c.Spacecraft, Transmitter: c.Transmitter, Station: c.Station, Antenna: c.Antenna,
		Mode: q.Mode, PowerW: q.PowerW, DiameterM: q.DishM, PointingErrorDeg: q.PointingErrorDeg,
		LeastElevationDeg: q.LeastElevationDeg, ExceededPercent: q.ExceededPercent,
		NameOfFile: w.Name, Remark: "A what-if of the live page.",
	})
	if err != nil {
		return nil, &web.RefusedError{Text: "the changed scenario would be wrong: " + err.Error()}
	}
	if len(s.Files) == 0 {
		return &web.File{Name: w.Name, Kind: "application/yaml; charset=utf-8", Body: s.Text}, nil
	}
	return archive(w.Name, s)
}

// archive puts a scenario and the files that it names into a folder of a ZIP file.
func archive(name string, s *scenario.Changed) (*web.File, error) {
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	folder := strings.TrimSuffix(name, filepath.Ext(name))
	for _, f := range append([]scenario.File{{Name: name, Text: string(s.Text)}}, s.Files...) {
		w, err := z.Create(folder + "/" + f.Name)
		if err == nil {
			_, err = io.WriteString(w, f.Text)
		}
		if err != nil {
			return nil, fmt.Errorf("packing %s: %w", f.Name, err)
		}
	}
	if err := z.Close(); err != nil {
		return nil, fmt.Errorf("packing %s: %w", name, err)
	}
	return &web.File{Name: folder + ".zip", Kind: "application/zip", Body: b.Bytes()}, nil
}

// keepIn returns what writes a new file into the folder of a scenario, whole or not at
// all and never over another.
func keepIn(named string) func(string, []byte) error {
	if named == "" {
		named = scenario.DefaultFile
	}
	folder := filepath.Dir(named)
	return func(name string, body []byte) error {
		return atomicfile.Create(filepath.Join(folder, name), 0o644, func(w io.Writer) error {
			_, err := w.Write(body)
			return err
		})
	}
}
