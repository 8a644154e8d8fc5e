package tolerance

import (
	"fmt"
	"strings"

	"slantwise/orbit/unit"
)

// Statement is a way to state the margin of a table.
type Statement int

// Statements.
const (
	NominalMargin Statement = iota
	MeanMargin
	WorstCase        // everything adverse at once
	WorstRSS         // nominal less the root of the sum of the squared adverse tolerances
	WorstRSSFromMean // the same about the means
	MeanLessSigmas   // mean less a number of sigmas
)

var statementNames = [...]string{"nominal", "mean", "worst_case", "worst_case_rss", "worst_case_rss_from_mean", "mean_minus_sigmas"}

// String returns the statement as the scenario writes it.
func (s Statement) String() string {
	if s < 0 || int(s) >= len(statementNames) {
		return fmt.Sprintf("statement %d", int(s))
	}
	return statementNames[s]
}

// Statements lists the names of all statements.
func Statements() []string { return statementNames[:] }

// ParseStatement returns the statement of a name.
func ParseStatement(name string) (Statement, error) {
	for i, n := range statementNames {
		if n == name {
			return Statement(i), nil
		}
	}
	return 0, fmt.Errorf("statement: %q is not known; it must be one of %s", name, strings.Join(statementNames[:], ", "))
}

// Criterion is what a design must reach.
type Criterion struct {
	Name      string
	Statement Statement
	Sigmas    float64 // of MeanLessSigmas, greater than 0; else 0
	Least     unit.DB // the margin to be reached, itself allowed
	Source    string  // who asks for it
}

// Verdict is a criterion with what the table reaches.
type Verdict struct {
	Criterion
	Reached  unit.DB
	Distance unit.DB // Reached - Least, negative where it is not met
	Met      bool
}

func (t *Table) judge(c Criterion) Verdict {
	v := Verdict{Criterion: c}
	switch c.Statement {
	case NominalMargin:
		v.Reached = t.Nominal
	case MeanMargin:
		v.Reached = t.Mean
	case WorstCase:
		v.Reached = t.Worst
	case WorstRSS:
		v.Reached = t.WorstRSS
	case WorstRSSFromMean:
		v.Reached = t.WorstRSSFromMean
	case MeanLessSigmas:
		v.Reached = t.MeanLess(c.Sigmas)
	}
	v.Distance = v.Reached - c.Least
	v.Met = v.Distance >= 0
	return v
}
