package elements_test

import (
	"fmt"
	"os"
	"strings"
	"time"

	"slantwise/orbit/elements"
)

const twoSets = `WAGTAIL 1
1 99001U 26001A   26069.50000000  .00001234  00000-0  84553-4 0  9995
2 99001  97.4012 120.3456 0012345  85.6789 274.5432 15.21987654 12348
WAGTAIL 1
1 99001U 26001A   26071.50000000  .00001234  00000-0  84553-4 0  9998
2 99001  97.4012 130.3456 0012345  85.6789 274.5432 15.21987654 12349
`

func ExampleChoose() {
	sets, _, err := elements.Read(strings.NewReader(twoSets), "sets.tle")
	if err != nil {
		fmt.Println(err)
		return
	}
	at := time.Date(2026, 3, 10, 18, 0, 0, 0, time.UTC)
	for _, how := range []elements.Choice{elements.Newest, elements.Nearest} {
		c := elements.Choose(sets, how, at)[0]
		fmt.Printf("%s of %d: epoch %s, age %s\n", how, c.Among, c.Epoch.Format(time.RFC3339), c.Age)
	}
	// Output:
	// newest of 2: epoch 2026-03-12T12:00:00Z, age -42h0m0s
	// nearest of 2: epoch 2026-03-10T12:00:00Z, age 6h0m0s
}

func ExampleRead() {
	_, _, err := elements.Read(strings.NewReader(strings.Replace(twoSets, "26069", "26367", 1)), "sets.tle")
	fmt.Println(err)
	// Output:
	// sets.tle:2:21: line 1, epoch day "367.50000000": must be 1 to less than 366 in 2026, which has 365 days; fetch the set again, or copy it whole
	// sets.tle:2:69: checksum "5": the line adds up to 6: a character was changed or lost; fetch the set again, or copy it whole
}

func ExampleWriteOMM() {
	sets, _, err := elements.Read(strings.NewReader(twoSets), "sets.tle")
	if err != nil {
		fmt.Println(err)
		return
	}
	if err := elements.WriteOMM(os.Stdout, sets[:1], elements.OMMCSV, elements.Header{}); err != nil {
		fmt.Println(err)
	}
	// Output:
	// OBJECT_NAME,OBJECT_ID,CENTER_NAME,REF_FRAME,TIME_SYSTEM,MEAN_ELEMENT_THEORY,EPOCH,MEAN_MOTION,ECCENTRICITY,INCLINATION,RA_OF_ASC_NODE,ARG_OF_PERICENTER,MEAN_ANOMALY,EPHEMERIS_TYPE,CLASSIFICATION_TYPE,NORAD_CAT_ID,ELEMENT_SET_NO,REV_AT_EPOCH,BSTAR,MEAN_MOTION_DOT,MEAN_MOTION_DDOT
	// WAGTAIL 1,2026-001A,EARTH,TEME,UTC,SGP4,2026-03-10T12:00:00.000000,15.21987654,0.0012345,97.4012,120.3456,85.6789,274.5432,0,U,99001,999,1234,0.000084553,0.00001234,0
}
