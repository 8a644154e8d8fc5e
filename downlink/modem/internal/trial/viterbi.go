package trial

import (
	"math"
	"math/bits"
)

// The convolutional code of CCSDS 131.0-B: constraint length 7, generators 171 and
// 133 octal. Inverting the second output, as the book does, changes no error rate.
const (
	states   = 64
	firstG   = 0o171
	secondG  = 0o133
	halfSize = states / 2
)

// Puncturing says which outputs of the two generators are sent, one entry a bit of
// the period (CCSDS 131.0-B, the patterns of the five rates).
type Puncturing struct{ First, Second []bool }

// PuncturingOf returns the pattern of a rate "1/2", "2/3", "3/4", "5/6" or "7/8"; ok
// is false for another.
func PuncturingOf(rate string) (p Puncturing, ok bool) {
	patterns := map[string][2]string{
		"1/2": {"1", "1"}, "2/3": {"10", "11"}, "3/4": {"101", "110"},
		"5/6": {"10101", "11010"}, "7/8": {"1000101", "1111010"},
	}
	t, ok := patterns[rate]
	for i := range t[0] {
		p.First = append(p.First, t[0][i] == '1')
		p.Second = append(p.Second, t[1][i] == '1')
	}
	return p, ok
}

// Rate returns information bits to sent bits.
func (p Puncturing) Rate() float64 {
	sent := 0
	for i := range p.First {
		if p.First[i] {
			sent++
		}
		if p.Second[i] {
			sent++
		}
	}
	return float64(len(p.First)) / float64(sent)
}

// viterbi decodes a stream block by block, with soft values that are not quantized.
// A bit is decided once a whole further block has been seen.
type viterbi struct {
	metric, next [states]float32
	outputs      [states]uint8 // both outputs for an input of 0 out of a state
	decisions    [2][]uint64   // of the block before and the present one
	out          []byte
}

func newViterbi(block int) *viterbi {
	v := &viterbi{decisions: [2][]uint64{make([]uint64, block), make([]uint64, block)}, out: make([]byte, block)}
	for s := range states {
		register := uint(s) // six bits of the past; an input of 0 adds nothing
		v.outputs[s] = uint8(bits.OnesCount(register&firstG)&1)<<1 | uint8(bits.OnesCount(register&secondG)&1)
	}
	return v
}

// step takes the soft values of both outputs, positive for a sent 0, and notes for
// each new state from which of two it came. A state holds the past bits with the
// newest at its top; both generators reach the newest and the oldest bit, so that an
// input of 1, and an oldest bit of 1, turn both outputs around.
func (v *viterbi) step(a, b float32) uint64 {
	gain := [4]float32{a + b, a - b, b - a, -a - b}
	var chosen uint64
	for pair := range halfSize {
		even, odd := v.metric[2*pair], v.metric[2*pair+1]
		g := gain[v.outputs[2*pair]&3] // of input 0 out of the even state
		zeroFromEven, zeroFromOdd := even+g, odd-g
		oneFromEven, oneFromOdd := even-g, odd+g
		v.next[pair], v.next[pair+halfSize] = max(zeroFromEven, zeroFromOdd), max(oneFromEven, oneFromOdd)
		chosen |= negative(zeroFromEven-zeroFromOdd)<<pair | negative(oneFromEven-oneFromOdd)<<(pair+halfSize)
	}
	v.metric, v.next = v.next, v.metric
	return chosen
}

// release decides the bits of the block before the present one, and makes the
// present one the block before. The result is overwritten by the next call.
func (v *viterbi) release() []byte {
	best, top := 0, v.metric[0]
	for s, m := range v.metric {
		if m > top {
			best, top = s, m
		}
	}
	for s := range v.metric { // keep the numbers small
		v.metric[s] -= top
	}
	for i := len(v.decisions[1]) - 1; i >= 0; i-- {
		best = before(best, v.decisions[1][i])
	}
	for i := len(v.decisions[0]) - 1; i >= 0; i-- {
		v.out[i] = byte(best >> 5)
		best = before(best, v.decisions[0][i])
	}
	v.decisions[0], v.decisions[1] = v.decisions[1], v.decisions[0]
	return v.out
}

// before returns the state from which a state was reached.
func before(state int, chosen uint64) int {
	return state<<1&(states-1) | int(chosen>>state&1)
}

// negative returns 1 for a negative number, without a branch that nobody could
// predict.
func negative(x float32) uint64 { return uint64(math.Float32bits(x) >> 31) }
