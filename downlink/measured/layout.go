package measured

import (
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"
)

// Layout tells what a table holds whose columns have names of their own.
type Layout struct {
	Name       string
	Separator  rune // 0: comma
	TimeColumn string
	Times      TimeForm
	// ClockAhead is how much the recorder's clock was ahead of UTC.
	ClockAhead time.Duration
	Missing    []string // fields that mean that nothing was measured, beside the empty one
	Columns    []LayoutColumn
}

// LayoutColumn is a quantity of a Layout: Scale times the field plus Add, or the same
// for every row.
type LayoutColumn struct {
	Column     string  // empty: Constant holds for every row
	Holds      string  // one of ColumnNames, whose unit the result has
	Scale, Add float64 // Scale 0 counts as 1
	Constant   float64
	Yes        string // of locked: the field that means so, where every other means not; empty: 1, 0, yes, no, true, false
}

// TimeForm is how a table writes times.
type TimeForm int

// Forms of times.
const (
	TimeISO   TimeForm = iota // 2026-03-10T14:05:00Z
	TimePlain                 // 2026-03-10 14:05:00, taken as UTC
	TimeUnix                  // seconds since 1970-01-01T00:00:00Z
)

// TimeForms lists the words for the forms.
func TimeForms() []string { return []string{"iso", "plain", "unix_s"} }

// own is the layout of a table that uses our names, but for those that are renamed.
func own(renamed map[string]string, f *faults) *Layout {
	out := &Layout{TimeColumn: "utc"}
	var names []string
	for our := range renamed {
		names = append(names, our)
	}
	slices.Sort(names)
	for _, our := range names {
		switch _, known := columnsByName[our]; {
		case our == "utc":
			out.TimeColumn = renamed[our]
		case known:
			out.Columns = append(out.Columns, LayoutColumn{Column: renamed[our], Holds: our})
		default:
			f.add(1, "column %q is not one that is known; it must be utc or one of %s", our, strings.Join(ColumnNames(), ", "))
		}
	}
	return out
}

// named lists the columns of the file that the layout uses.
func (l *Layout) named() []string {
	out := []string{l.TimeColumn}
	for _, c := range l.Columns {
		if c.Column != "" {
			out = append(out, c.Column)
		}
	}
	return out
}

// Fits tells whether a file begins with a row that holds every column of the layout.
func (l *Layout) Fits(text []byte) bool {
	head, err := l.reader(string(text)).Read()
	if err != nil {
		return false
	}
	for _, n := range l.named() {
		if !slices.Contains(head, n) {
			return false
		}
	}
	return true
}

func (l *Layout) reader(text string) *csv.Reader {
	r := csv.NewReader(strings.NewReader(text))
	r.FieldsPerRecord, r.Comment, r.TrimLeadingSpace = -1, '#', true
	if l.Separator != 0 {
		r.Comma = l.Separator
	}
	return r
}

// instant reads a time of the layout's form.
func (l *Layout) instant(text string) (time.Time, error) {
	var t time.Time
	var err error
	like := "2026-03-10T14:05:00Z, in UTC"
	switch l.Times {
	case TimePlain:
		like = "2026-03-10 14:05:00"
		t, err = time.Parse("2006-01-02 15:04:05.999999999", strings.Replace(text, "T", " ", 1))
	case TimeUnix:
		like = "1773151500.5, seconds since 1970"
		var v float64
		if v, err = strconv.ParseFloat(text, 64); err == nil && math.Abs(v) < 1e10 {
			whole, part := math.Modf(v)
			t = time.Unix(int64(whole), int64(math.Round(part*1e6))*1000).UTC() // a float64 resolves no more
		}
	default:
		if t, err = time.Parse(time.RFC3339Nano, text); err == nil && !strings.HasSuffix(text, "Z") {
			t = time.Time{}
		}
	}
	if err != nil || t.Year() < 1957 || t.Year() > 2200 {
		return time.Time{}, fmt.Errorf("%s: %.60q is not a time; write it as %s", l.TimeColumn, text, like)
	}
	return t.Add(-l.ClockAhead), nil
}

// ConstantRange returns what a value under a name of ColumnNames may be.
func ConstantRange(name string) (low, high float64, known bool) {
	c, known := columnsByName[name]
	if !known {
		return 0, 0, false
	}
	r := spans[c.q]
	return (r[0] - c.shift) / c.scale, (r[1] - c.shift) / c.scale, true
}

// SameQuantity tells whether two names of ColumnNames are units of one quantity.
func SameQuantity(a, b string) bool { return columnsByName[a].q == columnsByName[b].q }
