package propagation

import "math"

// P.841-6 §1: coefficients for global planning.
const (
	worstMonthQ1   = 2.85
	worstMonthBeta = 0.13
)

// WorstMonth returns the percentage of the average worst month that belongs to a
// percentage of the average year, for the global values Q1 = 2.85 and beta = 0.13.
// Source: Rec. ITU-R P.841-6 §1, equations (1) and (2).
func WorstMonth(year Exceedance) (Exceedance, error) {
	if err := checkPercent(year.Percents()); err != nil {
		return 0, err
	}
	return Exceedance(worstMonth(year.Percents())) * Percent, nil
}

func worstMonth(pPct float64) float64 {
	q3 := worstMonthQ1 * math.Pow(3, -worstMonthBeta)
	switch {
	case pPct < math.Pow(worstMonthQ1/12, 1/worstMonthBeta):
		return 12 * pPct // all of it in one month
	case pPct <= 3:
		return worstMonthQ1 * math.Pow(pPct, 1-worstMonthBeta)
	case pPct <= 30:
		return q3 * pPct
	}
	return q3 * math.Pow(pPct/30, math.Log10(q3)/math.Log10(0.3)) * pPct
}
