package rateplan

import (
	"flag"

	_ "pgregory.net/rapid" // registers the flag
)

// The random tests draw the same cases in every run; -rapid.seed=0 draws new ones.
func init() { _ = flag.Set("rapid.seed", "20260310") }
