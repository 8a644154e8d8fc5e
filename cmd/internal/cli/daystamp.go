package cli

import "time"

// dayStamp writes instants as utc does, many times as fast where they follow each
// other: it keeps the text of the day.
type dayStamp struct {
	day  int64 // days since 1970 plus one, 0: none yet
	text [len("2006-01-02T")]byte
}

const msPerDay = 24 * 60 * 60 * 1000

// append appends t in ISO 8601 with milliseconds and Z, rounded to the millisecond.
func (d *dayStamp) append(b []byte, t time.Time) []byte {
	ms := t.Round(time.Millisecond).UnixMilli()
	day := ms / msPerDay
	if ms%msPerDay < 0 {
		day--
	}
	if d.day != day+1 {
		d.day = day + 1
		time.Unix(day*86400, 0).UTC().AppendFormat(d.text[:0], "2006-01-02T")
	}
	in := int(ms - day*msPerDay)
	b = append(b, d.text[:]...)
	b = append(twoDigits(b, in/3_600_000), ':')
	b = append(twoDigits(b, in/60_000%60), ':')
	b = append(twoDigits(b, in/1000%60), '.', byte('0'+in%1000/100))
	return append(twoDigits(b, in%100), 'Z')
}

func twoDigits(b []byte, v int) []byte { return append(b, byte('0'+v/10), byte('0'+v%10)) }
