package scenario

import (
	"embed"
	"fmt"
)

//go:embed launchday
var launchDayFiles embed.FS

// File is a text with its name.
type File struct{ Name, Text string }

// LaunchDay returns the files of an invented satellite's first day, in the order in
// which they come to be known: four scenarios that differ in the orbit alone (the
// separation state as planned, the same after a late launch, an ephemeris from
// tracking, the first element set) and the two files that they name.
func LaunchDay() ([]File, error) {
	var out []File
	for _, name := range []string{"nominal.yaml", "slipped.yaml", "tracked.yaml", "catalogued.yaml", "tracked.oem", "catalogued.tle"} {
		text, err := launchDayFiles.ReadFile("launchday/" + name)
		if err != nil {
			return nil, fmt.Errorf("embedded launch day: %w", err)
		}
		out = append(out, File{name, string(text)})
	}
	return out, nil
}
