package paper

import (
	"fmt"
	"slices"
	"strings"
)

// Heading writes the head of a section, on the page on which what comes under it begins.
func (d *Document) Heading(text string) { d.heads = append(d.heads, head{text: text}) }

// head is a heading that waits for what comes under it.
type head struct {
	text    string
	chapter string // of the list of contents that begins here; empty: none
}

// leastUnder is how much of what comes under a heading stands on its page at least.
const leastUnder = 40.0

// headHeight is how high a heading is.
func (d *Document) headHeight(h head) float64 {
	d.font("B", 11.5, ink)
	return 8 + 15*float64(len(d.split(h.text, fieldWidth)))
}

// writeHeads writes the headings that wait.
func (d *Document) writeHeads() {
	heads := d.heads
	d.heads = nil
	for _, h := range heads {
		d.y += 6
		if h.chapter != "" {
			d.chapter(h.chapter)
		}
		d.font("B", 11.5, ink)
		for _, line := range d.split(h.text, fieldWidth) {
			d.put(margin, d.y+drop(15, 11.5), line)
			d.y += 15
		}
		d.y += 2
	}
}

// Paragraph writes text over the whole width.
func (d *Document) Paragraph(text string) {
	d.font("", textSize, ink)
	d.block(text, lineHeight)
	d.y += 3
}

// Answer writes the sentence that is looked for first.
func (d *Document) Answer(text string) {
	d.font("B", textSize+2, ink)
	d.block(text, (textSize+2)*lineHeight/textSize)
	d.y += 3
}

// Small writes what stands back.
func (d *Document) Small(text string) {
	d.font("", smallSize, soft)
	d.block(text, smallSize*lineHeight/textSize)
	d.y += 3
}

// drop is how far under the top of a line of a height its base line lies.
func drop(high, size float64) float64 { return high/2 + 0.35*size }

// block writes text over the whole width in lines of a height.
func (d *Document) block(text string, high float64) {
	set := d.set
	for _, line := range d.split(text, fieldWidth) {
		d.room(high)
		d.set = set // a heading may have come before
		d.put(margin, d.y+drop(high, set.size), line)
		d.y += high
	}
}

// Caution writes text in a frame with a bar at its side: it must not be overlooked, in grey neither.
func (d *Document) Caution(text string) {
	d.font("B", textSize, ink)
	lines := d.split("⚠ "+text, fieldWidth-16)
	high := float64(len(lines))*lineHeight + 8
	d.room(high + 4)
	d.font("B", textSize, ink)
	d.page.Pen(ink, 0.7)
	d.page.Rectangle(margin, d.y, fieldWidth, high)
	d.page.Draw()
	d.page.Fill(ink)
	d.page.Rectangle(margin, d.y, 4, high)
	d.page.Paint(false)
	for i, line := range lines {
		d.put(margin+11, d.y+4+float64(i)*lineHeight+drop(lineHeight, textSize), line)
	}
	d.y += high + 5
}

// Notes writes a list of sentences.
func (d *Document) Notes(list []string) {
	const high, size = 10.5, smallSize + 0.5
	for _, text := range list {
		d.font("", size, ink)
		for i, line := range d.split(text, fieldWidth-10) {
			d.room(high)
			d.font("", size, ink)
			if i == 0 {
				d.put(margin, d.y+drop(high, size), "•")
			}
			d.put(margin+10, d.y+drop(high, size), line)
			d.y += high
		}
	}
	d.y += 3
}

// split breaks a text into lines of a width as it is set, at spaces and, where a word is longer than a
// line, inside of it. A line end in the text begins a line. There is one line at least.
func (d *Document) split(text string, width float64) []string {
	var lines []string
	for part := range strings.SplitSeq(strings.TrimRight(text, "\n"), "\n") {
		lines = d.splitLine(lines, part, width)
	}
	return lines
}

func (d *Document) splitLine(lines []string, text string, width float64) []string {
	if d.width(text) <= width {
		return append(lines, text)
	}
	space := d.width(" ")
	line, used := "", 0.0
	for word := range strings.SplitSeq(text, " ") {
		long := d.width(word)
		if line != "" && used+space+long <= width {
			line, used = line+" "+word, used+space+long
			continue
		}
		if line != "" {
			lines = append(lines, line)
		}
		for long > width {
			n := d.fitting(word, width)
			if n == len(word) {
				break
			}
			long -= d.width(word[:n])
			lines, word = append(lines, word[:n]), word[n:]
		}
		line, used = word, long
	}
	return append(lines, line)
}

// fitting returns how many bytes of a word go into a width: one letter at least.
func (d *Document) fitting(word string, width float64) int {
	used := 0.0
	for i, r := range word {
		if used += d.set.font.Letter(r, d.set.size); used > width && i > 0 {
			return i
		}
	}
	return len(word)
}

// fit shortens a text to a width as it is set.
func (d *Document) fit(text string, width float64) string {
	if d.width(text) <= width {
		return text
	}
	runes := []rune(text)
	for n := len(runes) - 1; n > 0; n-- {
		if short := string(runes[:n]) + "…"; d.width(short) <= width {
			return short
		}
	}
	return "…"
}

// tellBoxes says which letters stand as boxes, and which as the sign for a letter that cannot be shown.
func (d *Document) tellBoxes() {
	if len(d.boxes) == 0 {
		return
	}
	var boxes, beyond []rune
	for r := range d.boxes {
		if r < 1<<16 {
			boxes = append(boxes, r)
		} else {
			beyond = append(beyond, r)
		}
	}
	text := ""
	if len(boxes) > 0 {
		text = "An empty box stands where the font of this document has no letter; searching and copying give the true one:" + codes(boxes) + ". "
	}
	if len(beyond) > 0 {
		text += "The sign \ufffd stands for a letter that this document cannot hold:" + codes(beyond) + "."
	}
	text = strings.TrimSpace(text)
	if d.whole { // there is room for this line alone
		d.font("", smallSize-1, soft)
		d.put(WholeMargin, bottom+8, d.fit(text, WholeWidth))
		return
	}
	d.Small(text)
}

// codes lists runes by their numbers, the first ones where they are many.
func codes(list []rune) string {
	slices.Sort(list)
	const most = 12
	text := ""
	for i, r := range list {
		if i == most {
			return text + fmt.Sprintf(" and %d more", len(list)-most)
		}
		text += fmt.Sprintf(" U+%04X", r)
	}
	return text
}
