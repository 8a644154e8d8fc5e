package cli

import (
	"context"
	"fmt"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"slantwise/orbit"
	"slantwise/orbit/elements"
)

// elementsOptions are the flags of elements.
type elementsOptions struct {
	files   []string // none: those of the scenario
	objects []string // catalogue numbers or names; none: all
	format  format
	at      time.Time
	choice  elements.Choice // from the scenario, newest without one

	convert string
	from    string
	timeout time.Duration
	into    string
	loss    bool // --into may lose objects or go back in time
}

func newElements(env *Env) *cobra.Command {
	return newElementsRunning(env, runElements)
}

// newElementsRunning takes the function that does the work, so that a test can look
// at the flags alone.
func newElementsRunning(env *Env, run func(context.Context, *Env, elementsOptions) error) *cobra.Command {
	var o elementsOptions
	cmd := &cobra.Command{
		Use:   "elements [FILE…]",
		Short: "List, convert and fetch element sets",
		Long: `List the element sets of the scenario, of the FILEs named (- is standard input), or
of an address: epoch, age, heights of perigee and apogee, inclination, period, next
ascending node, and which set of an object is used. Formats are told apart by their
content: TLE with two or three lines, OMM as KVN, XML, JSON or CSV.

--convert writes the sets in another format, to standard output or into a file.
--from fetches a text of element sets; with --into it is kept as it came. A FILE of
--into is replaced only as a whole, and only when the new text can be read and holds
every object of the old one with an epoch no older.

Age and node are for the start of the scenario's window; with FILE or --from, for
now. --at names another instant.`,
		Example: `  slantwise elements
  slantwise elements weather.tle --object 99001 --format json
  slantwise elements weather.tle --convert omm-xml --into weather.xml
  slantwise elements --from https://elements.example/weather.tle --into weather.tle`,
		Args: func(cmd *cobra.Command, args []string) error {
			o.files = args
			return o.check(env, cmd.Flags().Changed)
		},
		RunE: func(cmd *cobra.Command, args []string) error { return run(cmd.Context(), env, o) },
	}
	fs := cmd.Flags()
	addFormat(cmd, &o.format)
	addTime(fs, &o.at, "at", "instant of age and next node")
	fs.StringArrayVar(&o.objects, "object", nil, "only the object with this catalogue number or `NAME`; may be repeated")
	fs.StringVar(&o.convert, "convert", "", "write the sets as `KIND`: "+strings.Join(elementKinds(), ", "))
	fs.StringVar(&o.from, "from", "", "fetch the sets from this http or https `ADDRESS`")
	addDuration(fs, &o.timeout, "timeout", 30*time.Second, "give up fetching after this time")
	fs.StringVar(&o.into, "into", "", "write into this `FILE`, whole or not at all")
	fs.BoolVar(&o.loss, "allow-loss", false, "let --into replace a file that holds more objects, newer sets or something else")
	cmd.AddCommand(newElementsFit(env), newElementsTabulate(env))
	return cmd
}

func elementKinds() []string {
	var kinds []string
	for f := elements.TLE; f <= elements.OMMCSV; f++ {
		kinds = append(kinds, f.String())
	}
	return kinds
}

// check finds flags that do not go together, before anything is read. given tells
// which flags were.
func (o *elementsOptions) check(env *Env, given func(string) bool) error {
	switch {
	case o.from != "" && len(o.files) > 0:
		return inputErrorf("--from and FILE are both given; give one of them")
	case o.into != "" && o.from == "" && o.convert == "":
		return inputErrorf("--into needs --convert or --from: without them there is nothing to write")
	case o.loss && o.into == "":
		return inputErrorf("--allow-loss is about --into, which is not given")
	case given("timeout") && o.from == "":
		return inputErrorf("--timeout is about --from, which is not given")
	case given("format") && (o.convert != "" || o.into != ""):
		return inputErrorf("--format is about the list of sets, which is not written here; --convert chooses the format of the sets")
	}
	if err := o.checkScenario(env, given); err != nil {
		return err
	}
	if o.convert != "" {
		if _, err := elements.ParseFormat(o.convert); err != nil {
			return inputErrorf("--convert: %w", err)
		}
	}
	return nil
}

// checkScenario refuses flags about a scenario where none is read, but for the
// choice among several sets.
func (o *elementsOptions) checkScenario(env *Env, given func(string) bool) error {
	if o.from == "" && len(o.files) == 0 {
		return nil
	}
	for _, flag := range []string{"scenario", "window-start", "window-length-h", "horizon"} {
		if given(flag) {
			return inputErrorf("--%s is about a scenario, and none is read with FILE or --from; --at names the instant of age and node", flag)
		}
	}
	if f := env.overrides["element_choice"]; f != nil && f.Changed {
		choice, err := elements.ParseChoice(f.Value.String())
		if err != nil {
			return inputErrorf("--element-choice: %w", err)
		}
		o.choice = choice
	}
	return nil
}

func runElements(ctx context.Context, env *Env, o elementsOptions) error {
	read, err := gatherElements(ctx, env, &o)
	if err != nil {
		return err
	}
	for _, w := range read.warnings {
		env.note("warning: %s", printable(w.String()))
	}
	if read.sets, err = only(read.sets, o.objects); err != nil {
		return err
	}
	switch {
	case o.convert != "":
		return convertElements(env, o, read.sets)
	case o.into != "":
		return keepFetched(env, o, read)
	}
	return listElements(env, o, read.sets)
}

// gathered is what was read, from wherever.
type gathered struct {
	sets     []orbit.Elements
	warnings []elements.Warning
	text     []byte // as fetched; nil otherwise
}

// gatherElements reads the sets, and settles the instant and the choice.
func gatherElements(ctx context.Context, env *Env, o *elementsOptions) (gathered, error) {
	if o.from == "" && len(o.files) == 0 {
		s, err := env.load(needOrbits)
		if err != nil {
			return gathered{}, err
		}
		if o.at.IsZero() {
			o.at = s.Window.Start
		}
		o.choice = s.Choice
		return gathered{sets: s.Sets}, nil
	}
	if o.at.IsZero() {
		o.at = env.Now().UTC()
	}
	if o.from != "" {
		return fetchElements(ctx, o.from, o.timeout)
	}
	var all gathered
	for _, name := range o.files {
		read, err := readElements(env, name)
		if err != nil {
			return gathered{}, &InputError{Err: err}
		}
		all.sets = append(all.sets, read.sets...)
		all.warnings = append(all.warnings, read.warnings...)
	}
	return all, nil
}

func readElements(env *Env, name string) (g gathered, err error) {
	if name == "-" {
		g.sets, g.warnings, err = elements.Read(env.In, "standard input")
		return g, err
	}
	g.sets, g.warnings, err = elements.ReadFile(name)
	return g, err
}

// only keeps the sets of the objects named, in the order of the sets.
func only(sets []orbit.Elements, objects []string) ([]orbit.Elements, error) {
	if len(objects) == 0 {
		return sets, nil
	}
	wanted := map[orbit.Elements]bool{}
	for _, ref := range objects {
		found, err := elements.Match(sets, ref)
		if err != nil {
			return nil, &InputError{Err: fmt.Errorf("--object: %w", err)}
		}
		for _, el := range found {
			wanted[el] = true
		}
	}
	var out []orbit.Elements
	for _, el := range sets {
		if wanted[el] {
			out = append(out, el)
		}
	}
	return out, nil
}
