package reports

import (
	"bytes"
	"context"
	"flag"
	"os"
	"path/filepath"
	"sync"
	"testing"
)

var update = flag.Bool("update", false, "write the golden files anew, then compare")

// rendered renders a report in memory.
func rendered(t *testing.T, r *Report, o Options, chart script) map[string][]byte {
	t.Helper()
	var mutex sync.Mutex
	files := map[string][]byte{}
	put := func(name string, content []byte) error {
		mutex.Lock()
		defer mutex.Unlock()
		if files[name] != nil {
			t.Errorf("%s is written twice", name)
		}
		files[name] = bytes.Clone(content)
		return nil
	}
	if err := newWriter(r, o, chart, put).write(context.Background()); err != nil {
		t.Fatal(err)
	}
	return files
}

// stubScript stands for the chart script, so that golden pages do not depend on
// whether it was brought.
var stubScript = script{code: "/* charts */", licence: "licence"}

// goldenReport has a short pass of each kind: part closing, geometry alone and cut.
func goldenReport() *Report {
	r := fixtureReport(0)
	shapes := []shape{basicShape(), basicShape(), basicShape()}
	shapes[0].miss, shapes[0].half, shapes[0].power = 1100, 45, -104.6
	shapes[0].sky = true
	shapes[1].noRadio, shapes[1].half, shapes[1].site = true, 30, plateau()
	shapes[1].aos = firstAOS.Add(95 * 60e9)
	shapes[2].half, shapes[2].cut, shapes[2].aos = 40, 2, firstAOS.Add(71*3600e9)
	for _, s := range shapes {
		r.Keys = append(r.Keys, Key{Spacecraft: s.spacecraft, Station: s.site.Name, AOS: s.aos})
	}
	r.Load = func(_ context.Context, i int) (*Pass, error) {
		p := fixturePass(shapes[i])
		if i == 0 {
			p.Ground = groundOf(p)
		}
		return p, nil
	}
	return r
}

// withoutCoast makes pages that do not depend on whether the coastline was brought.
func withoutCoast(t *testing.T) {
	brought, turned := coast, coastOutlines
	coast, coastOutlines = func() [][]int { return nil }, func() []outline { return nil }
	t.Cleanup(func() { coast, coastOutlines = brought, turned })
}

func TestGolden(t *testing.T) {
	withoutCoast(t)
	files := rendered(t, goldenReport(), Options{}, stubScript)
	const first, second = "passes/wagtail-1-skerry-point-20260310t104231z", "passes/wagtail-1-high-plateau-20260310t121731z"
	for name, golden := range map[string]string{
		"index.html": "index.html", "passes.csv": "passes.csv", "passes.json": "passes.json",
		"week.html": "week.html", "week.csv": "week.csv", "week.json": "week.json",
		first + ".html": "pass.html", first + ".csv": "pass.csv", first + ".json": "pass.json",
		second + ".html": "geometry.html", second + ".csv": "geometry.csv",
	} {
		t.Run(golden, func(t *testing.T) { compareGolden(t, files[name], golden) })
	}
}

func TestGoldenWithoutChartScript(t *testing.T) {
	files := rendered(t, goldenReport(), Options{}, script{})
	compareGolden(t, files["index.html"], "index-public.html")
}

func compareGolden(t *testing.T, got []byte, name string) {
	t.Helper()
	path := filepath.Join("testdata", name+".golden")
	if *update {
		if err := os.WriteFile(path, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	gotLines, wantLines := bytes.Split(got, []byte("\n")), bytes.Split(want, []byte("\n"))
	for i := range max(len(gotLines), len(wantLines)) {
		var g, w []byte
		if i < len(gotLines) {
			g = gotLines[i]
		}
		if i < len(wantLines) {
			w = wantLines[i]
		}
		if !bytes.Equal(g, w) {
			t.Fatalf("%s differs from line %d on:\ngot  %.300s\nwant %.300s\nrun go test ./reports -update when it should, and read the difference", path, i+1, g, w)
		}
	}
}

func TestSameBytesFromAnyNumberOfWorkers(t *testing.T) {
	want := rendered(t, fixtureReport(9), Options{Workers: 1}, stubScript)
	for _, workers := range []int{2, 5, 0} {
		got := rendered(t, fixtureReport(9), Options{Workers: workers}, stubScript)
		if len(got) != len(want) {
			t.Errorf("%d workers: %d files, want %d", workers, len(got), len(want))
		}
		for name := range want {
			if !bytes.Equal(got[name], want[name]) {
				t.Errorf("%d workers: %s differs from that of one worker", workers, name)
			}
		}
	}
}
