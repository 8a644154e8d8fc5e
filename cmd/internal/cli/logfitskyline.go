package cli

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"slantwise/downlink/measured"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// skylineFit is the horizon of a station as its logs tell it.
type skylineFit struct {
	groups []*groupFit // of the station
	seen   *measured.Horizon
	err    error
}

// fitSkylines fits the horizon of each station where the lock was logged.
func fitSkylines(fitted []*groupFit, knots int) []*skylineFit {
	var out []*skylineFit
	for _, f := range fitted {
		if !f.log.Has(measured.Locked) {
			continue
		}
		at := slices.IndexFunc(out, func(h *skylineFit) bool { return h.groups[0].station.Site.Name == f.station.Site.Name })
		if at < 0 {
			at = len(out)
			out = append(out, &skylineFit{})
		}
		out[at].groups = append(out[at].groups, f)
	}
	for _, h := range out {
		var points [][]measured.Point
		var o measured.HorizonOptions
		o.Knots, o.Had = knots, h.had
		for _, g := range h.groups {
			points = append(points, g.points)
			if g.level != nil && (len(h.groups) == 1 || g.level.Parameters[0].Value < o.LevelDB) {
				o.LevelDB = g.level.Parameters[0].Value
			}
		}
		h.seen, h.err = measured.FitHorizon(points, o)
	}
	return out
}

// had is the skyline of the scenario as it is seen.
func (h *skylineFit) had(azimuth unit.Angle) unit.Angle {
	g := h.groups[0]
	return horizonSeen(&g.station.Site, g.refraction, azimuth)
}

// rows adds the fit to a sheet.
func (h *skylineFit) rows(out *sheet) {
	if h.err != nil {
		out.notes = append(out.notes, "skyline: "+h.err.Error())
		return
	}
	var craft []string
	for _, g := range h.groups {
		craft = append(craft, g.spacecraft.Name)
	}
	addFit(out, "locked", h.seen.Fit, strings.Join(craft, ", "), h.groups[0].station.Site.Name)
	for _, a := range h.seen.Fit.Advice {
		out.notes = append(out.notes, "skyline: "+a)
	}
	out.notes = append(out.notes, fmt.Sprintf("skyline: from %d instants at which signals appear or vanish, in apparent elevation; %d left out where the predicted margin was too low to say that something hid the signal, %d with too few others near them",
		h.seen.Seen, h.seen.Weak, h.seen.Alone))
}

// mask is the skyline as the scenario would have it, and how many of its points are as before.
func (h *skylineFit) mask() (m *station.Mask, text string, kept int, err error) {
	var azimuths []unit.Angle
	if had := h.groups[0].station.Site.Mask; had != nil {
		for _, p := range had.Points() {
			azimuths = append(azimuths, p.Azimuth)
		}
	}
	points, kept := h.seen.Mask(azimuths)
	if m, err = station.NewMask(points, station.Apparent); err != nil {
		return nil, "", 0, err
	}
	var rows []string
	for _, p := range points {
		rows = append(rows, fmt.Sprintf("[%s, %s]", trimmed(p.Azimuth.Degrees()), fixed(p.Elevation.Degrees(), 1)))
	}
	return m, "[" + strings.Join(rows, ", ") + "]", kept, nil
}

// trimmed is a number of degrees with at most two decimals.
func trimmed(deg float64) string { return strconv.FormatFloat(math.Round(100*deg)/100, 'f', -1, 64) }
