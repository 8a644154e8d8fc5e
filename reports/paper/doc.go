// Package paper lays documents out on pages of A4, as PDF files: headings, paragraphs, tables, charts
// of reports/drawing as vectors, page numbers, a list of contents with links, and bookmarks. It knows
// nothing of passes: reports hands it finished words and numbers. The same input gives the same
// bytes; the date of a file is the one it is told.
package paper
