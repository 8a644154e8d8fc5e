package cli

import (
	"bufio"
	"fmt"
	"io"
	"strings"
)

// column describes a column of a table.
type column struct {
	head string // with its unit: "elevation deg"
	text bool   // left-aligned, and shortened where the terminal is narrow
}

// textColumn and numberColumn are the two kinds of columns.
func textColumn(head string) column   { return column{head: head, text: true} }
func numberColumn(head string) column { return column{head: head} }

// narrowest is how far a text column may be shortened, in terminal cells.
const narrowest = 8

// writeTable writes rows under their heads. On a terminal of the given width (0: no
// terminal, nothing is shortened) text columns are shortened until a line fits;
// where that does not do, each row becomes a block of lines, one a column.
func writeTable(w io.Writer, width int, columns []column, rows [][]string) error {
	b := bufio.NewWriter(w)
	clean := cleanRows(rows)
	widths := naturalWidths(columns, clean)
	if width > 0 && !shrink(columns, widths, width) {
		writeBlocks(b, columns, clean)
	} else {
		writeLines(b, columns, widths, clean)
	}
	if err := b.Flush(); err != nil {
		return fmt.Errorf("write the table: %w", err)
	}
	return nil
}

// cleanRows replaces control characters, which could steer the terminal.
func cleanRows(rows [][]string) [][]string {
	out := make([][]string, len(rows))
	for i, row := range rows {
		out[i] = make([]string, len(row))
		for j, cell := range row {
			out[i][j] = printable(cell)
		}
	}
	return out
}

func naturalWidths(columns []column, rows [][]string) []int {
	widths := make([]int, len(columns))
	for j, c := range columns {
		widths[j] = cells(c.head)
	}
	for _, row := range rows {
		for j, cell := range row {
			widths[j] = max(widths[j], cells(cell))
		}
	}
	return widths
}

// gap is the space between two columns.
const gap = 2

// shrink narrows text columns, the widest first, until a line fits into width. It
// reports whether that succeeded.
func shrink(columns []column, widths []int, width int) bool {
	total := -gap
	for _, w := range widths {
		total += w + gap
	}
	for total > width {
		widest := -1
		for j, c := range columns {
			if c.text && widths[j] > narrowest && (widest < 0 || widths[j] > widths[widest]) {
				widest = j
			}
		}
		if widest < 0 {
			return false
		}
		widths[widest]--
		total--
	}
	return true
}

func writeLines(b *bufio.Writer, columns []column, widths []int, rows [][]string) {
	heads := make([]string, len(columns))
	rule := make([]string, len(columns))
	for j, c := range columns {
		heads[j] = c.head
		rule[j] = strings.Repeat("-", widths[j])
	}
	writeLine(b, columns, widths, heads)
	writeLine(b, columns, widths, rule)
	for _, row := range rows {
		writeLine(b, columns, widths, row)
	}
}

func writeLine(b *bufio.Writer, columns []column, widths []int, row []string) {
	var line strings.Builder
	for j, cell := range row {
		if j > 0 {
			line.WriteString("  ")
		}
		cell = shorten(cell, widths[j])
		pad := strings.Repeat(" ", widths[j]-cells(cell))
		if columns[j].text {
			line.WriteString(cell + pad)
		} else {
			line.WriteString(pad + cell)
		}
	}
	// Errors stay in the buffered writer until it is flushed.
	b.WriteString(strings.TrimRight(line.String(), " "))
	b.WriteByte('\n')
}

func writeBlocks(b *bufio.Writer, columns []column, rows [][]string) {
	widest := 0
	for _, c := range columns {
		widest = max(widest, cells(c.head))
	}
	for i, row := range rows {
		if i > 0 {
			b.WriteByte('\n')
		}
		for j, cell := range row {
			fmt.Fprintf(b, "%s%s  %s\n", columns[j].head, strings.Repeat(" ", widest-cells(columns[j].head)), cell)
		}
	}
}
