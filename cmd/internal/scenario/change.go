package scenario

import (
	"fmt"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"slantwise/cmd/internal/scenario/tree"
)

// Change says what a changed scenario has in place of the values of another. Names are
// those of the scenario; nil and an empty mode change nothing.
type Change struct {
	Spacecraft, Transmitter, Station, Antenna string

	Mode               string   // the transmitter's only mode
	PowerW             *float64 // of the transmitter
	DiameterM          *float64 // of the antenna
	PointingErrorDeg   *float64 // of the antenna
	LeastElevationDeg  *float64 // of the station
	ExceededPercent    *float64 // of the path
	NameOfFile, Remark string   // of the new file; the remark stands at its top
}

// Changed is the text of a changed scenario.
type Changed struct {
	Text  []byte   // YAML
	Files []File   // of the embedded demo alone: the files that the text names
	Told  []string // a line for each change
}

// WithChange reads the scenario of a request again and returns it changed, as YAML: with
// its comments where it is YAML without anchors. Scalars that the environment or flags
// replace stand in it as they were replaced. File names in it are relative as before, so
// that it belongs into the folder of the scenario. It is checked: what would be a fault
// of the new file is the error.
func WithChange(req Request, c Change) (*Changed, error) {
	src, err := find(req)
	if err != nil {
		return nil, err
	}
	return withChange(src, req, c)
}

func withChange(src *source, req Request, c Change) (*Changed, error) {
	root, err := tree.Parse(src.text, src.format)
	if err != nil {
		_, err = load(src, req) // tells it with its place
		return nil, err
	}
	edit := tree.NewEdit(src.text, src.format, root)
	r := &reader{place: src.label, src: src, need: req.Need}
	r.override(root, req.Flags)
	for _, key := range scalarKeys {
		if n := lookUp(root, key); n != nil && n.Origin != "" {
			edit.Set(edit.Root(), key, *n)
			if other, is := alternatives[key]; is {
				edit.Remove(edit.Root(), siblingOf(key, other))
			}
		}
	}
	out := &Changed{}
	if err := out.apply(edit, &c); err != nil {
		return nil, err
	}
	heading := append([]string{c.Remark + " It was made from " + filepath.Base(src.label) + ":"}, out.Told...)
	if out.Text, err = edit.Text(heading); err != nil {
		return nil, err
	}
	next := *src
	next.label, next.format, next.text = c.NameOfFile, tree.YAML, out.Text
	if _, err := load(&next, Request{Need: req.Need}); err != nil {
		return nil, err
	}
	if src.dir == demoFolder && src.files != nil {
		out.Files, err = src.embedded()
	}
	return out, err
}

// siblingOf returns a key beside another.
func siblingOf(key, other string) string {
	if at := strings.LastIndexByte(key, '.'); at >= 0 {
		return key[:at+1] + other
	}
	return other
}

// apply makes the changes and notes each.
func (out *Changed) apply(edit *tree.Edit, c *Change) error {
	root := edit.Root()
	craft, okCraft := edit.Item(root, "spacecraft", c.Spacecraft)
	transmitter, okTransmitter := edit.Item(craft, "transmitters", c.Transmitter)
	station, okStation := edit.Item(root, "stations", c.Station)
	antenna, okAntenna := edit.Item(station, "antennas", c.Antenna)
	if !(okCraft && okTransmitter && okStation && okAntenna) {
		return fmt.Errorf("the scenario does not have %s with %s, or %s with %s, any more", c.Spacecraft, c.Transmitter, c.Station, c.Antenna)
	}
	tell := func(format string, args ...any) { out.Told = append(out.Told, fmt.Sprintf(format, args...)) }
	for _, n := range []struct {
		at    tree.Place
		of    string
		key   string
		value *float64
	}{
		{transmitter, "spacecraft " + c.Spacecraft + ", transmitter " + c.Transmitter, "power_w", c.PowerW},
		{antenna, "station " + c.Station + ", antenna " + c.Antenna, "diameter_m", c.DiameterM},
		{antenna, "station " + c.Station + ", antenna " + c.Antenna, "pointing_error_deg", c.PointingErrorDeg},
		{station, "station " + c.Station, "minimum_elevation_deg", c.LeastElevationDeg},
		{root, "path", "path.exceeded_percent", c.ExceededPercent},
	} {
		if n.value == nil {
			continue
		}
		if n.key == "power_w" {
			edit.Remove(n.at, "power_dbm")
			edit.Remove(n.at, "power_dbw")
		}
		text := strconv.FormatFloat(*n.value, 'g', -1, 64)
		edit.Set(n.at, n.key, tree.Node{Kind: tree.Number, Text: text})
		tell("%s: %s is %s", n.of, n.key, text)
	}
	if c.Mode != "" {
		if !edit.Keep(transmitter, "modes", c.Mode) {
			return fmt.Errorf("transmitter %s of %s does not have a mode %s any more", c.Transmitter, c.Spacecraft, c.Mode)
		}
		tell("spacecraft %s, transmitter %s: %s is its only mode", c.Spacecraft, c.Transmitter, c.Mode)
	}
	if len(out.Told) == 0 {
		tell("nothing is changed")
	}
	return nil
}

// embedded returns the files beside the embedded scenario.
func (s *source) embedded() ([]File, error) {
	entries, err := demoFiles.ReadDir(s.dir)
	if err != nil {
		return nil, fmt.Errorf("embedded demo: %w", err)
	}
	var out []File
	for _, e := range entries {
		if e.Name() == DefaultFile {
			continue
		}
		text, err := demoFiles.ReadFile(s.place(e.Name()))
		if err != nil {
			return nil, fmt.Errorf("embedded demo: %w", err)
		}
		out = append(out, File{Name: e.Name(), Text: string(text)})
	}
	slices.SortFunc(out, func(a, b File) int { return strings.Compare(a.Name, b.Name) })
	return out, nil
}
