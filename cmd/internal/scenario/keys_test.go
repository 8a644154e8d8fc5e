package scenario

import (
	"os"
	"strings"
	"testing"

	"slantwise/cmd/internal/scenario/tree"
)

// TestEveryKeyIsRead puts a group of keys at the place of each value of a file that
// holds every key: a key that nobody reads, or reads without a look, goes unnoticed.
func TestEveryKeyIsRead(t *testing.T) {
	const file = "testdata/good/everything.yaml"
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	src := &source{label: file, dir: "testdata/good", text: text}
	root, err := tree.Parse(text, tree.YAML)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := build(root, src, Request{}); err != nil {
		t.Fatal(err)
	}
	found := map[string]bool{}
	visit(root, func(e *tree.Entry) {
		found[e.Key] = true
		good := e.Value
		e.Value = &tree.Node{Kind: tree.Map, Line: good.Line, Entries: []tree.Entry{{Key: "zzz", Line: good.Line, Value: &tree.Node{Kind: tree.Null}}}}
		_, err := build(root, src, Request{})
		e.Value = good
		if err == nil || !strings.Contains(err.Error(), e.Key) {
			t.Errorf("line %d: a group at the place of %s gives %v", e.Line, e.Key, err)
		}
	})
	for _, keys := range [][]string{
		topKeys, windowKeys, earthKeys, spacecraftKeys, transmitterKeys, spinKeys, patternKeys, modeKeys, lossDissipativeKeys,
		stationKeys, antennaKeys, noiseKeys, stageKeys, sizingKeys, requirementKeys, marginAtKeys, marginShareKeys, familyKeys,
		uplinkKeys, transmitKeys, linkSetKeys, oscillatorKeys, measuredKeys, coherentKeys, pathKeys, climateKeys, levelKeys, lognormalKeys, lowPathKeys,
		mountKeys, measurementKeys, measurementColumnKeys,
		contactPlanKeys, planWeightKeys, planClosedKeys, planStationKeys, planAntennaKeys, shiftKeys, planCraftKeys, planDataKeys, planCommandsKeys, planLimitKeys, planSharedKeys,
		ratePlanKeys, licenceKeys, sectorKeys, hoursKeys, recorderKeys, recorderDataKeys, craftUncertaintyKeys, covarianceKeys, stateKeys, syntheticKeys, controlKeys, toleranceKeys, criterionKeys,
	} {
		for _, k := range keys {
			if !found[k] && k != "end_utc" { // which stands in place of length_h
				t.Errorf("%s holds no %s", file, k)
			}
		}
	}
}

// visit calls f for every key of a tree.
func visit(n *tree.Node, f func(*tree.Entry)) {
	for i := range n.Entries {
		e := &n.Entries[i]
		f(e)
		visit(e.Value, f)
	}
	for _, item := range n.Items {
		visit(item, f)
	}
}

// TestNumbersRefuseWhatIsNotFinite puts what is no finite number at the place of
// each number of that file.
func TestNumbersRefuseWhatIsNotFinite(t *testing.T) {
	const file = "testdata/good/everything.yaml"
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	src := &source{label: file, dir: "testdata/good", text: text}
	root, err := tree.Parse(text, tree.YAML)
	if err != nil {
		t.Fatal(err)
	}
	tried := 0
	numbers(root, func(n *tree.Node) {
		good := *n
		for _, bad := range []string{".nan", ".inf", "-.Inf", "1e999"} {
			n.Text = bad
			if _, err := build(root, src, Request{}); err == nil && good.Text != "99001" {
				t.Errorf("line %d: %s in place of %s was accepted", n.Line, bad, good.Text)
			}
			tried++
		}
		n.Kind, n.Text = tree.Text, "−1"
		if _, err := build(root, src, Request{}); good.Text != "99001" && (err == nil || !strings.Contains(err.Error(), "U+2212")) {
			t.Errorf("line %d: a mathematical minus in place of %s gives %v", good.Line, good.Text, err)
		}
		*n = good
	})
	if tried < 300 {
		t.Errorf("only %d values were tried; the file holds more numbers", tried)
	}
}

// numbers calls f for every number of a tree.
func numbers(n *tree.Node, f func(*tree.Node)) {
	if n.Kind == tree.Number {
		f(n)
	}
	for _, e := range n.Entries {
		numbers(e.Value, f)
	}
	for _, item := range n.Items {
		numbers(item, f)
	}
}
