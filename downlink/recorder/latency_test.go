package recorder

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestSpreadOfManyPieces compares the halving with the plain sum in the order of age,
// over pieces wide and narrow, and with pieces of one age.
func TestSpreadOfManyPieces(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for range 200 {
		var pieces []ages
		total := 0.0
		width := math.Pow(10, 4*r.Float64())
		for range 1 + r.IntN(2000) {
			low := 1e4 * r.Float64()
			p := ages{bytes: 1 + 1e6*r.Float64(), low: low, high: low + width*r.Float64()}
			if r.IntN(4) == 0 {
				p.low = 1000 * math.Floor(10*r.Float64()) // many of one age
				p.high = p.low
			}
			pieces = append(pieces, p)
			total += p.bytes
		}
		for _, q := range []float64{0.5, 0.95} {
			got, want := quantile(pieces, q*total), sweep(pieces, 0, q*total, math.NaN())
			if !(math.Abs(got-want) <= 1e-5) {
				t.Fatalf("%d pieces: the %g quantile is %.9f, in order %.9f", len(pieces), q, got, want)
			}
		}
	}
}
