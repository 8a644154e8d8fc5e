// Package pdf writes PDF files of text, lines and filled shapes: PDF 1.7 (ISO 32000-1:2008), its
// numbered sections named beside the code. A TrueType face is read once and shared by all files;
// each file embeds the outlines of those letters alone that stand in it, without hinting. Every
// letter is drawn where the face has it, and as the face's empty box where it has not; the text
// that is searched and copied is the true one in both cases. The same calls make the same bytes.
// It lays nothing out: reports/paper does.
package pdf
