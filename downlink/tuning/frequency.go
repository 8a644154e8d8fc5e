package tuning

import "slantwise/orbit/unit"

// Received returns the frequency at which a carrier arrives, f (1 - ṙ/c), to first order
// as everywhere in this program: what relativity adds is (v/c)²/2 of the carrier, under
// 0.7 Hz at 2 GHz in a low orbit. rangeRate is positive for a spacecraft that recedes.
func Received(sent unit.Frequency, rangeRate unit.Speed) unit.Frequency {
	return unit.Frequency(sent.Hertz() * (1 - float64(rangeRate)/unit.SpeedOfLight))
}

// SendFor returns the frequency that a station must send so that the spacecraft receives
// wanted, wanted / (1 - ṙ/c): the inverse of Received, exactly.
//
// The range rate is that of the instant in which the wave passes the spacecraft, the
// range over the speed of light after it was sent: a table by the instant of sending is
// early by that, which is 2 ms and at most some hertz at 2 GHz from 550 km.
func SendFor(wanted unit.Frequency, rangeRate unit.Speed) unit.Frequency {
	return unit.Frequency(wanted.Hertz() / (1 - float64(rangeRate)/unit.SpeedOfLight))
}

// Transponded returns the frequency at which the station receives a spacecraft that sends
// ratio times what it receives from a station that sends sent: the shift of both ways, with
// the range rate taken as the same for both.
func Transponded(sent unit.Frequency, ratio float64, rangeRate unit.Speed) unit.Frequency {
	return Received(unit.Frequency(ratio*Received(sent, rangeRate).Hertz()), rangeRate)
}
