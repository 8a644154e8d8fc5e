package scenario

import (
	"embed"
	"fmt"
	"strings"
)

//go:embed start
var startFiles embed.FS

// Start returns the text of a commented scenario to start from, which names
// elementFile as its element file, and the text of that file.
func Start(elementFile string) (scenarioText, elementText string, err error) {
	s, err := startFiles.ReadFile("start/slantwise.yaml")
	if err != nil {
		return "", "", fmt.Errorf("embedded starting scenario: %w", err)
	}
	e, err := startFiles.ReadFile("start/elements.tle")
	if err != nil {
		return "", "", fmt.Errorf("embedded starting scenario: %w", err)
	}
	// In quotes: a file name may hold what YAML takes for its own.
	name := "'" + strings.ReplaceAll(elementFile, "'", "''") + "'"
	return strings.Replace(string(s), "ELEMENTS", name, 1), string(e), nil
}
