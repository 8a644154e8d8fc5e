package paper

import (
	"fmt"
	"strings"
	"time"

	"slantwise/reports/paper/pdf"
)

// Page and text, in points: A4 upright.
const (
	pageWidth  = 595.28
	pageHeight = 841.89
	margin     = 42.0
	fieldWidth = pageWidth - 2*margin
	textSize   = 9.0
	smallSize  = 7.5
	lineHeight = 12.0
	bottom     = pageHeight - margin - 14
)

// Info is what a file says about itself.
type Info struct {
	Title    string
	Subject  string    // the scenario
	Creator  string    // program and version
	Date     time.Time // of the content: files carry no clock
	Contents int       // how many lines the list of contents has; 0: no list
	Foot     string    // what more stands at the foot of each page: the age of the elements; may be empty
}

// Document is a file in the making. Texts may hold any runes: a letter that the font lacks stands as
// an empty box, and a line at the end of the document tells which.
type Document struct {
	file   *pdf.File
	fonts  [2]*pdf.Font // upright and bold
	info   Info
	pages  []*pdf.Page
	page   *pdf.Page // the one that is written on
	y      float64   // how far down it
	listed []entry   // of the list of contents
	listAt []place   // where its parts stand; empty: no list
	set    setting
	boxes  map[rune]bool // letters that the font lacks
	heads  []head        // that wait for what comes under them
	whole  bool          // the last page is drawn from edge to edge
}

// setting is how text is set.
type setting struct {
	font *pdf.Font
	size float64
	tone pdf.Colour
}

// entry is a line of the list of contents.
type entry struct {
	text string
	page int
	to   *pdf.Target
}

type place struct {
	page *pdf.Page
	y    float64
}

// The list of contents: lines on a page, and heights in points.
const (
	listLines = 52
	listHead  = 20.0
	listLine  = 13.5
)

// New returns a document without pages.
func New(info Info) *Document {
	d := &Document{info: info, boxes: map[rune]bool{}}
	both := faces()
	file, fonts := pdf.New(pdf.Info{Title: info.Title, Subject: info.Subject, Creator: info.Creator, Date: info.Date, Language: "en"}, both[:]...)
	d.file, d.fonts = file, [2]*pdf.Font(fonts)
	return d
}

// The colours are those of the pages in print.
var (
	ink  = pdf.Colour{0x16, 0x19, 0x1d}
	soft = pdf.Colour{0x54, 0x5b, 0x64}
	rule = pdf.Colour{0xd6, 0xda, 0xde}
	wash = pdf.Colour{0xf3, 0xf5, 0xf7}
)

// font sets what text is written in; style "B" is bold.
func (d *Document) font(style string, size float64, c pdf.Colour) {
	i := 0
	if style == "B" {
		i = 1
	}
	d.set = setting{d.fonts[i], size, c}
}

// width returns how wide a text is as it is set.
func (d *Document) width(text string) float64 { return d.set.font.Width(text, d.set.size) }

// put writes a line on its base line.
func (d *Document) put(x, y float64, text string) {
	for _, r := range text {
		if (r < ' ' || r > '~') && !d.set.font.Has(r) {
			d.boxes[r] = true
		}
	}
	d.page.Fill(d.set.tone)
	d.page.Text(x, y, d.set.font, d.set.size, text)
}

// Page begins a page.
func (d *Document) Page() {
	d.page = d.file.Page(pageWidth, pageHeight)
	d.pages = append(d.pages, d.page)
	d.y = margin
}

// room begins a page where less than h points are left on this one, with the headings that wait.
func (d *Document) room(h float64) {
	heads := 0.0
	for _, one := range d.heads {
		heads += d.headHeight(one)
	}
	if heads > 0 {
		h = heads + max(h, leastUnder)
	}
	if d.page == nil || d.y+h > bottom && d.y > margin {
		d.Page()
	}
	if heads > 0 {
		d.writeHeads()
	}
}

// Title writes the head of a page, and a softer line under it.
func (d *Document) Title(text, under string) {
	d.room(40)
	d.font("B", 16, ink)
	d.block(text, 19)
	if under != "" {
		d.font("", textSize+1, soft)
		d.block(under, lineHeight+2)
	}
	d.y += 4
}

// List leaves room for the list of contents: on this page where it fits, else on pages of its own.
func (d *Document) List() {
	n := d.info.Contents
	if n == 0 {
		return
	}
	d.room(0)
	if need := listHead + listLine*float64(n); d.y+need <= bottom {
		d.listAt = []place{{d.page, d.y}}
		d.y += need
		return
	}
	for range (n + listLines - 1) / listLines {
		d.Page()
		d.listAt = append(d.listAt, place{d.page, margin})
	}
	d.Page()
}

// Chapter puts a line into the list of contents and the bookmarks, at this place: at the heading where
// one was just told.
func (d *Document) Chapter(text string) {
	if n := len(d.heads); n > 0 {
		d.heads[n-1].chapter = text
		return
	}
	d.room(0)
	d.chapter(text)
}

func (d *Document) chapter(text string) {
	to := d.page.Target(d.y)
	d.file.Bookmark(text, to)
	d.listed = append(d.listed, entry{text, len(d.pages), to})
}

// writeList fills the room that List left.
func (d *Document) writeList() {
	for i, e := range d.listed {
		if at := i / listLines; i%listLines == 0 && at < len(d.listAt) {
			d.page, d.y = d.listAt[at].page, d.listAt[at].y
			d.font("B", 11.5, ink)
			d.put(margin, d.y+13, "Contents")
			d.y += listHead
		}
		d.font("", textSize, ink)
		d.put(margin, d.y+10, d.fit(e.text, fieldWidth-40))
		d.right(margin+fieldWidth, d.y+10, fmt.Sprint(e.page))
		d.page.Link(margin, d.y, fieldWidth, listLine, e.to)
		d.y += listLine
	}
}

// right writes a line that ends at x.
func (d *Document) right(x, y float64, text string) { d.put(x-d.width(text), y, text) }

// foot writes the foot of every page: what the document is, what made it, and which page of how many.
func (d *Document) foot() {
	parts := []string{d.info.Title}
	for _, s := range []string{d.info.Subject, d.info.Creator} {
		if s != "" {
			parts = append(parts, s)
		}
	}
	text := strings.Join(parts, " · ")
	for i, p := range d.pages {
		d.page = p
		d.font("", smallSize, soft)
		d.put(margin, pageHeight-margin+7, d.fit(text, fieldWidth*0.86))
		d.right(margin+fieldWidth, pageHeight-margin+7, fmt.Sprintf("page %d of %d", i+1, len(d.pages)))
		if d.info.Foot != "" {
			d.put(margin, pageHeight-margin+16, d.fit(d.info.Foot, fieldWidth))
		}
	}
}

// Bytes ends the document and returns the file. It fails where the list of contents has more lines
// than were told.
func (d *Document) Bytes() ([]byte, error) {
	d.room(0)
	d.tellBoxes()
	if len(d.listAt) > 0 {
		if len(d.listed) > d.info.Contents {
			return nil, fmt.Errorf("paper: %d lines for a list of contents of %d", len(d.listed), d.info.Contents)
		}
		d.writeList()
	}
	d.foot()
	return d.file.Bytes()
}
