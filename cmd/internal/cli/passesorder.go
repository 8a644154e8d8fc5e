package cli

import (
	"cmp"
	"fmt"
	"iter"
	"slices"
	"strings"

	"slantwise/station/pass"
)

// passOrder is what a list of passes is sorted by.
type passOrder string

// Orders of passes; equal ones stay by AOS, spacecraft and station.
const (
	orderAOS        passOrder = "aos"
	orderElevation  passOrder = "elevation"
	orderDuration   passOrder = "duration"
	orderSpacecraft passOrder = "spacecraft"
	orderStation    passOrder = "station"
)

var passOrders = []string{string(orderAOS), string(orderElevation), string(orderDuration), string(orderSpacecraft), string(orderStation)}

// String returns the order's name.
func (o *passOrder) String() string { return string(*o) }

// Type names the value in the help text.
func (o *passOrder) Type() string { return "ORDER" }

// Set takes one of the orders.
func (o *passOrder) Set(s string) error {
	if !slices.Contains(passOrders, s) {
		return fmt.Errorf("%q is not allowed; it must be %s%s", s, strings.Join(passOrders, ", "), meant(s, passOrders))
	}
	*o = passOrder(s)
	return nil
}

// ordered yields the passes in an order.
func (p *passSearch) ordered(o passOrder) iter.Seq[pass.Found] {
	if o == orderAOS {
		return p.list.All()
	}
	keys := make([]float64, p.list.Len())
	order := make([]int, p.list.Len())
	for i := range order {
		f := p.list.At(i)
		order[i], keys[i] = i, p.key(o, &f)
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(keys[a], keys[b]) })
	return func(yield func(pass.Found) bool) {
		for _, i := range order {
			if !yield(p.list.At(i)) {
				return
			}
		}
	}
}

// key returns what is sorted by; spacecraft and stations come in the scenario's order.
func (p *passSearch) key(o passOrder, f *pass.Found) float64 {
	switch o {
	case orderElevation:
		return -f.MaxElevation.Degrees()
	case orderDuration:
		return -f.Duration().Seconds()
	case orderSpacecraft:
		return float64(f.Spacecraft)
	}
	return float64(f.Site)
}
