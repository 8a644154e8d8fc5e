package measured

import (
	"math"
	"strings"
	"testing"
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
