package scenario

import (
	"time"
	_ "time/tzdata" // time zones on machines that have no table of them

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

var stationKeys = []string{
	"name", "locator", "latitude_deg", "longitude_deg", "altitude_m", "geoid_height_m", "time_zone", "minimum_elevation_deg",
	"horizon_mask", "horizon_mask_file", "horizon_mask_kind", "merge_gap_s", "climate", "antennas", "uplink", "ground_line_bps",
}

// stations reads the stations; around is the environment of those that state none.
func (r *reader) stations(top object, around *propagation.Environment) []Station {
	if !top.has("stations") {
		switch r.need {
		case NeedOrbits:
			top.missing("stations", "at least one station")
		case NeedRadio:
			top.missing("stations", "at least one station with an antenna")
		}
		return nil
	}
	items := top.objects("stations", "stations", maxStations, stationKeys)
	called := names("station", items)
	out := make([]Station, len(items))
	for i, o := range items {
		o.about = "station " + called[i]
		out[i] = Station{Site: o.site(called[i]), Uplink: o.flag("uplink")}
		out[i].Line = unit.BitRate(o.numberOr("ground_line_bps", bitsASecond, 0))
		out[i].Climate, out[i].Environment = o.climate(&out[i].Site)
		if out[i].Environment == nil {
			out[i].Environment = around
		}
		out[i].Antennas = o.antennas()
		if !o.has("uplink") && canSend(out[i].Antennas) {
			out[i].Uplink = true
			o.assume("uplink left out: an antenna has a transmit side, so that the station can acknowledge")
		}
	}
	return out
}

func (o object) site(name string) station.Site {
	s := station.Site{Name: name}
	o.place(&s)
	s.Altitude = unit.Length(o.zeroLeftOut("altitude_m", span{low: -500, high: 9000, unit: "m", next: "give metres above the WGS-84 ellipsoid"}))
	s.GeoidHeight = unit.Length(o.zeroLeftOut("geoid_height_m", span{low: -120, high: 120, unit: "m"}))
	s.TimeZone = o.timeZone()
	s.MinimumElevation = unit.Angle(o.zeroLeftOut("minimum_elevation_deg", span{low: -5, high: 90, highOpen: true, unit: "deg"})) * unit.Degree
	s.Mask = o.mask()
	s.MergeGap = time.Duration(o.numberOr("merge_gap_s", atLeast(0, 86_400, "s"), 0) * float64(time.Second))
	return s
}

func (o object) timeZone() *time.Location {
	s, ok := o.text("time_zone")
	if !ok {
		return nil
	}
	zone, err := time.LoadLocation(s)
	if err != nil || s == "Local" {
		o.fault(o.get("time_zone"), "time_zone", "%s is not a time zone", "give a name of the IANA table, as Europe/London or UTC", quote(s))
		return nil
	}
	return zone
}
