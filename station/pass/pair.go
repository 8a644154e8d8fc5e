package pass

import "time"

// Pair is a pass of one list and the pass of another that stands for it. One of them
// is nil where there is none.
type Pair struct{ Before, After *Pass }

// Align pairs the passes of two lists of one spacecraft over one site, each by rising
// AOS: as many pairs as there can be whose culminations are at most apart, no two of
// them crossing, and among these pairings the one that moves culminations least in
// sum. What has no partner stands alone. The pairs come in the order of time, those of
// the first list before those of the second where neither has a partner.
//
// It takes time and memory by the product of the lengths.
func Align(before, after []Pass, apart time.Duration) []Pair {
	rows, columns := len(before)+1, len(after)+1
	best := make([]alignment, rows*columns)
	for i := 1; i < rows; i++ {
		for j := 1; j < columns; j++ {
			up, left := best[(i-1)*columns+j], best[i*columns+j-1]
			b := up
			if left.better(b) {
				b = left
			}
			if moved := distance(&before[i-1], &after[j-1]); moved <= apart {
				d := best[(i-1)*columns+j-1]
				if d.pairs, d.moved = d.pairs+1, d.moved+moved; !b.better(d) {
					b = d
				}
			}
			best[i*columns+j] = b
		}
	}
	var out []Pair
	for i, j := rows-1, columns-1; i > 0 || j > 0; {
		switch here := best[i*columns+j]; {
		case i > 0 && here == best[(i-1)*columns+j] && !(j > 0 && here == best[i*columns+j-1] && after[j-1].Culmination.After(before[i-1].Culmination)):
			i--
			out = append(out, Pair{Before: &before[i]})
		case j > 0 && here == best[i*columns+j-1]:
			j--
			out = append(out, Pair{After: &after[j]})
		default:
			i, j = i-1, j-1
			out = append(out, Pair{&before[i], &after[j]})
		}
	}
	for i, j := 0, len(out)-1; i < j; i, j = i+1, j-1 {
		out[i], out[j] = out[j], out[i]
	}
	return out
}

// alignment is the worth of a pairing of the beginnings of both lists.
type alignment struct {
	pairs int
	moved time.Duration
}

func (a alignment) better(b alignment) bool {
	return a.pairs > b.pairs || a.pairs == b.pairs && a.moved < b.moved
}

func distance(a, b *Pass) time.Duration { return b.Culmination.Sub(a.Culmination).Abs() }
