// Package pdf puts text, lines and filled shapes on the pages of a PDF file. The file is written by
// go-pdf/fpdf; what stands here is the order of the calls (pages that are written on in turn, a state
// that is told only where it changes) and the text: what a rune looks like on paper, which letters a
// face lacks, and the order of writing that runs to the left. The same calls make the same bytes.
// It lays nothing out: reports/paper does.
package pdf
