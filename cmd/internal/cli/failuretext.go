package cli

import (
	"errors"
	"io/fs"
	"os"
	"strings"
	"syscall"
)

// failureText words an error for people. What the operating system refused comes
// without the name of its call and of a temporary file that is gone again, and with
// what to do about it.
func failureText(err error) string {
	text := strings.TrimRight(err.Error(), "\n")
	var path *fs.PathError
	var link *os.LinkError
	var input *InputError
	reading := errors.As(err, &input) && errors.As(err, &path) && path.Op == "open"
	switch {
	case reading: // a file that the user names, and not one in the making
		said := path.Path + ": " + path.Err.Error()
		if strings.HasPrefix(text, path.Path+": ") {
			said = path.Err.Error()
		}
		text = strings.Replace(text, path.Error(), said, 1)
	case errors.As(err, &path):
		text = strings.Replace(text, path.Error(), path.Err.Error(), 1)
	case errors.As(err, &link):
		text = strings.Replace(text, link.Error(), link.Err.Error(), 1)
	default:
		return text
	}
	switch {
	case errors.Is(err, syscall.ENOSPC):
		return text + "; make room or choose another place"
	case errors.Is(err, fs.ErrPermission) && reading:
		return text + "; ask for leave to read it"
	case errors.Is(err, fs.ErrPermission), errors.Is(err, syscall.EROFS):
		return text + "; choose a place that you may write to"
	case errors.Is(err, fs.ErrNotExist) && !reading:
		return text + "; make the folder first"
	}
	return text
}
