package acceptance

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// check returns every fault of the readings.
func (m *Readings) check() error {
	var faults []error
	within := func(what string, v, low, high float64, u, allowed string) {
		if !(v >= low && v <= high) {
			faults = append(faults, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
		}
	}
	within("frequency", m.Frequency.Megahertz(), 1, 1e6, "MHz", "1 to 1e6 MHz")
	if len(m.YDB) == 0 {
		faults = append(faults, errors.New("noise ratio: there is no reading; give at least one"))
	}
	for i, y := range m.YDB {
		if !(y > 0 && y <= 60) {
			faults = append(faults, &unit.RangeError{Quantity: fmt.Sprintf("noise ratio %d", i+1), Value: y, Unit: "dB", Allowed: "greater than 0 and at most 60 dB",
				Next: "the noise on the source must stand above that of the cold sky"})
		}
	}
	within("uncertainty of the noise ratio", m.YSigmaDB, 0, 20, "dB", "0 to 20 dB")
	if mean, _ := meanOf(m.YDB); len(m.YDB) > 0 && !(mean-m.YSigmaDB/2 > 0) {
		faults = append(faults, errors.New("noise ratio: its uncertainty reaches down to no rise at all; take a stronger source or average for longer"))
	}
	if !(m.Flux.Value > 0 && !math.IsInf(m.Flux.Value, 1)) {
		faults = append(faults, &unit.RangeError{Quantity: "flux density", Value: m.Flux.Value, Unit: "W/(m2 Hz)", Allowed: "greater than 0 and finite"})
	}
	share := func(what string, q Quantity) {
		if !(q.Sigma >= 0 && (q.Sigma == 0 || q.Sigma < q.Value)) {
			faults = append(faults, &unit.RangeError{Quantity: "uncertainty of the " + what, Value: q.Sigma, Allowed: fmt.Sprintf("0 or greater and less than the value, %g", q.Value)})
		}
	}
	share("flux density", m.Flux)
	within("diameter of the source", m.DiameterDeg.Value, 0, 5, "deg", "0 to 5 deg")
	share("diameter", m.DiameterDeg)
	if !(m.BeamDeg.Value > 0 && m.BeamDeg.Value <= 360) {
		faults = append(faults, &unit.RangeError{Quantity: "beamwidth", Value: m.BeamDeg.Value, Unit: "deg", Allowed: "greater than 0 and at most 360 deg"})
	}
	share("beamwidth", m.BeamDeg)
	within("attenuation of the air", m.Attenuation.Value, 0, 50, "dB", "0 to 50 dB")
	within("uncertainty of the attenuation", m.Attenuation.Sigma, 0, 50, "dB", "0 to 50 dB")
	within("pointing loss", m.PointingDB.Value, 0, 20, "dB", "0 to 20 dB")
	within("uncertainty of the pointing loss", m.PointingDB.Sigma, 0, 20, "dB", "0 to 20 dB")
	return errors.Join(faults...)
}
