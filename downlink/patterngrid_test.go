package downlink

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"slantwise/orbit/unit"
)

// gridOf samples a gain in dBi over off and around in deg.
func gridOf(t testing.TB, stepOff, stepAround, last float64, gain func(off, around float64) float64) *PatternGrid {
	t.Helper()
	var rows []PatternRow
	for off := 0.0; off <= last; off += stepOff {
		for around := 0.0; around < 360; around += stepAround {
			rows = append(rows, PatternRow{deg(off), deg(around), unit.DB(gain(off, around))})
		}
	}
	g, err := NewPatternGrid(rows)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

// bowl is a pattern that falls off boresight, faster in one plane than in the other.
func bowl(t testing.TB) *PatternGrid {
	return gridOf(t, 15, 30, 180, func(off, around float64) float64 {
		return 5 - off/10 - off/60*math.Pow(math.Sin(around*math.Pi/180), 2)*math.Sin(off*math.Pi/180)
	})
}

func TestGridGain(t *testing.T) {
	// 3 dBi on boresight; at 40 deg 0, 2, 4, 6 dBi each quarter; at 80 deg 10 dB less.
	var rows []PatternRow
	rows = append(rows, PatternRow{0, 0, 3})
	for i, g := range []unit.DB{0, 2, 4, 6} {
		rows = append(rows, PatternRow{deg(80), deg(90 * float64(i)), g - 10}, PatternRow{deg(40), deg(90 * float64(i)), g})
	}
	g, err := NewPatternGrid(rows)
	if err != nil {
		t.Fatal(err)
	}
	p := Pattern{Kind: GainGrid, Grid: g}
	for _, c := range []struct {
		name              string
		off, around, want float64
	}{
		{"on boresight, whatever the angle around", 0, 123, 3},
		{"at a node", 40, 90, 2},
		{"halfway around", 40, 45, 1},
		{"halfway off", 60, 90, -3},
		{"in the middle of a cell", 60, 45, -4},
		{"from the boresight", 20, 0, 1.5},
		{"from the last node around back to the first", 40, 315, 3},
		{"at 360 deg", 40, 360, 0},
		{"at the end", 80, 270, -4},
	} {
		got, err := p.GainToward(deg(c.off), deg(c.around))
		if err != nil || math.Abs(float64(got)-c.want) > 1e-9 {
			t.Errorf("%s: got %v dBi, %v, want %v", c.name, got, err, c.want)
		}
	}
	if v, err := p.GainToward(deg(80.1), 0); err == nil || !strings.Contains(err.Error(), "0 to 80 deg") {
		t.Errorf("beyond the end: %v dBi, %v", v, err)
	}
	if v, err := p.GainAt(deg(20)); err == nil {
		t.Errorf("without the angle around: %v dBi", v)
	}
	if v, err := p.GainAt(0); err != nil || v != 3 {
		t.Errorf("on boresight without the angle around: %v dBi, %v", v, err)
	}
	if p.WholeSphere() || !(&Pattern{Kind: GainGrid, Grid: bowl(t)}).WholeSphere() {
		t.Error("a grid to 80 deg is no whole sphere, one to 180 deg is")
	}
}

// A grid around which nothing changes is the table in one angle.
func TestGridAgreesWithTable(t *testing.T) {
	one := table(0, 6, 30, 5.1, 60, 1.8, 90, -4, 180, -11)
	var rows []PatternRow
	for _, q := range one.Table {
		for a := 0.0; a < 360; a += 60 {
			rows = append(rows, PatternRow{q.OffBoresight, deg(a), q.Gain})
		}
	}
	g, err := NewPatternGrid(rows)
	if err != nil {
		t.Fatal(err)
	}
	two := Pattern{Kind: GainGrid, Grid: g}
	rapid.Check(t, func(t *rapid.T) {
		off, around := rapid.Float64Range(0, math.Pi).Draw(t, "off"), rapid.Float64Range(0, 2*math.Pi).Draw(t, "around")
		a, okA := one.gain(off)
		b, okB := two.gainToward(off, around)
		if okA != okB || math.Abs(float64(a-b)) > 1e-9 {
			t.Fatalf("at %g, %g rad: %v %v in one angle, %v %v in two", off, around, a, okA, b, okB)
		}
	})
	if a, b := one.RadiatedShare(), two.RadiatedShare(); math.Abs(a-b) > 1e-6 {
		t.Errorf("radiated share %.9f in one angle, %.9f in two", a, b)
	}
	for _, q := range []float64{0.05, 0.5, 0.9, 0.99} {
		// The table falls by 0.19 dB a degree at most, and the pieces are half a degree wide.
		if a, b := one.GainExceeded(q), two.GainExceeded(q); math.Abs(float64(a-b)) > 0.1 {
			t.Errorf("gain exceeded with %g: %v dBi in one angle, %v in two", q, a, b)
		}
	}
	if one.Peak() != 6 || two.Peak() != 6 {
		t.Errorf("peaks %v and %v dBi", one.Peak(), two.Peak())
	}
}

// A short dipole has 1.5 sin²θ about its own axis and radiates all that it is fed
// (Balanis, Antenna Theory, 3rd ed. 2005, eq. (4-31), from memory; the integral is
// exact). Its boresight lies square to the axis, so that it depends on both angles:
// sin² = 1 - (sin off cos around)². The nulls are floored at -40 dB.
func TestGridRadiates(t *testing.T) {
	dipole := func(off, around float64) float64 {
		along := math.Sin(off*math.Pi/180) * math.Cos(around*math.Pi/180)
		return 10 * math.Log10(max(1.5*(1-along*along), 1e-4))
	}
	g := gridOf(t, 2, 2, 180, dipole)
	if share := g.share; math.Abs(share-1) > 2e-4 {
		t.Errorf("a dipole radiates %.6f of what it is fed, want 1", share)
	}
	// Share of the sphere with 1.5 (1 - u²) at least x is the |u| below √(1 - x/1.5).
	for _, q := range []float64{0.1, 0.5, 0.9} {
		want := 10 * math.Log10(1.5*(1-q*q))
		// Half a step of the curve of quantiles, and a bilinear cell of 2 degrees.
		tol := 8.7*q/(1-q*q)*0.0005 + 0.01
		if got := g.exceededWith(q); math.Abs(float64(got)-want) > tol {
			t.Errorf("gain exceeded with %g: %v dBi, want %.3f", q, got, want)
		}
	}
	// A link says what is wrong with a pattern that gives more than it gets.
	hot := gridOf(t, 10, 30, 180, func(off, _ float64) float64 { return 3 })
	l := mustLink(t, bodySpec(t, AttitudeNadir, Body{}, Pattern{Kind: GainGrid, Grid: hot}))
	if !l.noted(Warning, "radiates 2 times the power") {
		t.Errorf("no warning among %v", l.Notes())
	}
}

func TestReadPatternCSV(t *testing.T) {
	const two = "\ufeffoff_boresight_deg, around_boresight_deg,gain_dbi\r\n0,0,5\r\n\r\n90, 0,-3\n90,90,-4\n90,180,-3\n90,270,-4\n"
	p, err := ReadPatternCSV(strings.NewReader(two))
	if err != nil || p.Kind != GainGrid {
		t.Fatalf("%v, %v", p.Kind, err)
	}
	if g, _ := p.GainToward(deg(45), deg(90)); math.Abs(float64(g)-0.5) > 1e-9 {
		t.Errorf("gain %v dBi, want 0.5", g)
	}
	p, err = ReadPatternCSV(strings.NewReader("off_boresight_deg,gain_dbi\n0,5\n90,1\n"))
	if g, _ := p.GainAt(deg(45)); err != nil || math.Abs(float64(g)-3) > 1e-9 {
		t.Errorf("one angle: %v dBi, %v", g, err)
	}
	for text, want := range map[string]string{
		"":                              "the text is empty",
		"off_boresight_deg,gain\n0,5\n": "it must be off_boresight_deg,gain_dbi or",
		"off_boresight_deg,gain_dbi\n0,5\n90,x\n":                        "line 3: \"x\" is not a finite number",
		"off_boresight_deg,gain_dbi\n0,5\n90,NaN\n":                      "line 3",
		"off_boresight_deg,gain_dbi\n0,5\n90\n":                          "line 3: 1 columns",
		"off_boresight_deg,gain_dbi\n10,5\n90,1\n":                       "begins at 10 deg",
		"off_boresight_deg,around_boresight_deg,gain_dbi\n":              "must begin on the boresight",
		"off_boresight_deg,around_boresight_deg,gain_dbi\n0,0,5\n1,0,\"": "line",
	} {
		if _, err := ReadPatternCSV(strings.NewReader(text)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %v, want %q in it", text, err, want)
		}
	}
}

// What is accepted has a finite gain everywhere within its table and a finite share.
func FuzzReadPatternCSV(f *testing.F) {
	f.Add([]byte("off_boresight_deg,gain_dbi\n0,5\n90,1\n"))
	f.Add([]byte("off_boresight_deg,around_boresight_deg,gain_dbi\n0,0,5\n90,0,1\n90,90,1\n90,180,1\n90,270,1\n"))
	f.Add([]byte("off_boresight_deg,around_boresight_deg,gain_dbi\n0,0,5\n180,0,1\n"))                      // poles alone
	f.Add([]byte("off_boresight_deg,around_boresight_deg,gain_dbi\n0,0,5\n1e-12,0,1\n90,0,1\n90,360,1\n"))  // as good as a pole
	f.Add([]byte("off_boresight_deg,around_boresight_deg,gain_dbi\n0,0,5\n90,0,1\n90,1e-300,1\n90,90,1\n")) // nodes that all but touch
	f.Fuzz(func(t *testing.T, text []byte) {
		if len(text) > 1<<12 {
			return
		}
		p, err := ReadPatternCSV(strings.NewReader(string(text)))
		if err != nil {
			return
		}
		last := 0.0
		if p.Kind == GainGrid {
			last = p.Grid.Off[len(p.Grid.Off)-1].Radians()
		} else {
			last = p.Table[len(p.Table)-1].OffBoresight.Radians()
		}
		for _, w := range []float64{0, 0.2, 0.5, 0.99, 1} {
			for around := 0.0; around < 6.28; around += 0.7 {
				if g, ok := p.gainToward(w*last, around); !ok || !(g >= -200 && g <= 100) {
					t.Fatalf("gain %v (%v) at %g, %g rad", g, ok, w*last, around)
				}
			}
		}
		if s := p.RadiatedShare(); !(s >= 0) || math.IsInf(s, 1) {
			t.Fatalf("radiated share %v", s)
		}
	})
}
