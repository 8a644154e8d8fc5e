package paper

// Heading writes the head of a section, with room for what comes under it.
func (d *Document) Heading(text string) {
	d.room(60)
	d.pdf.Ln(6)
	d.font("B", 11.5, ink)
	d.pdf.MultiCell(fieldWidth, 15, text, "", "L", false)
	d.pdf.Ln(2)
}

// Paragraph writes text over the whole width.
func (d *Document) Paragraph(text string) { d.write("", textSize, ink, text) }

// Answer writes the sentence that is looked for first.
func (d *Document) Answer(text string) { d.write("B", textSize+2, ink, text) }

// Small writes what stands back.
func (d *Document) Small(text string) { d.write("", smallSize, soft, text) }

func (d *Document) write(style string, size float64, c colour, text string) {
	high := size * lineHeight / textSize
	d.font(style, size, c)
	lines := d.pdf.SplitText(text, fieldWidth)
	for _, line := range lines {
		d.room(high)
		d.font(style, size, c)
		d.pdf.CellFormat(fieldWidth, high, line, "", 1, "L", false, 0, "")
	}
	d.pdf.Ln(3)
}

// Caution writes text in a frame with a bar at its side: it must not be overlooked, in grey neither.
func (d *Document) Caution(text string) {
	d.font("B", textSize, ink)
	lines := d.pdf.SplitText("⚠ "+text, fieldWidth-16)
	high := float64(len(lines))*lineHeight + 8
	d.room(high + 4)
	x, y := d.pdf.GetXY()
	d.pdf.SetDrawColor(ink[0], ink[1], ink[2])
	d.pdf.SetFillColor(ink[0], ink[1], ink[2])
	d.pdf.SetLineWidth(0.7)
	d.pdf.Rect(x, y, fieldWidth, high, "D")
	d.pdf.Rect(x, y, 4, high, "F")
	d.font("B", textSize, ink)
	for i, line := range lines {
		d.pdf.SetXY(x+11, y+4+float64(i)*lineHeight)
		d.pdf.CellFormat(fieldWidth-16, lineHeight, line, "", 0, "L", false, 0, "")
	}
	d.pdf.SetXY(margin, y+high+5)
}

// Notes writes a list of sentences.
func (d *Document) Notes(list []string) {
	for _, text := range list {
		d.font("", smallSize+0.5, ink)
		lines := d.pdf.SplitText(text, fieldWidth-10)
		for i, line := range lines {
			d.room(10.5)
			d.font("", smallSize+0.5, ink)
			if i == 0 {
				d.pdf.CellFormat(10, 10.5, "•", "", 0, "L", false, 0, "")
			} else {
				d.pdf.SetX(margin + 10)
			}
			d.pdf.CellFormat(fieldWidth-10, 10.5, line, "", 1, "L", false, 0, "")
		}
	}
	d.pdf.Ln(3)
}

// fit shortens a text to a width in the font that is set.
func (d *Document) fit(text string, width float64) string {
	if d.pdf.GetStringWidth(text) <= width {
		return text
	}
	runes := []rune(text)
	for n := len(runes) - 1; n > 0; n-- {
		if short := string(runes[:n]) + "…"; d.pdf.GetStringWidth(short) <= width {
			return short
		}
	}
	return "…"
}
