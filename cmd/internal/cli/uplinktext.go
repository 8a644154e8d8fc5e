package cli

import (
	"slantwise/orbit/unit"
	"slantwise/station"
)

// front names where received power and noise are taken, frontLoss the loss up to there,
// farEnd where the flux density is.
func (c *chosenLink) front() string     { return c.byDirection("first amplifier", "spacecraft's receiver") }
func (c *chosenLink) frontLoss() string { return c.byDirection("feed", "line") }
func (c *chosenLink) farEnd() string    { return c.byDirection("site", "spacecraft") }

func (c *chosenLink) byDirection(down, up string) string {
	if c.uplink != nil {
		return up
	}
	return down
}

// radiationJSON is how much a station radiates; a number that is not known is null.
type radiationJSON struct {
	FedW           nano          `json:"fed_w"`
	EIRPDBW        nano          `json:"eirp_dbw"`
	NearFieldEndM  nano          `json:"near_field_end_m"`
	NearFieldMost  nano          `json:"near_field_most_w_m2"`
	FarFieldFromM  nano          `json:"far_field_from_m"`
	PowerDensities []densityJSON `json:"power_densities"`
	Caution        string        `json:"caution"`
}

type densityJSON struct {
	DistanceM nano `json:"distance_m"`
	Density   nano `json:"w_m2"`
}

func radiationOut(r *station.Radiation) *radiationJSON {
	out := &radiationJSON{FedW: nano(r.Fed.Watts()), EIRPDBW: nano(r.EIRP.DBW()), NearFieldEndM: nano(r.NearFieldEnd.Metres()),
		NearFieldMost: nano(r.NearFieldMost), FarFieldFromM: nano(r.FarFieldFrom.Metres()), Caution: radiationCaution}
	add := func(d unit.Length) {
		out.PowerDensities = append(out.PowerDensities, densityJSON{nano(d.Metres()), nano(r.DensityAt(d))})
	}
	for _, d := range radiationDistances {
		add(d)
	}
	if r.NearFieldMost > 0 {
		add(r.NearFieldEnd)
		add(r.FarFieldFrom)
	}
	return out
}
