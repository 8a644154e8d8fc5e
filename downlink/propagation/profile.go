package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Level is one level of a measured profile.
type Level struct {
	Height      unit.Length // above mean sea level
	Temperature unit.Temperature
	Pressure    Pressure // total
	Vapour      VapourDensity
}

// MeasuredProfile returns the air of a sounding, at least two levels of rising
// height. Between levels the temperature is linear in height, the pressure and the
// vapour in their logarithms (vapour linear where a level has none). Above the last
// level the mean annual global reference atmosphere follows, joined on by WithSurface's rule; below the first
// there is no air known, and a station there is refused.
func MeasuredProfile(levels []Level) (Atmosphere, error) {
	if len(levels) < 2 {
		return Atmosphere{}, fmt.Errorf("measured profile: %d levels; give two or more of rising height", len(levels))
	}
	heights := make([]float64, len(levels))
	states := make([]air, len(levels))
	for i, l := range levels {
		heights[i] = l.Height.Kilometres()
		states[i] = air{l.Temperature.Kelvins(), l.Pressure.Hectopascals(), l.Vapour.GramsPerCubicMetre()}
		if err := checkLevel(i, heights, states[i]); err != nil {
			return Atmosphere{}, err
		}
	}
	last := len(levels) - 1
	above, err := joined(globalReference, heights[last], states[last])
	if err != nil {
		return Atmosphere{}, fmt.Errorf("measured profile: last level: %w", err)
	}
	return Atmosphere{fmt.Sprintf("measured profile of %d levels, %s km to %s km", len(levels), number(heights[0]), number(heights[last])),
		func(h float64) air {
			if h >= heights[last] {
				return above(h)
			}
			return between(heights, states, h)
		}}, nil
}

func checkLevel(i int, heights []float64, a air) error {
	err := firstError(within("height", heights[i], "km", -0.5, topKm, ""), checkAirTemperature(a.tK),
		within("pressure", a.hPa, "hPa", 0, 1200, ""), within("water vapour density", a.rho, "g/m3", 0, 100, ""))
	if err == nil && i > 0 && !(heights[i] > heights[i-1]) {
		err = &unit.RangeError{Quantity: "height", Value: heights[i], Unit: "km",
			Allowed: "above the level before at " + withUnit(heights[i-1], "km")}
	}
	if err == nil && vapourPressure(a.rho, a.tK) > a.hPa {
		err = &unit.RangeError{Quantity: "water vapour density", Value: a.rho, Unit: "g/m3",
			Allowed: "less than the total pressure holds", Next: "give the total pressure, vapour included"}
	}
	if err != nil {
		return fmt.Errorf("measured profile: level %d: %w", i+1, err)
	}
	return nil
}

// between interpolates in a measured profile; below its first level it returns NaN,
// which newLayers refuses.
func between(heights []float64, states []air, h float64) air {
	if h < heights[0] {
		return air{math.NaN(), math.NaN(), math.NaN()}
	}
	i := 1
	for heights[i] <= h {
		i++
	}
	a, b := states[i-1], states[i]
	w := (h - heights[i-1]) / (heights[i] - heights[i-1])
	return air{a.tK + w*(b.tK-a.tK), geometric(a.hPa, b.hPa, w), geometric(a.rho, b.rho, w)}
}

// geometric interpolates in the logarithm, or linearly where an end is 0.
func geometric(a, b, w float64) float64 {
	if a > 0 && b > 0 {
		return a * math.Pow(b/a, w)
	}
	return a + w*(b-a)
}

// Surface states the air at a station; nil fields are left to the profile.
type Surface struct {
	Temperature *unit.Temperature
	Pressure    *Pressure // total
	Vapour      *VapourDensity
}

// WithSurface returns the profile moved so that it has the stated air at a height:
// pressure and vapour density in proportion at all heights, the temperature by a
// difference that shrinks linearly to nothing 11 km above. The rule is this
// package's; P.676-13 only says that local profiles are to be preferred.
func (a Atmosphere) WithSurface(height unit.Length, s Surface) (Atmosphere, error) {
	h := height.Kilometres()
	if err := checkStationHeight(h); err != nil {
		return Atmosphere{}, err
	}
	want := a.at(h)
	name := a.name
	if s.Temperature != nil {
		want.tK = s.Temperature.Kelvins()
		name += fmt.Sprintf(", %s K at the surface", number(want.tK))
	}
	if s.Pressure != nil {
		want.hPa = s.Pressure.Hectopascals()
		name += fmt.Sprintf(", %s hPa", number(want.hPa))
	}
	if s.Vapour != nil {
		want.rho = s.Vapour.GramsPerCubicMetre()
		name += fmt.Sprintf(", %s g/m3", number(want.rho))
	}
	if err := checkLevel(0, []float64{h}, want); err != nil {
		return Atmosphere{}, err
	}
	at, err := joined(a.at, h, want)
	return Atmosphere{name, at}, err
}

// joined moves a profile so that it passes through want at height h0.
func joined(base func(float64) air, h0 float64, want air) (func(float64) air, error) {
	have := base(h0)
	pressure, err := proportion("pressure", want.hPa, have.hPa, "hPa")
	if err != nil {
		return nil, err
	}
	vapour, err := proportion("water vapour density", want.rho, have.rho, "g/m3")
	if err != nil {
		return nil, err
	}
	dT := want.tK - have.tK
	return func(h float64) air {
		a := base(h)
		a.tK += dT * math.Max(0, 1-math.Max(0, h-h0)/11)
		a.hPa *= pressure
		a.rho *= vapour
		return a
	}, nil
}

// proportion returns want/have, 1 where both are 0.
func proportion(quantity string, want, have float64, unitName string) (float64, error) {
	if want == have {
		return 1, nil
	}
	if have > 0 {
		return want / have, nil
	}
	return 0, &unit.RangeError{Quantity: quantity, Value: want, Unit: unitName, Allowed: "0: the profile has none at this height",
		Next: "choose another reference atmosphere"}
}

// WithColumn returns the profile with its vapour in proportion, so that the
// vertical column above a height holds the stated mass.
func (a Atmosphere) WithColumn(height unit.Length, vapour Column) (Atmosphere, error) {
	if err := firstError(checkStationHeight(height.Kilometres()),
		within("integrated water vapour", float64(vapour), "kg/m2", 0, 150, "")); err != nil {
		return Atmosphere{}, err
	}
	ratio, err := proportion("integrated water vapour", float64(vapour), a.column(height.Kilometres()), "kg/m2")
	if err != nil {
		return Atmosphere{}, err
	}
	base := a.at
	return Atmosphere{fmt.Sprintf("%s, vapour column %s kg/m2", a.name, number(float64(vapour))), func(h float64) air {
		s := base(h)
		s.rho *= ratio
		return s
	}}, nil
}

// column returns the mass of vapour above a height in kg/m² (g/m³ times km), by
// Simpson's rule over steps of 25 m to 15 km and 425 m above; the reference profiles
// hold nothing that is finer.
func (a Atmosphere) column(h0 float64) float64 {
	simpson := func(lo, hi float64, n int) float64 {
		step := (hi - lo) / float64(2*n)
		sum := a.at(lo).rho + a.at(hi).rho
		for i := 1; i < 2*n; i++ {
			sum += float64(2+2*(i%2)) * a.at(lo+float64(i)*step).rho
		}
		return sum * step / 3
	}
	return simpson(h0, h0+15, 300) + simpson(h0+15, topKm, 100)
}

// globalReference is the mean annual global reference atmosphere at 7.5 g/m³.
func globalReference(h float64) air { return globalAir(h, 7.5) }
