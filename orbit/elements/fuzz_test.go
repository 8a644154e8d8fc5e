package elements

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"slantwise/orbit"
)

// seed adds the bad files whose names begin so: each is nearly good.
func seed(f *testing.F, prefixes ...string) {
	for _, p := range prefixes {
		files, err := filepath.Glob("testdata/bad/" + p + "*.txt")
		if err != nil || len(files) == 0 {
			f.Fatalf("no seeds %s: %v", p, err)
		}
		for _, path := range files {
			text, err := os.ReadFile(path)
			if err != nil {
				f.Fatal(err)
			}
			f.Add(string(text))
		}
	}
}

// holds checks what must be true of any text: it is refused with faults that name
// places in it, or it gives sets that are valid, finite and survive being written.
func holds(t *testing.T, text string) {
	sets, _, err := Read(strings.NewReader(text), "fuzz")
	if err != nil {
		if len(sets) > 0 || err.Error() == "" {
			t.Fatalf("%d sets with the error %q", len(sets), err)
		}
		return
	}
	if len(sets) == 0 {
		t.Fatal("no sets and no error")
	}
	for i := range sets {
		finite(t, &sets[i])
		if err := sets[i].Validate(); err != nil {
			t.Fatalf("accepted and not valid: %v", err)
		}
	}
	for f := OMMKVN; f <= OMMCSV; f++ {
		back := rewritten(t, sets, f)
		for i := range sets {
			if !alike(&sets[i], &back[i]) {
				t.Fatalf("by way of %s\n got %+v\nwant %+v", f, back[i], sets[i])
			}
		}
	}
	var b bytes.Buffer
	if _, err := WriteTLE(&b, sets); err == nil {
		again := rewritten(t, sets, TLE)
		var second bytes.Buffer
		if _, err := WriteTLE(&second, again); err != nil || second.String() != b.String() {
			t.Fatalf("not canonical: %v\n%s\nthen\n%s", err, b.String(), second.String())
		}
	}
}

func rewritten(t *testing.T, sets []orbit.Elements, f Format) []orbit.Elements {
	var b bytes.Buffer
	if _, err := Write(&b, sets, f, created); err != nil {
		t.Fatalf("%s: %v", f, err)
	}
	back, _, err := Read(bytes.NewReader(b.Bytes()), "fuzz")
	if err != nil || len(back) != len(sets) {
		t.Fatalf("%s is not read back: %d sets, %v\n%s", f, len(back), err, b.String())
	}
	return back
}

// alike compares all but the place; angles beyond 15 digits to a rounding of 1e-15.
func alike(a, b *orbit.Elements) bool {
	x, y := *a, *b
	for _, p := range [][2]*float64{
		{(*float64)(&x.Inclination), (*float64)(&y.Inclination)}, {(*float64)(&x.RAAN), (*float64)(&y.RAAN)},
		{(*float64)(&x.ArgPerigee), (*float64)(&y.ArgPerigee)}, {(*float64)(&x.MeanAnomaly), (*float64)(&y.MeanAnomaly)},
	} {
		if math.Abs(*p[0]-*p[1]) <= 1e-15*math.Abs(*p[0]) {
			*p[0] = *p[1]
		}
	}
	x.Source, y.Source = orbit.Source{}, orbit.Source{}
	if x.Name == unknownText { // stands for no name in an OMM
		x.Name = ""
	}
	if x.InternationalDesignator == unknownText {
		x.InternationalDesignator = ""
	}
	return x == y
}

func finite(t *testing.T, el *orbit.Elements) {
	for _, v := range []float64{el.MeanMotion, el.Eccentricity, el.Inclination.Radians(), el.RAAN.Radians(), el.ArgPerigee.Radians(),
		el.MeanAnomaly.Radians(), el.BStar, el.MeanMotionDot, el.MeanMotionDDot} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			t.Fatalf("not finite: %+v", el)
		}
	}
	if el.CatalogNumber < 0 || el.Epoch.IsZero() || !(el.MeanMotion > 0) {
		t.Fatalf("out of range: %+v", el)
	}
}

func FuzzTLE(f *testing.F) {
	seed(f, "checksum", "e", "t", "s", "n", "l", "mean")
	f.Add("WAGTAIL 1\r\n" + wagtailOne + "\r\n" + wagtailTwo + "\r\n")
	f.Add(pairTLE)
	f.Add("1 99001\n2 99001\n")
	f.Fuzz(func(t *testing.T, text string) {
		holds(t, text)
		// Most changes break the checksum; with it mended, the fields are reached.
		lines := strings.Split(text, "\n")
		for i, l := range lines {
			if len(l) >= tleColumns && (l[0] == '1' || l[0] == '2') {
				lines[i] = l[:68] + string(rune('0'+checksum(l))) + l[69:]
			}
		}
		holds(t, strings.Join(lines, "\n"))
	})
}

func FuzzKVN(f *testing.F) {
	seed(f, "kvn", "oem_kvn", "tdm")
	f.Add(pairKVN)
	f.Add(pairKVN + "\n" + pairKVN)
	f.Fuzz(holds)
}

func FuzzXML(f *testing.F) {
	seed(f, "xml", "oem_in", "web")
	f.Add("<ndm>" + asXML(pairKVN) + asXML(pairKVN) + "</ndm>")
	f.Fuzz(holds)
}

func FuzzJSON(f *testing.F) {
	seed(f, "json")
	f.Add(asJSON(pairKVN, false))
	f.Add(asJSON(pairKVN, true))
	f.Fuzz(holds)
}

func FuzzCSV(f *testing.F) {
	seed(f, "csv")
	var b bytes.Buffer
	if err := WriteOMM(&b, []orbit.Elements{exampleSet()}, OMMCSV, Header{}); err != nil {
		f.Fatal(err)
	}
	f.Add(b.String())
	f.Fuzz(holds)
}
