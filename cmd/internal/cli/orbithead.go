package cli

import (
	"fmt"
	"math"
	"path/filepath"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit/elements"
)

// orbitHead says by which orbit an answer was computed.
type orbitHead struct {
	kind     scenario.OrbitKind
	elements elements.Chosen // its age at the instant of the answer; of an ephemeris its mean elements
	name, id string          // of an ephemeris
	from, to time.Time       // what an ephemeris covers, as it is flown
}

// newOrbitHead tells of a spacecraft that is flown by an element set of its own, or by
// what it has in place of one, its age at an instant.
func newOrbitHead(c *scenario.Spacecraft, set elements.Chosen, at time.Time) *orbitHead {
	set.Age = set.Elements.Age(at)
	h := &orbitHead{kind: c.Orbit, elements: set}
	if t := c.Trajectory; t != nil {
		moved, spans := c.Shift.Late+c.Shift.Slip, t.Spans()
		h.name, h.id = t.Name, t.ID
		h.from, h.to = spans[0].From.Add(moved), spans[len(spans)-1].To.Add(moved)
	}
	return h
}

// String is the line at the head of an answer.
func (h *orbitHead) String() string {
	if h.kind == scenario.OnEphemeris {
		s := fmt.Sprintf("ephemeris of %s (%s), %s to %s", h.name, h.id, utc(h.from), utc(h.to))
		if f := h.file(); f != "" {
			s += ", " + f
		}
		return s
	}
	what, e := h.kind.String(), h.elements
	if h.kind.HasNumber() {
		what = fmt.Sprintf("element set %d", e.CatalogNumber)
	}
	when := "old"
	if e.Age < 0 {
		when = "ahead"
	}
	return fmt.Sprintf("%s of %s, %.2f days %s", what, utc(e.Epoch), e.Age.Abs().Hours()/24, when)
}

func (h *orbitHead) file() string {
	if f := h.elements.Source.File; f != "" {
		return filepath.Base(f)
	}
	return ""
}

// orbitJSON is the head in JSON. What the kind of orbit does not have is null.
type orbitJSON struct {
	Kind          string  `json:"kind"` // element set, state, synthetic orbit, ephemeris
	CatalogNumber *int    `json:"catalog_number"`
	EpochUTC      *string `json:"epoch_utc"`
	AgeDays       number  `json:"age_days"`
	FromUTC       *string `json:"from_utc"` // of an ephemeris
	ToUTC         *string `json:"to_utc"`
}

func (h *orbitHead) json(decimals int) *orbitJSON {
	out := &orbitJSON{Kind: h.kind.String(), AgeDays: num(math.NaN(), 0)}
	text := func(t time.Time) *string { s := utc(t); return &s }
	if h.kind.HasNumber() {
		out.CatalogNumber = &h.elements.CatalogNumber
	}
	if h.kind.HasEpoch() {
		out.EpochUTC, out.AgeDays = text(h.elements.Epoch), num(h.elements.Age.Hours()/24, decimals)
	} else {
		out.FromUTC, out.ToUTC = text(h.from), text(h.to)
	}
	return out
}
