package fit_test

import (
	"context"
	"math"
	"sync"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/fit"
)

// Fits to positions with errors of a normal law scatter about the true orbit as their
// covariance says: 150 draws know a standard deviation to 1/√300 = 5.8 %, and three times
// that is asked for; the mean of the covariances is what is compared.
func TestCovarianceAgainstScatter(t *testing.T) {
	const draws = 150
	el := wagtail()
	clean := ephemeris(t, el, el.Epoch, 12*time.Hour, 10*time.Minute, false)
	truth, err := orbit.NewPropagation(el)
	if err != nil {
		t.Fatal(err)
	}
	at := []time.Duration{0, 6 * time.Hour, 12 * time.Hour, 36 * time.Hour}
	scatter, formal := make([][3]float64, len(at)), make([][3]float64, len(at))
	for seed := range uint64(draws) {
		r, err := fit.Fit(context.Background(), noisy(clean, 30, seed), fit.Options{Epoch: el.Epoch.Add(12 * time.Hour)})
		if err != nil {
			t.Fatal(err)
		}
		p, err := orbit.NewPropagation(r.Elements)
		if err != nil {
			t.Fatal(err)
		}
		for i, d := range at {
			when := el.Epoch.Add(d)
			want, v, err := truth.At(when)
			if err != nil {
				t.Fatal(err)
			}
			got, _, err := p.At(when)
			if err != nil {
				t.Fatal(err)
			}
			c, err := r.Uncertainty.Covariance(when)
			if err != nil {
				t.Fatal(err)
			}
			if err := c.Validate(); err != nil {
				t.Fatal(err)
			}
			off := got.Sub(want)
			across := want.Cross(v).Unit()
			radial := want.Unit()
			for j, axis := range []orbit.Vec3{radial, across.Cross(radial), across} {
				scatter[i][j] += off.Dot(axis) * off.Dot(axis) / draws
				formal[i][j] += c[j][j] / draws
			}
		}
	}
	for i, d := range at {
		for j, axis := range []string{"radial", "along", "across"} {
			s, f := math.Sqrt(scatter[i][j]), math.Sqrt(formal[i][j])
			t.Logf("%v %s: scatter %.2f m, covariance %.2f m", d, axis, s, f)
			if math.Abs(s/f-1) > 3/math.Sqrt(2*draws) {
				t.Errorf("%v %s: scatter %g m, covariance %g m", d, axis, s, f)
			}
		}
	}
}

// Residuals that last from datum to datum count as fewer data, and are part of the spread.
func TestLastingResiduals(t *testing.T) {
	el := wagtail()
	data := ephemeris(t, el, el.Epoch, 12*time.Hour, time.Minute, false)
	white := noisy(data, 100, 5)
	waves := append([]fit.Datum(nil), data...)
	for i := range waves { // three to a revolution, which no element can follow
		waves[i].Position = waves[i].Position.Add(waves[i].Position.Unit().Scale(245 * math.Sin(6*math.Pi*float64(i)/94.6)))
	}
	var spread [2]float64
	for i, c := range []struct {
		data      []fit.Datum
		low, high float64 // of DataPerIndependent
	}{{white, 1, 1.2}, {waves, 20, 1e4}} {
		r, err := fit.Fit(context.Background(), c.data, fit.Options{BStar: &el.BStar})
		if err != nil {
			t.Fatal(err)
		}
		s, err := r.Uncertainty.At(el.Epoch.Add(6 * time.Hour))
		if err != nil {
			t.Fatal(err)
		}
		spread[i] = s.Total().Metres()
		t.Logf("RMS %.1f m, %.2f data say as much as one, spread %.1f m: %s", r.RMS, r.DataPerIndependent, spread[i], r.Uncertainty.Basis())
		if r.DataPerIndependent < c.low || r.DataPerIndependent > c.high {
			t.Errorf("data per independent %g, want %g to %g", r.DataPerIndependent, c.low, c.high)
		}
	}
	// 173 m of white noise in 721 positions: 173·√(6/2163) = 9 m. As much of waves stays.
	if spread[0] > 40 || spread[1] < 150 {
		t.Errorf("spreads %v m, want about 10 and 170", spread)
	}
}

func TestUncertaintyIsShared(t *testing.T) {
	el := wagtail()
	r, err := fit.Fit(context.Background(), noisy(ephemeris(t, el, el.Epoch, 12*time.Hour, 5*time.Minute, true), 100, 1), fit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	want, err := r.Uncertainty.At(el.Epoch)
	if err != nil {
		t.Fatal(err)
	}
	var all sync.WaitGroup
	for range 4 {
		all.Go(func() {
			for range 50 {
				if got, err := r.Uncertainty.At(el.Epoch); err != nil || got != want {
					t.Errorf("got %v, %v, want %v", got, err, want)
				}
			}
		})
	}
	all.Wait()
}

// The rule by age that a fit gives is within a fifth of the spread over the week that it is for.
func TestAgeRule(t *testing.T) {
	el := wagtail()
	data := ephemeris(t, el, el.Epoch, 24*time.Hour, 5*time.Minute, false)
	for i := range data {
		data[i].Position = data[i].Position.Add(data[i].Position.Unit().Scale(245 * math.Sin(6*math.Pi*float64(i)/18.92)))
	}
	r, err := fit.Fit(context.Background(), data, fit.Options{BStar: &el.BStar})
	if err != nil {
		t.Fatal(err)
	}
	rule, err := r.Uncertainty.AgeRule()
	if err != nil || rule.Validate() != nil {
		t.Fatal(err, rule.Validate())
	}
	u := orbit.AgeUncertainty{Rule: rule, Epoch: r.Elements.Epoch}
	for d := range 8 {
		var along, want float64
		for k := range 12 {
			at := r.Elements.Epoch.Add(time.Duration(d)*day + time.Duration(k)*8*time.Minute)
			s, err := r.Uncertainty.At(at)
			if err != nil {
				t.Fatal(err)
			}
			byAge, err := u.At(at)
			if err != nil {
				t.Fatal(err)
			}
			along += byAge.Along.Metres() / 12
			want += s.Along.Metres() / 12
		}
		t.Logf("day %d: along %.0f m by the rule, %.0f m by the covariance", d, along, want)
		if math.Abs(along/want-1) > 0.2 {
			t.Errorf("day %d: along %g m by the rule, %g m by the covariance", d, along, want)
		}
	}
}
