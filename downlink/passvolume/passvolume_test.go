package passvolume_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"slantwise/downlink/passvolume"
)

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.9g, want %.9g, difference %.3g over %.3g", what, got, want, got-want, tol)
	}
}

// flat is 100 s at 70 dBHz, 8000 bit/s from 68 dBHz on.
func flat() passvolume.Pass {
	p := passvolume.Pass{}
	for i := range 101 {
		p.Seconds = append(p.Seconds, float64(i))
		p.CN0DBHz = append(p.CN0DBHz, 70)
		p.NeedDBHz = append(p.NeedDBHz, 68)
		p.RateBps = append(p.RateBps, 8000)
	}
	return p
}

func level(p *passvolume.Pass, dB float64) []float64 {
	return slices.Repeat([]float64{dB}, len(p.Seconds))
}

func volumes(t *testing.T, p passvolume.Pass) *passvolume.Result {
	t.Helper()
	r, err := passvolume.Distribute(&p)
	if err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for i, a := range r.Volumes {
		sum += a.Probability
		if i > 0 && !(a.Bytes > r.Volumes[i-1].Bytes) {
			t.Errorf("atom %d: %g B do not rise", i, a.Bytes)
		}
	}
	near(t, "all probabilities", sum, 1, 1e-12)
	return r
}

// TestFlatPass by hand: attenuation 4 dB in 0.1 % and 0 dB in 10 % of the time, straight
// over the logarithm: 2 dB, where the link fails, at 1 % of the time.
func TestFlatPass(t *testing.T) {
	p := flat()
	near(t, "clear sky", volumes(t, p).ClearSkyBytes, 100_000, 1e-9)
	p.ExceedancePercent = []float64{0.1, 10}
	p.AttenuationDB = [][]float64{level(&p, 4), level(&p, 0)}
	r := volumes(t, p)
	if len(r.Volumes) != 2 || r.Volumes[0].Bytes != 0 {
		t.Fatalf("got %+v, want nothing or all", r.Volumes)
	}
	near(t, "probability of nothing", r.Volumes[0].Probability, 0.01, 1e-12)
	near(t, "mean", r.Volumes.Mean(), 99_000, 1e-6)
	near(t, "sigma", r.Volumes.Sigma(), 100_000*math.Sqrt(0.01*0.99), 1e-6)
	near(t, "reached with 99 %", r.Volumes.ReachedWith(0.99), 100_000, 0)
	near(t, "reached with 99.5 %", r.Volumes.ReachedWith(0.995), 0, 0)
	near(t, "uncovered", r.Uncovered, 0.001, 1e-15)
	near(t, "held", r.Held, 0.9, 1e-15)
}

// TestCrossingAndLock by hand: C/N0 rises by 0.1 dB/s from 60 dBHz and falls again; 65
// dBHz are there from 50 s to 150 s. With a gap in the middle the lock is lost again.
func TestCrossingAndLock(t *testing.T) {
	p := passvolume.Pass{Seconds: []float64{0, 100, 200}, CN0DBHz: []float64{60, 70, 60}, NeedDBHz: []float64{65, 65, 65}, RateBps: []float64{800, 800, 800}}
	near(t, "no lock", volumes(t, p).ClearSkyBytes, 10_000, 1e-6)
	p.Lock = 7
	near(t, "locked once", volumes(t, p).ClearSkyBytes, 9_300, 1e-6)
	p.Seconds = []float64{0, 100, 120, 200}
	p.CN0DBHz = []float64{60, 70, 68, 60}
	p.NeedDBHz, p.RateBps = []float64{65, 65, 65, 65}, []float64{800, 0, 800, 800}
	near(t, "silent from 100 s to 120 s", volumes(t, p).ClearSkyBytes, 100*(50-7+30-7), 1e-6)
	p.RateBps[1] = 1600
	near(t, "a change of rate keeps the lock", volumes(t, p).ClearSkyBytes, 100*(50-7+2*20+30), 1e-6)
	p.Changes = []bool{false, true, true, false}
	near(t, "locking again after each change", volumes(t, p).ClearSkyBytes, 100*(50-7+2*(20-7)+30-7), 1e-6)
	p.CN0DBHz[1] = math.Inf(-1)
	near(t, "not usable at 100 s", volumes(t, p).ClearSkyBytes, 100*(30-7), 1e-6)
}

// drawn returns a distribution of random atoms.
func drawn(r *rand.Rand, atoms int) passvolume.Distribution {
	d := make(passvolume.Distribution, atoms)
	sum := 0.0
	for i := range d {
		d[i] = passvolume.Atom{Bytes: 1e9 * (float64(i) + r.Float64()), Probability: r.Float64() + 0.05}
		sum += d[i].Probability
	}
	for i := range d {
		d[i].Probability /= sum
	}
	return d
}

// TestSums compares with sums of draws: the means, the spread, and the quantiles.
func TestSums(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 9))
	var of []passvolume.Distribution
	mean, variance, sigmas := 0.0, 0.0, 0.0
	for i := range 12 {
		d := drawn(r, 1+i)
		of = append(of, d)
		mean += d.Mean()
		variance += d.Sigma() * d.Sigma()
		sigmas += d.Sigma()
	}
	independent, dependent := passvolume.Independent(of), passvolume.Dependent(of)
	near(t, "independent: mean", independent.Mean(), mean, 1e-6*mean)
	near(t, "dependent: mean", dependent.Mean(), mean, 1e-6*mean)
	near(t, "independent: sigma", independent.Sigma(), math.Sqrt(variance), 1e-3*math.Sqrt(variance))
	if s := dependent.Sigma(); s > sigmas*(1+1e-9) || s < math.Sqrt(variance) {
		t.Errorf("dependent: sigma %g, between %g and %g", s, math.Sqrt(variance), sigmas)
	}
	const n = 100_000
	apart, alike := make([]float64, n), make([]float64, n)
	for i := range n {
		u := r.Float64()
		for _, d := range of {
			apart[i] += quantile(d, r.Float64())
			alike[i] += quantile(d, u)
		}
	}
	slices.Sort(apart)
	slices.Sort(alike)
	for _, q := range []float64{0.5, 0.9, 0.95, 0.99} {
		at := int((1 - q) * n)
		// Three standard errors of the draws' quantile are covered by the draws 0.3 %
		// of probability to either side, the grid adds a step.
		check := func(name string, d passvolume.Distribution, draws []float64) {
			got := d.ReachedWith(q)
			low, high := draws[max(0, at-n*3/1000)], draws[at+n*3/1000]
			if step := mean / 2000; got < low-step || got > high+step {
				t.Errorf("%s, reached with %g: got %.6g, the draws have %.6g to %.6g", name, q, got, low, high)
			}
		}
		check("independent", independent, apart)
		check("dependent", dependent, alike)
	}
}

func quantile(d passvolume.Distribution, u float64) float64 {
	for _, a := range d {
		if u -= a.Probability; u <= 0 {
			return a.Bytes
		}
	}
	return d[len(d)-1].Bytes
}

// TestTwoCoins: two passes that bring 0 or 1000 B with equal chance.
func TestTwoCoins(t *testing.T) {
	coin := passvolume.Distribution{{Bytes: 0, Probability: 0.5}, {Bytes: 1000, Probability: 0.5}}
	both := []passvolume.Distribution{coin, coin}
	near(t, "independent: 1000 B or more", passvolume.Independent(both).ReachedWith(0.75), 1000, 1e-9)
	near(t, "independent: all", passvolume.Independent(both).ReachedWith(0.25), 2000, 1e-9)
	near(t, "dependent: with 0.51", passvolume.Dependent(both).ReachedWith(0.51), 0, 0)
	near(t, "dependent: all", passvolume.Dependent(both).ReachedWith(0.5), 2000, 0)
	if d := passvolume.Independent(nil); len(d) != 1 || d[0] != (passvolume.Atom{Bytes: 0, Probability: 1}) {
		t.Errorf("the sum of nothing: got %+v", d)
	}
	if d := passvolume.Dependent(nil); len(d) != 1 || d[0].Bytes != 0 || d[0].Probability != 1 {
		t.Errorf("the sum of nothing: got %+v", d)
	}
}

// TestNearlySure: passes that nearly surely bring all they can, none of them a whole
// number of points of the grid, keep their mean and all of the probability.
func TestNearlySure(t *testing.T) {
	var of []passvolume.Distribution
	mean := 0.0
	for i := range 40 {
		d := passvolume.Distribution{{Bytes: 0, Probability: 1e-4}, {Bytes: 1e9 + 12345678*float64(i), Probability: 1 - 1e-4}}
		of, mean = append(of, d), mean+d.Mean()
	}
	sum := passvolume.Independent(of)
	total := 0.0
	for _, a := range sum {
		total += a.Probability
	}
	near(t, "all probabilities", total, 1, 1e-12)
	near(t, "mean", sum.Mean(), mean, 1e-9*mean)
	if v := sum.ReachedWith(0.5); v < 0.99*mean {
		t.Errorf("reached with 50 %%: %g B of %g B", v, mean)
	}
}

func TestBadInput(t *testing.T) {
	for _, c := range []struct {
		change func(*passvolume.Pass)
		want   string
	}{
		{func(p *passvolume.Pass) { p.RateBps = p.RateBps[1:] }, "a pass needs columns of one length"},
		{func(p *passvolume.Pass) { p.Seconds[3] = 2 }, "sample 4: 2 s does not rise"},
		{func(p *passvolume.Pass) { p.CN0DBHz[0] = math.NaN() }, "sample 1: C/N0: NaN dBHz"},
		{func(p *passvolume.Pass) { p.NeedDBHz[0] = math.Inf(1) }, "sample 1: C/N0 needed: +Inf dBHz"},
		{func(p *passvolume.Pass) { p.RateBps[0] = -1 }, "sample 1: rate: -1 bit/s"},
		{func(p *passvolume.Pass) { p.Lock = -1 }, "lock-on time: -1 s"},
		{func(p *passvolume.Pass) { p.ExceedancePercent = []float64{1} }, "the pass has 1 exceedances and 0 curves"},
		{func(p *passvolume.Pass) {
			p.ExceedancePercent, p.AttenuationDB = []float64{1, 1}, [][]float64{level(p, 0), level(p, 0)}
		}, "exceedance 2: 1 %"},
		{func(p *passvolume.Pass) { p.ExceedancePercent, p.AttenuationDB = []float64{1}, [][]float64{{1}} }, "the attenuation exceeded in 1 % has 1 samples, the pass 101"},
		{func(p *passvolume.Pass) {
			p.ExceedancePercent, p.AttenuationDB = []float64{1}, [][]float64{level(p, math.NaN())}
		}, "attenuation exceeded in 1 %, sample 1: NaN dB"},
	} {
		p := flat()
		c.change(&p)
		if _, err := passvolume.Distribute(&p); err == nil || !strings.HasPrefix(err.Error(), c.want) {
			t.Errorf("got %v, want %s", err, c.want)
		}
	}
}

// At 0.5 % of the time the attenuation is 6.41 dB at the ends and 3.20 dB in the middle
// by hand, which leaves 45.5 MB; the part of the time that holds 0.5 % has 46.3 MB.
func ExampleDistribute() {
	p := passvolume.Pass{
		Seconds: []float64{0, 300, 600}, CN0DBHz: []float64{68, 76, 68}, NeedDBHz: []float64{66, 66, 66}, RateBps: []float64{1e6, 1e6, 1e6},
		ExceedancePercent: []float64{0.1, 1, 10},
		AttenuationDB:     [][]float64{{12, 6, 12}, {4, 2, 4}, {1, 0.5, 1}},
	}
	r, err := passvolume.Distribute(&p)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("clear sky %.1f MB; with 95 %% at least %.1f MB, with 99.5 %% at least %.1f MB\n",
		r.ClearSkyBytes/1e6, r.Volumes.ReachedWith(0.95)/1e6, r.Volumes.ReachedWith(0.995)/1e6)
	// Output: clear sky 75.0 MB; with 95 % at least 75.0 MB, with 99.5 % at least 46.3 MB
}

// A week of 40 passes at 1 s with ten exceedances, each distribution and both sums.
func BenchmarkWeek(b *testing.B) {
	var p passvolume.Pass
	for i := range 721 {
		x := float64(i-360) / 360
		p.Seconds, p.CN0DBHz = append(p.Seconds, float64(i)), append(p.CN0DBHz, 76-8*x*x)
		p.NeedDBHz, p.RateBps = append(p.NeedDBHz, 67), append(p.RateBps, 1e6)
	}
	for _, q := range []float64{0.01, 0.03, 0.1, 0.3, 1, 2, 5, 10, 20, 50} {
		p.ExceedancePercent = append(p.ExceedancePercent, q)
		p.AttenuationDB = append(p.AttenuationDB, level(&p, 1/math.Sqrt(q)))
	}
	b.ReportAllocs()
	for b.Loop() {
		var of []passvolume.Distribution
		for range 40 {
			r, err := passvolume.Distribute(&p)
			if err != nil {
				b.Fatal(err)
			}
			of = append(of, r.Volumes)
		}
		passvolume.Independent(of)
		passvolume.Dependent(of)
	}
}
