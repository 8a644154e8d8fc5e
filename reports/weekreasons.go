package reports

import (
	"slices"
	"time"
)

// middles are the medians of a spacecraft's passes, against which one of them is judged.
type middles struct{ elevation, seconds, margin float64 }

func (w *week) middles() map[string]middles {
	columns := map[string]*[3][]float64{}
	for _, p := range w.passes {
		c := columns[p.spacecraft]
		if c == nil {
			c = new([3][]float64)
			columns[p.spacecraft] = c
		}
		for k, v := range [3]float64{p.maxElevationDeg, p.los.Sub(p.aos).Seconds(), p.greatest} {
			if finite(v) {
				c[k] = append(c[k], v)
			}
		}
	}
	out := map[string]middles{}
	for name, c := range columns {
		out[name] = middles{middle(c[0]), middle(c[1]), middle(c[2])}
	}
	return out
}

// middle is the median, of an even number the mean of the two; NaN for none.
func middle(values []float64) float64 {
	if len(values) == 0 {
		return leastOf(nil)
	}
	s := slices.Sorted(slices.Values(values))
	return (s[(len(s)-1)/2] + s[len(s)/2]) / 2
}

// reasons say why a pass brings what it does, against the median pass of its spacecraft.
func (p *weekPass) reasons(m middles) []string {
	out := []string{"up to " + fixed(p.maxElevationDeg, 1) + "°" + offBy(p.maxElevationDeg-m.elevation, "° higher", "° lower", 1)}
	length := p.los.Sub(p.aos)
	text := "lasts " + span(length)
	if by := length.Seconds() - m.seconds; by >= 1 || by <= -1 {
		word := " longer"
		if by < 0 {
			by, word = -by, " shorter"
		}
		text += ", " + span(time.Duration(by*float64(time.Second))) + word
	}
	out = append(out, text)
	switch p.verdict.state {
	case neverCloses:
		out = append(out, "the margin reaches "+fixed(p.greatest, 1)+" dB at most, "+fixed(p.required-p.greatest, 1)+" dB short of what is required")
	case closesPartly:
		out = append(out, "closes for "+p.verdict.Closed()+" of it, margin up to "+fixed(p.greatest, 1)+" dB"+offBy(p.greatest-m.margin, " dB more", " dB less", 1))
	case closesThrough:
		out = append(out, "closes throughout, margin up to "+fixed(p.greatest, 1)+" dB"+offBy(p.greatest-m.margin, " dB more", " dB less", 1))
	}
	if p.cut != "" {
		out = append(out, "the window cuts it")
	}
	if p.sunInBeam > 0 {
		out = append(out, "the Sun is in the beam for "+span(time.Duration(p.sunInBeam*float64(time.Second))))
	}
	if p.beamUnsure > 0 {
		out = append(out, "the beam is too narrow to be sure of for "+span(time.Duration(p.beamUnsure*float64(time.Second))))
	}
	if p.surety != nil && p.surety.MayVanish {
		out = append(out, "it grazes the horizon and takes place with "+fixed(100*p.surety.Existence, 0)+" %")
	}
	return out
}

// offBy says by how much a value is off the median, nothing where it is not.
func offBy(by float64, more, less string, decimals int) string {
	word := more
	if by < 0 {
		by, word = -by, less
	}
	if s := fixed(by, decimals); finite(by) && s != fixed(0, decimals) {
		return ", " + s + word
	}
	return ""
}
