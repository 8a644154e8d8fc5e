package reports

import "slantwise/reports/paper"

// paperCautions are those of the pages' foot.
var paperCautions = []string{
	"Radiation. Where the station transmits, keep people out of the beam and away from the feed until the power is off and locked off.",
	"Moving mounts. An antenna under program control starts without warning. Use the local stop before going near it.",
	"Height and weather. Work aloft only when trained and secured. Stay off masts and cables in a thunderstorm, and stow the antenna in high wind.",
	"Rules. Transmitting needs a licence for the frequency and the site, and in many countries so does receiving; the national rules decide. Local electrical and building codes come before this page, and so does the judgement of a licensed engineer.",
}

// cautionsOn ends a document, with what its numbers stand on.
func cautionsOn(d *paper.Document, b *Basis) {
	d.Heading("Cautions")
	d.Chapter("Cautions")
	d.Notes(paperCautions)
	d.Heading("What these numbers stand on")
	d.Notes(b.Lines())
}
