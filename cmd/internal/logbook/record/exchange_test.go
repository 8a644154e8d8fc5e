package record

import (
	"bytes"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"
)

// exported writes entries in a format.
func exported(t interface{ Fatal(...any) }, list []Entry, f Format) []byte {
	var out bytes.Buffer
	x := NewExporter(&out, f)
	for i := range list {
		if err := x.Entry(&list[i]); err != nil {
			t.Fatal(err)
		}
	}
	if err := x.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

// anyEntry draws an entry with texts and numbers of every kind.
func anyEntry(id int64) *rapid.Generator[Entry] {
	text := rapid.OneOf(rapid.StringMatching(`[a-zA-Z0-9 ,";'<>\n\täß☂]{0,12}`), rapid.Just(""))
	number := rapid.OneOf(rapid.Float64Range(-1e12, 1e12), rapid.Just(math.NaN()), rapid.Just(-0.1), rapid.Just(0.0), rapid.Just(1e-300))
	at := rapid.Custom(func(t *rapid.T) time.Time {
		return time.Unix(rapid.Int64Range(0, 4e9).Draw(t, "s"), rapid.Int64Range(0, 999999999).Draw(t, "ns")).UTC()
	})
	return rapid.Custom(func(t *rapid.T) Entry {
		e := Entry{ID: id, Spacecraft: text.Draw(t, "craft"), Station: text.Draw(t, "station"), Transmitter: text.Draw(t, "transmitter"), Antenna: text.Draw(t, "antenna"),
			Mode: text.Draw(t, "mode"), First: at.Draw(t, "first"), Last: at.Draw(t, "last"), Source: text.Draw(t, "source"), Elements: text.Draw(t, "elements"), Note: text.Draw(t, "note"),
			Digest: fmt.Sprint("digest ", id), Taken: at.Draw(t, "taken"), PredictedBytes: number.Draw(t, "predicted"), TakenBytes: number.Draw(t, "bytes")}
		for range rapid.IntRange(0, 5).Draw(t, "values") {
			e.Values = append(e.Values, Value{At: at.Draw(t, "at"), Quantity: "q" + text.Draw(t, "quantity"), State: text.Draw(t, "state"), Measured: rapid.Float64Range(-1e12, 1e12).Draw(t, "measured"),
				Predicted: number.Draw(t, "predicted"), AzimuthDeg: number.Draw(t, "azimuth"), ElevationDeg: number.Draw(t, "elevation")})
		}
		e.Samples, e.Seal = len(e.Values), ""
		e.Seal = e.Sealed()
		return e
	})
}

// TestExportAndImportAreEqual: out and in again and out are the same bytes in both formats, and
// each entry is what was written.
func TestExportAndImportAreEqual(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		var list []Entry
		for i := range rapid.IntRange(0, 3).Draw(rt, "entries") {
			list = append(list, anyEntry(int64(i+1)).Draw(rt, "entry"))
		}
		for _, f := range []Format{CSV, JSON} {
			first := exported(rt, list, f)
			back, err := Import(bytes.NewReader(first), "export")
			if err != nil {
				rt.Fatalf("%v\n%s", err, first)
			}
			for i := range back {
				if err := back[i].Check(); err != nil {
					rt.Error(err)
				}
			}
			if !bytes.Equal(exported(rt, back, f), first) {
				rt.Fatalf("format %d: read back it is another", f)
			}
		}
	})
}

func TestChangedExportIsTold(t *testing.T) {
	list := []Entry{sample()}
	for _, f := range []Format{CSV, JSON} {
		text := strings.NewReplacer("cn0_dbhz,17,", "cn0_dbhz,71,", `"measured":17,`, `"measured":71,`).Replace(string(exported(t, list, f)))
		back, err := Import(strings.NewReader(text), "changed")
		if err != nil {
			t.Fatal(err)
		}
		if !slices.ContainsFunc(back, func(e Entry) bool { return e.Check() != nil }) {
			t.Errorf("format %d: a number was changed, and nothing tells", f)
		}
	}
}

// sample is an entry of 200 values.
func sample() Entry {
	at := time.Date(2026, 9, 15, 0, 50, 0, 500, time.UTC)
	e := Entry{ID: 1, Spacecraft: "Wagtail 1", Station: "Skerry Point", First: at, Last: at.Add(200 * time.Second), Source: "log.csv", Elements: "set", Digest: "one", Taken: at,
		PredictedBytes: math.NaN(), TakenBytes: 2e6}
	for i := range 200 {
		e.Values = append(e.Values, Value{At: at.Add(time.Duration(i) * time.Second), Quantity: "cn0_dbhz", State: "used", Measured: float64(i), Predicted: math.NaN(), AzimuthDeg: 12.5, ElevationDeg: math.NaN()})
	}
	e.Samples, e.Seal = len(e.Values), e.Sealed()
	return e
}

func TestImportRefuses(t *testing.T) {
	good := string(exported(t, []Entry{sample()}, CSV))
	goodJSON := string(exported(t, []Entry{sample()}, JSON))
	lines := strings.SplitAfter(good, "\n")
	for name, c := range map[string]struct{ text, want string }{
		"no header":    {strings.Join(lines[1:], ""), "line 1: these are not the columns"},
		"empty":        {"", "line 1"},
		"a bad number": {strings.Replace(good, ",17,", ",seventeen,", 1), `line 19: measured: "seventeen" is not a number`},
		"no number":    {strings.Replace(good, ",17,", ",,", 1), "measured: it is empty"},
		"a bad time":   {lines[0] + strings.Replace(lines[1], "2026-09-15T00:50:00", "yesterday", 1), "line 2"},
		"a cut row":    {lines[0] + "1,Wagtail 1\n", "line 2"},
		"other JSON":   {`{"format":"other","version":1,"passes":[]}`, `format: "other" is not allowed`},
		"newer JSON":   {strings.Replace(goodJSON, `"version":1`, `"version":2`, 1), "use a newer program"},
		"unknown key":  {strings.Replace(goodJSON, `"mode"`, `"mood"`, 1), "mood"},
		"more after":   {goodJSON + "{}", "after the end"},
		"cut JSON":     {goodJSON[:len(goodJSON)/2], "byte"},
		"null":         {strings.Replace(goodJSON, `"measured":17,`, `"measured":null,`, 1), "pass 1: measurement 18"},
	} {
		if _, err := Import(strings.NewReader(c.text), "in.csv"); err == nil || !strings.Contains(err.Error(), c.want) || !strings.HasPrefix(err.Error(), "in.csv: ") {
			t.Errorf("%s: %v, want %q", name, err, c.want)
		}
	}
}

func FuzzImport(f *testing.F) {
	e := sample()
	e.Values = e.Values[:2]
	for _, format := range []Format{CSV, JSON} {
		f.Add(exported(f, []Entry{e}, format))
		f.Add(exported(f, nil, format))
	}
	f.Add([]byte(`{"format":"slantwise logbook","version":1,"passes":[{"number":1}]}`))
	f.Fuzz(func(t *testing.T, data []byte) {
		list, err := Import(bytes.NewReader(data), "fuzz")
		if err != nil {
			return
		}
		again, err := Import(bytes.NewReader(exported(t, list, JSON)), "again")
		if err != nil || len(again) != len(list) {
			t.Fatalf("what was read is written and refused: %v", err)
		}
	})
}
