package scenario

import "errors"

// Load reads and checks the scenario of a request. All faults come at once, joined
// with errors.Join.
func Load(req Request) (*Scenario, error) {
	return nil, errors.New("scenario: not built yet")
}
