package cli

import (
	"bytes"
	"errors"
	"fmt"
	"syscall"
	"testing"
)

func TestExitCodes(t *testing.T) {
	for _, tt := range []struct {
		err     error
		started bool
		code    int
		says    string
	}{
		{nil, true, ExitAnswer, ""},
		{fmt.Errorf("write the CSV: %w", syscall.EPIPE), true, ExitAnswer, ""},
		{inputErrorf("wrong"), true, ExitInput, "slantwise: wrong\n"},
		{fmt.Errorf("more: %w", inputErrorf("wrong")), true, ExitInput, "slantwise: more: wrong\n"},
		{errors.New("disk full"), true, ExitFailure, "slantwise: disk full\n"},
		{errors.New("no such flag"), false, ExitInput, "slantwise: no such flag\n"},
	} {
		var out, errOut bytes.Buffer
		env := newEnv(nil, &out, &errOut)
		env.started = tt.started
		if got := exitCode(env, tt.err); got != tt.code || errOut.String() != tt.says {
			t.Errorf("%v: code %d, stderr %q; want %d, %q", tt.err, got, errOut.String(), tt.code, tt.says)
		}
	}
}
