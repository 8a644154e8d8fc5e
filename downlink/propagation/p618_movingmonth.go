package propagation

// Each hands over what the path takes in every interval at every percentage evaluated,
// the percentages rising within an interval.
func (m *Moving) Each(visit func(interval int, p Exceedance, s Sample, k Sky)) {
	for i := range m.shares {
		for k, p := range m.percent {
			visit(i, Exceedance(p)*Percent, m.samples[k][i], m.skies[k][i])
		}
	}
}

// ExceedingInWorstMonth is Exceeding for the average worst month: at each elevation the
// percentage of the year becomes that of the worst month by P.841-6 with its global
// values. What holds all the year holds all the month.
func (m *Moving) ExceedingInWorstMonth(excess func(interval int, s Sample, k Sky) float64) Span {
	var total Span
	for i, share := range m.shares {
		one := m.interval(i, excess)
		total.Low += share.Share * monthOf(one.Low)
		total.High += share.Share * monthOf(one.High)
	}
	return total
}

func monthOf(year float64) float64 {
	if year <= 0 || year >= 1 {
		return year
	}
	return min(1, worstMonth(100*year)/100)
}
