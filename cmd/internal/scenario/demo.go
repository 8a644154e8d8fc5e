package scenario

import (
	"embed"
	"fmt"

	"slantwise/cmd/internal/scenario/tree"
)

//go:embed demo
var demoFiles embed.FS

// demoFolder is where the demo lies among its files.
const demoFolder = "demo"

// demo returns the embedded demo.
func demo() (*source, error) {
	const file = demoFolder + "/" + DefaultFile
	text, err := demoFiles.ReadFile(file)
	if err != nil {
		return nil, fmt.Errorf("embedded demo: %w", err)
	}
	return &source{label: "embedded demo", dir: demoFolder, files: demoFiles, format: tree.YAML, text: text}, nil
}
