package pdf

import (
	"bytes"
	"compress/zlib"
	"crypto/sha256"
	"fmt"
	"sync"
	"time"
	"unicode/utf16"
)

// Info is what a file says about itself (14.3.3).
type Info struct {
	Title, Subject, Creator string
	Date                    time.Time
	Language                string // "en"
}

// File is a PDF file in the making.
type File struct {
	info      Info
	fonts     []*Font
	pages     []*Page
	bookmarks []bookmark
}

type bookmark struct {
	text string
	to   *Target
}

// New returns a file without pages, with fonts of the given faces, at most nine.
func New(info Info, faces ...*Face) (*File, []*Font) {
	f := &File{info: info}
	for i, face := range faces {
		one := newFont(face)
		one.object = i
		f.fonts = append(f.fonts, one)
	}
	return f, f.fonts
}

// Page adds a page.
func (f *File) Page(width, height float64) *Page {
	p := &Page{file: f, width: width, height: height, out: make([]byte, 0, 1<<14), state: pen{width: 1}}
	p.out = append(p.out, "1 j\n"...) // lines join round
	f.pages = append(f.pages, p)
	return p
}

// Pages returns how many pages there are.
func (f *File) Pages() int { return len(f.pages) }

// Target returns a place of a page for links.
func (p *Page) Target(y float64) *Target { return &Target{p, y} }

// Bookmark adds a line to the reader's list.
func (f *File) Bookmark(text string, to *Target) {
	f.bookmarks = append(f.bookmarks, bookmark{text, to})
}

// writer writes the objects of a file.
type writer struct {
	out     []byte
	offsets []int // by object, from 1
}

func (w *writer) printf(format string, args ...any) { w.out = fmt.Appendf(w.out, format, args...) }

// object begins an object, whose number must not have been used.
func (w *writer) object(n int) {
	for len(w.offsets) <= n {
		w.offsets = append(w.offsets, 0)
	}
	w.offsets[n] = len(w.out)
	w.printf("%d 0 obj\n", n)
}

func (w *writer) end() { w.printf("\nendobj\n") }

type packer struct {
	to  bytes.Buffer
	zip *zlib.Writer
}

// packers keep the tables of the packing, which take longer to make than a page to pack.
var packers = sync.Pool{New: func() any {
	p := &packer{}
	p.zip, _ = zlib.NewWriterLevel(&p.to, zlib.BestSpeed) // fails for unknown levels alone
	return p
}}

// stream writes packed content as an object; more stands in its dictionary.
func (w *writer) stream(n int, more string, content []byte) {
	p := packers.Get().(*packer)
	defer packers.Put(p)
	p.to.Reset()
	p.zip.Reset(&p.to)
	p.zip.Write(content) // a buffer takes all
	p.zip.Close()
	w.object(n)
	w.printf("<</Filter/FlateDecode/Length %d%s>>\nstream\n", p.to.Len(), more)
	w.out = append(append(w.out, p.to.Bytes()...), "\nendstream"...)
	w.end()
}

// text writes a text string: UTF-16 with its mark, in hexadecimal digits (7.9.2.2).
func text(s string) string {
	b := []byte("<FEFF")
	for _, v := range utf16.Encode([]rune(s)) {
		b = appendHex(b, v)
	}
	return string(append(b, '>'))
}

// Numbers of the objects that come first.
const (
	catalogAt = 1 + iota
	pagesAt
	infoAt
	outlinesAt
	firstFree
)

// objectsOfFont is how many objects a font takes.
const objectsOfFont = 5

// Bytes returns the whole file.
func (f *File) Bytes() []byte {
	size := 1 << 14
	for _, p := range f.pages {
		size += len(p.out) / 2
	}
	w := &writer{out: make([]byte, 0, size)}
	w.out = append(w.out, "%PDF-1.7\n%\xe2\xe3\xcf\xd3\n"...)
	next := firstFree
	fonts := "<<"
	for i, one := range f.fonts {
		fonts += fmt.Sprintf("/F%d %d 0 R", i, next)
		one.write(w, next)
		next += objectsOfFont
	}
	fonts += ">>"
	pageAt := func(i int) int { return next + 2*i }
	place := make(map[*Page]int, len(f.pages))
	for i, p := range f.pages {
		place[p] = pageAt(i)
	}
	to := func(t *Target) string {
		return fmt.Sprintf("[%d 0 R/XYZ 0 %.2f null]", place[t.page], t.page.height-t.y)
	}
	kids := ""
	for i, p := range f.pages {
		n := pageAt(i)
		kids += fmt.Sprintf("%d 0 R ", n)
		w.object(n)
		w.printf("<</Type/Page/Parent %d 0 R/MediaBox[0 0 %.2f %.2f]/Resources<</Font%s>>/Contents %d 0 R", pagesAt, p.width, p.height, fonts, n+1)
		if len(p.links) > 0 {
			w.printf("/Annots[")
			for _, l := range p.links {
				w.printf("<</Type/Annot/Subtype/Link/Border[0 0 0]/Rect[%.2f %.2f %.2f %.2f]/Dest%s>>", l.left, p.height-l.top-l.height, l.left+l.width, p.height-l.top, to(l.to))
			}
			w.printf("]")
		}
		w.printf(">>")
		w.end()
		w.stream(n+1, "", p.out)
	}
	f.bookmarksOn(w, pageAt(len(f.pages)), to)
	w.object(pagesAt)
	w.printf("<</Type/Pages/Count %d/Kids[%s]>>", len(f.pages), kids)
	w.end()
	f.infoOn(w)
	f.trailerOn(w)
	return w.out
}

// bookmarksOn writes the outline, one level deep (12.3.3).
func (f *File) bookmarksOn(w *writer, from int, to func(*Target) string) {
	last := from + len(f.bookmarks) - 1
	w.object(outlinesAt)
	w.printf("<</Type/Outlines/Count %d", len(f.bookmarks))
	if len(f.bookmarks) > 0 {
		w.printf("/First %d 0 R/Last %d 0 R", from, last)
	}
	w.printf(">>")
	w.end()
	for i, b := range f.bookmarks {
		n := from + i
		w.object(n)
		w.printf("<</Title%s/Parent %d 0 R/Dest%s", text(b.text), outlinesAt, to(b.to))
		if i > 0 {
			w.printf("/Prev %d 0 R", n-1)
		}
		if n < last {
			w.printf("/Next %d 0 R", n+1)
		}
		w.printf(">>")
		w.end()
	}
}

func (f *File) infoOn(w *writer) {
	date := f.info.Date.UTC().Format("D:20060102150405Z")
	w.object(infoAt)
	w.printf("<</Title%s/Subject%s/Creator%s/Producer%s/CreationDate(%s)/ModDate(%s)>>", text(f.info.Title), text(f.info.Subject), text(f.info.Creator), text(f.info.Creator), date, date)
	w.end()
	w.object(catalogAt)
	w.printf("<</Type/Catalog/Pages %d 0 R/Outlines %d 0 R/Lang(%s)/ViewerPreferences<</DisplayDocTitle true>>>>", pagesAt, outlinesAt, f.info.Language)
	w.end()
}

// trailerOn ends the file with the places of its objects (7.5.4, 7.5.5); its identity is a sum over
// the content.
func (f *File) trailerOn(w *writer) {
	sum := sha256.Sum256(w.out)
	at := len(w.out)
	w.printf("xref\n0 %d\n0000000000 65535 f \n", len(w.offsets))
	for _, o := range w.offsets[1:] {
		w.printf("%010d 00000 n \n", o)
	}
	w.printf("trailer\n<</Size %d/Root %d 0 R/Info %d 0 R/ID[<%x><%x>]>>\nstartxref\n%d\n%%%%EOF\n", len(w.offsets), catalogAt, infoAt, sum[:16], sum[:16], at)
}
