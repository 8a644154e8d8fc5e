package modem

import (
	"math"
	"strings"
	"testing"
)

var userHead = strings.Join(UserColumns, ",") + "\n"

func TestReadRows(t *testing.T) {
	rows, err := ReadRows(strings.NewReader("\ufeff" + userHead +
		"qpsk,house,1/2,2,,1000,48,2000,32,3.5,1e-3,bit,bench of March\r\n" +
		"qpsk, house ,1/2,2,,1000,48,2000,32,4.5,1e-5,bit,bench of March\r\n" +
		"8fsk,tones,1,3,8,,,,,9.5,1e-4,codeword,maker's sheet\n"))
	if err != nil || len(rows) != 2 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	house := rows[0]
	if house.Name() != "qpsk house" || house.Coding.Rate != 0.5 || !house.Modulation.Shaped() || len(house.Thresholds) != 2 || house.Thresholds[0].Provenance != "user" {
		t.Errorf("got %+v", house)
	}
	within(t, "between its two points", float64(need(t, &house, 1e-4)), 4.0, 1e-9) // straight in the logarithm
	within(t, "net", house.NetEfficiency(false), 2*952.0/2032, 1e-12)
	if tones := rows[1]; tones.Modulation.Width != 8 || tones.NetEfficiency(false) != 3 || tones.Thresholds[0].Metric != CodewordErrors || len(tones.Curves) != 0 {
		t.Errorf("got %+v", tones)
	}
	own, err := Standard().With(rows...)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := own.FindModulation("8fsk"); err != nil || len(own.Rows()) != len(Standard().Rows())+2 {
		t.Errorf("%d rows, %v", len(own.Rows()), err)
	}
}

func need(t *testing.T, r *Row, rate float64) float64 {
	t.Helper()
	n, err := r.At("", rate)
	if err != nil {
		t.Fatal(err)
	}
	return float64(n.EbN0)
}

func TestReadRowsRefuses(t *testing.T) {
	const good = "qpsk,house,1/2,2,,1000,48,2000,32,3.5,1e-3,bit,bench\n"
	for _, c := range []struct{ name, text, want string }{
		{"nothing", "", "the text is empty; its first line must be modulation,coding"},
		{"another header", "name,value\n", "line 1: the header is"},
		{"short", userHead + "qpsk,house\n", "line 2: 2 columns; give 13"},
		{"code rate 0", userHead + strings.Replace(good, "1/2", "0", 1), `line 2: code_rate: "0" is not allowed; it must be a number from 0 (not itself) to 1`},
		{"code rate by 0", userHead + strings.Replace(good, "1/2", "1/0", 1), `code_rate: "1/0" is not allowed`},
		{"half a bit", userHead + strings.Replace(good, ",2,,", ",1.5,,", 1), "bits_per_symbol: 1.5 is not a whole number"},
		{"Eb/N0 not a number", userHead + strings.Replace(good, "3.5", "NaN", 1), `required_eb_n0_db: "NaN" is not allowed`},
		{"error rate 1", userHead + strings.Replace(good, "1e-3", "1", 1), "error_rate: 1 is not allowed"},
		{"unknown metric", userHead + strings.Replace(good, "bit,", "word,", 1), `metric: "word" is not allowed; it must be bit, codeword, frame or packet`},
		{"no source", userHead + strings.Replace(good, "bench", "", 1), "source: it is empty"},
		{"negative header", userHead + strings.Replace(good, "48", "-1", 1), `frame_header_bits: "-1"`},
		{"nothing but header", userHead + strings.Replace(good, "48", "1000", 1), "some information must be left"},
		{"fewer sent than taken in", userHead + strings.Replace(good, "2000", "999", 1), "at least as many bits be sent"},
		{"twice", userHead + good + good, "line 3: qpsk house stands above with the same error rate"},
		{"two code rates", userHead + good + strings.Replace(good, "1/2", "3/4", 1), "with other numbers"},
		{"rising", userHead + good + strings.Replace(good, "3.5,1e-3", "4.5,1e-2", 1), "Eb/N0 must rise and the error rate fall"},
		{"under Shannon's bound", userHead + strings.Replace(good, "3.5,1e-3", "-0.1,1e-3", 1), "required_eb_n0_db: -0.1 dB is not allowed; at an error rate of 0.001 Shannon's bound for 1 information bits a symbol is -0.07 dB"},
		{"two faults", userHead + strings.Replace(good, "3.5", "x", 1) + strings.Replace(good, "bench", "", 1), "line 3: source"},
	} {
		_, err := ReadRows(strings.NewReader(c.text))
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}
	if _, err := ReadRows(strings.NewReader(userHead + strings.Repeat(good, 100_000))); err == nil || !strings.Contains(err.Error(), "over 4 MB") {
		t.Errorf("a large text: %v", err)
	}
}

func FuzzReadRows(f *testing.F) {
	f.Add(userHead + "qpsk,house,1/2,2,,1000,48,2000,32,3.5,1e-3,bit,bench\n") // good
	f.Add(userHead + "qpsk,house,1/0,2,,,,,,3.5,1e-3,bit,bench\n")             // a rate by nothing
	f.Add(userHead + "a,b,1,1,,,,,,1,1e-3,bit,s\na,b,1,1,,,,,,2,1e-4,bit,s\n") // a curve
	f.Add(userHead + "a,b,1,1,,1,1,1,,1,1e-3,bit,s\n")                         // a frame of nothing but header
	f.Add("modulation,coding\n")                                               // short header
	f.Add(userHead + "\"a\nb\",c,0x1p-2,1,,,,,,1e0,1e-3,bit,s\n")              // a line break in a name, hexadecimal
	f.Fuzz(func(t *testing.T, text string) {
		rows, err := ReadRows(strings.NewReader(text))
		if err != nil {
			return
		}
		for i := range rows {
			r := &rows[i]
			for _, v := range []float64{r.SpectralEfficiency(), r.NetEfficiency(false), r.Coding.Rate, r.Modulation.WidthFactor(0.35)} {
				if !(v > 0) || math.IsInf(v, 0) {
					t.Fatalf("accepted %+v", r)
				}
			}
			for _, n := range r.Thresholds {
				if got, err := r.At(n.Metric, n.ErrorRate); err != nil || got.EbN0 != n.EbN0 || got.Source == "" {
					t.Fatalf("%s at %s: %+v, %v", r.Name(), n, got, err)
				}
			}
		}
	})
}

func FuzzTables(f *testing.F) {
	f.Add(thresholdsCSV[:600], curvesCSV[:600], codingsCSV[:600])
	f.Add("coding,modulations,required_eb_n0,required_es_n0,error_rate,metric,provenance,source\nname,,,,,,,\nx,qpsk,1,2,1e-5,bit error rate,computed,s\n", "", "") // both requirements
	f.Fuzz(func(t *testing.T, thresholds, curves, codings string) {
		needs, err := readThresholds(thresholds)
		for _, n := range needs {
			if err == nil && (!(n.ErrorRate > 0 && n.ErrorRate < 1) || !(math.Abs(float64(n.EbN0)) <= 100)) {
				t.Fatalf("accepted %+v", n)
			}
		}
		lines, err := readCurves(curves)
		for i := range lines {
			if err == nil && !(lines[i].Low > 0 && lines[i].High > lines[i].Low) {
				t.Fatalf("accepted %+v", lines[i])
			}
		}
		list, err := readCodings(codings)
		for _, c := range list {
			if err == nil && (!(c.Rate > 0 && c.Rate <= 1) || c.Frame.check() != nil) {
				t.Fatalf("accepted %+v", c)
			}
		}
	})
}
