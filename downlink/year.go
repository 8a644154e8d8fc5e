package downlink

import (
	"errors"
	"math"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// Year is what the contacts of a moving satellite are worth over an average year: the
// link under a clear sky with the statistics of the path at every elevation, by Rec.
// ITU-R P.618-14 §8. The figures are marginals: how much of the contact time in all,
// not when, and nothing about two instants together.
type Year struct {
	link   *Link
	moving *propagation.Moving
	shares []propagation.ElevationShare
	cells  []meanCell
	time   float64 // s
}

// NewYear makes the statistics of contacts with a link under a clear sky. The spec is
// that of the link's path; its Exceedance is not used.
func NewYear(clear *Link, spec propagation.PathSpec, contacts *ContactCells) (*Year, error) {
	if contacts.seconds == 0 {
		return nil, errors.New("there is no contact to make statistics of")
	}
	y := &Year{link: clear, time: contacts.seconds}
	y.shares, y.cells = contacts.shares()
	var err error
	y.moving, err = propagation.NewMoving(spec, y.shares)
	return y, err
}

// ContactSeconds returns the time of all contacts.
func (y *Year) ContactSeconds() float64 { return y.time }

// Notes tells what the statistics take for granted.
func (y *Year) Notes() []Note {
	out := pathNotes(y.moving.Notes())
	return append(out, Note{Assumption, "the margin falls by the attenuation beyond the clear sky's and by the noise of the weather, both at the same percentage"})
}

// Attenuation returns the total attenuation that is exceeded during a fraction of
// contact time; a *unit.RangeError for fractions that the percentages cannot tell.
func (y *Year) Attenuation(fraction float64) (unit.DB, error) { return y.moving.Total(fraction) }

// UnderMargin returns the fraction of contact time during which the margin over the
// required one is less than m; also of the average worst month, P.841.
func (y *Year) UnderMargin(m unit.DB) (year, worstMonth propagation.Span) {
	always := y.ClearUnderMargin(m) // where the clear sky does not do, no weather does
	excess := func(i int, s propagation.Sample, k propagation.Sky) float64 {
		if y.clearUnder(i, m) {
			return -1
		}
		return float64(m) - y.marginOver(i, &s, k)
	}
	add := func(s propagation.Span) propagation.Span {
		return propagation.Span{Low: min(1, always+s.Low), High: min(1, always+s.High)} // 1 but for rounding
	}
	return add(y.moving.Exceeding(excess)), add(y.moving.ExceedingInWorstMonth(excess))
}

// ClearUnderMargin is UnderMargin if the sky were clear all year.
func (y *Year) ClearUnderMargin(m unit.DB) float64 {
	var f float64
	for i := range y.cells {
		if y.clearUnder(i, m) {
			f += y.shares[i].Share
		}
	}
	return f
}

func (y *Year) clearUnder(i int, m unit.DB) bool {
	c := &y.cells[i]
	return !c.usable || y.link.marginOverAt(c.cn0) < float64(m)
}

// cn0 is the C/N0 of a cell with what its path takes.
func (y *Year) cn0(i int, s *propagation.Sample, k propagation.Sky) float64 {
	c := &y.cells[i]
	added := y.link.SkyShare(y.shares[i].Elevation) * max(0, k.Increase().Kelvins())
	noise := 0.0
	if added > 0 {
		noise = 10 * math.Log10(1+added/c.noise)
	}
	return c.cn0 - float64(s.Total-s.ClearGas) - noise
}

func (y *Year) marginOver(i int, s *propagation.Sample, k propagation.Sky) float64 {
	return y.link.marginOverAt(y.cn0(i, s, k))
}

// marginOverAt is the margin over the required one at a C/N0; NaN without a data rate.
func (l *Link) marginOverAt(cn0 float64) float64 {
	r := result{cn0: cn0, usable: true}
	l.marginAndRate(&r)
	return r.marginOver
}

// SkyShare is the share of a rise of the sky's brightness that reaches the amplifier;
// 0 where the system noise is not known.
func (l *Link) SkyShare(elevation unit.Angle) float64 {
	if l.noise.kind == noiseUnknown {
		return 0
	}
	share := l.noise.share
	if n := l.spec.Antenna.Noise; n != nil && n.SpillOver != nil {
		share *= 1 - n.SpillOver.AtFrequency(l.Frequency()).Value(elevation)
	}
	return share
}

// YearVolume is what the contacts bring down, in bytes.
type YearVolume struct{ Mode, Achievable float64 }

// Volume returns the bytes of the contacts, in the mode while its margin is at least
// what is required and at the achievable rate, in the average year and if the sky
// were clear all year. Percentages of the year beyond the last evaluated count as
// that.
func (y *Year) Volume() (weather, clear YearVolume) {
	under, _ := y.UnderMargin(0)
	rate := float64(y.link.dataRate())
	weather.Mode, clear.Mode = rate*y.time*(1-under.High)/8, rate*y.time*(1-y.ClearUnderMargin(0))/8
	if rate == 0 {
		weather.Mode, clear.Mode = math.NaN(), math.NaN()
	}
	var before, last float64 // percentage as a fraction, and the rate there
	cell, sum := -1, 0.0
	close := func() { // the rest of the cell's year
		if cell >= 0 {
			sum += y.shares[cell].Share * last * (1 - before)
		}
	}
	y.moving.Each(func(i int, p propagation.Exceedance, s propagation.Sample, k propagation.Sky) {
		bps, _ := y.link.achievable(y.cn0(i, &s, k), y.cells[i].usable)
		if i != cell {
			close()
			cell, before, last = i, 0, bps
		}
		sum += y.shares[i].Share * (float64(p) - before) * (last + bps) / 2
		before, last = float64(p), bps
	})
	close()
	weather.Achievable = sum * y.time / 8
	for i, c := range y.cells {
		bps, _ := y.link.achievable(c.cn0, c.usable)
		clear.Achievable += y.shares[i].Share * bps * y.time / 8
	}
	return weather, clear
}
