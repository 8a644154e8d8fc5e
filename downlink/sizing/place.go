package sizing

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Place is what a site's links are made of.
type Place struct {
	// Clear is the link under a clear sky; its antenna is the template of the family.
	Clear downlink.LinkSpec
	// Weather is the path with the weather that plans are made for, and Statistics the
	// same for all percentages; both with the smallest aperture that will be asked for,
	// since scintillation is scaled down from it. Nil: the sky is always clear.
	Weather    *propagation.Path
	Statistics *propagation.PathSpec
}

// air is what a site's path takes at the rungs of its ladder.
type air struct {
	ladder            ladder
	frequency         unit.Frequency
	aperture          propagation.Aperture // that the scintillation below is for
	planned           *airColumns          // nil: always clear
	percent           []float64            // rising; empty: always clear
	logs              []float64            // natural logarithms of percent over 100
	months            []float64            // of the percentages of the worst month
	least, leastMonth float64              // shares of the first percentage
	yearly            []airColumns         // by percent
	notes             []propagation.Note
}

// airColumns are what the air takes beyond the clear sky at one percentage, by rung.
type airColumns struct {
	gas, wet, scintillation []float64 // dB: gas beyond the clear sky's, rain with cloud, fade
	brighter                []float64 // K that the sky is brighter than clear
}

func newAir(p *Place, lowestDeg float64) (*air, error) {
	a := &air{ladder: newLadder(lowestDeg), frequency: p.Clear.Transmitter.Frequency}
	if p.Weather == nil {
		return a, nil
	}
	if p.Statistics == nil {
		return nil, errors.New("a path with weather needs its statistics")
	}
	if ap := p.Statistics.Aperture; ap != nil {
		a.aperture = *ap
	}
	n := len(a.ladder.deg)
	a.planned = newAirColumns(n)
	shares := make([]propagation.ElevationShare, n)
	for i := range n {
		el := a.ladder.elevation(i)
		s, err := p.Weather.At(el)
		if err != nil {
			return nil, err
		}
		sky, err := p.Weather.Sky(el)
		if err != nil {
			return nil, err
		}
		a.planned.set(i, &s, sky)
		shares[i] = propagation.ElevationShare{Elevation: el, Share: 1 / float64(n)}
	}
	moving, err := propagation.NewMoving(*p.Statistics, shares)
	if err != nil {
		return nil, err
	}
	a.notes = moving.Notes()
	visited := 0 // rung by rung, the percentages of one after another
	moving.Each(func(i int, e propagation.Exceedance, s propagation.Sample, sky propagation.Sky) {
		if i == 0 {
			a.percent = append(a.percent, e.Percents())
			a.yearly = append(a.yearly, *newAirColumns(n))
		}
		k := visited
		if i > 0 {
			k %= len(a.percent)
		}
		a.yearly[k].set(i, &s, sky)
		visited++
	})
	return a, a.count()
}

// count prepares the percentages. That of the worst month is a power of that of the
// year between any two of them up to 30 %, and near one beyond (P.841-6 §1).
func (a *air) count() error {
	for _, p := range a.percent {
		m, err := propagation.WorstMonth(propagation.Exceedance(p) * propagation.Percent)
		if err != nil {
			return err
		}
		a.logs, a.months = append(a.logs, math.Log(p/100)), append(a.months, math.Log(min(1, float64(m))))
	}
	if len(a.logs) > 0 {
		a.least, a.leastMonth = math.Exp(a.logs[0]), math.Exp(a.months[0])
	}
	return nil
}

func newAirColumns(n int) *airColumns {
	all := make([]float64, 4*n)
	return &airColumns{all[:n], all[n : 2*n], all[2*n : 3*n], all[3*n:]}
}

func (c *airColumns) set(i int, s *propagation.Sample, k propagation.Sky) {
	c.gas[i], c.wet[i] = float64(s.Gas-s.ClearGas), float64(s.Rain+s.Cloud)
	c.scintillation[i] = float64(s.Scintillation)
	c.brighter[i] = max(0, k.Increase().Kelvins())
}

// smoothing returns by rung what an aperture leaves of the scintillation in the columns,
// as a factor: a larger one averages more of it out (P.618-14 §2.4.1, step 6).
func (a *air) smoothing(of propagation.Aperture) ([]float64, error) {
	out := make([]float64, len(a.ladder.deg))
	for i, el := range a.ladder.deg {
		out[i] = 1
		if a.aperture.Diameter == 0 || of == a.aperture {
			continue
		}
		at := unit.Angle(max(el, 0.1)) * unit.Degree
		fade := func(ap propagation.Aperture) (float64, error) {
			v, _, err := propagation.ScintillationFade(a.frequency, at, ap, 50, 1*propagation.Percent)
			return float64(v), err
		}
		was, err := fade(a.aperture)
		if err != nil {
			return nil, err
		}
		is, err := fade(of)
		if err != nil {
			return nil, err
		}
		if was > 0 {
			out[i] = is / was
		}
	}
	return out, nil
}

// loss returns by rung what C/N0 loses to the columns: attenuation beyond the clear
// sky's by P.618-14 equation (65), and the noise of the brighter sky.
func (c *airColumns) loss(smoothing, skyShare, noise, into []float64) {
	for i := range into {
		added := skyShare[i] * c.brighter[i]
		into[i] = c.gas[i] + math.Hypot(c.wet[i], smoothing[i]*c.scintillation[i])
		if added > 0 {
			into[i] += 10 * math.Log10(1+added/noise[i])
		}
	}
}

// front is a site's link with one antenna: what turns flux density into C/N0, by rung.
type front struct {
	antenna *station.Antenna
	clear   []float64   // dB to be added to the flux density under a clear sky
	planned []float64   // under the planned weather
	noise   []float64   // K, clear sky
	losses  [][]float64 // by rung, then by percentage: dB lost to the weather
	most    []float64   // by rung: the most of them
	usable  bool        // the pointing error stays in the main lobe
}

// standardRange is the range at which the front's budgets are made; it cancels.
const standardRange = 1000 * unit.Kilometre

// newFront evaluates the clear link with an antenna, its noise changed by extra kelvins
// at the first amplifier's input.
func (a *air) newFront(p *Place, antenna *station.Antenna, extra float64) (*front, error) {
	spec := p.Clear
	spec.Antenna = antenna
	link, err := downlink.NewLink(spec)
	if err != nil {
		return nil, err
	}
	n := len(a.ladder.deg)
	f := &front{antenna: antenna, clear: make([]float64, n), noise: make([]float64, n), planned: make([]float64, n), usable: true}
	share := make([]float64, n)
	for i := range n {
		boresight := unit.Angle(0)
		var off *unit.Angle
		if spec.Transmitter.Attitude != downlink.AttitudeTumbling {
			off = &boresight
		}
		g, err := link.StatedGeometry(standardRange, a.ladder.elevation(i), nil, off)
		if err != nil {
			return nil, err
		}
		b, err := link.At(g)
		if err != nil {
			return nil, err
		}
		t := b.SystemNoise.Kelvins()
		if math.IsNaN(t) {
			return nil, fmt.Errorf("antenna %q: its noise is not known", antenna.Name)
		}
		if !(t+extra > 0) {
			return nil, &unit.RangeError{Quantity: "system noise temperature", Value: t + extra, Unit: "K", Allowed: "greater than 0 K", Next: "take less off the noise"}
		}
		f.noise[i] = t + extra
		f.clear[i] = float64(b.CN0) - b.PowerFluxDensity - 10*math.Log10(f.noise[i]/t)
		f.usable = f.usable && b.Usable
		share[i] = link.SkyShare(a.ladder.elevation(i))
	}
	return f, f.weather(a, share)
}

// weather fills in what the weather takes.
func (f *front) weather(a *air, share []float64) error {
	copy(f.planned, f.clear)
	if a.planned == nil {
		return nil
	}
	smoothing, err := a.smoothing(propagation.Aperture{Diameter: f.antenna.Diameter, Efficiency: f.antenna.Efficiency})
	if err != nil {
		return err
	}
	loss := make([]float64, len(f.clear))
	a.planned.loss(smoothing, share, f.noise, loss)
	for i, v := range loss {
		f.planned[i] -= v
	}
	all := make([]float64, len(loss)*len(a.percent))
	for i := range loss {
		f.losses = append(f.losses, all[i*len(a.percent):(i+1)*len(a.percent)])
	}
	for k := range a.yearly {
		a.yearly[k].loss(smoothing, share, f.noise, loss)
		for i, v := range loss {
			f.losses[i][k] = v
		}
	}
	for i := range loss {
		f.most = append(f.most, slices.Max(f.losses[i]))
	}
	return nil
}

// under returns the share of the average year in which the weather at a place of the
// ladder takes more than slack dB, and with months that of its worst month (P.841), else
// NaN. Where the percentages leave it open, the greater share: as in downlink.Year, the last
// percentage counts to the end, and the first from the start.
func (f *front) under(a *air, at place, slack float64, months bool) (year, month float64) {
	switch {
	case slack < 0:
		return 1, 1
	case len(a.percent) == 0:
		return 0, 0
	case slack >= f.most[at.rung] && slack >= f.most[at.rung+1]: // as most samples do
		return a.least, a.leastMonth
	}
	low, high, w := f.losses[at.rung], f.losses[at.rung+1], float64(at.part)
	last := len(a.percent) - 1
	after := 0.0
	for k := last; k >= 0; k-- {
		e := low[k] + w*(high[k]-low[k]) - slack
		if e > 0 {
			if k == last {
				return 1, 1
			}
			part := e / (e - after) // straight in the logarithm of the percentage
			month = math.NaN()
			if months {
				month = math.Exp(a.months[k] + (a.months[k+1]-a.months[k])*part)
			}
			return math.Exp(a.logs[k] + (a.logs[k+1]-a.logs[k])*part), month
		}
		after = e
	}
	return a.least, a.leastMonth
}
