package downlink

import (
	"errors"
	"fmt"

	"slantwise/orbit/unit"
)

// Validate returns every fault of the transmitter at once, its modes included.
func (t *Transmitter) Validate() error {
	var faults []error
	check := func(what string, v float64, u, allowed string, fine bool) {
		if !fine {
			faults = append(faults, &unit.RangeError{Quantity: what, Value: v, Unit: u, Allowed: allowed})
		}
	}
	between := func(what string, v, low, high float64, u string) {
		check(what, v, u, fmt.Sprintf("%g to %g %s", low, high, u), v >= low && v <= high)
	}
	f := t.Frequency.Megahertz()
	check("frequency", f, "MHz", "greater than 0 and at most 1e6 MHz", f > 0 && f <= 1e6)
	if t.EIRP != nil {
		between("EIRP", t.EIRP.DBW(), -200, 200, "dBW")
	} else {
		between("transmit power", t.Power.DBW(), -200, 100, "dBW")
		between("line loss", float64(t.LineLoss), 0, 100, "dB")
		if err := t.Pattern.Validate(); err != nil {
			faults = append(faults, err)
		} else if err := t.checkTumbling(); err != nil {
			faults = append(faults, err)
		}
		faults = append(faults, t.checkBody()...)
	}
	q := t.AttitudeProbability
	check("attitude probability", q, "", "greater than 0 and less than 1", q >= 0 && q < 1)
	if t.Polarization != nil {
		if err := t.Polarization.Check(); err != nil {
			faults = append(faults, err)
		}
	}
	between("implementation loss", float64(t.ImplementationLoss), 0, 100, "dB")
	between("required margin", float64(t.RequiredMargin), -100, 100, "dB")
	for _, l := range t.ExtraLosses {
		between(fmt.Sprintf("extra loss %q", l.Name), float64(l.Loss), 0, 1000, "dB")
	}
	between("allotted bandwidth", t.AllottedBandwidth.Megahertz(), 0, 1e6, "MHz")
	between("highest rate", t.HighestRate.BitsPerSecond(), 0, 1e15, "bit/s")
	for _, m := range t.Modes {
		if _, err := m.Resolve(); err != nil {
			faults = append(faults, fmt.Errorf("mode %q: %w", m.Name, err))
		}
	}
	return errors.Join(faults...)
}

// checkTumbling refuses a pattern whose gain the tumbling would need and that is not
// known, or is nothing.
func (t *Transmitter) checkTumbling() error {
	if t.Attitude != AttitudeTumbling || t.Pattern.WholeSphere() {
		return nil
	}
	if t.Pattern.Kind == CosinePower {
		return errors.New("a tumbling spacecraft shows every side of its antenna; give the pattern's back lobe")
	}
	last := unit.Angle(0)
	if g := t.Pattern.Grid; g != nil {
		last = g.Off[len(g.Off)-1]
	} else {
		last = t.Pattern.Table[len(t.Pattern.Table)-1].OffBoresight
	}
	return fmt.Errorf("a tumbling spacecraft shows every side of its antenna; continue the pattern's table from %g deg to 180 deg", asGiven(last))
}

// checkBody returns what is wrong with where the antenna sits and how the body turns.
func (t *Transmitter) checkBody() []error {
	var faults []error
	b := &t.Body
	degrees := func(what string, v unit.Angle, low, high float64) {
		if d := asGiven(v); !(d >= low && d <= high) {
			faults = append(faults, &unit.RangeError{Quantity: what, Value: d, Unit: "deg", Allowed: fmt.Sprintf("%g to %g deg", low, high)})
		}
	}
	degrees("boresight off body z", b.Boresight.OffZ, 0, 180)
	degrees("boresight around body z", b.Boresight.AroundZ, -360, 360)
	degrees("turn of the pattern", b.Turn, -360, 360)
	if b.Boresight.OffZ != 0 && !t.Attitude.HasBody() && t.Attitude != AttitudeUnstated {
		faults = append(faults, fmt.Errorf("with attitude %s the boresight has no place on the body; leave it out", t.Attitude))
	}
	if n := b.SpinAxis.Norm(); t.Attitude == AttitudeSpin && !(n > 1-1e-9 && n < 1+1e-9) {
		faults = append(faults, &unit.RangeError{Quantity: "length of the spin axis", Value: n, Allowed: "1"})
	}
	if t.Attitude == AttitudeHistory && b.History == nil {
		faults = append(faults, errors.New("attitude history has no records; give them"))
	}
	return faults
}

// attitudeProbability returns the probability that counts for a tumbling spacecraft.
func (t *Transmitter) attitudeProbability() float64 {
	if t.AttitudeProbability == 0 {
		return DefaultAttitudeProbability
	}
	return t.AttitudeProbability
}
