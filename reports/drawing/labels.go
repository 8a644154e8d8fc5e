package drawing

import "math"

// labels finds places for words around marks so that they do not lie on each other.
type labels struct {
	c      Canvas
	w, h   float64
	taken  []field // no word may lie there
	spared []field // better no word lies there: lines
}

// field is an upright rectangle.
type field struct{ left, top, right, bottom float64 }

func (f field) over(g field) float64 {
	return max(0, min(f.right, g.right)-max(f.left, g.left)) * max(0, min(f.bottom, g.bottom)-max(f.top, g.top))
}

func around(p Point, r float64) field { return field{p.X - r, p.Y - r, p.X + r, p.Y + r} }

// take keeps words off a field.
func (l *labels) take(f field) { l.taken = append(l.taken, f) }

// follow keeps words off a line where there is room elsewhere.
func (l *labels) follow(points []Point) {
	const near = 2.0
	for i := 1; i < len(points); i++ {
		a, b := points[i-1], points[i]
		n := int(math.Hypot(b.X-a.X, b.Y-a.Y)/(2*near)) + 1
		for k := range n {
			s := float64(k) / float64(n)
			l.spared = append(l.spared, around(Point{a.X + s*(b.X-a.X), a.Y + s*(b.Y-a.Y)}, near))
		}
	}
}

// free tells whether a field has no word and lies on the canvas.
func (l *labels) free(f field) bool { return l.cost(f) < hinders }

// hinders is the cost from which on a field is not free: a word of a point or more lies there.
const hinders = 10.0

func (l *labels) cost(f field) float64 {
	area := (f.right - f.left) * (f.bottom - f.top)
	sum := 20 * (area - f.over(field{0, 0, l.w, l.h}))
	for _, t := range l.taken {
		sum += 10 * f.over(t)
	}
	for _, t := range l.spared {
		sum += 0.2 * f.over(t)
	}
	return sum
}

// put writes lines beside a mark of radius r at a point: on the first of eight sides where nothing is
// covered, else where the least is. The first line is bold; toEnd: the sides to the left come first.
func (l *labels) put(at Point, r float64, lines []string, size float64, toEnd bool) {
	if len(lines) == 0 {
		return
	}
	wide := 0.0
	for _, s := range lines {
		wide = max(wide, l.c.Width(s, size)*1.06) // the first is bold
	}
	high := float64(len(lines)) * (size + 1)
	sides := [...][2]float64{{1, 0}, {-1, 0}, {1, -1}, {-1, -1}, {1, 1}, {-1, 1}, {0, -1}, {0, 1}}
	best, least := field{}, math.Inf(1)
	var side [2]float64
	for _, s := range sides {
		if toEnd {
			s[0] = -s[0]
		}
		gap := r + 3
		if s[0] != 0 && s[1] != 0 {
			gap = 0.8*r + 1
		}
		f := field{left: at.X + s[0]*gap - (1-s[0])/2*wide, top: at.Y + s[1]*gap - (1-s[1])/2*high}
		f.right, f.bottom = f.left+wide, f.top+high
		if cost := l.cost(f); cost < least {
			best, least, side = f, cost, s
		}
	}
	l.take(best)
	ground := []Point{{best.left, best.top + 1}, {best.right, best.top + 1}, {best.right, best.bottom}, {best.left, best.bottom}}
	l.c.Area(ground, Paper, nil) // lines under a word end beside it
	align, x := [...]Align{End, Middle, Start}[int(side[0])+1], best.left+(1-side[0])/2*wide
	for i, s := range lines {
		l.c.Write(Text{At: Point{x, best.top + size*0.95 + float64(i)*(size+1)}, Text: s, Size: size, Align: align, Bold: i == 0})
	}
}
