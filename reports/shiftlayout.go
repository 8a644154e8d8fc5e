package reports

import (
	"strings"

	vector "slantwise/reports/drawing"
	"slantwise/reports/paper"
)

// Sizes of the sheet on paper, in points.
const (
	sheetText    = 7.4
	sheetSmall   = 6.7
	sheetLine    = 8.6
	sheetTight   = 8.0 // of small text
	sheetHead    = 15.0
	sheetLeft    = 252.0 // the table of events
	sheetGutter  = 12.0
	sheetWrite   = 16.0
	sheetBetween = 5.0
	sheetTitle   = 40.0 // of the first page
	sheetAgain   = 16.0 // of the others
)

// ruler measures as the papers' font does: DejaVu Sans Condensed is nine tenths as wide as the
// font of the drawings, and its bold letters are wider by a tenth.
var ruler = vector.NewSVG(0, 0)

func sheetWidth(text string, size float64, bold bool) float64 {
	w := 0.9 * ruler.Width(text, size)
	if bold {
		w *= 1.12
	}
	return w
}

// wrapped breaks a text into lines of a width, the first of which is shorter by what stands
// before it. A word that is longer than a line is broken.
func wrapped(text string, size, width, before float64, bold bool) []string {
	var lines []string
	line, room := "", width-before
	for _, word := range strings.Fields(text) {
		for {
			longer := word
			if line != "" {
				longer = line + " " + word
			}
			if sheetWidth(longer, size, bold) <= room {
				line = longer
				break
			}
			if line != "" || len(lines) == 0 && before > 0 {
				lines, line, room = append(lines, line), "", width
				continue
			}
			runes := []rune(word)
			n := len(runes) - 1
			for n > 1 && sheetWidth(string(runes[:n]), size, bold) > room {
				n--
			}
			if n < 1 {
				line = word
				break
			}
			lines, word = append(lines, string(runes[:n])), string(runes[n:])
		}
	}
	return append(lines, line)
}

// told is a text behind a bold name, in lines.
type told struct {
	name  string
	lines []string
}

func tellLines(t shiftTell, size, width float64) told {
	return told{t.Name, wrapped(t.Text, size, width, sheetWidth(t.Name+"  ", size, true), false)}
}

// sheetBlock is a contact in lines.
type sheetBlock struct {
	facts  []string
	words  []told
	alarm  [][]string
	height float64
}

func (b *shiftBlock) inLines() sheetBlock {
	out := sheetBlock{facts: wrapped(b.Facts, sheetSmall, paper.WholeWidth, 0, false)}
	right := 0.0
	for _, w := range b.Words {
		t := tellLines(w, sheetText, paper.WholeWidth-sheetLeft-sheetGutter)
		out.words = append(out.words, t)
		right += sheetLine * float64(len(t.lines))
	}
	out.height = sheetHead + sheetTight*float64(len(out.facts)) + max(right, sheetLine*float64(len(b.Points))) + 2
	for _, a := range b.Alarm {
		lines := wrapped("⚠ "+a, sheetText, paper.WholeWidth, 0, true)
		out.alarm = append(out.alarm, lines)
		out.height += sheetLine * float64(len(lines))
	}
	if len(b.Signal) > 0 {
		out.height += sheetTight*float64(len(b.Signal)) + 4
	}
	out.height += sheetWrite + sheetBetween
	return out
}

// sheetFoot is what stands at the end of the sheet.
type sheetFoot struct {
	left, right        []told // the causes, in two columns
	signs, rest        []string
	cautions           [][]string
	tall, frame, total float64
}

func (v *shiftView) footLines(beyond string) sheetFoot {
	var f sheetFoot
	half := (paper.WholeWidth - sheetGutter) / 2
	var list []told
	whole := 0.0
	for _, t := range v.Tell {
		lines := tellLines(t, sheetSmall, half)
		list, whole = append(list, lines), whole+sheetTight*float64(len(lines.lines))
	}
	a, b := 0.0, 0.0
	for _, t := range list {
		high := sheetTight * float64(len(t.lines))
		if b == 0 && a+high/2 <= whole/2 {
			f.left, a = append(f.left, t), a+high
		} else {
			f.right, b = append(f.right, t), b+high
		}
	}
	f.tall = max(a, b)
	if len(v.Blocks) > 0 {
		f.signs = wrapped(v.Signs, sheetSmall, paper.WholeWidth, 0, false)
	}
	for _, text := range append(append(nonEmpty(beyond), v.Left...), v.Warnings...) {
		f.rest = append(f.rest, wrapped(text, sheetSmall, paper.WholeWidth, 0, false)...)
	}
	for _, text := range v.Cautions {
		lines := wrapped("⚠ "+text, sheetSmall, paper.WholeWidth-12, 0, true)
		f.cautions = append(f.cautions, lines)
		f.frame += sheetTight * float64(len(lines))
	}
	f.frame += 6
	f.total = 4 + f.tall + 3 + sheetTight*float64(len(f.signs)+len(f.rest)) + 4 + f.frame
	return f
}

func nonEmpty(text string) []string {
	if text == "" {
		return nil
	}
	return []string{text}
}

// layOut puts the contacts onto pages: as few as hold all of them with the foot on the last, at
// most so many; what finds no room is named.
func (v *shiftView) layOut(most int) {
	heights := make([]float64, len(v.Blocks))
	for i := range v.Blocks {
		heights[i] = v.Blocks[i].inLines().height
	}
	for pages := 1; ; pages++ {
		placed := v.place(heights, pages, v.footLines("").total)
		v.Pages = pages
		if placed == len(heights) {
			return
		}
		if pages < most {
			continue
		}
		// The line that names the others takes room itself.
		placed = v.place(heights, pages, v.footLines(v.beyond(placed)).total)
		v.Beyond = v.beyond(placed)
		return
	}
}

// place fills pages, each with a contact at least while there are any, and returns how many contacts found room.
func (v *shiftView) place(heights []float64, pages int, foot float64) int {
	at := 0
	for page := 1; page <= pages; page++ {
		room := paper.WholeHeight - sheetAgain
		if page == 1 {
			room = paper.WholeHeight - sheetTitle
		}
		if page == pages {
			room -= foot
		}
		last := len(heights)
		if page < pages {
			last-- // stays for the page of the foot
		}
		for first := true; at < last && (heights[at] <= room || first); first = false {
			v.Blocks[at].Page, v.Blocks[at].Turn = page, first && page > 1
			room -= heights[at]
			at++
		}
	}
	for i := at; i < len(heights); i++ {
		v.Blocks[i].Page, v.Blocks[i].Turn = 0, false
	}
	return at
}

const mostNamed = 8

// beyond names the contacts from number n on.
func (v *shiftView) beyond(n int) string {
	var names []string
	for _, b := range v.Blocks[n:] {
		names = append(names, b.Begin+" "+b.Spacecraft)
	}
	count := fixed(float64(len(names)), 0) + " contacts are"
	if len(names) == 1 {
		count = "1 contact is"
	}
	if len(names) > mostNamed {
		names = append(names[:mostNamed], "and "+fixed(float64(len(names)-mostNamed), 0)+" more")
	}
	return count + " not on paper for want of room: " + strings.Join(names, ", ") + ". More --pages print them."
}
