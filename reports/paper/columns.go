package paper

import "strings"

// columns returns how wide the columns of a table are: the names have their share and the others are
// alike where every text fits so in a line; else each column is given room by what stands in it.
func (d *Document) columns(t *Table) []float64 {
	share := t.First
	if share <= 0 {
		share = 0.4
	}
	n := len(t.Heads)
	for i := range t.Rows {
		n = max(n, len(t.Rows[i].Cells))
	}
	out := make([]float64, n+1)
	out[0] = fieldWidth * share
	if n == 0 {
		out[0] = fieldWidth
		return out
	}
	whole, words := d.needs(t, n)
	fits := whole[0] <= out[0]
	for k := 1; k <= n; k++ {
		out[k] = (fieldWidth - out[0]) / float64(n)
		fits = fits && whole[k] <= out[k]
	}
	if fits {
		return out
	}
	return between(words, whole, fieldWidth)
}

// needs returns how wide each column is with its texts in one line, and with its longest words alone.
func (d *Document) needs(t *Table, n int) (whole, words []float64) {
	whole, words = make([]float64, n+1), make([]float64, n+1)
	look := func(k int, text string, gap float64) {
		long := d.width(text) + gap
		if long <= words[k] {
			return
		}
		whole[k] = max(whole[k], long)
		for word := range strings.FieldsSeq(text) {
			words[k] = max(words[k], min(d.width(word)+gap, fieldWidth/3))
		}
	}
	row := func(r Row) {
		if len(r.Cells) == 0 {
			return
		}
		d.font(r.style(), cellSize, ink)
		look(0, r.Name, nameGap)
		for k, c := range r.Cells {
			look(k+1, c, cellGap)
		}
	}
	row(Row{Name: t.Corner, Cells: t.Heads, Result: true})
	for _, r := range t.Rows {
		row(r)
	}
	return whole, words
}

// between gives each column a width from least to most so that they fill the field: what is over is
// shared out, what is short is taken from those that can break their lines.
func between(least, most []float64, field float64) []float64 {
	low, high := 0.0, 0.0
	for k := range least {
		most[k] = max(most[k], least[k])
		low, high = low+least[k], high+most[k]
	}
	out := make([]float64, len(least))
	switch {
	case high <= field:
		for k := range out {
			out[k] = most[k] + (field-high)/float64(len(out))
		}
	case low >= field:
		for k := range out {
			out[k] = least[k] * field / low
		}
	default:
		s := (field - low) / (high - low)
		for k := range out {
			out[k] = least[k] + s*(most[k]-least[k])
		}
	}
	return out
}
