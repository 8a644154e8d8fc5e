package measured

import (
	"math"
	"strings"
	"testing"
	"time"
)

const goodTable = `utc,cn0_dbhz,received_power_dbw,frequency_khz,locked,mood
2026-09-15T00:50:00Z,55.5,-140,437000.5,yes,fine
2026-09-15T00:50:02.5Z,56,,437000.4,no,
2026-09-15T00:50:00Z,55.5,-140,437000.5,yes,fine
`

// goodKVN has the layout and units of CCSDS 503.0-B-2: dBW, dBHz, Hz over FREQ_OFFSET.
const goodKVN = `CCSDS_TDM_VERS = 2.0
COMMENT invented
CREATION_DATE = 2026-09-16T00:00:00
ORIGINATOR = EXAMPLE
META_START
TIME_SYSTEM = UTC
PARTICIPANT_1 = A
PARTICIPANT_2 = B
MODE = SEQUENTIAL
PATH = 2,1
FREQ_OFFSET = 437000000
ANGLE_TYPE = AZEL
HOUSE_STYLE = plain
META_STOP
DATA_START
RECEIVE_FREQ_1 = 2026-258T00:50:00 500
PC_N0 = 2026-09-15T00:50:00 55.5
CARRIER_POWER = 2026-09-15T00:50:00 -140
ANGLE_1 = 2026-09-15T00:50:00 120
ANGLE_2 = 2026-09-15T00:50:00 20
PRESSURE = 2026-09-15T00:50:00 1000
SPARKLE = 2026-09-15T00:50:00 1
DATA_STOP
`

const goodXML = `<?xml version="1.0"?><tdm id="CCSDS_TDM_VERS" version="2.0"><header><ORIGINATOR>E</ORIGINATOR></header><body><segment>
<metadata><TIME_SYSTEM>UTC</TIME_SYSTEM><FREQ_OFFSET>437000000</FREQ_OFFSET><ANGLE_TYPE>AZEL</ANGLE_TYPE><HOUSE_STYLE>x</HOUSE_STYLE></metadata>
<data><observation><EPOCH>2026-09-15T00:50:00</EPOCH><RECEIVE_FREQ>500</RECEIVE_FREQ></observation>
<observation><EPOCH>2026-09-15T00:50:00</EPOCH><PC_N0>55.5</PC_N0></observation>
<observation><EPOCH>2026-09-15T00:50:00</EPOCH><CARRIER_POWER>-140</CARRIER_POWER></observation>
<observation><EPOCH>2026-09-15T00:50:00</EPOCH><SPARKLE>1</SPARKLE></observation></data></segment></body></tdm>`

func TestReadForms(t *testing.T) {
	for name, text := range map[string]string{"table": goodTable, "kvn": goodKVN, "xml": goodXML} {
		l, err := Read(strings.NewReader(text), name, nil)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		s := l.Samples[0]
		for q, want := range map[Quantity]float64{CN0DBHz: 55.5, PowerDBm: -110, FrequencyHz: 437000500} {
			if math.Abs(s.Get(q)-want) > 1e-6 {
				t.Errorf("%s: %v is %v, want %v", name, q, s.Get(q), want)
			}
		}
		notes := strings.Join(l.Notes, "\n")
		if name == "table" && (!strings.Contains(notes, "mood") || !strings.Contains(notes, "1 doubled rows") || len(l.Samples) != 2) {
			t.Errorf("%s: %d samples, notes %q", name, len(l.Samples), notes)
		}
		if name != "table" && (!strings.Contains(notes, "SPARKLE") || !strings.Contains(notes, "HOUSE_STYLE") || len(l.Samples) != 1) {
			t.Errorf("%s: %d samples, notes %q", name, len(l.Samples), notes)
		}
	}
}

func TestReadFaults(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"two units", "utc,received_power_dbm,received_power_dbw\n", "perhaps in two units"},
		{"unit in the field", "utc,cn0_dbhz\n2026-09-15T00:50:00Z,55 dBHz\n", "write the number alone"},
		{"no zone", "utc,cn0_dbhz\n2026-09-15T00:50:00,55\n", "line 2: utc"},
		{"contradiction", "utc,cn0_dbhz\n2026-09-15T00:50:00Z,55\n2026-09-15T00:50:00Z,56\n", "in line 2"},
		{"nothing measured", "utc,mood\n2026-09-15T00:50:00Z,fine\n", "no column holds"},
		{"cut off", "utc,cn0_dbhz\n2026-09-15T00:50:00Z\n", "1 fields"},
		{"empty", "", "column names"},
		{"beyond", "utc,humidity_pct\n2026-09-15T00:50:00Z,120\n", "must be 0 to 100"},
		{"other scale", strings.Replace(goodKVN, "= UTC", "= TAI", 1), "not supported"},
		{"two-way", strings.Replace(goodKVN, "2,1", "1,2,1", 1), "two-way"},
		{"cut KVN", strings.TrimSuffix(goodKVN, "DATA_STOP\n"), "cut off"},
		{"broken XML", goodXML[:200], "hold together"},
	} {
		if _, err := Read(strings.NewReader(c.text), "log", nil); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v, want %q in it", c.name, err, c.want)
		}
	}
}

func TestMappedColumns(t *testing.T) {
	l, err := Read(strings.NewReader("When,S\n2026-09-15T00:50:00Z,55\n"), "log", map[string]string{"utc": "When", "cn0_dbhz": "S"})
	if err != nil || l.Samples[0].Get(CN0DBHz) != 55 {
		t.Errorf("%v, %v", l, err)
	}
	if _, err := Read(strings.NewReader("When,S\n"), "log", map[string]string{"utc": "Then", "loudness": "S"}); err == nil ||
		!strings.Contains(err.Error(), "Then") || !strings.Contains(err.Error(), "loudness") {
		t.Errorf("%v: both faults must be told", err)
	}
}

// FuzzRead: what is accepted is in order, finite or absent, and each instant is there once.
func FuzzRead(f *testing.F) {
	for _, s := range []string{goodTable, goodKVN, goodXML, goodXML[:300], "utc,locked\n2026-09-15T00:50:00Z,2\n", "utc,a\n\"", "CCSDS_TDM_VERS=2\nDATA_START\n"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		l, err := Read(strings.NewReader(text), "fuzz", nil)
		if err != nil {
			return
		}
		for i, s := range l.Samples {
			if i > 0 && !s.At.After(l.Samples[i-1].At) {
				t.Fatalf("sample %d is not after the one before", i)
			}
			for q, v := range s.Values {
				if math.IsInf(v, 0) {
					t.Fatalf("%v is %v", Quantity(q), v)
				}
			}
		}
	})
}

func TestLaidOutTable(t *testing.T) {
	lay := &Layout{Separator: ';', TimeColumn: "When", Times: TimePlain, ClockAhead: 250 * time.Millisecond, Missing: []string{"-999"}, Columns: []LayoutColumn{
		{Column: "AGC", Holds: "relative_power_db", Scale: -0.5, Add: 12}, {Column: "Tone", Holds: "frequency_khz", Add: 437000},
		{Column: "State", Holds: "locked", Yes: "LOCK"}, {Holds: "rain_mm_h", Constant: 0.5}}}
	const text = "When;AGC;Tone;State\n2026-09-15 00:50:00.25;-40;0.5;LOCK\n2026-09-15 00:50:01.25;-999;;-\n"
	if !lay.Fits([]byte(text)) || lay.Fits([]byte(goodTable)) {
		t.Error("a table is known by its columns")
	}
	l, err := ReadLaidOut(strings.NewReader(text), "log", lay)
	if err != nil {
		t.Fatal(err)
	}
	a, b := l.Samples[0], l.Samples[1]
	if !a.At.Equal(time.Date(2026, 9, 15, 0, 50, 0, 0, time.UTC)) || a.Get(RelativePowerDB) != 32 || a.Get(FrequencyHz) != 437000500 || a.Get(Locked) != 1 || a.Get(RainMmH) != 0.5 {
		t.Errorf("first row: %v %v", a.At, a.Values)
	}
	if !math.IsNaN(b.Get(RelativePowerDB)) || !math.IsNaN(b.Get(FrequencyHz)) || b.Get(Locked) != 0 {
		t.Errorf("second row: %v", b.Values)
	}
	lay.Times = TimeUnix
	l, err = ReadLaidOut(strings.NewReader("When;AGC;Tone;State\n1789433400.5;-40;0.5;LOCK\n"), "log", lay)
	if err != nil || !l.Samples[0].At.Equal(time.Date(2026, 9, 15, 0, 50, 0, 250e6, time.UTC)) {
		t.Errorf("seconds since 1970: %v %v", l, err)
	}
	for _, c := range []struct{ text, want string }{
		{"When;AGC;Tone\n", `no column "State"`}, {"When;AGC;Tone;State\n1e99;1;1;1\n", "seconds since 1970"}, {"When;AGC;Tone;State;rain_mm_h\n", "hold the same quantity"},
	} {
		if _, err := ReadLaidOut(strings.NewReader(c.text), "log", lay); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q: %v, want %q in it", c.text, err, c.want)
		}
	}
}

// FuzzLayout: a table that is laid out is read without a panic, and what is accepted is finite or absent.
func FuzzLayout(f *testing.F) {
	f.Add("When;AGC;State\n2026-09-15 00:50:00;-40;LOCK\n", ";", 1, -0.5)
	f.Add("When\tAGC\tState\n1789433400.5\t-40\tLOCK\n", "\t", 2, 1e300)
	f.Add("When,AGC,State,When\n\"\n", ",", 0, 0.0)
	f.Fuzz(func(t *testing.T, text, separator string, form int, scale float64) {
		lay := &Layout{TimeColumn: "When", Times: TimeForm(form), Missing: []string{"-"}, Columns: []LayoutColumn{{Column: "AGC", Holds: "relative_power_db", Scale: scale}, {Column: "State", Holds: "locked", Yes: "LOCK"}}}
		for _, c := range separator {
			lay.Separator = c
		}
		lay.Fits([]byte(text))
		l, err := ReadLaidOut(strings.NewReader(text), "fuzz", lay)
		if err != nil {
			return
		}
		for _, s := range l.Samples {
			if v := s.Get(RelativePowerDB); math.IsInf(v, 0) || math.Abs(v) > 300 {
				t.Fatalf("relative power %v", v)
			}
		}
	})
}
