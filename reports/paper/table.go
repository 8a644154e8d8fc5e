package paper

// Row is a line of a table; a row without cells is a heading over those after it.
type Row struct {
	Name, Remark string // the remark stands small under the name
	Cells        []string
	Result       bool // a sum or an answer
}

// Table is a table with a name at the head of each row.
type Table struct {
	Corner string
	Heads  []string
	Rows   []Row
	First  float64 // share of the width that the names have where all fits; 0: 0.4
	Left   bool    // texts, set at the left of their columns
	// Numbers is how many of the last columns of a table of texts hold numbers, set at their right.
	Numbers int
}

// Heights of the lines of a table, and its sizes of text.
const (
	cellLine   = 10.5
	remarkLine = 8.5
	cellRoom   = 3.5
	cellSize   = smallSize + 0.5
	remarkSize = smallSize - 1
)

// Between columns.
const (
	nameGap = 6.0
	cellGap = 5.0
)

// Table writes a table; its head comes again on each page.
func (d *Document) Table(t Table) {
	columns := d.columns(&t)
	head := Row{Name: t.Corner, Cells: t.Heads, Result: true}
	d.room(50)
	d.row(&t, head, columns)
	for _, r := range t.Rows {
		high := d.layRow(r, columns).high
		if len(r.Cells) == 0 {
			high += cellLine + cellRoom // never a heading alone at the foot of a page
		}
		if d.y+high > bottom {
			d.Page()
			d.row(&t, head, columns)
		}
		d.row(&t, r, columns)
	}
	d.y += 5
}

func (r Row) style() string {
	if r.Result || len(r.Cells) == 0 {
		return "B"
	}
	return ""
}

// laid is a row in lines.
type laid struct {
	names, remarks []string
	cells          [][]string
	high           float64
}

func (d *Document) layRow(r Row, columns []float64) laid {
	var l laid
	first := columns[0]
	d.font(r.style(), cellSize, ink)
	if len(r.Cells) == 0 {
		first = fieldWidth
	}
	l.names = d.split(r.Name, first-nameGap)
	most := 0
	for k, c := range r.Cells {
		lines := d.split(c, columns[k+1]-cellGap)
		l.cells = append(l.cells, lines)
		most = max(most, len(lines))
	}
	if r.Remark != "" {
		d.font("", remarkSize, soft)
		l.remarks = d.split(r.Remark, first-nameGap)
	}
	l.high = max(float64(len(l.names))*cellLine+float64(len(l.remarks))*remarkLine, float64(most)*cellLine) + cellRoom
	return l
}

func (d *Document) row(t *Table, r Row, columns []float64) {
	l := d.layRow(r, columns)
	y := d.y
	if len(r.Cells) == 0 {
		d.page.Fill(wash)
		d.page.Rectangle(margin, y, fieldWidth, l.high)
		d.page.Paint(false)
	}
	d.font(r.style(), cellSize, ink)
	for i, line := range l.names {
		d.put(margin+1, y+8.5+float64(i)*cellLine, line)
	}
	x := margin + columns[0]
	for k, lines := range l.cells {
		for i, line := range lines {
			base := y + 8.5 + float64(i)*cellLine
			if t.Left && k < len(l.cells)-t.Numbers {
				d.put(x, base, line)
			} else {
				d.right(x+columns[k+1]-1, base, line)
			}
		}
		x += columns[k+1]
	}
	d.font("", remarkSize, soft)
	for i, line := range l.remarks {
		d.put(margin+1, y+7.5+float64(len(l.names))*cellLine+float64(i)*remarkLine, line)
	}
	d.page.Pen(rule, 0.5)
	d.page.Move(margin, y+l.high)
	d.page.Line(margin+fieldWidth, y+l.high)
	d.page.Draw()
	d.y = y + l.high
}
