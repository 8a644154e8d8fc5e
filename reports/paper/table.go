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
	First  float64 // share of the width that the names have; 0: 0.4
	Left   bool    // texts, set at the left of their columns
}

// Table writes a table; its head comes again on each page.
func (d *Document) Table(t Table) {
	first := fieldWidth * 0.4
	if t.First > 0 {
		first = fieldWidth * t.First
	}
	wide := (fieldWidth - first) / float64(max(1, len(t.Heads)))
	side := "R"
	if t.Left {
		side = "L"
	}
	head := func() {
		d.rowOf(Row{Name: t.Corner, Cells: t.Heads, Result: true}, first, wide, side)
	}
	d.room(50)
	head()
	for _, r := range t.Rows {
		if d.pdf.GetY()+d.heightOf(r, first, wide) > bottom {
			d.Page()
			head()
		}
		d.rowOf(r, first, wide, side)
	}
	d.pdf.Ln(5)
}

// parts are the lines of a row by column.
func (d *Document) parts(r Row, first, wide float64) (names, remarks []string, cells [][]string) {
	d.font(r.style(), smallSize+0.5, ink)
	if len(r.Cells) == 0 {
		first = fieldWidth
	}
	names = d.pdf.SplitText(r.Name, first-6)
	for _, c := range r.Cells {
		cells = append(cells, d.pdf.SplitText(c, wide-4))
	}
	if r.Remark != "" {
		d.font("", smallSize-1, soft)
		remarks = d.pdf.SplitText(r.Remark, first-6)
	}
	return names, remarks, cells
}

func (r Row) style() string {
	if r.Result || len(r.Cells) == 0 {
		return "B"
	}
	return ""
}

// Heights of the lines of a table.
const (
	cellLine   = 10.5
	remarkLine = 8.5
	cellRoom   = 3.5
)

func (d *Document) heightOf(r Row, first, wide float64) float64 {
	names, remarks, cells := d.parts(r, first, wide)
	high := float64(len(names))*cellLine + float64(len(remarks))*remarkLine
	for _, c := range cells {
		high = max(high, float64(len(c))*cellLine)
	}
	return high + cellRoom
}

func (d *Document) rowOf(r Row, first, wide float64, side string) {
	names, remarks, cells := d.parts(r, first, wide)
	high, y := d.heightOf(r, first, wide), d.pdf.GetY()
	if len(r.Cells) == 0 {
		d.pdf.SetFillColor(wash[0], wash[1], wash[2])
		d.pdf.Rect(margin, y, fieldWidth, high, "F")
	}
	d.font(r.style(), smallSize+0.5, ink)
	for i, line := range names {
		d.pdf.Text(margin+1, y+8.5+float64(i)*cellLine, line)
	}
	for k, c := range cells {
		for i, line := range c {
			d.pdf.SetXY(margin+first+float64(k)*wide, y+1+float64(i)*cellLine)
			d.pdf.CellFormat(wide-1, cellLine, line, "", 0, side, false, 0, "")
		}
	}
	d.font("", smallSize-1, soft)
	for i, line := range remarks {
		d.pdf.Text(margin+1, y+7.5+float64(len(names))*cellLine+float64(i)*remarkLine, line)
	}
	d.pdf.SetDrawColor(rule[0], rule[1], rule[2])
	d.pdf.SetLineWidth(0.5)
	d.pdf.Line(margin, y+high, margin+fieldWidth, y+high)
	d.pdf.SetXY(margin, y+high)
}
