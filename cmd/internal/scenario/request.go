package scenario

import "github.com/spf13/pflag"

// Need says what a command will use of the scenario.
type Need int

// Needs.
const (
	NeedOrbits Need = iota // window and element sets must be there
	NeedRadio              // a stated geometry: element files stay unread, a window is optional
	NeedPlan               // windows from outside: element files stay unread, all else is optional
)

// Request says which scenario to read. Variables SLANTWISE_… of the environment
// replace scalars outside lists, too; flags go before them.
type Request struct {
	Path  string                 // empty: DefaultFile in the working folder, else the embedded demo
	Flags map[string]*pflag.Flag // flags that replace scalars, by key path ("window.length_h"); only changed ones count
	Need  Need
	// Opened is called with each file of the machine that is looked for, there or not,
	// just before; nil: nobody asks. The embedded demo has none but DefaultFile.
	Opened func(file string)
}
