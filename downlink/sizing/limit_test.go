package sizing

import (
	"math"
	"testing"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// Where the gain has its summit: by a surface error that is a share e of the diameter
// alone at D = wavelength / (4 pi e), where the slope of D^2 exp(-(4 pi e D / wavelength)^2) is 0
// (Ruze, Proc. IEEE 54, 1966, from memory); with pointing beside it where a fine grid
// has it, each with its share of what is taken.
func TestSummitNamesAllThatTakes(t *testing.T) {
	c := usualCase()
	c.clear, c.days = true, 7
	const share = 2e-4
	calm, still := 0.02*unit.Degree, unit.Angle(0)
	alone := 299792458 / 8.18e9 / (4 * math.Pi * share)
	for _, x := range []struct {
		name string
		of   Family
		by   int
	}{{"both", Family{SurfaceShare: share, Pointing: &calm}, 2}, {"surface alone", Family{SurfaceShare: share, Pointing: &still}, 1}} {
		s := c.study(t, None(), x.of)
		l, err := s.limit(nil, Range{Low: 1, High: 13})
		if err != nil || len(l.By) != x.by {
			t.Fatalf("%s: %+v, %v", x.name, l, err)
		}
		sum := 0.0
		for _, b := range l.By {
			sum += b.Share
			if b.Loss == "surface" && math.Abs(b.Alone.Metres()/alone-1) > 1e-3 {
				t.Errorf("%s: by the surface alone %.4f m, the closed form gives %.4f", x.name, b.Alone.Metres(), alone)
			}
			if b.Alone > 0 && b.Alone < l.Peak*0.999 {
				t.Errorf("%s: %s alone has its summit at %.4f m, before that of all at %.4f", x.name, b.Loss, b.Alone.Metres(), l.Peak.Metres())
			}
		}
		if math.Abs(sum-1) > 0.02 || x.by == 2 && l.By[0].Share < l.By[1].Share {
			t.Errorf("%s: shares %+v", x.name, l.By)
		}
		best, at := math.Inf(-1), 0.0
		for d := 0.5; d < 60; d *= 1.0005 {
			a, err := s.antenna(0, Variant{Diameter: unit.Length(d)})
			if err != nil {
				t.Fatal(err)
			}
			w, _ := a.BeamwidthAt(8.18 * unit.Gigahertz)
			if g := 20*math.Log10(d) - float64(station.SurfaceLoss(a.SurfaceRMS, 8.18*unit.Gigahertz)) - float64(station.PointingLoss(a.PointingRMS, w)); g > best {
				best, at = g, d
			}
		}
		if math.Abs(l.Peak.Metres()/at-1) > 1e-3 {
			t.Errorf("%s: summit at %.4f m, on a fine grid at %.4f", x.name, l.Peak.Metres(), at)
		}
	}
}
