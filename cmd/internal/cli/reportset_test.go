package cli

import (
	"encoding/csv"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestPagesTellLinkSets: what a pass's page and JSON say of a link set is what rates --set
// says of the pass.
func TestPagesTellLinkSets(t *testing.T) {
	t.Chdir(t.TempDir())
	if code, _, errOut := invoke(t, "report", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--into", "pages"); code != ExitAnswer {
		t.Fatal(errOut)
	}
	type set struct {
		Set    string
		Shares []struct {
			Link                     string
			Seconds, Bytes           float64
			AloneSeconds, AloneBytes float64
		}
	}
	var found []set
	names, err := filepath.Glob("pages/passes/*.json")
	if err != nil || len(names) == 0 {
		t.Fatal(err, len(names))
	}
	for _, name := range names {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		var j struct {
			Sets []set `json:"link_sets"`
		}
		if err := json.Unmarshal(text, &j); err != nil {
			t.Fatal(err)
		}
		page, err := os.ReadFile(strings.TrimSuffix(name, ".json") + ".html")
		if err != nil {
			t.Fatal(err)
		}
		for _, s := range j.Sets {
			found = append(found, s)
			if !strings.Contains(string(page), "Shared among the links of "+s.Set) {
				t.Errorf("%s: the page does not tell the set %s", name, s.Set)
			}
		}
	}
	if len(found) == 0 {
		t.Fatal("no page tells a link set")
	}
	name := found[0].Set
	code, out, errOut := invoke(t, "rates", "--spacecraft", "Wagtail 1", "--station", "Skerry Point", "--set", name, "--format", "csv")
	if code != ExitAnswer {
		t.Fatal(errOut)
	}
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	want := map[string]float64{} // by link: the sums over all passes
	for _, r := range rows[1:] {
		want[r[5]] += near(t, r[8])
	}
	got := map[string]float64{}
	for _, s := range found {
		if s.Set != name {
			continue
		}
		for _, x := range s.Shares {
			got[x.Link] += 100 * x.Bytes
		}
	}
	for link, bytes := range want {
		if got[link] != bytes || bytes == 0 {
			t.Errorf("%s: %v bytes on the pages, %v by rates --set", link, got[link]/100, bytes/100)
		}
	}
}
