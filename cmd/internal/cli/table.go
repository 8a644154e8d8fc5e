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
	text bool   // left-aligned
}

// textColumn and numberColumn are the two kinds of columns.
func textColumn(head string) column   { return column{head: head, text: true} }
func numberColumn(head string) column { return column{head: head} }

// writeTable writes rows under their heads. On a terminal of the given width (0: no
// terminal, one line a row) heads and then cells are broken between words until a
// line fits; where that does not do, each row becomes a block of lines, one a column.
// Nothing is cut off.
func writeTable(w io.Writer, width int, columns []column, rows [][]string) error {
	b := bufio.NewWriter(w)
	clean := cleanRows(rows)
	widths := naturalWidths(columns, clean)
	if width > 0 && !shrink(columns, clean, widths, width) {
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

// shrink narrows columns, the widest first, until a line fits into width: by their
// heads as long as that does, then by what is in them, never within a word. It
// reports whether that succeeded.
func shrink(columns []column, rows [][]string, widths []int, width int) bool {
	total := -gap
	for _, w := range widths {
		total += w + gap
	}
	byHead, byWord := make([]int, len(columns)), make([]int, len(columns))
	for j, c := range columns {
		byWord[j] = longestWord(c.head)
		byHead[j] = byWord[j]
		for _, row := range rows {
			byWord[j] = max(byWord[j], longestWord(row[j]))
			byHead[j] = max(byHead[j], cells(row[j]))
		}
	}
	for _, least := range [][]int{byHead, byWord} {
		for total > width {
			widest := -1
			for j, w := range widths {
				if w > least[j] && (widest < 0 || w > widths[widest]) {
					widest = j
				}
			}
			if widest < 0 {
				break
			}
			widths[widest]--
			total--
		}
	}
	return total <= width
}

func writeLines(b *bufio.Writer, columns []column, widths []int, rows [][]string) {
	heads := make([]string, len(columns))
	rule := make([]string, len(columns))
	for j, c := range columns {
		heads[j] = c.head
		rule[j] = strings.Repeat("-", widths[j])
	}
	writeRow(b, columns, widths, heads)
	writeRow(b, columns, widths, rule)
	for _, row := range rows {
		writeRow(b, columns, widths, row)
	}
}

// writeRow writes a row, in as many lines as its highest cell has.
func writeRow(b *bufio.Writer, columns []column, widths []int, row []string) {
	parts := make([][]string, len(row))
	height := 1
	for j, cell := range row {
		parts[j] = wrap(cell, widths[j])
		height = max(height, len(parts[j]))
	}
	var line strings.Builder
	for n := range height {
		line.Reset()
		for j := range parts {
			if j > 0 {
				line.WriteString("  ")
			}
			part := ""
			if n < len(parts[j]) {
				part = parts[j][n]
			}
			pad := strings.Repeat(" ", widths[j]-cells(part))
			if columns[j].text {
				line.WriteString(part + pad)
			} else {
				line.WriteString(pad + part)
			}
		}
		// Errors stay in the buffered writer until it is flushed.
		b.WriteString(strings.TrimRight(line.String(), " "))
		b.WriteByte('\n')
	}
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
