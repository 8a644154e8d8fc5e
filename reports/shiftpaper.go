package reports

import (
	"strings"

	vector "slantwise/reports/drawing"
	"slantwise/reports/paper"
)

// ShiftPaper returns the sheet as PDF, on as many pages as it may have.
func ShiftPaper(s *Shift) ([]byte, error) {
	v := newShiftView(s)
	d := paper.New(paper.Info{Title: v.Title + ", " + v.When, Subject: "scenario " + s.Title, Creator: strings.TrimSpace("slantwise " + s.Version), Date: s.From})
	for page := 1; page <= v.Pages; page++ {
		d.Whole(func(c vector.Canvas, w, h float64) { (&sheetPen{c: c, w: w, h: h}).page(v, page) })
	}
	return d.Bytes()
}

// sheetPen paints from top to bottom.
type sheetPen struct {
	c       vector.Canvas
	w, h, y float64
}

func (p *sheetPen) text(x, y float64, text string, size float64, bold bool, tone vector.Tone, align vector.Align) {
	if text != "" {
		p.c.Write(vector.Text{At: vector.Point{X: x, Y: y}, Text: text, Size: size, Bold: bold, Tone: tone, Align: align})
	}
}

func (p *sheetPen) rule(x, to, y, width float64, tone vector.Tone) {
	p.c.Line([]vector.Point{{X: x, Y: y}, {X: to, Y: y}}, vector.Stroke{Tone: tone, Width: width})
}

// fit shortens a text to a width.
func (p *sheetPen) fit(text string, size, width float64, bold bool) string {
	room := width
	if bold {
		room /= 1.12
	}
	runes := []rune(text)
	for n := len(runes); n > 0; n-- {
		short := string(runes[:n])
		if n < len(runes) {
			short += "…"
		}
		if p.c.Width(short, size) <= room {
			return short
		}
	}
	return ""
}

func (p *sheetPen) page(v *shiftView, page int) {
	if page == 1 {
		p.text(0, 13, p.fit(v.Title, 15, p.w*0.55, true), 15, true, vector.Ink, vector.Start)
		p.text(p.w, 9, v.When, 9, true, vector.Ink, vector.End)
		p.text(p.w, 20, v.Local, 8, false, vector.Soft, vector.End)
		p.text(0, 27, p.fit(v.Source+"; "+v.Footer, sheetSmall, p.w*0.62, false), sheetSmall, false, vector.Soft, vector.Start)
		p.y = sheetTitle - 6
	} else {
		p.text(0, 8, p.fit(v.Title+", "+v.When, 8, p.w, true), 8, true, vector.Ink, vector.Start)
		p.y = sheetAgain - 4
	}
	for i := range v.Blocks {
		if v.Blocks[i].Page == page {
			p.block(&v.Blocks[i])
		}
	}
	if len(v.Blocks) == 0 {
		for _, line := range wrapped(v.None, 11, p.w, 0, true) {
			p.y += 14
			p.text(0, p.y, line, 11, true, vector.Ink, vector.Start)
		}
	}
	if page == v.Pages {
		p.foot(v)
	}
}

func (p *sheetPen) block(b *shiftBlock) {
	in := b.inLines()
	p.rule(0, p.w, p.y, 1.2, vector.Ink)
	y := p.y + 11
	number := fixed(float64(b.Number), 0)
	p.text(0, y, number, 10.5, true, vector.Ink, vector.Start)
	x := 16.0
	for _, part := range []struct {
		text string
		size float64
		bold bool
		tone vector.Tone
	}{{b.Begin + " to " + b.End + " UTC", 10.5, true, vector.Ink}, {b.Local, 8.5, false, vector.Ink}} {
		p.text(x, y, part.text, part.size, part.bold, part.tone, vector.Start)
		if part.text != "" {
			x += sheetWidth(part.text, part.size, part.bold) + 9
		}
	}
	p.text(p.w, y, b.Length, 8.5, false, vector.Ink, vector.End)
	p.text(x, y, p.fit(b.Spacecraft, 10.5, p.w-x-sheetWidth(b.Length, 8.5, false)-8, true), 10.5, true, vector.Ink, vector.Start)
	y = p.y + sheetHead
	for _, line := range in.facts {
		p.text(0, y+6.2, line, sheetSmall, false, vector.Soft, vector.Start)
		y += sheetTight
	}
	after := max(p.points(b, y), p.words(in.words, sheetLeft+sheetGutter, y, sheetText, sheetLine)) + 2
	for _, lines := range in.alarm {
		for _, line := range lines {
			p.text(0, after+6.6, line, sheetText, true, vector.Ink, vector.Start)
			after += sheetLine
		}
	}
	after = p.signal(b, after)
	base := after + sheetWrite - 4
	for _, part := range []struct {
		name     string
		from, to float64
	}{{"Taken", 0, 0.3}, {"By", 0.31, 0.45}, {"Remarks", 0.46, 1}} {
		x := p.w * part.from
		p.text(x, base, part.name, sheetSmall, false, vector.Soft, vector.Start)
		p.rule(x+sheetWidth(part.name, sheetSmall, false)+4, p.w*part.to, base+1, 0.6, vector.Soft)
	}
	p.y += in.height
}

// points paints the table of events, the first row of which are their times, and returns where
// it ends.
func (p *sheetPen) points(b *shiftBlock, y float64) float64 {
	const name = 58.0
	wide := (sheetLeft - name) / 3
	for i, h := range b.Heads {
		if i == 1 {
			h = "top" // culmination is too long a word beside the time
		}
		at := b.Points[0].Cells[i]
		room := wide - sheetWidth(" "+at, sheetText, true) - 2
		p.text(name+wide*float64(i+1), y+6.4, p.fit(h, sheetText, room, true)+" "+at, sheetText, true, vector.Ink, vector.End)
	}
	p.text(0, y+6.4, b.Points[0].Name, sheetText, false, vector.Soft, vector.Start)
	y += sheetLine
	for _, r := range b.Points[1:] {
		p.rule(0, sheetLeft, y-0.6, 0.4, vector.Rule)
		p.text(0, y+6.4, p.fit(r.Name, sheetText, name-2, false), sheetText, false, vector.Soft, vector.Start)
		for i, cell := range r.Cells {
			p.text(name+wide*float64(i+1), y+6.4, p.fit(cell, sheetText, wide-2, false), sheetText, false, vector.Ink, vector.End)
		}
		y += sheetLine
	}
	return y
}

// words paints texts behind their bold names and returns where they end.
func (p *sheetPen) words(list []told, x, y, size, line float64) float64 {
	for _, t := range list {
		p.text(x, y+line-2.3, t.name, size, true, vector.Ink, vector.Start)
		for i, text := range t.lines {
			at := x
			if i == 0 {
				at += sheetWidth(t.name+"  ", size, true)
			}
			p.text(at, y+line-2.3, text, size, false, vector.Ink, vector.Start)
			y += line
		}
	}
	return y
}

// signal paints what is expected and returns where it ends.
func (p *sheetPen) signal(b *shiftBlock, y float64) float64 {
	if len(b.Signal) == 0 {
		return y
	}
	const name = 58.0
	wide := min(40, (p.w-name)/float64(len(b.Signal[0].Cells)))
	for k, r := range b.Signal {
		if k == 0 {
			p.c.Area([]vector.Point{{X: 0, Y: y}, {X: p.w, Y: y}, {X: p.w, Y: y + sheetTight}, {X: 0, Y: y + sheetTight}}, vector.Rule, nil)
		}
		p.text(1, y+6.2, r.Name, sheetSmall, k == 0, vector.Ink, vector.Start)
		for i, cell := range r.Cells {
			p.text(name+wide*float64(i+1)-2, y+6.2, p.fit(cell, sheetSmall, wide-1, k == 0), sheetSmall, k == 0, vector.Ink, vector.End)
		}
		y += sheetTight
	}
	p.rule(0, p.w, y, 0.4, vector.Rule)
	return y + 4
}

// foot paints what holds for all contacts at the end of the page.
func (p *sheetPen) foot(v *shiftView) {
	f := v.footLines(v.Beyond)
	y := p.h - f.total
	p.rule(0, p.w, y, 1.2, vector.Ink)
	y += 4
	p.words(f.left, 0, y, sheetSmall, sheetTight)
	p.words(f.right, (p.w+sheetGutter)/2, y, sheetSmall, sheetTight)
	y += f.tall + 3
	for _, line := range append(f.signs, f.rest...) {
		p.text(0, y+6.2, line, sheetSmall, false, vector.Soft, vector.Start)
		y += sheetTight
	}
	y += 4
	edge := &vector.Stroke{Tone: vector.Ink, Width: 0.7}
	p.c.Area([]vector.Point{{X: 0, Y: y}, {X: p.w, Y: y}, {X: p.w, Y: y + f.frame}, {X: 0, Y: y + f.frame}}, vector.Paper, edge)
	p.c.Area([]vector.Point{{X: 0, Y: y}, {X: 4, Y: y}, {X: 4, Y: y + f.frame}, {X: 0, Y: y + f.frame}}, vector.Ink, nil)
	y += 3
	for _, lines := range f.cautions {
		for _, line := range lines {
			p.text(9, y+6.2, line, sheetSmall, true, vector.Ink, vector.Start)
			y += sheetTight
		}
	}
}
