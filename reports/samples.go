package reports

import (
	"encoding/json"
	"math"
	"slices"
	"time"
)

// sampleTime returns the instant of a sample, to the millisecond.
func sampleTime(start time.Time, seconds float64) time.Time {
	return start.UTC().Add(time.Duration(math.Round(seconds*1000)) * time.Millisecond)
}

// samplesCSV returns every sample of a pass: a header row, then a row a sample.
func samplesCSV(p *Pass) []byte { return appendCSV(nil, p) }

// appendCSV appends what samplesCSV returns.
func appendCSV(dst []byte, p *Pass) []byte {
	cols, later := columns(p), laterColumns(p)
	f := p.Profile
	dst = slices.Grow(dst, (len(f.Seconds)+1)*(26+9*(len(cols)+len(later))))
	dst = append(dst, "utc"...)
	dst = appendNames(dst, cols)
	words := p.Radio != nil && len(f.AchievableLimit) == len(f.Seconds) && len(f.Usable) == len(f.Seconds)
	if words {
		dst = append(dst, ",achievable_limit,usable"...)
	}
	dst = appendNames(dst, later)
	dst = append(dst, '\n')
	for i, s := range f.Seconds {
		dst = sampleTime(f.Start, s).AppendFormat(dst, utcLayout)
		dst = appendRow(dst, cols, i)
		if words {
			dst = append(append(dst, ','), limitName(f.AchievableLimit[i])...)
			dst = append(append(dst, ','), yesNo(f.Usable[i])...)
		}
		dst = append(appendRow(dst, later, i), '\n')
	}
	return dst
}

func appendNames(dst []byte, cols []column) []byte {
	for _, c := range cols {
		dst = append(append(dst, ','), c.name...)
	}
	return dst
}

// appendRow writes the values of a sample; what does not exist is empty.
func appendRow(dst []byte, cols []column, sample int) []byte {
	for k := range cols {
		dst = append(dst, ',')
		if v := cols[k].values[sample]; finite(v) {
			dst = appendFixed(dst, v, cols[k].decimals)
		}
	}
	return dst
}

func yesNo(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}

// passJSON returns the summary, the budgets and every sample of a pass, the samples
// as one array a column.
func passJSON(p *Pass) ([]byte, error) { return appendPassJSON(nil, p) }

// appendPassJSON appends what passJSON returns.
func appendPassJSON(dst []byte, p *Pass) ([]byte, error) {
	head, err := json.Marshal(passHead(p))
	if err != nil {
		return nil, err
	}
	cols := append(columns(p), laterColumns(p)...)
	f := p.Profile
	dst = slices.Grow(dst, len(head)+len(f.Seconds)*(28+9*len(cols)))
	dst = append(dst, head[:len(head)-1]...) // the closing brace comes after the samples
	dst = append(dst, `,"samples":{"utc":[`...)
	for i, s := range f.Seconds {
		dst = comma(dst, i)
		dst = append(dst, '"')
		dst = sampleTime(f.Start, s).AppendFormat(dst, utcLayout)
		dst = append(dst, '"')
	}
	dst = append(dst, ']')
	for _, c := range cols {
		dst = append(append(append(dst, ",\n\""...), c.name...), `":[`...)
		for i, v := range c.values {
			dst = comma(dst, i)
			dst = appendJSONNumber(dst, v, c.decimals)
		}
		dst = append(dst, ']')
	}
	return append(dst, "}}\n"...), nil
}

func comma(dst []byte, i int) []byte {
	if i > 0 {
		return append(dst, ',')
	}
	return dst
}
