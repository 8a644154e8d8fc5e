package cli

import (
	"slices"

	"slantwise/orbit/unit"
	"slantwise/reports"
	"slantwise/station"
)

// horizonOf returns the least geometric elevation that counts, all around: the higher
// of mask and minimum elevation, each taken out of the kind it is meant in.
func horizonOf(site *reportSite, decides station.ElevationKind) []reports.Direction {
	azimuths := make([]float64, 0, 128)
	for az := range 72 {
		azimuths = append(azimuths, 5*float64(az))
	}
	geometric := func(el unit.Angle, kind station.ElevationKind) unit.Angle {
		if kind == station.Apparent {
			if g, ok := site.refraction.Geometric(el); ok {
				return g
			}
		}
		return el
	}
	least := geometric(site.Site.MinimumElevation, decides)
	mask := site.Site.Mask
	if mask != nil {
		for _, p := range mask.Points() {
			azimuths = append(azimuths, p.Azimuth.Degrees())
		}
	}
	out := make([]reports.Direction, 0, len(azimuths))
	slices.Sort(azimuths)
	for _, az := range slices.Compact(azimuths) {
		el := least
		if mask != nil {
			el = max(el, geometric(mask.At(unit.Angle(az)*unit.Degree), mask.Kind()))
		}
		out = append(out, reports.Direction{AzimuthDeg: az, ElevationDeg: el.Degrees()})
	}
	return out
}
