// Package trial measures error rates by simulation, for codings and receivers whose
// curve no formula gives: convolutional codes under Reed-Solomon codes, and frequency
// modulation behind a limiter and discriminator.
//
// Its tests measure the simulated curves of package modem (curves.csv) with -measure,
// and some of the committed points again in every run. The planner itself does not
// use it. The same seed gives the same count.
package trial

// Count is what a simulation has counted.
type Count struct {
	Bits, BitErrors           int // information bits
	Codewords, CodewordErrors int // 0 where there are none
	Frames, FrameErrors       int // 0 where there are none
}

// BitErrorRate returns the share of information bits that came out wrong.
func (c Count) BitErrorRate() float64 { return float64(c.BitErrors) / float64(c.Bits) }

// FrameErrorRate returns the share of frames with a codeword that was not corrected.
func (c Count) FrameErrorRate() float64 { return float64(c.FrameErrors) / float64(c.Frames) }
