package fit_test

import (
	"context"
	"encoding/csv"
	"errors"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/fit"
	"slantwise/orbit/unit"
)

// published is one of the 33 cases of AIAA 2006-6753 (testdata/SOURCES.md): an element
// set and the states in TEME that are printed for it.
type published struct {
	el   orbit.Elements
	data []fit.Datum
}

func publishedCases(t testing.TB) []published {
	t.Helper()
	f, err := os.Open("../../testdata/orbit/sgp4_verification.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.FieldsPerRecord = -1
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var cases []published
	for _, row := range rows {
		if row[0] == "set" {
			sets, _, err := elements.Read(strings.NewReader(summed(row[1])+summed(row[2])), "verification")
			if err != nil {
				t.Fatal(err)
			}
			cases = append(cases, published{el: sets[0]})
			continue
		}
		var x [7]float64
		for i := range x {
			if x[i], err = strconv.ParseFloat(row[i+1], 64); err != nil {
				t.Fatal(err)
			}
		}
		c := &cases[len(cases)-1]
		c.data = append(c.data, fit.Datum{Time: c.el.Epoch.Add(time.Duration(math.Round(x[0] * 60e9))),
			Position: orbit.Vec3{X: x[1], Y: x[2], Z: x[3]}.Scale(1000), Velocity: orbit.Vec3{X: x[4], Y: x[5], Z: x[6]}.Scale(1000), HasVelocity: true})
	}
	return cases
}

// summed returns a line with its checksum, which two of the published lines have wrong.
func summed(line string) string {
	sum := 0
	for _, c := range line[:68] {
		switch {
		case c >= '0' && c <= '9':
			sum += int(c - '0')
		case c == '-':
			sum++
		}
	}
	return line[:68] + strconv.Itoa(sum%10) + "\n"
}

// Cases whose published states do not give the set back as the others do, and why.
var unlike = map[int]struct {
	why string
	// refused is the refusal where there is no fit; else mostRMS is the bound in m, and the
	// elements differ.
	refused fit.Why
	mostRMS float64
}{
	33333: {why: "made to fail: the perigee lies 6300 km under the ground, and other elements give the first state, too", refused: fit.BeyondTheory},
	33334: {why: "made to have no state", refused: fit.OutsideTheory},
	33335: {why: "inclination 0.0019 deg, eccentricity under the 1e-6 that SGP4 puts in its place: near the equator the lunar and solar terms turn with the node, " +
		"and sets of other nodes come within a hundred metres", mostRMS: 100},
}

// Deep-space orbits on which the published states say nothing of B*; it is stated.
var dragless = []int{4632, 9998, 14128, 20413, 23333, 24208, 25954, 26900, 28129, 28626, 33333, 33334, 33335}

// The published states of each case (AIAA 2006-6753), 8 decimals of a kilometre, give the
// set back to the digits of a two-line set. 0.03 m: the difference of the propagation from
// the published states is up to 6 mm (TestPublishedVerificationStates), that of 04632 to
// 20413 more over years.
func TestPublishedStatesGiveTheSetBack(t *testing.T) {
	cases := publishedCases(t)
	if len(cases) != 33 {
		t.Fatalf("%d cases, want the 33 published", len(cases))
	}
	for i, c := range cases {
		number := c.el.CatalogNumber
		o := fit.Options{Epoch: c.el.Epoch}
		threeYears := i == 32 // of 20413 are known, and they carry B*
		if slices.Contains(dragless, number) && !threeYears {
			o.BStar = &c.el.BStar
			_, err := fit.Fit(context.Background(), c.data, fit.Options{Epoch: c.el.Epoch})
			if why := (*fit.Refusal)(nil); !errors.As(err, &why) {
				t.Errorf("%05d: with B* free %v, want it refused", number, err)
			}
		}
		r, err := fit.Fit(context.Background(), c.data, o)
		odd, isOdd := unlike[number]
		var why *fit.Refusal
		switch {
		case isOdd && odd.refused != 0:
			if !errors.As(err, &why) || why.Why != odd.refused {
				t.Errorf("%05d (%s): %v, want %v", number, odd.why, err, odd.refused)
			}
		case err != nil:
			t.Errorf("%05d: %v", number, err)
		case isOdd:
			if !(r.RMS < odd.mostRMS) {
				t.Errorf("%05d (%s): RMS %g m", number, odd.why, r.RMS)
			}
		default:
			givesBack(t, &c.el, r)
		}
		if err == nil {
			t.Logf("%05d: %d states, RMS %.6f m, condition %.1f, B* found %v: n %+.1e, e %+.1e, i %+.1e, node %+.1e, perigee %+.1e, anomaly %+.1e deg, B* %+.1e",
				number, r.Used, r.RMS, r.Condition, r.DragFound, r.Elements.MeanMotion-c.el.MeanMotion, r.Elements.Eccentricity-c.el.Eccentricity,
				turn(r.Elements.Inclination-c.el.Inclination), turn(r.Elements.RAAN-c.el.RAAN), turn(r.Elements.ArgPerigee-c.el.ArgPerigee),
				turn(r.Elements.MeanAnomaly-c.el.MeanAnomaly), r.Elements.BStar-c.el.BStar)
		} else {
			t.Logf("%05d: %v", number, err)
		}
	}
}

func turn(a unit.Angle) float64 { return math.Remainder(a.Degrees(), 360) }

// givesBack asks for half the last digit of a two-line set. B* may be open by more, as the
// covariance says.
func givesBack(t *testing.T, want *orbit.Elements, r *fit.Result) {
	t.Helper()
	got := &r.Elements
	if !(r.RMS < 0.03) {
		t.Errorf("%05d: RMS %g m, want under 0.03 m", want.CatalogNumber, r.RMS)
	}
	for name, d := range map[string][2]float64{
		"mean motion":  {got.MeanMotion - want.MeanMotion, 5e-9},
		"eccentricity": {got.Eccentricity - want.Eccentricity, 5e-8},
		"inclination":  {turn(got.Inclination - want.Inclination), 5e-5},
		"node":         {turn(got.RAAN - want.RAAN), 5e-5},
		"perigee":      {turn(got.ArgPerigee - want.ArgPerigee), 5e-5},
		"mean anomaly": {turn(got.MeanAnomaly - want.MeanAnomaly), 5e-5},
		"B*":           {got.BStar - want.BStar, math.Max(5e-6*math.Abs(want.BStar), 4*math.Sqrt(r.Covariance[6][6]))},
	} {
		if !(math.Abs(d[0]) <= d[1]) {
			t.Errorf("%05d: %s off by %g, over %g", want.CatalogNumber, name, d[0], d[1])
		}
	}
}
