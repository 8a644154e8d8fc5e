package cli

import (
	"context"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/cmd/internal/logbook"
	"slantwise/downlink"
	"slantwise/downlink/measured"
	"slantwise/orbit/unit"
	"slantwise/reports"
)

// openBook reads the entries of the logbook that belong to passes of the window. Without a name
// the logbook of this folder is taken where it is there, and then a fault of it is told and no
// more.
func (p *reportPlan) openBook(ctx context.Context, env *Env, name string, named bool) error {
	if name == "" || !named && !exists(name) {
		return nil
	}
	book, err := readBook(ctx, name)
	if err != nil {
		if named {
			return &InputError{Err: err}
		}
		p.warnings = append(p.warnings, "measurements are left out: "+err.Error())
		return nil
	}
	defer book.close()
	for i := range book.entries {
		e := &book.entries[i]
		if e.Last.Before(p.scenario.Window.Start) || e.First.After(p.scenario.Window.End) {
			continue
		}
		k := bookKey{e.Spacecraft, e.Station}
		if p.logged == nil {
			p.logged = map[bookKey][]loggedEntry{}
		}
		one := loggedEntry{Entry: e}
		if err := book.fill(ctx, e); err != nil {
			one.fault = err.Error()
		}
		p.logged[k] = append(p.logged[k], one)
	}
	if book.fault != nil {
		p.warnings = append(p.warnings, book.fault.Error())
	}
	if !named && len(p.logged) > 0 {
		env.note("with the measurements of %s (--log \"\" leaves them out)", name)
	}
	return nil
}

// bookKey is what an entry of the logbook belongs to.
type bookKey struct{ spacecraft, station string }

type loggedEntry struct {
	*logbook.Entry
	fault string
}

// around is how far outside a pass a sample is still shown with it.
const around = time.Minute

// lead is how long before and after a pass a receiver may log on without its log being of more.
const lead = 10 * time.Minute

// addMeasured puts what was logged during the pass onto its page.
func (p *reportPlan) addMeasured(out *reports.Pass, craft *reportCraft, site *reportSite, page *reportPage) {
	from, to := page.AOS.Add(-around), page.LOS.Add(around)
	for _, e := range p.logged[bookKey{craft.Name, site.Site.Name}] {
		if e.Last.Before(page.AOS) || e.First.After(page.LOS) || page.many && !e.madeFor(page.link) {
			continue
		}
		points := slices.DeleteFunc(pointsOf(e.Entry), func(pt measured.Point) bool { return pt.At.Before(from) || pt.At.After(to) })
		if len(points) == 0 {
			continue
		}
		fillDirections(points, craft, site)
		m := reports.Measured{Number: e.ID, Source: e.Source, Note: e.Note, Elements: e.Elements, Link: linkOf(e.Entry), Added: e.Taken,
			PredictedBytes: e.PredictedBytes, TakenBytes: e.TakenBytes}
		m.Locked, m.HasLock = lockTimes(points)
		for _, q := range measured.Compared() {
			if one, ok := measuredQuantity(points, q, carrierOf(craft, e.Transmitter, page)); ok {
				m.Quantities = append(m.Quantities, one)
			}
		}
		if e.fault != "" {
			m.Faults = append(m.Faults, e.fault)
		}
		if e.First.Before(page.AOS.Add(-lead)) || e.Last.After(page.LOS.Add(lead)) {
			m.Faults = append(m.Faults, fmt.Sprintf("the log covers %s to %s, more than this pass: its bytes are of all of it", utc(e.First), utc(e.Last)))
		}
		out.Measured = append(out.Measured, m)
	}
}

// madeFor tells whether an entry was predicted for a link; an entry that does not say is for any.
func (e *loggedEntry) madeFor(l *reportLink) bool {
	return e.Transmitter == "" || l != nil && l.transmitter.Name == e.Transmitter && l.antenna.Name == e.Antenna
}

// carrierOf returns the nominal frequency of the transmitter that an entry names, else of the
// page's, else 0.
func carrierOf(craft *reportCraft, name string, page *reportPage) unit.Frequency {
	for i := range craft.Transmitters {
		if t := &craft.Transmitters[i]; t.Name == name {
			return t.Frequency
		}
	}
	if page.link != nil {
		return page.link.transmitter.Frequency
	}
	return 0
}

// fillDirections looks where the spacecraft stood where an entry does not say, as before version 3
// of the logbook.
func fillDirections(points []measured.Point, craft *reportCraft, site *reportSite) {
	for i := range points {
		pt := &points[i]
		if !math.IsNaN(pt.AzimuthDeg) && !math.IsNaN(pt.ElevationDeg) {
			continue
		}
		if s, err := craft.ephemeris.At(pt.At); err == nil {
			look := site.frame.Look(s)
			pt.AzimuthDeg, pt.ElevationDeg = look.Azimuth.Degrees(), look.Elevation.Degrees()
		}
	}
}

// measuredQuantity puts one quantity of a log into the form of a page; false where it was not
// logged.
func measuredQuantity(points []measured.Point, q measured.Quantity, carrier unit.Frequency) (reports.MeasuredQuantity, bool) {
	out := reports.MeasuredQuantity{Key: q.String(), Title: quantityWords[q][0], Unit: quantityWords[q][1], DifferenceUnit: measured.Unit(q)}
	if q == measured.FrequencyHz && carrier > 0 {
		out.Base, out.BaseText = carrier.Hertz(), fmt.Sprintf("the carrier of %.6g MHz", carrier.Hertz()/1e6)
	}
	free := 0.0
	if q == measured.RelativePowerDB {
		free = middleResidual(points, q)
		out.BaseText = "a level of its own (the predicted curve is shifted onto it)"
	}
	for i := range points {
		p := &points[i]
		v := p.Get(q)
		if math.IsNaN(v) {
			continue
		}
		out.Times, out.Measured = append(out.Times, p.At), append(out.Measured, v)
		out.Predicted, out.Difference = append(out.Predicted, p.Predicted(q)+free), append(out.Difference, p.Residual(q)-free)
		out.States = append(out.States, p.State.String())
	}
	if len(out.Times) == 0 {
		return out, false
	}
	for _, tr := range measured.Trends(points, q) {
		if tr.Fit == nil {
			continue
		}
		for i, f := range tr.Fit.Parameters {
			if i == 0 && (tr.By != "alone" || q == measured.RelativePowerDB) || math.IsNaN(f.Value) {
				continue
			}
			out.Figures = append(out.Figures, reports.MeasuredFigure{By: tr.By, Name: f.Name, Unit: f.Unit, Value: f.Value, Span: f.Span, Samples: tr.Fit.Used, Outliers: len(tr.Fit.Outliers)})
		}
	}
	return out, true
}

// middleResidual is the median of measured less predicted over the samples that count; 0 without.
func middleResidual(points []measured.Point, q measured.Quantity) float64 {
	var r []float64
	for i := range points {
		if v := points[i].Residual(q); points[i].State == measured.Used && !math.IsNaN(v) {
			r = append(r, v)
		}
	}
	if len(r) == 0 {
		return 0
	}
	slices.Sort(r)
	return r[len(r)/2]
}

// lockTimes returns the spans of consecutive samples in lock; false where lock was not logged.
func lockTimes(points []measured.Point) (spans []downlink.Interval, logged bool) {
	open := false
	for i := range points {
		p := &points[i]
		v := p.Get(measured.Locked)
		if math.IsNaN(v) {
			continue
		}
		logged = true
		switch {
		case v == 1 && open:
			spans[len(spans)-1].To = p.At
		case v == 1:
			spans, open = append(spans, downlink.Interval{From: p.At, To: p.At}), true
		default:
			open = false
		}
	}
	return spans, logged
}
