package reports

import (
	"bytes"
	_ "embed"
	"fmt"
	"html/template"
)

//go:embed pages/shift.css
var shiftStyle string

// ShiftPage returns the sheet as one file of HTML without any script. It prints on the pages that
// the sheet may have; on a screen it shows all contacts.
func ShiftPage(s *Shift) ([]byte, error) {
	v := newShiftView(s)
	v.pageView = plainPage(v.Title)
	v.Style = template.HTML("<style>" + styleSheet + shiftStyle + "</style>")
	v.foot(&s.Basis, "")
	var out bytes.Buffer
	if err := pageTemplates().ExecuteTemplate(&out, "shift.html", v); err != nil {
		return nil, fmt.Errorf("report: %w", err)
	}
	return out.Bytes(), nil
}
