package scenario

import (
	"embed"
	"fmt"
	"strings"
)

//go:embed planningday
var planningDayFiles embed.FS

// PlanningDay returns the files of a day of contact planning: the demo with rules of the
// plan, once with the element sets of the day before and once with new ones, and an outage
// as the calendar of a station tells it.
func PlanningDay() ([]File, error) {
	var fault error
	read := func(fs embed.FS, name string) string {
		text, err := fs.ReadFile(name)
		if err != nil && fault == nil {
			fault = fmt.Errorf("embedded planning day: %w", err)
		}
		return string(text)
	}
	body, rules := read(demoFiles, "demo/slantwise.yaml"), read(planningDayFiles, "planningday/rules.yaml")
	with := func(elements string) string { return strings.Replace(body, "elements.tle", elements, 1) + rules }
	out := []File{
		{"yesterday.yaml", with("yesterday.tle")}, {"today.yaml", with("today.tle")},
		{"yesterday.tle", read(demoFiles, "demo/elements.tle")}, {"today.tle", read(planningDayFiles, "planningday/today.tle")},
		{"skyline.csv", read(demoFiles, "demo/skyline.csv")}, {"gearbox.ics", read(planningDayFiles, "planningday/gearbox.ics")},
	}
	return out, fault
}
