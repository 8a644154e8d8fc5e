package orbit

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// States by sgp4 2.15 from elements with twelve digits (testdata/orbit/fine_elements.py),
// printed to 0.1 mm and 1e-6 m/s. Tolerance 1 cm: the second order of the grid; 3 cm
// for the stationary orbit, whose node turns fast with an inclination near zero.
func TestElementsFinerThanTheFormat(t *testing.T) {
	worst, worstV := 0.0, 0.0
	for _, row := range referenceRows(t, "../testdata/orbit/fine_elements.csv") {
		el := Elements{
			Epoch:        instant(t, row[0]),
			MeanMotion:   number(t, row[1]),
			Eccentricity: number(t, row[2]),
			Inclination:  unit.Angle(number(t, row[3])) * unit.Degree,
			RAAN:         unit.Angle(number(t, row[4])) * unit.Degree,
			ArgPerigee:   unit.Angle(number(t, row[5])) * unit.Degree,
			MeanAnomaly:  unit.Angle(number(t, row[6])) * unit.Degree,
			BStar:        number(t, row[7]),
		}
		p, err := newPropagator(&el)
		if err != nil {
			t.Fatal(err)
		}
		pos, vel := p.raw(int(number(t, row[8])))
		d := pos.Sub(Vec3{number(t, row[9]), number(t, row[10]), number(t, row[11])}.Scale(1000)).Norm()
		dv := vel.Sub(Vec3{number(t, row[12]), number(t, row[13]), number(t, row[14])}.Scale(1000)).Norm()
		tolerance := 0.01
		if el.Inclination < 0.1*unit.Degree {
			tolerance = 0.03
		}
		if d > tolerance || dv > 1e-4 {
			t.Errorf("%s, %s rev/day, after %s s: %.5f m and %.7f m/s from the reference", row[0], row[1], row[8], d, dv)
		}
		worst, worstV = math.Max(worst, d), math.Max(worstV, dv)
	}
	t.Logf("worst %.6f m, %.7f m/s", worst, worstV)
}

// The lines that the library is given have the columns that it slices, whatever the
// values: it ends the program where they do not parse.
func TestLinesAreWellFormed(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for range 2000 {
		el := anyOrbit(rng)
		el.Epoch = firstEpoch.Add(time.Duration(rng.Int64N(int64(lastEpoch.Sub(firstEpoch)))))
		el.BStar = (rng.Float64()*2 - 1) * math.Pow10(rng.IntN(14)-13)
		for _, g := range onGrid(&el, el.BStar, true) {
			one, two := g.lines()
			if len(one) != 69 || len(two) != 69 {
				t.Fatalf("lines of %d and %d columns, want 69:\n%s\n%s", len(one), len(two), one, two)
			}
			for _, column := range []int{1, 8, 17, 32, 43, 52, 61, 63} {
				if one[column] != ' ' {
					t.Fatalf("column %d of %q is not blank", column+1, one)
				}
			}
			for _, column := range []int{1, 7, 16, 25, 33, 42, 51} {
				if two[column] != ' ' {
					t.Fatalf("column %d of %q is not blank", column+1, two)
				}
			}
			if back := twoLines(t, one, two); math.Abs(back.Epoch.Sub(el.Epoch).Seconds()) > 2.01 {
				t.Fatalf("epoch %v became %v", el.Epoch, back.Epoch)
			}
		}
	}
}

// FuzzPropagate asks for states of any elements that Validate lets through: no panic,
// no end of the program, and a state that check accepts is finite and above the ground.
func FuzzPropagate(f *testing.F) {
	f.Add(int64(0), 15.5, 0.001, 51.6, 10.0, 20.0, 30.0, 1e-4, int64(3600))                // plain
	f.Add(int64(1e9), 1.0027, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, int64(-86400))                 // all zero
	f.Add(int64(31e8), 2.0, 0.7, 63.4, 359.99999, 360.0, 359.99996, 1e-3, int64(1e6))      // the wrap
	f.Add(int64(5e8), 16.0, 0.0, 180.0, 0.0, 0.0, 0.0, 1e-4, int64(10))                    // SGP4's own singularity
	f.Add(int64(5e8), 1e-8, 0.9999999, 179.9999, 1.0, 1.0, 1.0, 10.0, int64(1e8))          // the edges
	f.Add(int64(5e8), 20.0, 0.9999999, 90.0, 1.0, 1.0, 1.0, -10.0, int64(-1e8))            // under the ground
	f.Add(int64(3155759999), 14.0, 1e-4, 98.0, 1.0, 1.0, 1.0, 9.999999e-10, int64(100000)) // the last epoch
	f.Fuzz(func(t *testing.T, epoch int64, motion, ecc, incl, node, perigee, anomaly, drag float64, after int64) {
		el := Elements{
			Epoch:      time.Unix(firstEpoch.Unix()+epoch%3155760000, epoch%1000*1e6).UTC(),
			MeanMotion: motion, Eccentricity: ecc, Inclination: unit.Angle(incl) * unit.Degree,
			RAAN: unit.Angle(node) * unit.Degree, ArgPerigee: unit.Angle(perigee) * unit.Degree,
			MeanAnomaly: unit.Angle(anomaly) * unit.Degree, BStar: drag,
		}
		p, err := newPropagator(&el)
		if err != nil {
			return
		}
		k := int(after % int64(farthestFromEpoch/time.Second))
		pos, vel := p.raw(k)
		if p.check(k, pos, vel) == 0 && !(pos.Norm() >= wgs72RadiusKm*1000 && finite(vel)) {
			t.Fatalf("a sound state at %v, %v", pos, vel)
		}
	})
}

// FuzzEphemeris builds an hour of any such elements and looks at it.
func FuzzEphemeris(f *testing.F) {
	f.Add(15.5, 0.001, 51.6, 1e-4, int64(3600))
	f.Add(16.4, 0.001, 70.0, 5e-3, int64(86400))
	f.Add(1e-3, 0.5, 70.0, 1.0, int64(86400))
	f.Fuzz(func(t *testing.T, motion, ecc, incl, drag float64, after int64) {
		el := Elements{Epoch: testEpoch, MeanMotion: motion, Eccentricity: ecc, Inclination: unit.Angle(incl) * unit.Degree, BStar: drag}
		from := testEpoch.Add(time.Duration(after%864000) * time.Second)
		e, err := NewEphemeris(el, from, from.Add(time.Hour), EarthOrientation{})
		if err != nil {
			return
		}
		for i := range 21 {
			if st := e.StateAt(e.Span() * float64(i) / 20); !finite(st.Position) || !finite(st.Velocity) {
				t.Fatalf("at %d/20 of the span: %v", i, st)
			}
		}
	})
}
