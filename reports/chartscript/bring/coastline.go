package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
)

// coastline turns the land of Natural Earth, 1:110 million, which the package
// world-atlas holds as TopoJSON, into the rings that the maps draw.
func coastline() error {
	folder := filepath.Join(project, "node_modules", "world-atlas")
	packed, err := os.ReadFile(filepath.Join(folder, "land-110m.json"))
	if err != nil {
		return err
	}
	rings, err := landRings(packed)
	if err != nil {
		return fmt.Errorf("land-110m.json: %w", err)
	}
	licence, err := os.ReadFile(filepath.Join(folder, "LICENSE"))
	if err != nil {
		return err
	}
	out, err := json.Marshal(rings)
	if err != nil {
		return err
	}
	text := "The coastline is made with Natural Earth (land, 1:110 million), which is in the public domain.\n" +
		"It came packed in world-atlas 2.0.2, whose licence is:\n\n" + strings.TrimSpace(string(licence)) + "\n"
	if err := os.WriteFile(filepath.Join(assets, "coastline-licence.txt"), []byte(text), 0o644); err != nil {
		return err
	}
	made := filepath.Join(project, "node_modules", "coastline.json")
	if err := os.WriteFile(made, out, 0o644); err != nil {
		return err
	}
	return os.Rename(made, filepath.Join(assets, "coastline.json"))
}

// topology is what is read of a TopoJSON file.
// Source: The TopoJSON Format Specification, version 1.0, sections 2.1 and 2.2.
type topology struct {
	Transform struct {
		Scale, Translate [2]float64
	}
	Arcs    [][][2]float64 // quantized, each position but the first as a difference
	Objects map[string]struct {
		Geometries []struct {
			Type string
			Arcs [][][]int // polygon, ring, arc; ^i is arc i backwards
		}
	}
}

// landRings returns every ring as longitude, latitude, longitude, latitude ... in
// hundredths of a degree. Land is what an odd number of rings goes around.
func landRings(packed []byte) ([][]int, error) {
	var top topology
	if err := json.Unmarshal(packed, &top); err != nil {
		return nil, err
	}
	land, ok := top.Objects["land"]
	if !ok {
		return nil, errors.New("it has no object land")
	}
	var rings [][]int
	for _, g := range land.Geometries {
		if g.Type != "MultiPolygon" {
			return nil, fmt.Errorf("land is made of %s, not of MultiPolygon", g.Type)
		}
		for _, polygon := range g.Arcs {
			for _, ring := range polygon {
				var points []int
				for _, arc := range ring {
					part, err := top.arc(arc)
					if err != nil {
						return nil, err
					}
					if len(points) > 0 {
						part = part[2:] // an arc begins where the one before ends
					}
					points = append(points, part...)
				}
				rings = append(rings, points)
			}
		}
	}
	return rings, nil
}

// arc returns the positions of an arc, backwards for a negative index.
func (t *topology) arc(i int) ([]int, error) {
	back := i < 0
	if back {
		i = ^i
	}
	if i >= len(t.Arcs) {
		return nil, fmt.Errorf("arc %d of %d", i, len(t.Arcs))
	}
	var at [2]float64
	points := make([]int, 0, 2*len(t.Arcs[i]))
	for _, step := range t.Arcs[i] {
		for k := range at {
			at[k] += step[k]
			points = append(points, int(math.Round(100*(at[k]*t.Transform.Scale[k]+t.Transform.Translate[k]))))
		}
	}
	if len(points) == 0 {
		return nil, fmt.Errorf("arc %d is empty", i)
	}
	if back {
		turned := make([]int, 0, len(points))
		for k := len(points) - 2; k >= 0; k -= 2 {
			turned = append(turned, points[k], points[k+1])
		}
		points = turned
	}
	return points, nil
}
