package trial

import (
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
)

// Receiver is a frequency modulation with a receiver of limiter and discriminator, as a
// narrow-band FM radio has it.
type Receiver struct {
	Tones   bool    // audio tones on the carrier's frequency; else the bits themselves
	Index   float64 // without tones: frequency shift over bit rate
	BT      float64 // without tones: of the Gaussian filter
	IFWidth float64 // 3 dB width of the fourth-order filter ahead of the limiter, over the bit rate

	samples int // a bit
}

// GFSK is frequency-shift keying of index 0.5 behind a Gaussian filter of BT 0.5, with a
// filter as wide as Carson's rule says; bits are integrated behind the discriminator.
var GFSK = Receiver{Index: 0.5, BT: 0.5, IFWidth: 1.5, samples: 16}

// AFSK is 1200 baud in tones of 1200 and 2200 Hz on a deviation of 3 kHz, with a filter
// of 15 kHz; behind the discriminator the energies of both tones are compared.
var AFSK = Receiver{Tones: true, IFWidth: 12.5, samples: 48}

// Tones of AFSK over the bit rate, and the deviation of the carrier.
const (
	lowTone   = 1200.0 / 1200
	highTone  = 2200.0 / 1200
	deviation = 3000.0 / 1200
)

// receiving is a run of a receiver: the transmitted phase, the filter and what it has
// seen of a bit.
type receiving struct {
	Receiver
	random        *rand.Rand
	sigma         float64 // of the noise, each of real and imaginary part
	pulse         []float64
	history       []float64 // the bits under the pulse, ±1, newest first
	carrier, tone float64   // phases
	filter        [2]section
	last          complex128
	offset        int // samples from the start of a bit to that of its decision
}

// Received counts the bit errors of a receiver at an Eb/N0 over white Gaussian noise. Blocks
// of 1000 bits are sent until there are enough errors or the most bits.
func Received(r Receiver, ebn0dB float64, enough, mostBits int, seed uint64) (Count, error) {
	if r.samples < 1 || !(r.IFWidth > 0 && r.IFWidth < float64(r.samples)) || !(math.Abs(ebn0dB) <= 50) || enough < 1 || mostBits < 1 {
		return Count{}, fmt.Errorf("filter of %g bit rates at %d samples a bit, %g dB, %d errors, %d bits: not a trial", r.IFWidth, r.samples, ebn0dB, enough, mostBits)
	}
	best, widest := 0, math.Inf(-1)
	for offset := range 4 * r.samples { // without noise the eye is widest at the delay of the filters
		quiet := newReceiving(r, 0, seed)
		quiet.offset = offset
		if eye := quiet.run(200, nil); eye > widest {
			best, widest = offset, eye
		}
	}
	noisy := newReceiving(r, math.Sqrt(float64(r.samples)/math.Pow(10, ebn0dB/10)/2), seed)
	noisy.offset = best
	var c Count
	for c.BitErrors < enough && c.Bits < mostBits {
		noisy.run(1000, &c)
	}
	return c, nil
}

func newReceiving(r Receiver, sigma float64, seed uint64) *receiving {
	s := &receiving{Receiver: r, random: rand.New(rand.NewPCG(seed, 30)), sigma: sigma, last: 1}
	s.filter = butterworth(r.IFWidth / 2 / float64(r.samples))
	if !r.Tones {
		s.pulse = gaussian(r.BT, r.samples)
	}
	s.history = make([]float64, max(5, len(s.pulse)/r.samples))
	return s
}

// run sends some bits, counts the wrong ones where there is a count, and returns how far open the eye was: the least
// decision in the right direction, after the first bits.
func (s *receiving) run(bits int, c *Count) (eye float64) {
	const settle = 12 // bits for the filters to fill
	sent := make([]float64, bits+settle)
	angles := make([]float64, len(sent)*s.samples)
	for i := range sent {
		sent[i] = float64(1 - 2*int(s.random.Uint32()&1))
		s.sendBit(sent[i], angles[i*s.samples:(i+1)*s.samples])
	}
	eye = math.Inf(1)
	for i := settle / 2; i < len(sent)-settle/2; i++ {
		from := i*s.samples + s.offset
		right := sent[i] * s.decision(angles[from:from+s.samples])
		eye = min(eye, right)
		if c == nil {
			continue
		}
		c.Bits++
		if right < 0 {
			c.BitErrors++
		}
	}
	return eye
}

// sendBit sends a bit and notes the discriminator's output, a turn of phase a sample.
func (s *receiving) sendBit(bit float64, angles []float64) {
	copy(s.history[1:], s.history)
	s.history[0] = bit
	for k := range angles {
		s.carrier += s.turn(k)
		noise := complex(s.sigma*s.random.NormFloat64(), s.sigma*s.random.NormFloat64())
		y := s.filter[1].filter(s.filter[0].filter(cmplx.Rect(1, s.carrier) + noise))
		angles[k] = cmplx.Phase(y * cmplx.Conj(s.last))
		s.last = y
	}
	s.carrier = math.Mod(s.carrier, 2*math.Pi)
	s.tone = math.Mod(s.tone, 2*math.Pi)
}

// turn is how far the carrier turns in the k-th sample of a bit.
func (s *receiving) turn(k int) float64 {
	n := float64(s.samples)
	if s.Tones {
		tone := lowTone
		if s.history[0] < 0 {
			tone = highTone
		}
		s.tone += 2 * math.Pi * tone / n
		return 2 * math.Pi * deviation / n * math.Cos(s.tone)
	}
	frequency := 0.0
	for back, bit := range s.history {
		frequency += bit * s.pulse[back*s.samples+k]
	}
	return math.Pi * s.Index / n * frequency
}

// decision is positive for a sent +1: the whole turn over the bit, or the amplitude of
// the low tone less that of the high one.
func (s *receiving) decision(angles []float64) float64 {
	if !s.Tones {
		sum := 0.0
		for _, a := range angles {
			sum += a
		}
		return sum
	}
	var low, high complex128
	stepLow := cmplx.Rect(1, 2*math.Pi*lowTone/float64(s.samples))
	stepHigh := cmplx.Rect(1, 2*math.Pi*highTone/float64(s.samples))
	atLow, atHigh := complex(1, 0), complex(1, 0)
	for _, a := range angles {
		low += times(a, atLow)
		high += times(a, atHigh)
		atLow *= stepLow
		atHigh *= stepHigh
	}
	return cmplx.Abs(low) - cmplx.Abs(high)
}
