package trial

import (
	"fmt"
	"math"
	"math/rand/v2"
)

// A Reed-Solomon codeword of CCSDS 131.0-B in octets, and how many of them are
// interleaved to a frame.
const (
	codewordOctets = 255
	depth          = 5
)

// Concatenated counts the errors of the convolutional code of a rate under a
// Reed-Solomon code that corrects the given number of octets a codeword (16 or 8; 0
// counts the convolutional code alone), interleaved to a depth of five, over BPSK in white Gaussian noise. It
// stops after enough wrong frames or at the most bits.
//
// The all-zero word is sent, as the code is linear and the channel symmetric. A
// codeword with more wrong octets than can be corrected keeps its wrong bits; that a
// decoder may take it for another codeword is neglected.
func Concatenated(rate string, corrects int, ebn0dB float64, enough, mostBits int, seed uint64) (Count, error) {
	puncturing, ok := PuncturingOf(rate)
	if !ok || corrects < 0 || corrects > 127 || !(math.Abs(ebn0dB) <= 50) || enough < 1 || mostBits < 1 {
		return Count{}, fmt.Errorf("rate %q, %d octets corrected, %g dB, %d frames, %d bits: not a trial", rate, corrects, ebn0dB, enough, mostBits)
	}
	data := codewordOctets - 2*corrects
	esn0 := math.Pow(10, ebn0dB/10) * puncturing.Rate() * float64(data) / codewordOctets
	sigma := float32(math.Sqrt(1 / (2 * esn0)))
	random := rand.New(rand.NewPCG(seed, 20))
	soft := func(sent bool) float32 {
		if !sent {
			return 0
		}
		return 1 + sigma*float32(random.NormFloat64())
	}
	v := newViterbi(codewordOctets * depth * 8)
	var c Count
	for block := 0; c.FrameErrors < enough && c.Bits < mostBits; block++ {
		for i := range v.decisions[1] {
			at := (block*len(v.decisions[1]) + i) % len(puncturing.First)
			v.decisions[1][i] = v.step(soft(puncturing.First[at]), soft(puncturing.Second[at]))
		}
		decided := v.release()
		if block > 0 { // before it there is no block
			c.addFrame(decided, corrects, data)
		}
	}
	return c, nil
}

// addFrame counts a frame of decided bits, which should all be 0.
func (c *Count) addFrame(decided []byte, corrects, data int) {
	var octets, dataBits [depth]int // wrong ones of each codeword
	for octet := range codewordOctets * depth {
		wrong := 0
		for _, b := range decided[octet*8 : octet*8+8] {
			wrong += int(b)
		}
		if wrong == 0 {
			continue
		}
		octets[octet%depth]++
		if octet/depth < data {
			dataBits[octet%depth] += wrong
		}
	}
	c.Bits += data * depth * 8
	c.Codewords += depth
	c.Frames++
	bad := 0
	for i := range depth {
		if octets[i] > corrects {
			bad++
			c.BitErrors += dataBits[i]
		}
	}
	c.CodewordErrors += bad
	if bad > 0 {
		c.FrameErrors++
	}
}
