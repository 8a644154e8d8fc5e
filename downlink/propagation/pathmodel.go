package propagation

import "math"

// cloudLayerKm is the thickness of the layer that stands for cloud under 5°.
const cloudLayerKm = 2

// fill writes every part at a geometric elevation from the horizon to 90°, with the
// attenuation of gas already known. Under 0° rain, cloud and scintillation are those
// of 0°, which a note says.
func (m *pathModel) fill(into *[columns]float64, elDeg, gas, clearGas float64) {
	el := math.Max(0, elDeg)
	into[colGas], into[colClearGas] = gas, clearGas
	into[colCloud] = m.cloudZenith * cloudSlant(el)
	into[colRain], into[colScintillation] = 0, 0
	if m.rain != nil {
		into[colRain] = m.rain.attenuation(el, m.pPct)
	}
	if m.scintillation != nil {
		into[colScintillation] = m.fadeSquared(el)
	}
}

// direct evaluates everything at an elevation, rays traced.
func (m *pathModel) direct(elDeg float64) (v [columns]float64, err error) {
	gas, err := m.gas.direct(elDeg)
	if err != nil {
		return v, err
	}
	clearGas, err := m.clearGas.direct(elDeg)
	if err != nil {
		return v, err
	}
	m.fill(&v, elDeg, gas, clearGas)
	return v, nil
}

// fadeSquared returns the square of the scintillation fade at 0° to 90°.
func (m *pathModel) fadeSquared(elDeg float64) float64 {
	if elDeg >= 5 {
		return m.scintillation.fadeSquared(elDeg, m.pPct)
	}
	if m.low != nil {
		f := m.low.fade(elDeg)
		return f * f
	}
	return m.scintillation.continuedSquared(elDeg, m.pPct)
}

// continuedSquared continues fadeSquared under 5° with the mean of the two sines of
// equation (43) in place of the sine of step 7, in proportion so that it joins at 5°.
func (s scintillation) continuedSquared(elDeg, pPct float64) float64 {
	sinEl := math.Sin(radians(elDeg))
	g2 := averagingSquared(s.averagingArgument(sinEl))
	if g2 <= 0 {
		return 0
	}
	const sin5 = 0.087155742747658174 // sine of 5°
	scale := s.timeFactor(pPct) * s.reference() * math.Pow(flatSine(sin5)/(flatSine(sinEl)*sin5), 1.2)
	return scale * scale * g2
}

func flatSine(sinEl float64) float64 { return (math.Sqrt(sinEl*sinEl+flatSky) + sinEl) / 2 }

// cloudSlant returns the path through cloud in units of the vertical one.
func cloudSlant(elDeg float64) float64 {
	sinEl := math.Sin(radians(elDeg))
	if elDeg >= 5 {
		return 1 / sinEl
	}
	sin5 := math.Sin(radians(5))
	return curvedSlant(sinEl, cloudLayerKm) / curvedSlant(sin5, cloudLayerKm) / sin5
}

// breaks returns the elevations between the horizon and 90° between which every part
// of the path is smooth, in rising order.
func (m *pathModel) breaks() []float64 {
	b := []float64{m.horizon()}
	if m.horizon() < 0 {
		b = append(b, 0)
	}
	for _, c := range []*gasCurve{m.gas, m.clearGas} {
		if c.horizonDeg > m.horizon() && c.horizonDeg < 0 { // rays from under the horizontal begin
			b = append(b, c.horizonDeg)
		}
	}
	if m.low != nil {
		if el := m.low.transitionDeg(); el > 0 && el < 5 {
			b = append(b, el)
		}
	}
	b = append(b, 5)
	if m.scintillation != nil {
		if el := m.scintillation.averagedOutFrom(); el < 90 {
			b = append(b, el)
		}
	}
	if m.rain != nil {
		b = append(b, m.rain.kinks()...)
		if math.Abs(m.rain.site.latDeg) < 36 && m.pPct < 1 {
			b = append(b, 25)
		}
	}
	return sortedUnique(append(b, 60, 90)) // 60°: from here up the zenith's variable
}

// horizon is the lowest geometric elevation from which every part has a value.
func (m *pathModel) horizon() float64 { return math.Max(m.gas.lowestDeg(), m.clearGas.lowestDeg()) }

// kinks returns the elevations above 0° at which step 7 of P.618-14 §2.2.1.1 changes
// its branch.
func (r *rainPath) kinks() []float64 {
	if r.site.rainKm <= r.site.stationKm || r.site.rateMmH == 0 {
		return nil
	}
	var found []float64
	const step = 0.25
	for el := step; el < 90-step; el += step {
		low, high := el, el+step
		side := r.steep(low)
		if r.steep(high) == side {
			continue
		}
		for range 50 {
			if mid := (low + high) / 2; r.steep(mid) == side {
				low = mid
			} else {
				high = mid
			}
		}
		found = append(found, high)
	}
	return found
}
