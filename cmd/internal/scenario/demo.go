package scenario

import (
	"embed"
	"fmt"

	"slantwise/cmd/internal/scenario/tree"
)

//go:embed demo
var demoFiles embed.FS

// demo returns the embedded demo.
func demo() (*source, error) {
	const dir, file = "demo", "demo/slantwise.yaml"
	text, err := demoFiles.ReadFile(file)
	if err != nil {
		return nil, fmt.Errorf("embedded demo: %w", err)
	}
	return &source{label: "embedded demo", dir: dir, files: demoFiles, format: tree.YAML, text: text}, nil
}
