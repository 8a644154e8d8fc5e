package cli

import (
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/reports"
	"slantwise/station"
)

// What the causes of a low signal assume; the sheet says so.
const (
	shiftRainPercent   = 0.1  // of an average year: some nine hours of it
	shiftAttitudeShare = 0.5  // of the directions, were each equally likely
	leastShiftCauseDB  = 0.05 // less is not worth a word
)

// atBoth holds the main link's budget at the lower end and at the highest point.
type atBoth struct {
	time   [2]time.Time
	budget [2]*downlink.Budget
	spread [2]station.LookSpread // the orbit's error on the sky; zero: not known
}

// causes tells how much each cause could take off what is expected of the main link.
func (j *shiftJob) causes(c *shiftChoice, l *shiftLink, events *[3]reports.ShiftEvent) ([]reports.ShiftCause, error) {
	at := atBoth{time: [2]time.Time{events[lowEnd(events)].Time, events[1].Time}}
	for i, t := range at.time {
		b, err := l.link.budgetAt(c.craft(j), t)
		if err != nil {
			return nil, err
		}
		at.budget[i], at.spread[i] = b, j.spreadAt(c, t)
	}
	var list []reports.ShiftCause
	add := func(kind reports.ShiftCauseKind, detail string, db [2]float64) {
		if db[0] >= leastShiftCauseDB || db[1] >= leastShiftCauseDB {
			list = append(list, reports.ShiftCause{Kind: kind, LowDB: db[0], HighDB: db[1], Detail: detail})
		}
	}
	rain, err := j.rain(c, l, &at)
	if err != nil {
		return nil, err
	}
	path := reports.ShiftRain
	if l.link.link.Frequency() < unit.Gigahertz { // rain takes nothing there, and scintillation of the ionosphere does
		path = reports.ShiftIonosphere
	}
	add(path, fmt.Sprintf("exceeded %g %% of an average year", shiftRainPercent), rain)
	off, err := l.offPoint(&at)
	if err != nil {
		return nil, err
	}
	add(reports.ShiftPointing, fmt.Sprintf("error of orbit and antenna, not exceeded with %g %%", 100*downlink.SureProbability), off)
	detail, db := l.offAttitude(&at)
	add(reports.ShiftAttitude, detail, db)
	if lost := lostWithin(c); len(lost) > 0 {
		add(reports.ShiftKeyhole, "the mount does not follow "+spans(lost), [2]float64{0, math.Inf(1)})
	}
	detail, db = l.otherMode(&at)
	add(reports.ShiftWrongMode, detail, db)
	detail, db = l.otherHand()
	add(reports.ShiftPolarisation, detail, db)
	slices.SortStableFunc(list, func(a, b reports.ShiftCause) int {
		if x, y := a.Kind >= reports.ShiftWrongMode, b.Kind >= reports.ShiftWrongMode; x != y {
			if x {
				return 1
			}
			return -1
		}
		switch x, y := max(a.LowDB, a.HighDB), max(b.LowDB, b.HighDB); {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
	return list, nil
}

// spreadAt is the orbit's error on the sky; zero where it is not known.
func (j *shiftJob) spreadAt(c *shiftChoice, t time.Time) (none station.LookSpread) {
	w, craft := j.scenario.Window, c.craft(j)
	u, _, err := j.scenario.AssumedUncertainty(craft.Spacecraft, w.Start, w.End)
	if err != nil {
		return none
	}
	spread, err := u.At(t)
	if err != nil {
		return none
	}
	e := craft.ephemeris
	return j.report.sites[c.page.Site].frame.LookSpread(e.StateAt(max(0, min(e.Seconds(t), e.Span()))), spread)
}

// rain is how much less C/N0 there is in the weather of shiftRainPercent; nothing where the
// station's climate or the frequency knows no rain.
func (j *shiftJob) rain(c *shiftChoice, l *shiftLink, at *atBoth) (db [2]float64, err error) {
	wet, known := j.rained[l.link]
	if !known {
		other := *j.scenario
		other.Path.ClearSky, other.Path.Exceedance = false, propagation.Exceedance(shiftRainPercent)*propagation.Percent
		link := *l.link
		link.clear = nil
		if err := link.prepare(newSkies(&other)); err != nil {
			return db, err
		}
		wet = &link
		j.rained[l.link] = wet
	}
	if slices.Contains(wet.sky.missing, "rain") {
		return db, nil // what else the path takes would pass for rain
	}
	for i, t := range at.time {
		b, err := wet.budgetAt(c.craft(j), t)
		if err != nil {
			return db, err
		}
		if less := float64(at.budget[i].CN0 - b.CN0); less > 0 {
			db[i] = less
		}
	}
	return db, nil
}

// offPoint is the loss of pointing at the error of orbit and antenna that is not exceeded with
// downlink.SureProbability, beside what the budget holds of it already.
func (l *shiftLink) offPoint(at *atBoth) (db [2]float64, err error) {
	a := l.link.antenna
	beam := 2 * unit.Angle(l.profile.HalfBeamDeg) * unit.Degree
	if !(beam > 0) || a.Kind == station.Fixed {
		return db, nil
	}
	quantile, err := station.NewErrorQuantile(downlink.SureProbability)
	if err != nil {
		return db, err
	}
	own := a.PointingRMS.Radians() / math.Sqrt2 // alike along both axes
	for i, b := range at.budget {
		orbit := at.spread[i]
		if a.Follows == station.FollowsSignal {
			orbit = station.LookSpread{}
		}
		e := quantile.Of(unit.Angle(math.Hypot(orbit.Major.Radians(), own)), unit.Angle(math.Hypot(orbit.Minor.Radians(), own)))
		if !station.InMainLobe(e, beam) {
			db[i] = math.Inf(1)
			continue
		}
		db[i] = math.Max(0, float64(station.PointingLoss(e, beam))-termOf(b, "pointing loss", "orbit pointing loss"))
	}
	return db, nil
}

// offAttitude is what half of all directions of a spacecraft that turns about freely take.
func (l *shiftLink) offAttitude(at *atBoth) (detail string, db [2]float64) {
	t := l.link.transmitter
	if t.EIRP != nil || t.Pattern.Kind == downlink.Isotropic || t.Attitude == downlink.AttitudeTumbling {
		return "", db
	}
	if p := t.Pattern; p.Kind == downlink.GainTable && p.Table[len(p.Table)-1].OffBoresight < 180*unit.Degree-1e-9 {
		return "", db
	}
	gain := t.Pattern.GainExceeded(shiftAttitudeShare)
	for i, b := range at.budget {
		db[i] = math.Max(0, termOf(b, "transmit antenna gain")-float64(gain))
	}
	return "attitude lost: so much or more half of the time", db
}

// otherMode is how much more the most demanding of the other modes needs.
func (l *shiftLink) otherMode(at *atBoth) (detail string, db [2]float64) {
	if l.rated == nil {
		return "", db
	}
	name, most := "", math.Inf(-1)
	for _, m := range l.planner.all.Modes() {
		if m.NeedDBHz > most {
			name, most = m.Name, m.NeedDBHz
		}
	}
	for i, t := range at.time {
		if need, sent := l.needAt(t); sent != "" {
			db[i] = math.Max(0, most-need)
		}
	}
	return "were it " + name, db
}

// otherHand is the loss of the opposite polarisation, beside what the budget holds.
func (l *shiftLink) otherHand() (detail string, db [2]float64) {
	a, b := l.link.transmitter.Polarization, l.link.antenna.Polarization
	if a == nil || b == nil {
		return "", db
	}
	set := float64(a.Mismatch(*b).Loss)
	turned := *b
	switch b.Kind {
	case station.RightHandCircular:
		turned.Kind, detail = station.LeftHandCircular, "were the feed set to lhcp"
	case station.LeftHandCircular:
		turned.Kind, detail = station.RightHandCircular, "were the feed set to rhcp"
	default:
		if b.Tilt == nil || a.Kind != station.Linear {
			return "", db
		}
		tilt := *b.Tilt + 90*unit.Degree
		turned.Tilt, detail = &tilt, "were the feed turned by 90 deg"
	}
	less := math.Max(0, float64(a.Mismatch(turned).Loss)-set)
	return detail, [2]float64{less, less}
}
