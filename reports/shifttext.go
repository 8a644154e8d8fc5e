package reports

import (
	"strings"
	"unicode/utf8"
)

// ShiftText returns the sheet as lines of text for a terminal, with all contacts.
func ShiftText(s *Shift) []string {
	v := newShiftView(s)
	lines := []string{v.Title + ", " + v.When, v.Local, v.Source, ""}
	if v.None != "" {
		lines = append(lines, v.None, "")
	}
	for i := range v.Blocks {
		lines = append(lines, v.Blocks[i].text()...)
	}
	for _, t := range v.Tell {
		lines = append(lines, t.Name+": "+t.Text)
	}
	if len(v.Tell) > 0 {
		lines = append(lines, v.Signs, "")
	}
	lines = append(append(lines, v.Left...), v.Warnings...)
	return append(lines, v.Cautions...)
}

func (b *shiftBlock) text() []string {
	lines := []string{
		strings.TrimSpace(fixed(float64(b.Number), 0)+"  "+b.Begin+" to "+b.End+" UTC  "+b.Local) + "  " + b.Spacecraft + "  " + b.Length,
		"   " + b.Facts,
	}
	rows := append([]shiftRow{{Cells: b.Heads}}, b.Points...)
	lines = append(lines, columned(rows)...)
	for _, w := range b.Words {
		lines = append(lines, "   "+w.Name+": "+w.Text)
	}
	for _, a := range b.Alarm {
		lines = append(lines, "   ! "+a)
	}
	return append(append(lines, columned(b.Signal)...), "")
}

// columned sets rows in columns.
func columned(rows []shiftRow) []string {
	var widths []int
	name := 0
	for _, r := range rows {
		name = max(name, utf8.RuneCountInString(r.Name))
		for i, c := range r.Cells {
			if i == len(widths) {
				widths = append(widths, 0)
			}
			widths[i] = max(widths[i], utf8.RuneCountInString(c))
		}
	}
	var out []string
	for _, r := range rows {
		line := "   " + r.Name + strings.Repeat(" ", name-utf8.RuneCountInString(r.Name))
		for i, c := range r.Cells {
			line += "  " + strings.Repeat(" ", widths[i]-utf8.RuneCountInString(c)) + c
		}
		out = append(out, line)
	}
	return out
}
