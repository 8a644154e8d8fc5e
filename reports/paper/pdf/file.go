package pdf

import (
	"bytes"
	"fmt"
	"strings"
	"time"

	"codeberg.org/go-pdf/fpdf"
)

// Info is what a file says about itself (ISO 32000-1:2008, 14.3.3).
type Info struct {
	Title, Subject, Creator string
	Date                    time.Time
	Language                string // "en"
}

// File is a PDF file in the making.
type File struct {
	out   *fpdf.Fpdf
	pages []*Page
	on    *Page  // the page that out writes on
	font  string // family that out has, and its size
	size  float64
}

// New returns a file without pages, with fonts of the given faces.
func New(info Info, faces ...*Face) (*File, []*Font) {
	p := fpdf.New("P", "pt", "A4", "")
	p.SetCatalogSort(true)
	p.SetCreationDate(info.Date.UTC())
	p.SetModificationDate(info.Date.UTC())
	p.SetTitle(strings.Map(Visible, info.Title), true)
	p.SetSubject(strings.Map(Visible, info.Subject), true)
	p.SetCreator(strings.Map(Visible, info.Creator), true)
	p.SetProducer(strings.Map(Visible, info.Creator), true)
	p.SetLang(info.Language)
	p.SetDisplayMode("fullwidth", "continuous")
	p.SetAutoPageBreak(false, 0)
	f := &File{out: p}
	var fonts []*Font
	for _, face := range faces {
		p.AddUTF8FontFromBytes(face.name, "", face.part)
		fonts = append(fonts, newFont(face))
	}
	if len(fonts) > 0 { // bookmarks are taken as text of an embedded face from here on
		p.SetFont(faces[0].name, "", 1)
	}
	return f, fonts
}

// Page adds a page.
func (f *File) Page(width, height float64) *Page {
	f.out.AddPageFormat("P", fpdf.SizeType{Wd: width, Ht: height})
	f.out.RawWriteStr("1 j")     // lines join round
	f.out.SetDashPattern(nil, 0) // else that of the page before goes on
	p := &Page{file: f, number: len(f.pages) + 1}
	f.pages = append(f.pages, p)
	f.on, f.font = p, ""
	return p
}

// turnTo makes out write on a page.
func (f *File) turnTo(p *Page) *fpdf.Fpdf {
	if f.on != p {
		f.out.SetPage(p.number)
		f.on, f.font = p, ""
	}
	return f.out
}

// family makes out write in a part of a face.
func (f *File) family(one *Font, whole bool, size float64) {
	name := one.face.name
	if whole {
		name += wholeFace
		if !one.whole {
			f.out.AddUTF8FontFromBytes(name, "", one.face.ttf)
			one.whole = true
		}
	}
	if f.font != name || f.size != size {
		f.font, f.size = name, size
		f.out.SetFont(name, "", size)
	}
}

// wholeFace is the ending of a whole face's name in files.
const wholeFace = "Whole"

// Pages returns how many pages there are.
func (f *File) Pages() int { return len(f.pages) }

// Target returns a place of a page for links.
func (p *Page) Target(y float64) *Target { return &Target{page: p, y: y, link: -1} }

// Bookmark adds a line to the reader's list.
func (f *File) Bookmark(text string, to *Target) {
	f.turnTo(to.page).Bookmark(strings.Map(Visible, text), 0, to.y)
}

// Bytes returns the whole file.
func (f *File) Bytes() ([]byte, error) {
	if n := len(f.pages); n > 0 {
		f.turnTo(f.pages[n-1]) // fpdf counts the pages up to the one that it writes on
	}
	var b bytes.Buffer
	if err := f.out.Output(&b); err != nil {
		return nil, fmt.Errorf("PDF: %w", err)
	}
	return b.Bytes(), nil
}
