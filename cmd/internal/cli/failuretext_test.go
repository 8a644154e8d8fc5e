package cli

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"syscall"
	"testing"
)

func TestFailureText(t *testing.T) {
	part := func(err error) error { return &fs.PathError{Op: "open", Path: "plans/.a.tle.17.part", Err: err} }
	for _, tt := range []struct {
		err  error
		want string
	}{
		{fmt.Errorf("writing plans/a.tle: %w; nothing was changed there", part(syscall.ENOSPC)),
			"writing plans/a.tle: no space left on device; nothing was changed there; make room or choose another place"},
		{fmt.Errorf("writing plans/a.tle: %w", part(syscall.EACCES)), "writing plans/a.tle: permission denied; choose a place that you may write to"},
		{fmt.Errorf("writing plans/a.tle: %w", part(syscall.EROFS)), "writing plans/a.tle: read-only file system; choose a place that you may write to"},
		{fmt.Errorf("writing plans/a.tle: %w", part(syscall.ENOENT)), "writing plans/a.tle: no such file or directory; make the folder first"},
		{fmt.Errorf("writing plans/a.tle: %w", &os.LinkError{Op: "rename", Old: "a", New: "b", Err: syscall.EIO}), "writing plans/a.tle: input/output error"},
		{&InputError{Err: &fs.PathError{Op: "open", Path: "log.csv", Err: syscall.ENOENT}}, "log.csv: no such file or directory"},
		{inputErrorf("log.csv: %w", &fs.PathError{Op: "open", Path: "log.csv", Err: syscall.EACCES}), "log.csv: permission denied; ask for leave to read it"},
		{errors.New("convert: nothing to write\n"), "convert: nothing to write"},
	} {
		if got := failureText(tt.err); got != tt.want {
			t.Errorf("got  %s\nwant %s", got, tt.want)
		}
	}
}
