package cli

import (
	"context"
	"encoding/json"
	"io"
	"net"
	"net/http"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"time"

	"slantwise/cmd/internal/web"
)

// served is the line that the command writes, once it is there.
type served struct{ line chan string }

func (s *served) Write(p []byte) (int, error) {
	s.line <- strings.TrimSpace(string(p))
	return len(p), nil
}

// serve runs the command until the test ends and returns its address.
func serve(t *testing.T, args ...string) string {
	t.Helper()
	out := &served{line: make(chan string, 1)}
	ctx, stop := context.WithCancel(t.Context())
	env := newEnv(strings.NewReader(""), out, io.Discard)
	code := make(chan int, 1)
	go func() { code <- run(ctx, append([]string{"serve", "--listen", "127.0.0.1:0"}, args...), env) }()
	t.Cleanup(func() {
		stop()
		if got := <-code; got != ExitAnswer {
			t.Errorf("code %d after an interrupt", got)
		}
	})
	select {
	case line := <-out.line:
		return line
	case got := <-code:
		code <- got
		t.Fatalf("it ended with code %d", got)
	}
	return ""
}

// ask gets JSON, or posts a question where there is one.
func ask(t *testing.T, address string, question, into any) int {
	t.Helper()
	var r *http.Response
	var err error
	if question == nil {
		r, err = http.Get(address)
	} else {
		var body []byte
		if body, err = json.Marshal(question); err == nil {
			r, err = http.Post(address, "application/json", strings.NewReader(string(body)))
		}
	}
	if err != nil {
		t.Fatal(err)
	}
	defer r.Body.Close()
	if err := json.NewDecoder(r.Body).Decode(into); err != nil {
		t.Fatal(err)
	}
	return r.StatusCode
}

// TestServedNumbers holds the live signal against the command budget, and questions
// against laws: twice the power is 3.01 dB, and what changes nothing changes no number.
func TestServedNumbers(t *testing.T) {
	at := serve(t, "--clock", "2026-09-15T00:55:00Z", "--speed", "0")
	var s web.State
	ask(t, at+"api/state", nil, &s)
	var c *web.Contact
	for i := range s.Next {
		if s.Next[i].Spacecraft == "Wagtail 1" && s.Next[i].Station == "Skerry Point" && c == nil {
			c = &s.Next[i]
		}
	}
	if c == nil {
		t.Fatal("the contact under way is missing")
	}
	var signal *web.Signal
	for i := range s.Signals {
		if s.Signals[i].ID == c.ID {
			signal = &s.Signals[i]
		}
	}
	if signal == nil {
		t.Fatal("there is no signal of the contact under way")
	}
	code, out, errOut := invoke(t, "budget", "--spacecraft", c.Spacecraft, "--station", c.Station, "--mode", signal.Mode, "--at", "2026-09-15T00:55:00Z", "--format", "json")
	if code != ExitAnswer {
		t.Fatal(errOut)
	}
	var b struct {
		Samples []struct {
			MarginDB float64 `json:"margin_db"`
			PowerDBm float64 `json:"received_power_dbm"`
		} `json:"samples"`
	}
	if err := json.Unmarshal([]byte(out), &b); err != nil || len(b.Samples) != 1 {
		t.Fatalf("%v: %d samples in %s", err, len(b.Samples), out)
	}
	within(t, "margin, dB", float64(signal.MarginDB), b.Samples[0].MarginDB, 1e-3)
	within(t, "power, dBm", float64(signal.ReceivedPowerDBm), b.Samples[0].PowerDBm, 1e-3)

	var d web.Detail
	ask(t, at+"api/contacts/"+c.ID, nil, &d)
	power := 2 * float64(d.PowerW)
	least := float64(d.MinimumElevation)
	var a web.Answer
	began := time.Now()
	if code := ask(t, at+"api/what-if", web.Question{Contact: c.ID, Mode: d.Mode, PowerW: &power}, &a); code != http.StatusOK {
		t.Fatalf("status %d", code)
	}
	t.Logf("a question took %v", time.Since(began))
	// 10 lg 2 = 3.0103; the figures come with 4 decimals.
	within(t, "gain of twice the power, dB", float64(a.After.LeastMarginDB-a.Before.LeastMarginDB), 3.0103, 2e-4)
	ask(t, at+"api/what-if", web.Question{Contact: c.ID, LeastElevationDeg: &least}, &a)
	within(t, "bytes", float64(a.After.Bytes), float64(a.Before.Bytes), 1e-6*float64(a.Before.Bytes))
	high := 89.0
	ask(t, at+"api/what-if", web.Question{Contact: c.ID, LeastElevationDeg: &high}, &a)
	if a.After.Usable || a.After.Bytes != 0 {
		t.Errorf("over 89 deg: %+v", a.After)
	}
	for _, q := range []web.Question{
		{Contact: c.ID, Mode: "warp"}, {Contact: c.ID, DishM: new(float64)}, {Contact: c.ID, PowerW: new(float64)}, {Contact: c.ID, ExceededPercent: new(float64)},
	} {
		var refused struct{ Error string }
		if code := ask(t, at+"api/what-if", q, &refused); code != http.StatusUnprocessableEntity || refused.Error == "" {
			t.Errorf("%+v: status %d, %q", q, code, refused.Error)
		}
	}
}

func within(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if d := got - want; !(d <= tolerance && d >= -tolerance) {
		t.Errorf("%s: got %g, want %g, difference %g, tolerance %g", what, got, want, d, tolerance)
	}
}

// TestServedScenarioTurnsInvalid breaks each file of a scenario while it is served, and
// mends it. The files lie in other folders than the scenario's, as those of a team do.
func TestServedScenarioTurnsInvalid(t *testing.T) {
	apart := t.TempDir()
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "new"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	read := func(file string) string {
		t.Helper()
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		return string(text)
	}
	write := func(file, text string) {
		t.Helper()
		if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	elementFile, mask, skyline := filepath.Join(apart, "elements.tle"), filepath.Join(apart, "skyline.csv"), "azimuth_deg,elevation_deg\n0,5\n180,8\n"
	good := strings.Replace(read("slantwise.yaml"), "'slantwise.tle'", "'"+elementFile+"'", 1)
	good = regexp.MustCompile(`horizon_mask: .*`).ReplaceAllString(good, "horizon_mask_file: '"+mask+"'")
	sets := read("slantwise.tle")
	write("slantwise.yaml", good)
	write(elementFile, sets)
	write(mask, skyline)
	at := serve(t)
	type state struct {
		web.State
		Fault      string
		Generation int
	}
	generation := 1
	await := func(what, fault string) {
		t.Helper()
		var s state
		for range 200 {
			s = state{}
			if code := ask(t, at+"api/state", nil, &s); code != http.StatusOK {
				t.Fatalf("status %d", code)
			}
			if len(s.Spacecraft) == 0 {
				t.Fatalf("%s: the last good state is gone", what)
			}
			if (fault == "") == (s.Fault == "") && strings.Contains(s.Fault, fault) && s.Generation == generation {
				return
			}
			time.Sleep(50 * time.Millisecond)
		}
		t.Fatalf("%s: not within 10 s; fault %q, generation %d, want %q, %d", what, s.Fault, s.Generation, fault, generation)
	}
	for _, row := range []struct{ what, file, bad, fault, good string }{
		{"an unknown key", "slantwise.yaml", "wrong_key: 1\n" + good, "wrong_key", good + "\n# mended\n"},
		{"elements in another folder", elementFile, strings.Replace(sets, "1 ", "1 x", 1), "elements.tle", sets},
		{"a mask in another folder", mask, skyline + "north,5\n", "skyline.csv", skyline + "270,4\n"},
	} {
		write(row.file, row.bad)
		await(row.what, row.fault)
		write(row.file, row.good)
		generation++
		await(row.what+", mended", "")
	}
	if err := os.Remove(elementFile); err != nil {
		t.Fatal(err)
	}
	await("a file that is gone", "elements.tle")
	write(elementFile, sets)
	generation++
	await("a file that is back", "")
}

func TestServeRefuses(t *testing.T) {
	busy, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	defer busy.Close()
	for _, row := range []struct{ flag, value, want string }{
		{"--listen", "0.0.0.0:8460", `--listen: "0.0.0.0" is not one address of this machine`},
		{"--listen", ":8460", `--listen: "" is not one address of this machine`},
		{"--listen", "[::]:8460", `--listen: "::" is not one address of this machine`},
		{"--listen", "example.net:8460", `--listen: "example.net" is not one address of this machine`},
		{"--listen", "8460", `--listen: "8460" is not an address with a port`},
		{"--listen", busy.Addr().String(), "another program may hold the port"},
		{"--speed", "-1", "--speed: -1 is not allowed; it must be 0 to 3600"},
		{"--speed", "NaN", "--speed: NaN is not allowed"},
		{"--clock", "yesterday", "--clock: "},
	} {
		t.Run(row.flag+" "+row.value, func(t *testing.T) {
			code, _, errOut := invoke(t, "serve", "--stop-after", "1s", row.flag, row.value)
			if code != ExitInput || !strings.Contains(errOut, row.want) {
				t.Errorf("code %d, stderr %s", code, errOut)
			}
		})
	}
}
