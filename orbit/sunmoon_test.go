package orbit

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// Figures by astropy 5.2.1 (testdata/orbit/sun_moon.py). Tolerances: what the comments
// of SunPosition and MoonPosition promise; for
// the Sun's distance the sum of the series' terms that are left out, 5e-5.
func TestSunAndMoon(t *testing.T) {
	f, err := os.Open("../testdata/orbit/sun_moon.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) < 100 {
		t.Fatalf("%d rows, want 121 and the header", len(rows))
	}
	sun, moon := worstOf{}, worstOf{}
	for _, row := range rows[1:] {
		at, err := time.Parse("2006-01-02T15:04:05.999999Z", row[0])
		if err != nil {
			t.Fatal(err)
		}
		var x [7]float64
		for i := range x {
			if x[i], err = strconv.ParseFloat(row[i+1], 64); err != nil {
				t.Fatal(err)
			}
		}
		earth := EarthOrientation{UT1MinusUTC: time.Duration(x[0] * float64(time.Second))}
		sun.add(SunPosition(at, earth), Vec3{x[1], x[2], x[3]}.Scale(1000))
		moon.add(MoonPosition(at, earth), Vec3{x[4], x[5], x[6]}.Scale(1000))
	}
	sun.require(t, "Sun", 0.002*unit.Degree, 5e-5)
	moon.require(t, "Moon", 0.03*unit.Degree, 3e-4)
}

// worstOf keeps the worst angle between two vectors, and of their lengths' relative
// difference.
type worstOf struct {
	angle  unit.Angle
	length float64
}

func (w *worstOf) add(got, want Vec3) {
	angle := math.Atan2(got.Cross(want).Norm(), got.Dot(want))
	w.angle = max(w.angle, unit.Angle(angle))
	w.length = max(w.length, math.Abs(got.Norm()/want.Norm()-1))
}

func (w *worstOf) require(t *testing.T, body string, angle unit.Angle, length float64) {
	t.Helper()
	t.Logf("%s: worst %.5f deg, distance %.2g of itself", body, w.angle.Degrees(), w.length)
	if w.angle > angle || w.length > length {
		t.Errorf("%s: worst %.5f deg and %.2g of the distance, over %.5f deg and %.2g", body, w.angle.Degrees(), w.length, angle.Degrees(), length)
	}
}
