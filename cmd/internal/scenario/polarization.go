package scenario

import (
	"slantwise/orbit/unit"
	"slantwise/station"
)

// polarization reads the polarisation of an antenna, nil where it is left out.
func (o object) polarization() *station.Polarization {
	if !o.has("polarization") {
		o.useless("without polarization", "axial_ratio_db", "polarization_tilt_deg")
		o.assume("polarization left out: no mismatch is counted, and up to 3 dB may hide there")
		return nil
	}
	word, given := o.word("polarization", "rhcp", "lhcp", "linear", "vertical", "horizontal")
	if !given {
		return nil
	}
	p := &station.Polarization{Kind: station.Linear}
	tilt := func(deg float64) { a := unit.Angle(deg) * unit.Degree; p.Tilt = &a }
	switch word {
	case "rhcp":
		p.Kind = station.RightHandCircular
	case "lhcp":
		p.Kind = station.LeftHandCircular
	case "horizontal":
		tilt(0)
	case "vertical":
		tilt(90)
	}
	if word == "linear" {
		if v, ok := o.number("polarization_tilt_deg", span{low: -180, high: 180, unit: "deg"}); ok {
			tilt(v)
		} else if !o.has("polarization_tilt_deg") {
			o.assume("polarization_tilt_deg left out: the tilt is not known")
		}
	} else {
		o.useless("with polarization: "+word, "polarization_tilt_deg")
	}
	o.axialRatio(p)
	return p
}

func (o object) axialRatio(p *station.Polarization) {
	if v, ok := o.number("axial_ratio_db", span{low: 0, high: 100, unit: "dB"}); ok {
		ratio := unit.DB(v)
		p.AxialRatio = &ratio
		return
	}
	if o.has("axial_ratio_db") {
		return
	}
	if p.Kind == station.Linear {
		o.assume("axial_ratio_db left out: purely linear")
	} else {
		o.assume("axial_ratio_db left out: purely circular, 0 dB")
	}
}

var (
	lossKeys            = []string{"name", "loss_db"}
	lossDissipativeKeys = []string{"name", "loss_db", "dissipative"}
)

// losses reads extra_losses; dissipative ones where they may be so.
func (o object) losses(mayDissipate bool) []station.Loss {
	known := lossKeys
	if mayDissipate {
		known = lossDissipativeKeys
	}
	items := o.objects("extra_losses", "losses with name and loss_db", maxParts, known)
	called := names("loss", items)
	var out []station.Loss
	for i, it := range items {
		out = append(out, station.Loss{
			Name:        called[i],
			Loss:        unit.DB(it.required("loss_db", lossDB, "the loss")),
			Dissipative: it.flag("dissipative"),
		})
	}
	return out
}
