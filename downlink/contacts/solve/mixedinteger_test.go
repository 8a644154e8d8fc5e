package solve

import (
	"bufio"
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"slantwise/downlink/contacts"
)

// program is a problem of requests written as a mixed-integer program, in continuous
// time: for each contact that a window may hold whether it is taken, its begin and end,
// and the seconds that count; for each two that may be in each other's way which comes
// first.
type program struct {
	p                *contacts.Problem
	copies           int // contacts that a window may hold
	objective, rows  strings.Builder
	bounds, binaries strings.Builder
	n                int
	counted          []string // by request
	once             []string
}

// maybe is a contact that a window may hold.
type maybe struct {
	name string
	c    *contacts.Candidate
}

// seconds keeps every coefficient a small number.
func seconds(t contacts.Ms) string { return strconv.FormatFloat(t.Seconds(), 'g', -1, 64) }

// writeProgram writes the problem in the LP format that both solvers read.
func writeProgram(p *contacts.Problem, copies int) string {
	w := &program{p: p, copies: copies, counted: make([]string, len(p.Requests)), once: make([]string, len(p.Requests))}
	var all []maybe
	for i := range p.Candidates {
		for k := range copies {
			all = append(all, w.contact(i, k))
		}
	}
	for i, a := range all {
		for _, b := range all[i+1:] {
			w.pair(a, b)
		}
	}
	for r := range p.Requests {
		if w.counted[r] != "" {
			w.row("%s <= %s", w.counted[r], seconds(p.Requests[r].Desired))
		}
		if w.once[r] != "" && !p.Split {
			w.row("%s <= 1", w.once[r])
		}
	}
	return "Maximize\n obj: " + w.objective.String() + "\nSubject To\n" + w.rows.String() + "Bounds\n" + w.bounds.String() + "Binaries\n" + w.binaries.String() + "End\n"
}

func (w *program) row(format string, a ...any) {
	w.n++
	fmt.Fprintf(&w.rows, " r%d: "+format+"\n", append([]any{w.n}, a...)...)
}

func (w *program) contact(i, k int) maybe {
	c := &w.p.Candidates[i]
	n := fmt.Sprintf("%d_%d", i, k)
	// With x at 0 begin and end may stand anywhere in the window, and nothing counts.
	w.row("e%s - s%s - %s x%s >= 0", n, n, seconds(c.Least), n)
	w.row("c%s - e%s + s%s <= 0", n, n, n)
	w.row("c%s - %s x%s <= 0", n, seconds(c.LongestContact()), n)
	fmt.Fprintf(&w.bounds, " %s <= s%s <= %s\n %s <= e%s <= %s\n 0 <= c%s\n", seconds(c.Window.From), n, seconds(c.Window.To), seconds(c.Window.From), n, seconds(c.Window.To), n)
	fmt.Fprintf(&w.binaries, " x%s\n", n)
	fmt.Fprintf(&w.objective, " + %g c%s", c.PerSecond, n)
	w.counted[c.Request] += " + c" + n
	w.once[c.Request] += " + x" + n
	return maybe{n, c}
}

// pair keeps two contacts apart where they share an antenna or a spacecraft.
func (w *program) pair(a, b maybe) {
	antenna := a.c.Antenna == b.c.Antenna
	if !antenna && a.c.Spacecraft != b.c.Spacecraft {
		return
	}
	if !w.p.Split && a.c.Request == b.c.Request {
		return // one of them at most
	}
	gap := func(x, y *contacts.Candidate) contacts.Ms {
		if antenna {
			return x.TearDown + y.SetUp
		}
		return 0
	}
	if a.c.Window.To+gap(a.c, b.c) <= b.c.Window.From || b.c.Window.To+gap(b.c, a.c) <= a.c.Window.From {
		return
	}
	y := "y" + a.name + "_" + b.name
	fmt.Fprintf(&w.binaries, " %s\n", y)
	// y = 1: a before b. Begin(b) - end(a) >= gap - M (1 - y) - M (2 - xa - xb).
	m1 := a.c.Window.To + gap(a.c, b.c) - b.c.Window.From
	w.row("s%s - e%s - %s %s - %s x%s - %s x%s >= %s", b.name, a.name, seconds(m1), y, seconds(m1), a.name, seconds(m1), b.name, seconds(gap(a.c, b.c)-3*m1))
	m2 := b.c.Window.To + gap(b.c, a.c) - a.c.Window.From
	w.row("s%s - e%s + %s %s - %s x%s - %s x%s >= %s", a.name, b.name, seconds(m2), y, seconds(m2), a.name, seconds(m2), b.name, seconds(gap(b.c, a.c)-2*m2))
}

// solved is what a general-purpose solver says.
type solved struct {
	value, bound float64
	optimal      bool
}

// runCBC solves a program with the solver of the Debian package coinor-cbc.
func runCBC(t testing.TB, lp string, limit int) solved {
	t.Helper()
	path := filepath.Join(t.TempDir(), "plan.lp")
	if err := os.WriteFile(path, []byte(lp), 0o600); err != nil {
		t.Fatal(err)
	}
	out, err := exec.Command("cbc", path, "seconds", strconv.Itoa(limit), "ratioGap", "0", "allowableGap", "1e-7", "solve").CombinedOutput()
	if err != nil {
		t.Fatalf("cbc: %v\n%s", err, out)
	}
	s := solved{optimal: bytes.Contains(out, []byte("Optimal solution found"))}
	number := regexp.MustCompile(`[-+0-9.e]+$`)
	scan := bufio.NewScanner(bytes.NewReader(out))
	for scan.Scan() {
		line := strings.TrimSpace(scan.Text())
		v, err := strconv.ParseFloat(number.FindString(line), 64)
		if err != nil {
			continue
		}
		switch {
		case strings.HasPrefix(line, "Objective value:"):
			s.value = max(v, -v)
		case strings.HasPrefix(line, "Upper bound:"), strings.HasPrefix(line, "Lower bound:"):
			s.bound = max(v, -v)
		}
	}
	if s.optimal {
		s.bound = s.value
	}
	return s
}

// runGLPK solves a program with the solver of the Debian package glpk-utils.
func runGLPK(t testing.TB, lp string, limit int) solved {
	t.Helper()
	dir := t.TempDir()
	path, result := filepath.Join(dir, "plan.lp"), filepath.Join(dir, "plan.txt")
	if err := os.WriteFile(path, []byte(lp), 0o600); err != nil {
		t.Fatal(err)
	}
	if out, err := exec.Command("glpsol", "--lp", path, "--tmlim", strconv.Itoa(limit), "-o", result).CombinedOutput(); err != nil {
		t.Fatalf("glpsol: %v\n%s", err, out)
	}
	text, err := os.ReadFile(result)
	if err != nil {
		t.Fatal(err)
	}
	s := solved{optimal: bytes.Contains(text, []byte("INTEGER OPTIMAL"))}
	if m := regexp.MustCompile(`Objective:\s+obj = ([-+0-9.e]+)`).FindSubmatch(text); m != nil {
		s.value, _ = strconv.ParseFloat(string(m[1]), 64)
	}
	return s
}

func needSolver(t testing.TB, name string) {
	t.Helper()
	if _, err := exec.LookPath(name); err != nil {
		if os.Getenv("CI") == "true" && name == "glpsol" {
			t.Fatalf("%s is missing; .ci/run installs it", name)
		}
		t.Skipf("%s is not installed", name)
	}
}
