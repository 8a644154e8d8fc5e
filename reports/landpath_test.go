package reports

import "testing"

// TestLandPath draws a ring in the middle, one over 180 degrees, which stands on both
// sides of the map, and one around the south pole, which is closed along it.
func TestLandPath(t *testing.T) {
	for _, row := range []struct {
		name string
		ring []Place
		want string
	}{
		{"in the middle", []Place{{0, 10}, {5, 20}, {-5, 15}}, "M10.0 0.0L20.0 -5.0L15.0 5.0z"},
		{"over 180 degrees", []Place{{0, 170}, {10, -170}, {-10, 175}}, "M-190.0 0.0L-170.0 -10.0L-185.0 10.0zM170.0 0.0L190.0 -10.0L175.0 10.0z"},
		{"around the pole", []Place{{-70, -180}, {-60, -60}, {-75, 60}}, "M-180.0 70.0L-60.0 60.0L60.0 75.0L180.0 70.0L180.0 90.0L-180.0 90.0z"},
	} {
		if got := landPath([][]Place{row.ring}); got != row.want {
			t.Errorf("%s: got %s, want %s", row.name, got, row.want)
		}
	}
}
