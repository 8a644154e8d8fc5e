package scenario

import (
	"embed"
	"fmt"
)

//go:embed teamweek
var teamWeekFiles embed.FS

// TeamWeek returns the files of a team's week: a scenario of an invented satellite and station
// with its element set, and three tables of measurements, which are invented, too.
func TeamWeek() ([]File, error) {
	var out []File
	for _, name := range []string{"week.yaml", "bunting.tle", "monday.csv", "tuesday.csv", "wednesday.csv"} {
		text, err := teamWeekFiles.ReadFile("teamweek/" + name)
		if err != nil {
			return nil, fmt.Errorf("embedded team's week: %w", err)
		}
		out = append(out, File{name, string(text)})
	}
	return out, nil
}
