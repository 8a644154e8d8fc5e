package propagation

import (
	"math"
	"testing"

	"slantwise/orbit/unit"
)

func kaPath() PathSpec {
	return PathSpec{Frequency: 26.25 * unit.Gigahertz, Climate: climateAt(52, 0.05), Exceedance: 1 * Percent, Tilt: 45 * unit.Degree, Aperture: dish(3.7)}
}

// BenchmarkReference is four exponentials and a logarithm, to judge the machine and its
// load by: a sample of a path costs about as much.
func BenchmarkReference(b *testing.B) {
	x := 0.5
	for b.Loop() {
		x = math.Log(1 + math.Exp(-x) + math.Exp(-2*x) + math.Exp(-3*x) + math.Exp(-4*x))
	}
	if !(x > 0) {
		b.Fatal(x)
	}
}

// sampled runs a benchmark over elevations that sweep the sky.
func sampled(b *testing.B, at func(p *Path, el unit.Angle) error) {
	p, err := NewPath(kaPath())
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	el := 5 * unit.Degree
	for b.Loop() {
		if err := at(p, el); err != nil {
			b.Fatal(err)
		}
		if el += 0.01 * unit.Degree; el > 89*unit.Degree {
			el = 0
		}
	}
}

func BenchmarkPathAt(b *testing.B) {
	sampled(b, func(p *Path, el unit.Angle) error { _, err := p.At(el); return err })
}

func BenchmarkPathSky(b *testing.B) {
	sampled(b, func(p *Path, el unit.Angle) error { _, err := p.Sky(el); return err })
}

func BenchmarkPathDirect(b *testing.B) {
	sampled(b, func(p *Path, el unit.Angle) error { _, err := p.Direct(el); return err })
}

func BenchmarkNewPath(b *testing.B) {
	spec := kaPath()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := NewPath(spec); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkGasSpecificAttenuation(b *testing.B) {
	b.ReportAllocs()
	var n notes
	for b.Loop() {
		if _, err := gasSpecificChecked(26.25, 1013.25, 288.15, 7.5, &n); err != nil {
			b.Fatal(err)
		}
	}
}
