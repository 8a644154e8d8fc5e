package elements

import (
	"errors"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
)

// setAt returns the example set with another number, name and epoch.
func setAt(number int, name string, epoch time.Time) orbit.Elements {
	el := exampleSet()
	el.CatalogNumber, el.Name, el.Epoch = number, name, epoch
	return el
}

var noon = time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC)

func day(n float64) time.Time {
	return noon.Add(time.Duration(n * 24 * float64(time.Hour))).Round(time.Second)
}

func TestChoose(t *testing.T) {
	sets := []orbit.Elements{
		setAt(99002, "PIPIT", day(-1)), setAt(99001, "WAGTAIL", day(0)), setAt(99001, "WAGTAIL", day(4)), setAt(99001, "WAGTAIL B", day(2)),
		setAt(0, "A", day(0)), setAt(0, "B", day(0)),
	}
	for name, c := range map[string]struct {
		how  Choice
		at   time.Time
		want time.Time
		age  time.Duration
	}{
		"newest":                       {Newest, day(1), day(4), -72 * time.Hour},
		"nearest before all":           {Nearest, day(-9), day(0), -9 * 24 * time.Hour},
		"nearest in between":           {Nearest, day(1.9), day(2), -144 * time.Minute},
		"equally near: the later":      {Nearest, day(1), day(2), -24 * time.Hour},
		"equally near from above, too": {Nearest, day(3), day(4), -24 * time.Hour},
	} {
		t.Run(name, func(t *testing.T) {
			got := Choose(sets, c.how, c.at)
			if len(got) != 4 || got[0].CatalogNumber != 99002 || got[2].Name != "A" || got[3].Name != "B" {
				t.Fatalf("objects %+v", got)
			}
			w := got[1]
			if !w.Epoch.Equal(c.want) || w.Age != c.age || w.Among != 3 {
				t.Errorf("chosen epoch %v, age %v, among %d; want %v, %v, 3", w.Epoch, w.Age, w.Among, c.want, c.age)
			}
		})
	}
	if got := Choose(nil, Newest, noon); len(got) != 0 {
		t.Errorf("nothing gave %v", got)
	}
	same := Choose([]orbit.Elements{setAt(1, "first", noon), setAt(1, "second", noon)}, Newest, noon)
	if same[0].Name != "second" {
		t.Errorf("of equal epochs %q was chosen, want the one that stands later", same[0].Name)
	}
}

func TestParseChoice(t *testing.T) {
	for _, c := range []Choice{Newest, Nearest} {
		if got, err := ParseChoice(c.String()); err != nil || got != c {
			t.Errorf("%s is read as %v (%v)", c, got, err)
		}
	}
	_, err := ParseChoice("newst")
	if err == nil || err.Error() != `"newst" is not allowed; it must be newest or nearest; did you mean "newest"?` {
		t.Errorf("error %v", err)
	}
}

func TestMatch(t *testing.T) {
	sets := []orbit.Elements{
		setAt(99001, "WAGTAIL 1", day(0)), setAt(99001, "WAGTAIL 1", day(1)), setAt(99002, "WAGTAIL 2", day(0)), setAt(100005, "PIPIT", day(0)),
		setAt(99003, "pipit", day(0)), setAt(99004, "99002", day(0)), setAt(5, "", day(0)), setAt(99005, "TWIN", day(0)), setAt(99006, "TWIN", day(0)),
		setAt(99007, "B0000", day(0)), setAt(123_456_789, "FAR", day(0)),
	}
	for ref, want := range map[string][2]int{
		"99001": {99001, 2}, "WAGTAIL 1": {99001, 2}, "wagtail 1": {99001, 2}, " WAGTAIL 2 ": {99002, 1}, "A0005": {100005, 1}, "100005": {100005, 1},
		"PIPIT": {100005, 1}, "pipit": {99003, 1}, "99002": {99002, 1}, "5": {5, 1}, "00005": {5, 1}, "B0000": {99007, 1}, "123456789": {123_456_789, 1},
	} {
		got, err := Match(sets, ref)
		if err != nil || len(got) != want[1] || got[0].CatalogNumber != want[0] {
			t.Errorf("%q gave %d sets (%v), want %d of object %d", ref, len(got), err, want[1], want[0])
		}
	}
	for ref, want := range map[string]string{
		"WAGTAIL 3": `no element set has the catalogue number or name "WAGTAIL 3"; did you mean "WAGTAIL 1", "WAGTAIL 2"?`,
		"Pippit":    `no element set has the catalogue number or name "Pippit"; did you mean "PIPIT", "pipit"?`,
		"TWIN":      `the name "TWIN" stands for 2 objects: "TWIN (99005)", "TWIN (99006)"; give the catalogue number`,
		"Pipit":     `the name "Pipit" stands for 2 objects: "PIPIT (100005)", "pipit (99003)"; give the catalogue number`,
		"1234567890": `no element set has the catalogue number or name "1234567890"; there are "WAGTAIL 1 (99001)", "WAGTAIL 2 (99002)", "PIPIT (100005)", ` +
			`"pipit (99003)", "99002 (99004)", "00005", "TWIN (99005)", "TWIN (99006)" and 2 more`,
		"": `no element set has the catalogue number or name ""; there are "WAGTAIL 1 (99001)", "WAGTAIL 2 (99002)", "PIPIT (100005)", ` +
			`"pipit (99003)", "99002 (99004)", "00005", "TWIN (99005)", "TWIN (99006)" and 2 more`,
	} {
		if _, err := Match(sets, ref); err == nil || err.Error() != want {
			t.Errorf("%q\n got %v\nwant %s", ref, err, want)
		}
	}
	_, err := Match(nil, "X")
	var nf *NotFoundError
	if !errors.As(err, &nf) || err.Error() != `no element set has the catalogue number or name "X"; there are no element sets` {
		t.Errorf("error %v", err)
	}
	var am *AmbiguousError
	if _, err = Match(sets, "TWIN"); !errors.As(err, &am) {
		t.Errorf("error is a %T, want *AmbiguousError", err)
	}
}

func TestLosses(t *testing.T) {
	before := []orbit.Elements{setAt(1, "A", day(0)), setAt(1, "A", day(2)), setAt(2, "B", day(0)), setAt(3, "C", day(0)), setAt(0, "D", day(0))}
	if got := Losses(before, before); len(got) > 0 {
		t.Errorf("the same text is a loss: %v", got)
	}
	after := []orbit.Elements{setAt(3, "renamed", day(1)), setAt(1, "A", day(1)), setAt(0, "d", day(1)), setAt(9, "NEW", day(0))}
	var got []string
	for _, l := range Losses(before, after) {
		got = append(got, l.String())
	}
	want := []string{
		"A (00001): older; its epoch was 2026-03-12T12:00:00.000000 and would be 2026-03-11T12:00:00.000000",
		"B (00002): missing; its epoch was 2026-03-10T12:00:00.000000",
		"D (00000): missing; its epoch was 2026-03-10T12:00:00.000000",
	}
	if strings.Join(got, "\n") != strings.Join(want, "\n") {
		t.Errorf("\n got %q\nwant %q", got, want)
	}
}
