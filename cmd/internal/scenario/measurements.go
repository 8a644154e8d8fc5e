package scenario

import (
	"fmt"
	"time"
	"unicode/utf8"

	"slantwise/downlink/measured"
)

var (
	measurementKeys       = []string{"name", "separator", "time_column", "time_form", "clock_ahead_s", "missing", "columns"}
	measurementColumnKeys = []string{"column", "holds", "scale", "add", "constant", "locked_word"}
)

// measurements reads what tables of measurements hold.
func (r *reader) measurements(top object) []measured.Layout {
	items := top.objects("measurements", "kinds of tables", maxParts, measurementKeys)
	called := names("kind of table", items)
	var out []measured.Layout
	for i, o := range items {
		o.about = "measurements " + called[i]
		out = append(out, o.layout(called[i]))
	}
	return out
}

func (o object) layout(name string) measured.Layout {
	l := measured.Layout{Name: name, TimeColumn: "utc"}
	if s, ok := o.text("time_column"); ok {
		l.TimeColumn = s
	} else if !o.has("time_column") {
		o.assume("time_column left out: utc")
	}
	form, _ := o.word("time_form", measured.TimeForms()...)
	for i, w := range measured.TimeForms() {
		if w == form {
			l.Times = measured.TimeForm(i)
		}
	}
	if !o.has("time_form") {
		o.assume("time_form left out: iso, UTC with Z")
	}
	ahead := o.zeroLeftOut("clock_ahead_s", span{low: -86_400, high: 86_400, unit: "s", next: "it says how much the recorder's clock was ahead of UTC"})
	l.ClockAhead = time.Duration(ahead * float64(time.Second))
	if s, ok := o.text("separator"); ok {
		switch c, n := utf8.DecodeRuneInString(s); {
		case s == "tab":
			l.Separator = '\t'
		case n != len(s) || c == '"' || c == '#':
			o.fault(o.get("separator"), "separator", "%s is not allowed; it must be one character or tab", "give , or ; or tab", quote(s))
		default:
			l.Separator = c
		}
	} else if !o.has("separator") {
		o.assume("separator left out: a comma")
	}
	for i, n := range o.items("missing", "texts that mean no value", maxParts) {
		if s, ok := o.textAt(n, fmt.Sprintf("missing[%d]", i), true); ok {
			l.Missing = append(l.Missing, s)
		}
	}
	if !o.has("columns") {
		o.missing("columns", "what each column holds")
	}
	for _, c := range o.objects("columns", "columns", maxParts, measurementColumnKeys) {
		l.Columns = append(l.Columns, c.layoutColumn(l.Columns))
	}
	return l
}

// layoutColumn reads a column beside those before it.
func (o object) layoutColumn(before []measured.LayoutColumn) measured.LayoutColumn {
	c := measured.LayoutColumn{Scale: 1}
	if !o.has("holds") {
		o.missing("holds", "one of "+list(measured.ColumnNames()))
	}
	var given bool
	c.Holds, given = o.word("holds", measured.ColumnNames()...)
	low, high, _ := measured.ConstantRange(c.Holds)
	which, any := o.exclusive("column", "constant")
	switch {
	case !any:
		o.missing("column", "the name of the column in the file, or constant where it held all the time")
	case which == "column":
		c.Column, _ = o.text("column")
	default:
		c.Constant = o.numberOr("constant", span{low: low, high: high}, 0)
		o.useless("beside constant", "scale", "add", "locked_word")
	}
	c.Scale = o.numberOr("scale", span{low: -1e12, high: 1e12}, 1)
	if c.Scale == 0 {
		o.fault(o.get("scale"), "scale", "0 is not allowed; it must be another number", "the value is scale times the field plus add")
	}
	c.Add = o.numberOr("add", span{low: -1e12, high: 1e12}, 0)
	if o.has("locked_word") {
		c.Yes, _ = o.text("locked_word")
		if given && c.Holds != "locked" {
			o.useless("unless holds is locked", "locked_word")
		} else {
			o.useless("beside locked_word", "scale", "add")
		}
	}
	for _, b := range before {
		switch {
		case given && measured.SameQuantity(b.Holds, c.Holds):
			o.fault(o.get("holds"), "holds", "%s is the quantity of another column, perhaps in another unit", "keep one of them", c.Holds)
		case c.Column != "" && b.Column == c.Column:
			o.fault(o.get("column"), "column", "%s holds %s already", "name each column once", quote(c.Column), b.Holds)
		}
	}
	return c
}
