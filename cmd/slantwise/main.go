// Command slantwise plans satellite passes and downlinks.
package main

import (
	"os"

	"slantwise/cmd/internal/cli"
)

func main() { os.Exit(cli.Main(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) }
