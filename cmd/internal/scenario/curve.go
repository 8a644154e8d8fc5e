package scenario

import (
	"fmt"
	"slices"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink/propagation"
)

// curve reads rows of [percent of the year, value exceeded]. Where the models will ask
// it for a percentage, it must reach that.
func (o object) curve(key string, in span) propagation.Curve {
	rows, ok := o.pairs(key, "[percent of an average year, "+in.unit+"]", percentage, in)
	if !ok {
		return propagation.Curve{}
	}
	points := make([]propagation.Exceeded, len(rows))
	for i, r := range rows {
		points[i] = propagation.Exceeded{P: propagation.Exceedance(r[0]) * propagation.Percent, Value: r[1]}
	}
	c, err := propagation.NewCurve(key, in.unit, points...)
	if err != nil {
		o.addAll(o.get(key), key, err)
		return c
	}
	if o.r.asked > 0 {
		if _, err := c.At(o.r.asked); err != nil {
			o.addAll(o.get(key), key, err)
		}
	}
	return c
}

// twelve reads a number for each month, January first.
func (o object) twelve(key string, in span) (out [12]float64, ok bool) {
	n := o.get(key)
	if n == nil {
		o.missing(key, "twelve numbers, January first; the rain rate needs both temperatures and rainfalls")
		return out, false
	}
	if n.Kind != tree.List || len(n.Items) != 12 {
		o.fault(n, key, "%s is not allowed; it must be a list of twelve numbers, January first", "", showRow(n))
		return out, false
	}
	ok = true
	for i, item := range n.Items {
		v, good := o.numberAt(item, fmt.Sprintf("%s[%d]", key, i), in)
		out[i], ok = v, ok && good
	}
	return out, ok
}

// words reads a list of words out of those that are known; it may be empty.
func (o object) words(key, of string, known []string) []string {
	n := o.get(key)
	if n.Kind != tree.List {
		o.fault(n, key, "%s is not allowed; it must be a list of %s: %s", "", show(n), of, list(known))
		return nil
	}
	var out []string
	for i, item := range n.Items {
		name := fmt.Sprintf("%s[%d]", key, i)
		w, ok := o.textAt(item, name, false)
		switch {
		case !ok:
		case !slices.Contains(known, w):
			o.notWord(item, name, w, known)
		default:
			out = append(out, w)
		}
	}
	return out
}
