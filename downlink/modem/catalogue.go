package modem

import (
	_ "embed" // the tables below
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"sync"

	"slantwise/orbit/unit"
)

//go:embed thresholds.csv
var thresholdsCSV string

//go:embed modulations.csv
var modulationsCSV string

// Entry is a row of the catalogue: what one coding requires with some modulations
// for one error rate.
type Entry struct {
	Coding       string
	Modulations  []string
	CodeRate     float64 // information bits to sent bits, (0, 1]
	CodeRateText string  // as a fraction, "223/510"
	RequiredEbN0 unit.DB // per information bit, without implementation loss
	ErrorRate    float64
	Metric       string // "bit error rate", "codeword error rate", ...
	Provenance   string // "seen-primary", "seen-secondary", "computed"
	Source       string
}

// Modulation is a modulation that the catalogue knows.
type Modulation struct {
	Name          string
	BitsPerSymbol int
	What          string
}

// Catalogue lists the entries in their order: for a coding and modulation the first
// is the one that counts when no error rate is named.
func Catalogue() []Entry { return slices.Clone(tables().entries) }

// Modulations lists the modulations.
func Modulations() []Modulation { return slices.Clone(tables().modulations) }

type catalogue struct {
	entries     []Entry
	modulations []Modulation
}

// tables reads the embedded tables once. A fault in them is one of the program: the
// tests read them too.
var tables = sync.OnceValue(func() catalogue {
	entries, err := readEntries(thresholdsCSV)
	if err != nil {
		panic("modem: thresholds.csv: " + err.Error())
	}
	modulations, err := readModulations(modulationsCSV)
	if err != nil {
		panic("modem: modulations.csv: " + err.Error())
	}
	return catalogue{entries, modulations}
})

// readRows returns the rows below the header and the row of units.
func readRows(text string, header string) ([][]string, error) {
	rows, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		return nil, err
	}
	if len(rows) < 3 || strings.Join(rows[0], ",") != header {
		return nil, fmt.Errorf("the header is not %s with a row of units and rows below it", header)
	}
	return rows[2:], nil
}

func readEntries(text string) ([]Entry, error) {
	rows, err := readRows(text, "coding,modulations,code_rate,required_eb_n0,error_rate,metric,provenance,source")
	if err != nil {
		return nil, err
	}
	out := make([]Entry, 0, len(rows))
	for i, r := range rows {
		e := Entry{Coding: r[0], Modulations: strings.Fields(r[1]), CodeRateText: r[2], Metric: r[5], Provenance: r[6], Source: r[7]}
		need, errNeed := strconv.ParseFloat(r[3], 64)
		e.RequiredEbN0 = unit.DB(need)
		var errRate, errCode error
		e.ErrorRate, errRate = strconv.ParseFloat(r[4], 64)
		e.CodeRate, errCode = fraction(r[2])
		if errNeed != nil || errRate != nil || errCode != nil || !(math.Abs(need) <= 100) || !(e.ErrorRate > 0 && e.ErrorRate < 1) || !(e.CodeRate > 0 && e.CodeRate <= 1) {
			return nil, fmt.Errorf("row %d (%s): code rate %q, Eb/N0 %q or error rate %q is no number in range", i+3, r[0], r[2], r[3], r[4])
		}
		out = append(out, e)
	}
	return out, nil
}

func readModulations(text string) ([]Modulation, error) {
	rows, err := readRows(text, "modulation,bits_per_symbol,what")
	if err != nil {
		return nil, err
	}
	out := make([]Modulation, 0, len(rows))
	for i, r := range rows {
		bits, err := strconv.Atoi(r[1])
		if err != nil || bits < 1 {
			return nil, fmt.Errorf("row %d (%s): %q bits a symbol is not a whole number above 0", i+3, r[0], r[1])
		}
		out = append(out, Modulation{r[0], bits, r[2]})
	}
	return out, nil
}

// fraction reads "223/510" or "1".
func fraction(s string) (float64, error) {
	above, below, divided := strings.Cut(s, "/")
	a, err := strconv.Atoi(above)
	if err != nil || !divided {
		return float64(a), err
	}
	b, err := strconv.Atoi(below)
	if err != nil || b <= 0 {
		return 0, fmt.Errorf("%q is not a fraction", s)
	}
	return float64(a) / float64(b), nil
}
