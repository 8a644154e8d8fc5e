package cli

import (
	"os"
	"strings"
	"testing"
)

// TestFirstOfSeveralAntennasIsTold: with a second antenna both commands say which of
// the two is counted, as a table, as CSV and as JSON; with one there is nothing to say.
func TestFirstOfSeveralAntennasIsTold(t *testing.T) {
	const told = "over Test Hill: of 2 antennas that take X-band the first is counted, dish"
	inBytesScenario(t)
	const dish = "      - {name: dish, kind: dish, diameter_m: 3.7, efficiency: 0.6, noise: {system_temperature_k: 150}}\n"
	for _, more := range []string{"", strings.Replace(dish, "name: dish", "name: small", 1)} {
		text := strings.Replace(bytesScenario, dish, dish+more, 1)
		if err := os.WriteFile("slantwise.yaml", []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		for _, command := range []string{"rates", "recorder"} {
			for _, format := range []string{"table", "csv", "json"} {
				code, out, errOut := invoke(t, command, "--transmitter", "X-band", "--format", format)
				where, other := errOut, out
				if format == "json" {
					where, other = out, errOut
				}
				if n := strings.Count(where, told); code != ExitAnswer || (n == 1) != (more != "") || strings.Contains(other, told) {
					t.Errorf("%s as %s, second antenna %t: code %d, told %d times\n%s", command, format, more != "", code, n, errOut)
				}
			}
		}
	}
}
