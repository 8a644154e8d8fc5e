package paper

import (
	"bytes"
	"fmt"
	"time"

	"codeberg.org/go-fonts/dejavu/dejavusanscondensed"
	"codeberg.org/go-fonts/dejavu/dejavusanscondensedbold"
	"codeberg.org/go-pdf/fpdf"
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
	family     = "body"
)

// Info is what a file says about itself.
type Info struct {
	Title    string
	Subject  string    // the scenario
	Creator  string    // program and version
	Date     time.Time // of the content: files carry no clock
	Contents int       // how many lines the list of contents has; 0: no list
}

// Document is a file in the making. Its methods remember the first error; Bytes returns it.
type Document struct {
	pdf    *fpdf.Fpdf
	info   Info
	listed []entry // of the list of contents
	listAt []place // where its parts stand; empty: no list
}

// entry is a line of the list of contents.
type entry struct {
	text string
	page int
	link int
}

type place struct {
	page int
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
	p := fpdf.New("P", "pt", "A4", "")
	p.SetCatalogSort(true)
	p.SetCreationDate(info.Date.UTC())
	p.SetModificationDate(info.Date.UTC())
	p.SetTitle(info.Title, true)
	p.SetSubject(info.Subject, true)
	p.SetCreator(info.Creator, true)
	p.SetProducer(info.Creator, true)
	p.SetLang("en")
	p.SetDisplayMode("fullwidth", "continuous")
	p.AddUTF8FontFromBytes(family, "", dejavusanscondensed.TTF)
	p.AddUTF8FontFromBytes(family, "B", dejavusanscondensedbold.TTF)
	p.SetMargins(margin, margin, margin)
	p.SetAutoPageBreak(false, margin)
	p.SetCellMargin(0)
	p.AliasNbPages("{all}")
	d := &Document{pdf: p, info: info}
	p.SetFooterFunc(d.footer)
	return d
}

func (d *Document) footer() {
	p := d.pdf
	d.font("", smallSize, soft)
	p.SetXY(margin, pageHeight-margin)
	p.CellFormat(fieldWidth*0.8, 10, d.fit(d.info.Title+" · "+d.info.Creator, fieldWidth*0.8), "", 0, "L", false, 0, "")
	p.CellFormat(fieldWidth*0.2, 10, fmt.Sprintf("page %d of {all}", p.PageNo()), "", 0, "R", false, 0, "")
}

// colour is red, green, blue.
type colour [3]int

// The colours are those of the pages in print.
var (
	ink  = colour{0x16, 0x19, 0x1d}
	soft = colour{0x54, 0x5b, 0x64}
	rule = colour{0xd6, 0xda, 0xde}
	wash = colour{0xf3, 0xf5, 0xf7}
)

func (d *Document) font(style string, size float64, c colour) {
	d.pdf.SetFont(family, style, size)
	d.pdf.SetTextColor(c[0], c[1], c[2])
}

// Page begins a page.
func (d *Document) Page() {
	d.pdf.AddPage()
	d.pdf.SetXY(margin, margin)
}

// room begins a page where less than h points are left on this one.
func (d *Document) room(h float64) {
	if d.pdf.PageNo() == 0 || d.pdf.GetY()+h > bottom {
		d.Page()
	}
}

// Title writes the head of a page, and a softer line under it.
func (d *Document) Title(text, under string) {
	d.room(40)
	d.font("B", 16, ink)
	d.pdf.MultiCell(fieldWidth, 19, text, "", "L", false)
	if under != "" {
		d.font("", textSize+1, soft)
		d.pdf.MultiCell(fieldWidth, lineHeight+2, under, "", "L", false)
	}
	d.pdf.Ln(4)
}

// List leaves room for the list of contents: on this page where it fits, else on pages of its own.
func (d *Document) List() {
	n := d.info.Contents
	if n == 0 {
		return
	}
	if need := listHead + listLine*float64(n); d.pdf.GetY()+need <= bottom {
		d.listAt = []place{{d.pdf.PageNo(), d.pdf.GetY()}}
		d.pdf.SetXY(margin, d.pdf.GetY()+need)
		return
	}
	for range (n + listLines - 1) / listLines {
		d.Page()
		d.listAt = append(d.listAt, place{d.pdf.PageNo(), margin})
	}
	d.Page()
}

// Chapter puts a line into the list of contents and the bookmarks, at this place.
func (d *Document) Chapter(text string) {
	link := d.pdf.AddLink()
	d.pdf.SetLink(link, d.pdf.GetY(), d.pdf.PageNo())
	d.pdf.Bookmark(text, 0, d.pdf.GetY())
	d.listed = append(d.listed, entry{text, d.pdf.PageNo(), link})
}

// writeList fills the room that List left.
func (d *Document) writeList() {
	last := d.pdf.PageNo()
	for i, e := range d.listed {
		if at := i / listLines; i%listLines == 0 && at < len(d.listAt) {
			d.pdf.SetPage(d.listAt[at].page)
			d.pdf.SetXY(margin, d.listAt[at].y)
			d.font("B", 11.5, ink)
			d.pdf.CellFormat(fieldWidth, listHead, "Contents", "", 1, "L", false, 0, "")
		}
		d.font("", textSize, ink)
		d.pdf.CellFormat(fieldWidth-40, listLine, d.fit(e.text, fieldWidth-40), "", 0, "L", false, e.link, "")
		d.pdf.CellFormat(40, listLine, fmt.Sprint(e.page), "", 1, "R", false, e.link, "")
	}
	d.pdf.SetPage(last)
}

// Bytes ends the document and returns the file.
func (d *Document) Bytes() ([]byte, error) {
	if len(d.listAt) > 0 {
		if len(d.listed) > d.info.Contents {
			return nil, fmt.Errorf("paper: %d lines for a list of contents of %d", len(d.listed), d.info.Contents)
		}
		d.writeList()
	}
	var out bytes.Buffer
	if err := d.pdf.Output(&out); err != nil {
		return nil, fmt.Errorf("paper: %w", err)
	}
	return out.Bytes(), nil
}
