package scenario

// ShareTree lets a scenario say that it was read from the text of another.
func ShareTree(s, of *Scenario) { s.root = of.root }
