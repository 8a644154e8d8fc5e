package cli

import (
	"fmt"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/tuning"
	"slantwise/orbit/unit"
)

// tunedCarrier is a frequency at the station that changes along a pass: of what it
// receives, or of what it must send.
type tunedCarrier struct {
	nominal unit.Frequency
	at      func(t time.Time, rangeRate unit.Speed) unit.Frequency
	notes   []string
}

// Words of --locked: what a transmitter that is locked to its uplink hears.
const (
	lockedFollowing = "following" // the uplink is tuned so that the spacecraft hears its nominal frequency
	lockedSteady    = "steady"    // the uplink stays at its nominal frequency
)

var lockedWords = []string{lockedFollowing, lockedSteady}

// receivedCarrier is what a station receives of a transmitter.
func receivedCarrier(craft *scenario.Spacecraft, tx *downlink.Transmitter, locked string) (*tunedCarrier, error) {
	if locked == "" {
		c := &tunedCarrier{nominal: tx.Frequency}
		c.noteOscillator("transmitter "+tx.Name, tx.Oscillator)
		c.at = func(t time.Time, rate unit.Speed) unit.Frequency {
			return tuning.Received(tx.Frequency+tx.Oscillator.OffsetAt(t), rate)
		}
		return c, nil
	}
	r := tx.Turnaround
	if r == nil {
		return nil, inputErrorf("--locked: transmitter %q is not locked to an uplink; give it coherent with uplink and turnaround, or leave the flag out", tx.Name)
	}
	u := craft.Uplink(r.Uplink)
	c := &tunedCarrier{nominal: tx.Frequency}
	c.notes = []string{fmt.Sprintf("assumption: transmitter %s sends %d/%d of what it receives on uplink %s, which is %s; its own oscillator does not count", tx.Name, r.Down, r.Up, u.Name, locked)}
	if locked == lockedSteady {
		c.at = func(_ time.Time, rate unit.Speed) unit.Frequency {
			return tuning.Transponded(u.Frequency, r.Ratio(), rate)
		}
		return c, nil
	}
	c.noteOscillator("uplink "+u.Name, u.Oscillator)
	c.at = func(t time.Time, rate unit.Speed) unit.Frequency {
		return tuning.Received(unit.Frequency(r.Ratio()*(u.Frequency+u.Oscillator.OffsetAt(t)).Hertz()), rate)
	}
	return c, nil
}

// sentCarrier is what a station must send so that an uplink's receiver hears the
// frequency that it listens on.
func sentCarrier(u *downlink.Receiver) *tunedCarrier {
	c := &tunedCarrier{nominal: u.Frequency, at: func(t time.Time, rate unit.Speed) unit.Frequency {
		return tuning.SendFor(u.Frequency+u.Oscillator.OffsetAt(t), rate)
	}}
	c.notes = []string{"assumption: the station sends f / (1 - ṙ/c), so that the spacecraft receives f; the light time of the way up, some milliseconds, is left out"}
	c.noteOscillator("uplink "+u.Name, u.Oscillator)
	return c
}

func (c *tunedCarrier) noteOscillator(what string, o *downlink.Oscillator) {
	if o != nil {
		c.notes = append(c.notes, fmt.Sprintf("assumption: %s: the oscillator is %s; a straight line, worth no more than its last measurement", what, o))
	}
}
