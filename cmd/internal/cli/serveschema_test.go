package cli

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"net/http"
	"strconv"
	"strings"
	"testing"

	"slantwise/cmd/internal/web"
	"slantwise/cmd/internal/web/schematest"
)

// TestServedSchema holds every answer of the demo against the schema that is served with
// them, and each chart's CSV against its JSON.
func TestServedSchema(t *testing.T) {
	at := serve(t, "--clock", "2026-09-15T00:55:00Z", "--speed", "0")
	_, text := visit(t, at+"api/schema")
	schema, err := schematest.New(text)
	if err != nil {
		t.Fatal(err)
	}
	holds := func(definition string, body []byte) {
		t.Helper()
		if err := schema.Check(definition, body); err != nil {
			t.Errorf("%s: %v", definition, err)
		}
	}
	get := func(definition, path string, into any) {
		t.Helper()
		code, body := visit(t, at+path)
		if code != http.StatusOK {
			t.Fatalf("%s: status %d", path, code)
		}
		holds(definition, body)
		if err := json.Unmarshal(body, into); err != nil {
			t.Fatal(err)
		}
	}
	var s web.State
	get("state", "api/state", &s)
	if len(s.Signals) == 0 || len(s.Next) == 0 {
		t.Fatal("the instant shows too little")
	}
	var all []web.Contact
	get("contacts", "api/contacts", &all)
	if rows := sheetOf(t, at+"api/csv/contacts"); len(rows) != len(all)+1 || rows[1][0] != all[0].ID || rows[0][9] != "max_elevation_deg" || rows[1][9] != number4(all[0].MaxElevationDeg) {
		t.Errorf("contacts as CSV: %d rows, first %q", len(rows), rows[1])
	}
	if rows := sheetOf(t, at+"api/csv/map"); len(rows) != 2+len(s.Spacecraft)+len(s.Stations) || rows[1][3] != number4(s.Spacecraft[0].LatitudeDeg) {
		t.Errorf("the map as CSV: %q", rows)
	}
	seen := map[string]bool{} // a contact with a link, and one of geometry alone
	for _, c := range all {
		if kind := c.Transmitter; seen[kind] {
			continue
		} else {
			seen[kind] = true
		}
		var d web.Detail
		get("detail", "api/contacts/"+c.ID, &d)
		rows := sheetOf(t, at+"api/csv/contacts/"+c.ID)
		last := rows[len(rows)-1]
		if n := len(d.Seconds); len(rows) != n+1 || last[1] != number4(d.Seconds[n-1]) || last[3] != number4(d.ElevationDeg[n-1]) || last[9] != number4(d.LongitudeDeg[n-1]) {
			t.Errorf("%s as CSV: %d rows for %d samples, last %q", c.ID, len(rows), n, last)
		}
		lines := sheetOf(t, at+"api/csv/contacts/"+c.ID+"/lines")
		if want := 1 + len(d.Circle.LatitudeDeg) + len(d.Before.LatitudeDeg) + len(d.After.LatitudeDeg) + len(d.Horizon.AzimuthDeg) + len(d.Sky); len(lines) != want || len(d.Circle.LatitudeDeg) == 0 {
			t.Errorf("%s: %d lines, want %d", c.ID, len(lines), want)
		}
		body, err := json.Marshal(web.Question{Contact: c.ID})
		if err != nil {
			t.Fatal(err)
		}
		holds("question", body)
		r, err := http.Post(at+"api/what-if", "application/json", bytes.NewReader(body))
		if err != nil {
			t.Fatal(err)
		}
		var answer bytes.Buffer
		if _, err := answer.ReadFrom(r.Body); err != nil {
			t.Fatal(err)
		}
		r.Body.Close()
		if r.StatusCode == http.StatusOK {
			holds("answer", answer.Bytes())
		} else {
			holds("refusal", answer.Bytes())
		}
	}
	if len(seen) < 5 || !seen[""] {
		t.Errorf("only contacts by %v", seen)
	}
	for _, path := range []string{"api/contacts/none", "api/csv/contacts/none", "api/scenario?contact=none", "api/scenario?x=1", "api/scenario?contact=" + strings.Repeat("a", 9000)} {
		code, body := visit(t, at+path)
		if code < 400 {
			t.Errorf("%s: status %d", path, code)
		}
		holds("refusal", body)
	}
}

func sheetOf(t *testing.T, address string) [][]string {
	t.Helper()
	code, body := visit(t, address)
	if code != http.StatusOK {
		t.Fatalf("%s: status %d", address, code)
	}
	rows, err := csv.NewReader(bytes.NewReader(body)).ReadAll()
	if err != nil || len(rows) < 2 {
		t.Fatalf("%s: %d rows, %v", address, len(rows), err)
	}
	return rows
}

func number4(n web.Number) string { return strconv.FormatFloat(float64(n), 'f', 4, 64) }
