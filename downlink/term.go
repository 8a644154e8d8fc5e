package downlink

// TermInfo names one line of a link budget. Losses are positive numbers with Sign
// -1, gains and the transmit power have Sign 1.
type TermInfo struct {
	Name   string // "free-space loss"
	Sign   int    // 1 or -1
	Unit   string // "dBm" for the transmit power (or EIRP), "dBi" for gains, else "dB"
	Source string // the formula's source, "scenario", or the assumption made
}

// Term is a line of a link budget with its value at one instant. The sum of
// Sign times Value over a budget is the received power in dBm.
type Term struct {
	TermInfo
	Value float64 // in Unit
}
