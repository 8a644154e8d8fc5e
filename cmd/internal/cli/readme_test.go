package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestReadmeRuns types in every call of the README, block by block in a folder of its
// own, but for what needs a network; below a call that begins with $ the README shows
// lines of the answer, and each must be in it.
func TestReadmeRuns(t *testing.T) {
	text, err := os.ReadFile(filepath.Join("..", "..", "..", "README.md"))
	if err != nil {
		t.Fatal(err)
	}
	calls := 0
	for _, block := range codeBlocks(string(text)) {
		t.Run(block[0], func(t *testing.T) {
			t.Chdir(t.TempDir())
			out := ""
			for _, line := range block {
				call, shown := strings.CutPrefix(line, "$ ")
				if !strings.HasPrefix(call, "slantwise ") {
					if out != "" && line != "…" && !strings.Contains(out, line+"\n") {
						t.Errorf("the README shows a line that is not in the answer:\n%s\nthe answer:\n%s", line, out)
					}
					continue
				}
				out = ""
				if strings.Contains(call, "https://") {
					continue
				}
				calls++
				code, answer, errOut := invoke(t, words(t, call)[1:]...)
				if code != ExitAnswer {
					t.Errorf("%s: code %d, %s", call, code, errOut)
				}
				if shown {
					out = answer
				}
			}
		})
	}
	if calls < 10 {
		t.Errorf("%d calls found in the README", calls)
	}
}

// codeBlocks returns the indented blocks of a Markdown text, without the indentation.
func codeBlocks(text string) [][]string {
	var blocks [][]string
	inside := false
	for _, line := range strings.Split(text, "\n") {
		code, indented := strings.CutPrefix(line, "    ")
		switch {
		case indented && inside:
			blocks[len(blocks)-1] = append(blocks[len(blocks)-1], code)
		case indented:
			blocks = append(blocks, []string{code})
		}
		inside = indented
	}
	return blocks
}
