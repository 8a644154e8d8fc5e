package main

import (
	"reflect"
	"strings"
	"testing"
)

// Two arcs make one ring, the second of them taken backwards. Worked by hand from the
// TopoJSON Format Specification 1.0, sections 2.1.2 (arcs are differences, scaled then
// translated) and 2.1.4 (the complement of an index is the arc reversed, and arcs share
// their ends).
func TestLandRings(t *testing.T) {
	rings, err := landRings([]byte(`{"type":"Topology","transform":{"scale":[0.5,0.25],"translate":[-10,20]},
		"arcs":[[[0,0],[4,0],[0,8]],[[0,0],[0,8],[4,0]]],
		"objects":{"land":{"type":"GeometryCollection","geometries":[{"type":"MultiPolygon","arcs":[[[0,-2]]]}]}}}`))
	if err != nil {
		t.Fatal(err)
	}
	want := [][]int{{-1000, 2000, -800, 2000, -800, 2200, -1000, 2200, -1000, 2000}}
	if !reflect.DeepEqual(rings, want) {
		t.Errorf("got %v, want %v", rings, want)
	}
}

func TestLandRingsRefuses(t *testing.T) {
	for _, row := range []struct{ text, want string }{
		{`{`, "unexpected end"},
		{`{"objects":{}}`, "no object land"},
		{`{"objects":{"land":{"geometries":[{"type":"Point"}]}}}`, "made of Point"},
		{`{"objects":{"land":{"geometries":[{"type":"MultiPolygon","arcs":[[[7]]]}]}}}`, "arc 7 of 0"},
		{`{"arcs":[[]],"objects":{"land":{"geometries":[{"type":"MultiPolygon","arcs":[[[0]]]}]}}}`, "arc 0 is empty"},
	} {
		if _, err := landRings([]byte(row.text)); err == nil || !strings.Contains(err.Error(), row.want) {
			t.Errorf("%s: got %v, want %q", row.text, err, row.want)
		}
	}
}
