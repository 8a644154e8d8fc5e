package scenario

import (
	"errors"
	"fmt"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// elementFiles reads every element set and ephemeris of the files that the scenario
// names.
func (r *reader) elementFiles(o object, earth orbit.EarthOrientation) ([]orbit.Elements, []TrajectoryFile) {
	if !o.has("element_files") {
		if r.need == NeedOrbits && !everyOneHasState(o) {
			o.missing("element_files", "a list of files of element sets, relative to the scenario file")
		}
		return nil, nil
	}
	var sets []orbit.Elements
	var tracks []TrajectoryFile
	seen := map[string]bool{}
	for i, n := range o.items("element_files", "file names", maxParts) {
		name := fmt.Sprintf("element_files[%d]", i)
		file, ok := o.textAt(n, name, false)
		if !ok {
			continue
		}
		if seen[file] {
			o.fault(n, name, "%s stands twice", "remove one of the two", quote(file))
			continue
		}
		seen[file] = true
		if r.need != NeedOrbits {
			continue
		}
		told, is, err := r.src.trajectories(file, earth)
		if err != nil {
			r.elementFault(o, name, file, err)
			continue
		}
		if is {
			for _, w := range told.Warnings {
				r.warnings = append(r.warnings, Note{About: "element file " + file, Text: w.String()})
			}
			for _, t := range told.Trajectories {
				tracks = append(tracks, TrajectoryFile{Trajectory: t, Created: told.Created})
			}
			continue
		}
		found, warnings, err := r.src.elementSets(file)
		if err != nil {
			r.elementFault(o, name, file, err)
			continue
		}
		for _, w := range warnings {
			r.warnings = append(r.warnings, Note{About: "element file " + file, Text: w.String()})
		}
		sets = append(sets, found...)
	}
	return sets, tracks
}

// everyOneHasState tells whether each spacecraft has an orbit of its own.
func everyOneHasState(top object) bool {
	all := top.get("spacecraft")
	if all == nil || len(all.Items) == 0 {
		return false
	}
	for _, craft := range all.Items {
		if craft.Kind != tree.Map || craft.Get("state") == nil && craft.Get("synthetic_orbit") == nil {
			return false
		}
	}
	return true
}

// elementFault passes on what is wrong with an element file. Faults of its text tell
// file and line themselves; that it cannot be read is told at the key.
func (r *reader) elementFault(o object, key, file string, err error) {
	var fs *elements.Faults
	if errors.As(err, &fs) {
		r.faults.add(fs)
		return
	}
	o.fault(o.get("element_files"), key, "%s", "names are relative to the scenario file", err)
}
