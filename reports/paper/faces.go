package paper

import (
	"sync"

	"codeberg.org/go-fonts/dejavu/dejavusanscondensed"
	"codeberg.org/go-fonts/dejavu/dejavusanscondensedbold"

	"slantwise/reports/paper/pdf"
)

// faces are the upright and the bold face. They are part of the program: that they cannot be read is
// a broken build.
var faces = sync.OnceValue(func() [2]*pdf.Face {
	var list [2]*pdf.Face
	for i, f := range []struct {
		name string
		ttf  []byte
	}{{"DejaVuSansCondensed", dejavusanscondensed.TTF}, {"DejaVuSansCondensed-Bold", dejavusanscondensedbold.TTF}} {
		face, err := pdf.ParseFace(f.name, f.ttf)
		if err != nil {
			panic("paper: " + err.Error())
		}
		list[i] = face
	}
	return list
})
