package cli

import (
	"encoding/csv"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const modesHeader = "name,modulation,coding,code_rate,bits_per_symbol,spectral_efficiency_bit_per_symbol,required_eb_n0_db,required_es_n0_db,error_rate,source"

func modesRows(t *testing.T, args ...string) [][]string {
	t.Helper()
	code, out, errOut := invoke(t, append([]string{"modes", "--format", "csv"}, args...)...)
	if code != ExitAnswer {
		t.Fatalf("exit %d: %s", code, errOut)
	}
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil || strings.Join(rows[0], ",") != modesHeader {
		t.Fatalf("%v, header %v", err, rows[0])
	}
	return rows[1:]
}

// ETSI EN 302 307-1 table 13: QPSK 1/2 has 0.988858 bit/symbol and needs 1.00 dB of
// Es/N0, which is 1.05 dB of Eb/N0, for a packet error rate of 1e-7.
func TestModesCSV(t *testing.T) {
	rows := modesRows(t, "--modulation", "qpsk", "--coding", "dvb-s2-1-2")
	if len(rows) != 1 {
		t.Fatalf("%d rows", len(rows))
	}
	want := "qpsk dvb-s2-1-2,qpsk,dvb-s2-1-2,0.500000,2,0.988858,1.049,1.000,1e-07"
	if got := strings.Join(rows[0][:9], ","); got != want || !strings.HasPrefix(rows[0][9], "packet error rate, seen-secondary: ETSI EN 302 307-1") {
		t.Errorf("got %s\nwant %s, source %q", got, want, rows[0][9])
	}
	if all := modesRows(t); len(all) < 130 {
		t.Errorf("%d rows in all", len(all))
	}
	if dvb := modesRows(t, "--coding", "dvb-s2-"); len(dvb) != 28 {
		t.Errorf("%d rows of DVB-S2, want 28", len(dvb))
	}
}

// Uncoded QPSK at 1e-6 needs 10.530 dB (Q(sqrt(2 Eb/N0))); the codings of DVB-S2 do not
// know that error rate, and say so.
func TestModesErrorRate(t *testing.T) {
	code, out, errOut := invoke(t, "modes", "--format", "csv", "--modulation", "qpsk", "--error-rate", "1e-6")
	if code != ExitAnswer || !strings.Contains(out, "qpsk none,qpsk,none,1.000000,2,2.000000,10.530,13.540,1e-06,") {
		t.Errorf("exit %d\n%s", code, out)
	}
	if !strings.Contains(out, "qpsk dvb-s2-1-2,qpsk,dvb-s2-1-2,0.500000,2,0.988858,,,,") || !strings.Contains(errOut, "do not know that error rate") {
		t.Errorf("%s\n%s", errOut, out)
	}
	_, out, _ = invoke(t, "modes", "--format", "csv", "--coding", "ccsds-rs-255-223", "--modulation", "bpsk", "--error-rate", "1e-6", "--metric", "frame")
	if !strings.Contains(out, ",frame error rate, computed") && !strings.Contains(out, "frame error rate, computed") {
		t.Errorf("no frame error rate in\n%s", out)
	}
}

func TestModesFilters(t *testing.T) {
	for _, r := range modesRows(t, "--max-eb-n0-db", "1", "--min-efficiency", "0.6") {
		if r[6] > "1.0" || r[5] < "0.6" {
			t.Errorf("kept %v", r)
		}
	}
	wide := modesRows(t, "--symbol-rate", "1e6")
	narrow := modesRows(t, "--symbol-rate", "1e6", "--roll-off", "0.2", "--bandwidth-mhz", "1.2")
	for _, r := range narrow {
		if r[1] == "2fsk" || r[1] == "gmsk" { // 2 and 1.5 Hz a baud by Carson's rule
			t.Errorf("%s fits", r[0])
		}
	}
	if len(narrow) == 0 || len(narrow) >= len(wide) {
		t.Errorf("%d of %d rows fit", len(narrow), len(wide))
	}
}

// Net data rate of ETSI EN 302 307-1, QPSK 3/4 with pilots: 22 blocks of 36 symbols
// beside 361 slots of 90; width 1.2 MHz at a roll-off of 0.2.
func TestModesJSON(t *testing.T) {
	code, out, _ := invoke(t, "modes", "--format", "json", "--coding", "dvb-s2-3-4", "--modulation", "qpsk", "--symbol-rate", "1e6", "--roll-off", "0.2", "--pilots")
	var got struct {
		Modes []struct {
			Name    string  `json:"name"`
			Metric  string  `json:"metric"`
			NetRate float64 `json:"net_data_rate_bps"`
			Width   float64 `json:"occupied_bandwidth_hz"`
			Gap     float64 `json:"over_shannon_db"`
			Frame   struct {
				Sent float64 `json:"sent_bits"`
			} `json:"frame"`
			Curves []any `json:"curves"`
		} `json:"modes"`
	}
	if err := json.Unmarshal([]byte(out), &got); err != nil || code != ExitAnswer || len(got.Modes) != 1 {
		t.Fatalf("exit %d, %v in\n%s", code, err, out)
	}
	m := got.Modes[0]
	if rate := 48328.0 / 33282 * 1e6; m.NetRate < rate-0.01 || m.NetRate > rate+0.01 || m.Width != 1.2e6 || m.Frame.Sent != 64800 || m.Metric != "packet error rate" || m.Curves == nil || m.Gap < 0.5 || m.Gap > 1.5 {
		t.Errorf("got %+v, want %f bit/s", m, rate)
	}
}

func TestModesAdd(t *testing.T) {
	file := filepath.Join(t.TempDir(), "own.csv")
	text := "modulation,coding,code_rate,bits_per_symbol,width_hz_per_baud,frame_information_bits,frame_header_bits,frame_sent_bits,frame_marker_bits,required_eb_n0_db,error_rate,metric,source\n" +
		"qpsk,house,1/2,2,,,,,,3.5,1e-5,bit,measured on the bench\n"
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	rows := modesRows(t, "--add", file, "--coding", "house")
	if len(rows) != 1 || strings.Join(rows[0], ",") != "qpsk house,qpsk,house,0.500000,2,1.000000,3.500,3.500,1e-05,bit error rate, user: measured on the bench" {
		t.Errorf("got %v", rows)
	}
}

func TestModesTable(t *testing.T) {
	code, out, errOut := invoke(t, "modes", "--coding", "ccsds-conv-1-2", "--modulation", "bpsk", "--symbol-rate", "9600")
	if code != ExitAnswer || errOut != "" || !strings.Contains(out, "bpsk        ccsds-conv-1-2") || !strings.Contains(out, "net bit/s") {
		t.Errorf("exit %d, %s\n%s", code, errOut, out)
	}
	code, out, _ = invoke(t, "modes", "--max-eb-n0-db", "-50")
	if code != ExitAnswer || strings.Count(out, "\n") != 2 {
		t.Errorf("an empty answer: exit %d\n%s", code, out)
	}
}

func TestModesRefuses(t *testing.T) {
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"--modulation", "qspk"}, `--modulation: modulation: "qspk" is not in the catalogue; the nearest are msk, qpsk`},
		{[]string{"--error-rate", "0"}, "--error-rate: 0 is not allowed"},
		{[]string{"--error-rate", "NaN"}, "--error-rate: NaN is not allowed"},
		{[]string{"--symbol-rate", "-1"}, "--symbol-rate: -1 is not allowed"},
		{[]string{"--roll-off", "2"}, "--roll-off: 2 is not allowed"},
		{[]string{"--bandwidth-mhz", "1"}, "--bandwidth-mhz needs --symbol-rate"},
		{[]string{"--metric", "words"}, `--metric: "words" is not allowed; it must be bit, codeword, frame or packet`},
		{[]string{"--add", "no-such-file.csv"}, "--add no-such-file.csv: it cannot be read (no such file or directory); name a CSV file of modes"},
		{[]string{"--add", "."}, "--add .: modes: "},
		{[]string{"--coding", "dvbs2"}, `--coding: no name in the catalogue holds "dvbs2"; the nearest are dvb-s2`},
		{[]string{"--coding", "nosuch"}, `--coding: no name in the catalogue holds "nosuch"; slantwise modes lists them all`},
		{[]string{"extra"}, `takes no "extra"`},
	} {
		code, _, errOut := invoke(t, append([]string{"modes"}, c.args...)...)
		if code != ExitInput || !strings.Contains(errOut, c.want) {
			t.Errorf("%v: exit %d, %s, want %q", c.args, code, errOut, c.want)
		}
	}
}
