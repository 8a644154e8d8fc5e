package orbit

import (
	"errors"
	"flag"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

var testEpoch = time.Date(2026, 3, 10, 4, 5, 6, 789e6, time.UTC)

// orbitKind is a row of the table of orbits; figures of our own choice.
type orbitKind struct {
	name                                   string
	motion, eccentricity, inclination, bst float64 // rev/day, deg
}

var orbitKinds = []orbitKind{
	{"circular 300 km", 15.90, 0.0005, 51.6, 5e-4},
	{"circular 400 km", 15.55, 0.0003, 51.6, 2e-4},
	{"circular 600 km", 14.89, 0.0012, 45, 5e-5},
	{"circular 800 km retrograde", 14.27, 0.001, 144, 2e-5},
	{"sun-synchronous 550 km", 15.06, 0.0011, 97.6, 8e-5},
	{"circular 1400 km", 12.66, 0.0004, 66, 1e-5},
	{"equatorial 500 km", 15.21, 0.001, 0.02, 5e-5},
	{"eccentric low", 14.2, 0.05, 63, 8e-5},
	{"eccentric e 0.2", 10.8, 0.18, 34, 2e-5},
	{"below the deep-space limit", 6.5, 0.45, 28, 1e-4},
	{"transfer", 2.26, 0.7285, 7, 3e-4},
	{"transfer, low perigee", 2.27, 0.7335, 27, 1e-3},
	{"Molniya", 2.006, 0.69, 63.4, 1e-4},
	{"Molniya, e 0.74", 2.006, 0.742, 62.8, 1e-4},
	{"half-day circular", 2.0056, 0.005, 55, 0},
	{"geostationary", 1.00271, 0.0002, 0.05, 0},
	{"geosynchronous inclined", 1.0027, 0.002, 9, 0},
	{"high ellipse", 0.5, 0.85, 50, 0},
	{"decaying", 16.2, 0.003, 65, 1.2e-3},
	{"decaying fast", 16.35, 0.001, 82, 2e-3},
	{"decaying ellipse", 15.4, 0.045, 40, 4e-3},
}

func (k orbitKind) elements() Elements {
	return Elements{
		Name: k.name, CatalogNumber: 99001, Epoch: testEpoch,
		MeanMotion: k.motion, Eccentricity: k.eccentricity,
		Inclination: unit.Angle(k.inclination) * unit.Degree,
		RAAN:        77.1234 * unit.Degree, ArgPerigee: 251.4321 * unit.Degree, MeanAnomaly: 12.3456 * unit.Degree,
		BStar: k.bst,
	}
}

// The table against the adaptor itself at random seconds of a week and near its end.
func TestInterpolationError(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	bound, boundV := MaxPositionError.Metres(), float64(MaxVelocityError)
	for _, k := range orbitKinds {
		from := testEpoch.Add(5*time.Hour + 333*time.Millisecond)
		e, err := NewEphemeris(k.elements(), from, from.Add(7*24*time.Hour), EarthOrientation{})
		if err != nil {
			t.Errorf("%s: %v", k.name, err)
			continue
		}
		samples := 3000
		if k.bst >= 1e-3 {
			samples = 20000 // so that the kink of a vanishing eccentricity is met
		}
		p, v := interpolationError(t, e, rng, samples)
		if p > bound || v > boundV {
			t.Errorf("%s: %.4f m and %.6f m/s from SGP4, over %g m or %g m/s", k.name, p, v, bound, boundV)
		}
		t.Logf("%-28s step %4.0f s, span %6.0f s: worst %.4f m, %.6f m/s", k.name, e.Step(), e.Span(), p, v)
	}
}

// TestInterpolationErrorOfAnyOrbit draws orbits with their perigee at 180 km or
// higher, and windows on either side of the epoch.
func TestInterpolationErrorOfAnyOrbit(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	bound, boundV := MaxPositionError.Metres(), float64(MaxVelocityError)
	worst, worstV := 0.0, 0.0
	for range *anyOrbits {
		el := anyOrbit(rng)
		from := testEpoch.Add(time.Duration((rng.Float64()*10 - 5) * float64(24*time.Hour)))
		e, err := NewEphemeris(el, from, from.Add(24*time.Hour), EarthOrientation{})
		var pe *PropagationError
		if errors.As(err, &pe) {
			continue // the orbit has ended
		}
		if err != nil {
			t.Fatal(err)
		}
		p, v := interpolationError(t, e, rng, 200)
		if p > bound || v > boundV {
			t.Errorf("%+v, step %g s: %.4f m and %.6f m/s from SGP4, over %g m or %g m/s", el, e.Step(), p, v, bound, boundV)
		}
		worst, worstV = math.Max(worst, p), math.Max(worstV, v)
	}
	t.Logf("%d orbits: worst %.4f m, %.6f m/s", *anyOrbits, worst, worstV)
}

var anyOrbits = flag.Int("orbits", 100, "how many random orbits to interpolate")

func anyOrbit(rng *rand.Rand) Elements {
	within := func(lo, hi float64) float64 { return lo + (hi-lo)*rng.Float64() }
	turn := func(most float64) unit.Angle { return unit.Angle(within(0, most)) * unit.Degree }
	ecc := 0.85 * math.Pow(rng.Float64(), 3) // low ones are commoner
	axis := (wgs72RadiusKm + within(180, 2000)) / (1 - ecc)
	return Elements{
		Epoch:        testEpoch,
		MeanMotion:   86400 / (2 * math.Pi) * math.Sqrt(wgs72Mu/(axis*axis*axis)),
		Eccentricity: ecc,
		Inclination:  turn(179), RAAN: turn(360), ArgPerigee: turn(360), MeanAnomaly: turn(360),
		BStar: within(-1e-4, 5e-4),
	}
}

// interpolationError returns the worst differences from the adaptor at random
// seconds.
func interpolationError(t *testing.T, e *Ephemeris, rng *rand.Rand, samples int) (position, velocity float64) {
	t.Helper()
	el := e.Elements()
	prop, err := newPropagator(&el)
	if err != nil {
		t.Fatal(err)
	}
	offset := e.Reference().Sub(el.Epoch).Seconds()
	rot := newRotation(e.Reference(), EarthOrientation{})
	for i := range samples {
		k := math.Ceil(offset) + math.Floor(rng.Float64()*(e.Span()-1))
		if i < 50 {
			k = math.Ceil(offset) + math.Floor(e.Span()) - 1 - float64(i)*e.Step()/20
			k = math.Max(math.Floor(k), math.Ceil(offset))
		}
		pos, vel := prop.raw(int(k))
		want := rot.earthFixed(k-offset, pos, vel)
		got := e.StateAt(k - offset)
		position = math.Max(position, got.Position.Sub(want.Position).Norm())
		velocity = math.Max(velocity, got.Velocity.Sub(want.Velocity).Norm())
	}
	return position, velocity
}
