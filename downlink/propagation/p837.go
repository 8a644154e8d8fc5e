package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Month is the climate of one month of the average year.
type Month struct {
	Temperature unit.Temperature // mean at the surface
	Rainfall    float64          // mean total in mm
}

// Rain is the rain of an average year at a site, made from its twelve months by Rec.
// ITU-R P.837-7 Annex 1, steps 5 to 8.
type Rain struct {
	months      [12]rainMonth
	probability float64 // P0, %
}

// rainMonth holds the month's share of the year, its rain parameter r in mm/h and
// the probability of rain in %.
type rainMonth struct{ share, r, probability float64 }

// daysOfMonth are the Recommendation's: February has 28.25 days.
var daysOfMonth = [12]float64{31, 28.25, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}

// NewRain prepares the rain of a site from January to December.
func NewRain(months [12]Month) (*Rain, error) {
	var celsius, rainfall [12]float64
	for i, m := range months {
		celsius[i], rainfall[i] = m.Temperature.Kelvins()-273.15, m.Rainfall
	}
	return newRain(celsius, rainfall)
}

func newRain(celsius, rainfallMm [12]float64) (*Rain, error) {
	var rain Rain
	for i := range celsius {
		err := firstError(within("mean temperature", celsius[i], "deg C", -90, 60, "give degrees Celsius"),
			within("mean rainfall", rainfallMm[i], "mm", 0, 5000, "give millimetres a month"))
		if err != nil {
			return nil, fmt.Errorf("month %02d: %w", i+1, err)
		}
		m := rainMonth{share: daysOfMonth[i] / 365.25, r: 0.5874}
		if celsius[i] >= 0 {
			m.r *= math.Exp(0.0883 * celsius[i]) // equation (1)
		}
		hours := 24 * daysOfMonth[i]
		m.probability = 100 * rainfallMm[i] / (hours * m.r) // equation (2)
		if m.probability > 70 {                             // step 6b
			m.probability = 70
			m.r = 100.0 / 70 * rainfallMm[i] / hours
		}
		rain.months[i] = m
		rain.probability += m.share * m.probability // equation (3)
	}
	return &rain, nil
}

// exceeded returns the percentage of the year in which the rate is exceeded,
// equations (4) and (5).
func (r *Rain) exceeded(lnRate float64) float64 {
	var p float64
	for _, m := range r.months {
		if m.probability > 0 {
			p += m.share * m.probability * upperTail((lnRate+0.7938-math.Log(m.r))/1.26)
		}
	}
	return p
}

// Rate returns the rain rate exceeded for p of an average year: 0 where it rains
// less often. p must lie in (0, 1].
func (r *Rain) Rate(p Exceedance) (RainRate, error) {
	rate, err := r.rate(p.Percents())
	return RainRate(rate), err
}

func (r *Rain) rate(pPct float64) (float64, error) {
	if err := checkPercent(pPct); err != nil {
		return 0, err
	}
	if pPct >= r.probability {
		return 0, nil
	}
	low, high := math.Log(1e-12), math.Log(1e6)
	if r.exceeded(high) >= pPct || r.exceeded(low) <= pPct {
		return 0, fmt.Errorf("rain rate: no rate from 1e-12 to 1e6 mm/h is exceeded for %s %% of this climate; check the monthly figures",
			number(pPct))
	}
	for range 100 { // the exceedance falls with the rate; each step halves the bracket
		if mid := (low + high) / 2; r.exceeded(mid) > pPct {
			low = mid
		} else {
			high = mid
		}
	}
	return math.Exp((low + high) / 2), nil
}

// upperTail returns the share of the standard normal distribution above x.
func upperTail(x float64) float64 { return math.Erfc(x/math.Sqrt2) / 2 }
