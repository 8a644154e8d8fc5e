package propagation

import (
	"math"
	"testing"

	"slantwise/orbit/unit"
)

// A satellite that stands still has the path's own statistics: what P.618 gives for
// p is exceeded for p of the time.
func TestMovingAtOneElevationIsThePath(t *testing.T) {
	spec := kaPath()
	m, err := NewMoving(spec, []ElevationShare{{30 * unit.Degree, 1}})
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range []float64{0.01, 0.05, 0.1, 1, 5} {
		spec.Exceedance = Exceedance(p) * Percent
		path, err := NewPath(spec)
		if err != nil {
			t.Fatal(err)
		}
		s, err := path.Direct(30 * unit.Degree)
		if err != nil {
			t.Fatal(err)
		}
		got := m.ExceedingTotal(s.Total)
		if math.Abs(got.Low*100/p-1) > 1e-3 || got.Low != got.High {
			t.Errorf("%g %%: the path's %.4f dB are exceeded for %v", p, s.Total, got)
		}
		back, err := m.Total(p / 100)
		if err != nil || math.Abs(float64(back-s.Total)) > 1e-3 {
			t.Errorf("%g %%: %v dB, %v, the path has %v dB", p, back, err, s.Total)
		}
	}
}

// Steps e) and f) of P.618-14 §8 by hand for two intervals.
func TestMovingSumsOverElevations(t *testing.T) {
	spec := kaPath()
	one := func(el unit.Angle) *Moving {
		t.Helper()
		m, err := NewMoving(spec, []ElevationShare{{el, 1}})
		if err != nil {
			t.Fatal(err)
		}
		return m
	}
	both, err := NewMoving(spec, []ElevationShare{{10 * unit.Degree, 0.7}, {50 * unit.Degree, 0.3}})
	if err != nil {
		t.Fatal(err)
	}
	for _, a := range []unit.DB{0.5, 6, 10, 30, 200} {
		low, high := one(10*unit.Degree).ExceedingTotal(a), one(50*unit.Degree).ExceedingTotal(a)
		want := Span{0.7*low.Low + 0.3*high.Low, 0.7*low.High + 0.3*high.High}
		got := both.ExceedingTotal(a)
		if math.Abs(got.Low-want.Low) > 1e-12 || math.Abs(got.High-want.High) > 1e-12 {
			t.Errorf("%v dB: got %v, want %v", a, got, want)
		}
	}
	if never := both.ExceedingTotal(1e4); never.Low != 0 || math.Abs(never.High-1e-5) > 1e-15 {
		t.Errorf("10000 dB: got %v, want 0 to the lowest percentage evaluated", never)
	}
	if always := both.ExceedingTotal(0); always.High != 1 || always.Low != 0.5 {
		t.Errorf("0 dB: got %v, want the highest percentage evaluated to 1", always)
	}
}

func TestMovingEndsWithTheClimate(t *testing.T) {
	spec := kaPath()
	var err error
	if spec.Climate.CloudWater, err = NewCurve("cloud", "kg/m2", Exceeded{5 * Percent, 0.5}); err != nil {
		t.Fatal(err)
	}
	m, err := NewMoving(spec, []ElevationShare{{30 * unit.Degree, 1}})
	if err != nil {
		t.Fatal(err)
	}
	if last := m.percent[len(m.percent)-1]; last != 5 {
		t.Errorf("the statistics end at %g %%, the climate at 5 %%", last)
	}
	if _, err := NewMoving(spec, []ElevationShare{{30 * unit.Degree, 0.5}}); err == nil {
		t.Error("half of the contact time: no error")
	}
}

func BenchmarkMovingYear(b *testing.B) {
	var shares []ElevationShare
	for el := 2.5; el < 90; el += 5 {
		shares = append(shares, ElevationShare{unit.Angle(el) * unit.Degree, 1.0 / 18})
	}
	spec := kaPath()
	b.ReportAllocs()
	for b.Loop() {
		m, err := NewMoving(spec, shares)
		if err != nil {
			b.Fatal(err)
		}
		if s := m.ExceedingTotal(10); !(s.High > 0) {
			b.Fatal(s)
		}
	}
}
