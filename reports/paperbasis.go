package reports

import (
	"time"

	"slantwise/reports/paper"
)

// infoOf is what a PDF file of a page says about itself. Its date is the start of what it is about:
// files carry no clock, and the same input gives the same bytes.
func infoOf(title string, b *Basis, from time.Time) paper.Info {
	return paper.Info{Title: title, Subject: "scenario " + b.Scenario, Creator: program(b.Program), Date: from, Foot: b.ages()}
}

// ages says how old the orbits are over the time of a page; empty where none has an epoch.
func (b *Basis) ages() string {
	first, last, seen := time.Duration(0), time.Duration(0), false
	for i := range b.Orbits {
		o := &b.Orbits[i]
		if o.Epoch.IsZero() {
			continue
		}
		if !seen {
			first, last, seen = o.AgeFrom, o.AgeTo, true
		}
		first, last = min(first, o.AgeFrom), max(last, o.AgeTo)
	}
	switch {
	case !seen:
		return ""
	case first == last:
		return "elements " + ageText(first)
	case first >= 0:
		return "elements " + age(first) + " to " + age(last) + " old over the time of this document"
	}
	return "elements " + ageText(first) + " to " + ageText(last) + " over the time of this document"
}

// defaultsOn writes what was taken for what the scenario leaves out.
func (b *Basis) defaultsOn(d *paper.Document) {
	if len(b.Defaults) > 0 {
		d.Heading("Left out in the scenario, and taken as")
		d.Notes(noteTexts(b.Defaults))
	}
}

// chapter is a part of a document with a line in its list of contents.
type chapter struct {
	name  string
	is    bool
	write func(d *paper.Document)
}

// chaptersOn writes those chapters that there are.
func chaptersOn(d *paper.Document, list []chapter) {
	for _, c := range list {
		if c.is {
			d.Heading(c.name)
			d.Chapter(c.name)
			c.write(d)
		}
	}
}

// countOf returns how many chapters there are.
func countOf(list []chapter) int {
	n := 0
	for _, c := range list {
		if c.is {
			n++
		}
	}
	return n
}
