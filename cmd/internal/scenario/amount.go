package scenario

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"slantwise/cmd/internal/nearest"
	"slantwise/cmd/internal/scenario/tree"
)

// byteUnits are the units that a number of bytes may have: powers of 1000 by the SI,
// powers of 1024 by IEC 80000-13.
var byteUnits = []struct {
	name  string
	bytes float64
}{
	{"B", 1}, {"kB", 1e3}, {"MB", 1e6}, {"GB", 1e9}, {"TB", 1e12},
	{"KiB", 1 << 10}, {"MiB", 1 << 20}, {"GiB", 1 << 30}, {"TiB", 1 << 40},
}

var amount = regexp.MustCompile(`^([0-9.eE+_-]*[0-9.])\s*([A-Za-z]+)$`)

// ParseBytes reads a number of bytes with its unit, "32 GB" or "30 GiB". A unit that
// people use for several things (K, G, Gb, KB, gb) is refused with those that are taken.
func ParseBytes(text string) (float64, error) {
	m := amount.FindStringSubmatch(strings.TrimSpace(text))
	var names []string
	for _, u := range byteUnits {
		names = append(names, u.name)
		if m == nil || m[2] != u.name {
			continue
		}
		v, err := ParseNumber(m[1])
		if err != nil || !(v >= 0) || math.IsInf(v*u.bytes, 0) {
			break
		}
		return v * u.bytes, nil
	}
	next := "give a number of bytes, or one with its unit: " + list(names)
	if m != nil {
		switch near := nearest.Names(m[2], names, 1); {
		case strings.HasSuffix(m[2], "b") || strings.HasSuffix(strings.ToLower(m[2]), "bit"):
			next += "; b are bits to many, and B are bytes"
		case m[2] == "K" || m[2] == "M" || m[2] == "G" || m[2] == "T" || m[2] == "KB":
			next += "; 1000 and 1024 are told apart"
		case len(near) > 0 && near[0] != m[2]:
			next += "; did you mean " + near[0] + "?"
		}
	}
	return 0, fmt.Errorf("%s is not allowed; %s", quote(text), next)
}

// bytes reads a number of bytes, alone or with its unit, and tells what was understood.
func (o object) bytes(key string, in span) (float64, bool) {
	n := o.get(key)
	if n == nil || n.Kind != tree.Text && n.Kind != tree.Loose || !amount.MatchString(strings.TrimSpace(n.Text)) {
		return o.number(key, in)
	}
	v, err := ParseBytes(n.Text)
	switch {
	case err != nil:
		o.fault(n, key, "%s", "", err)
		return 0, false
	case !in.holds(v):
		o.fault(n, key, "%s is %s bytes; it must be %s", in.next, quote(n.Text), figure(v), in.allowed())
		return 0, false
	}
	o.assume("%s %s understood as %s bytes", key, quote(n.Text), strconv.FormatFloat(v, 'f', -1, 64))
	return v, true
}

func (o object) bytesOr(key string, in span, otherwise float64) float64 {
	if v, ok := o.bytes(key, in); ok {
		return v
	}
	return otherwise
}
