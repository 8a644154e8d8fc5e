package reports

import (
	"math"
	"strconv"
	"time"
)

const utcLayout = "2006-01-02T15:04:05.000Z"

// utcText returns t as ISO 8601 in UTC with milliseconds; empty for no time.
func utcText(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.UTC().Round(time.Millisecond).Format(utcLayout)
}

// dayClock is how pages write an instant: date, then the clock to the second.
func dayClock(t time.Time) string { return utcClock(t, dayLayout) }

// clock writes the time of the day alone.
func clock(t time.Time) string { return utcClock(t, clockLayout) }

const (
	clockLayout = "15:04:05"
	dayLayout   = "2006-01-02 15:04:05"
)

// layoutOf returns how the instants of a pass are written: with the date where the
// time of the day alone would be ambiguous.
func layoutOf(p *Pass) string {
	if p.Pass.Duration() > 24*time.Hour {
		return dayLayout
	}
	return clockLayout
}

// utcClock writes t in UTC by a layout, to the second.
func utcClock(t time.Time, layout string) string {
	return t.UTC().Round(time.Second).Format(layout)
}

// localText writes t in the station's zone with the zone's short name, with the date
// where it is another than the UTC one or the layout asks for it; empty where the
// station has no zone.
func localText(t time.Time, zone *time.Location, layout string) string {
	if zone == nil {
		return ""
	}
	u := t.UTC().Round(time.Second)
	l := u.In(zone)
	if l.YearDay() != u.YearDay() {
		layout = dayLayout
	}
	return l.Format(layout + " MST")
}

// offsetAt is a station's offset from UTC and from when on it holds.
type offsetAt struct {
	From    float64 `json:"from"` // seconds on the pages' time axis
	Seconds int     `json:"seconds"`
	Name    string  `json:"name"`
}

// offsets lists the station's offsets over [from, to], so that the page's script
// needs no time zone data; empty without a zone.
func offsets(from, to time.Time, zone *time.Location, base time.Time) []offsetAt {
	if zone == nil {
		return nil
	}
	var list []offsetAt
	for at := from; ; {
		name, seconds := at.In(zone).Zone()
		list = append(list, offsetAt{From: at.Sub(base).Seconds(), Seconds: seconds, Name: name})
		_, next := at.In(zone).ZoneBounds()
		if next.IsZero() || next.After(to) {
			return list
		}
		at = next
	}
}

// span writes a duration as "9 min 08 s", "2 h 05 min", "41 s".
func span(d time.Duration) string {
	s := int64(math.Round(d.Seconds()))
	switch {
	case s < 60:
		return strconv.FormatInt(s, 10) + " s"
	case s < 3600:
		return strconv.FormatInt(s/60, 10) + " min " + twoDigits(s%60) + " s"
	default:
		m := (s + 30) / 60
		return strconv.FormatInt(m/60, 10) + " h " + twoDigits(m%60) + " min"
	}
}

// age writes how old an element set is, in the unit that fits.
func age(d time.Duration) string {
	h := d.Hours()
	switch {
	case math.Abs(h) < 1:
		return fixed(d.Minutes(), 0) + " min"
	case math.Abs(h) < 48:
		return fixed(h, 1) + " h"
	default:
		return fixed(h/24, 1) + " days"
	}
}

func twoDigits(n int64) string {
	if n < 10 {
		return "0" + strconv.FormatInt(n, 10)
	}
	return strconv.FormatInt(n, 10)
}

// midnight returns the start of t's UTC day: the origin of the time axes.
func midnight(t time.Time) time.Time { return t.UTC().Truncate(24 * time.Hour) }

var compassPoints = [...]string{"N", "NNE", "NE", "ENE", "E", "ESE", "SE", "SSE", "S", "SSW", "SW", "WSW", "W", "WNW", "NW", "NNW"}

// compass returns the nearest of the sixteen points of the compass.
func compass(azimuthDeg float64) string {
	if !finite(azimuthDeg) {
		return ""
	}
	turned := math.Mod(math.Mod(azimuthDeg, 360)+360, 360)
	return compassPoints[int(math.Floor(turned/22.5+0.5))%16]
}
