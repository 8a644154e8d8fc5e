package reports

import (
	"html/template"
	"math"
	"strings"
	"time"

	"slantwise/downlink"
)

// Measured is an entry of the logbook that belongs to a pass: what was logged, over what was
// predicted when it was taken into the book.
type Measured struct {
	Number                     int64 // in the logbook
	Source, Note               string
	Elements                   string // which orbit the prediction flew
	Link                       string // transmitter, antenna and mode of the prediction; empty: not known
	Added                      time.Time
	PredictedBytes, TakenBytes float64 // of the pass; NaN: not known
	HasLock                    bool    // whether the receiver was in lock was logged
	Locked                     []downlink.Interval
	Quantities                 []MeasuredQuantity
	Faults                     []string // what is wrong with the entry, as rows that cannot be read
}

// MeasuredQuantity is one quantity of an entry that has a prediction, by time. All columns are
// of one length; NaN where there is no prediction.
type MeasuredQuantity struct {
	Key, Title, Unit    string // "cn0_dbhz", "C/N0", "dBHz"
	DifferenceUnit      string // "dB"
	Base                float64
	BaseText            string // what Base is, as "the carrier of 437.5 MHz"; empty: Base is 0
	Times               []time.Time
	Measured, Predicted []float64
	Difference          []float64 // measured less predicted, an azimuth the short way round
	States              []string  // "used" counts in Figures
	Figures             []MeasuredFigure
}

// MeasuredFigure is a bias or a slope with the half width of its interval of 95 %.
type MeasuredFigure struct {
	By, Name, Unit    string // By: "alone", "elevation", "azimuth", "time"
	Value, Span       float64
	Samples, Outliers int
}

// usedState is the state of a sample that counts.
const usedState = "used"

// bias returns the figure of the bias alone; nil where there is none.
func (q *MeasuredQuantity) bias() *MeasuredFigure {
	for i := range q.Figures {
		if q.Figures[i].By == "alone" {
			return &q.Figures[i]
		}
	}
	return nil
}

// text says in a line what differs.
func (q *MeasuredQuantity) text() string {
	b := q.bias()
	if b == nil {
		return q.Title + ": too few samples to say what differs"
	}
	return q.Title + ": measured less predicted " + withSign(b.Value, b.decimals()) + " ± " + fixed(b.Span, b.decimals()) + " " + b.Unit
}

// decimals is how exactly a figure is shown: to a tenth of a hertz, a hundredth of the rest.
func (f *MeasuredFigure) decimals() int {
	if strings.HasPrefix(f.Unit, "Hz") {
		return 1
	}
	return 2
}

// withSign writes a number with its sign.
func withSign(v float64, decimals int) string {
	text := fixed(v, decimals)
	if v > 0 && text != fixed(0, decimals) {
		return "+" + text
	}
	return text
}

// measuredView is the part of the page about measurements.
type measuredView struct {
	CSV     template.URL
	File    string // the name to keep it under
	Entries []measuredEntryView
}

type measuredEntryView struct {
	Title, Added, Source, Elements, Link, Note string
	Answers, Facts, Faults                     []string
	Figures                                    []measuredFigureView
	Rows                                       []measuredRow
}

type measuredFigureView struct {
	ID, Title, Caption string
	Drawing            template.HTML
	Table              template.HTML // empty: that of the drawing before holds the numbers
}

type measuredRow struct{ Quantity, By, Name, Value, Span, Unit, Samples, Outliers string }

const measuredSuffix = "-measured.csv"

func newMeasuredView(w *writer, stem string, p *Pass, fr *frame) *measuredView {
	if len(p.Measured) == 0 {
		return nil
	}
	v := &measuredView{CSV: template.URL(stem + measuredSuffix), File: stem + measuredSuffix}
	if w.options.OneFile {
		v.CSV = dataAddress("text/csv", measuredCSV(p))
	}
	for i := range p.Measured {
		m := &p.Measured[i]
		e := m.view()
		for k, s := range m.sketches(fr, i) {
			one := measuredFigureView{ID: s.id, Title: s.title, Caption: s.caption, Drawing: s.markup(s.title + ". " + s.caption)}
			if k%2 == 0 {
				one.Table = m.Quantities[k/2].table(p)
			}
			e.Figures = append(e.Figures, one)
		}
		v.Entries = append(v.Entries, e)
	}
	return v
}

// view holds the words of an entry, which page and paper share.
func (m *Measured) view() measuredEntryView {
	e := measuredEntryView{Title: "Logbook number " + itoa(m.Number), Added: dayClock(m.Added), Source: m.Source, Elements: m.Elements, Link: m.Link, Note: m.Note, Faults: m.Faults}
	for i := range m.Quantities {
		q := &m.Quantities[i]
		e.Answers = append(e.Answers, q.text())
		for _, f := range q.Figures {
			e.Rows = append(e.Rows, measuredRow{q.Title, f.By, f.Name, withSign(f.Value, f.decimals()), fixed(f.Span, f.decimals()), f.Unit, itoa(int64(f.Samples)), itoa(int64(f.Outliers))})
		}
	}
	e.Facts = append(e.Facts, m.volumeText(), m.lockText())
	return e
}

// volumeText compares the bytes.
func (m *Measured) volumeText() string {
	switch taken, predicted := finite(m.TakenBytes), finite(m.PredictedBytes); {
	case taken && predicted && m.PredictedBytes > 0:
		return "Taken " + withUnit(m.TakenBytes, byteScales) + " of " + withUnit(m.PredictedBytes, byteScales) + " predicted (" + fixed(100*m.TakenBytes/m.PredictedBytes, 1) + " %)"
	case taken && predicted:
		return "Taken " + withUnit(m.TakenBytes, byteScales) + "; nothing was predicted to be taken"
	case taken:
		return "Taken " + withUnit(m.TakenBytes, byteScales) + "; no volume was predicted"
	case predicted:
		return "Predicted " + withUnit(m.PredictedBytes, byteScales) + "; what was taken is not in the logbook"
	}
	return "Neither predicted nor taken bytes are in the logbook"
}

// lockText tells when the receiver was in lock.
func (m *Measured) lockText() string {
	if !m.HasLock {
		return "Lock times were not logged"
	}
	if len(m.Locked) == 0 {
		return "The receiver was never in lock"
	}
	text, all := "In lock ", time.Duration(0)
	for i, in := range m.Locked {
		all += in.To.Sub(in.From)
		switch {
		case i == mostLocks:
			text += " and later"
		case i > mostLocks:
		case i > 0:
			text += ", "
			fallthrough
		default:
			text += clock(in.From) + " to " + clock(in.To)
		}
	}
	return text + " UTC, " + span(all) + " in all"
}

// mostLocks is how many stretches of lock are written out.
const mostLocks = 8

// outOf counts the samples that do not count.
func (q *MeasuredQuantity) outOf() (uncounted int) {
	for _, s := range q.States {
		if s != usedState {
			uncounted++
		}
	}
	return uncounted
}

func (q *MeasuredQuantity) shown(v float64) float64 {
	if math.IsNaN(v) {
		return v
	}
	return v - q.Base
}
