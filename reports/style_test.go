package reports

import (
	"regexp"
	"strings"
	"testing"
)

// A rule of one kind of page stands under the class of its body, so that no page takes over
// what another means by a class.
func TestRulesOfOnePageAreItsOwn(t *testing.T) {
	for body, style := range map[string]string{"timeline": timelineStyle, "compare": comparisonStyle, "shift": shiftStyle} {
		rules := 0
		for _, m := range regexp.MustCompile(`(?m)^[ \t]*([^@{}\s][^{}\n]*?)\s*\{`).FindAllStringSubmatch(style, -1) {
			for _, selector := range strings.Split(m[1], ",") {
				rules++
				if s := strings.TrimSpace(selector); !strings.HasPrefix(s, "."+body+" ") && !strings.HasPrefix(s, "body."+body) && !strings.HasPrefix(s, "html:has(body."+body) {
					t.Errorf("%s: the rule %q holds for every page", body, s)
				}
			}
		}
		if rules == 0 {
			t.Errorf("%s: no rule found", body)
		}
	}
}

// Every colour is one of the palettes, whose contrast is measured.
func TestColoursStandInThePalettesAlone(t *testing.T) {
	beyond := regexp.MustCompile(`(?s):root[^{]*\{.*?\}`).ReplaceAllString(styleSheet+shiftStyle, "")
	beyond = regexp.MustCompile(`url\([^)]*\)`).ReplaceAllString(beyond, "")
	if m := regexp.MustCompile(`(?i)#[0-9a-f]{3,8}\b|\brgba?\(|\bhsla?\(`).FindString(beyond); m != "" {
		t.Errorf("the colour %s stands outside of the palettes", m)
	}
}
