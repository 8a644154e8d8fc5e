package cli

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"net/http"
	"net/url"
	"time"

	"slantwise/orbit/elements"
)

// maxRedirects is how often an address may point to another one.
const maxRedirects = 5

// fetchElements fetches a text of element sets and reads it. An address that cannot
// be used and a text that is wrong are faults of the input, all else is a failure.
func fetchElements(ctx context.Context, address string, timeout time.Duration) (gathered, error) {
	u, err := url.Parse(address)
	if err != nil || (u.Scheme != "http" && u.Scheme != "https") || u.Host == "" {
		return gathered{}, inputErrorf("--from: %q is no address that can be fetched; give one that begins with http:// or https:// and names a host", address)
	}
	shown := u.Redacted() // a password in it must not reach a log
	ctx, cancel := context.WithTimeout(ctx, timeout)
	defer cancel()
	text, err := fetch(ctx, u)
	if err != nil {
		if errors.Is(err, context.DeadlineExceeded) {
			return gathered{}, fmt.Errorf("fetch %s: no whole answer within %s; give a longer --timeout or try again later", shown, timeout)
		}
		var ue *url.Error
		if errors.As(err, &ue) {
			err = ue.Err // the rest of it says the address again, with any password
		}
		return gathered{}, fmt.Errorf("fetch %s: %w", shown, err)
	}
	g := gathered{text: text}
	g.sets, g.warnings, err = elements.Read(bytes.NewReader(text), shown)
	if err != nil {
		return gathered{}, &InputError{Err: fmt.Errorf("what was fetched is no text of element sets:\n%w", err)}
	}
	return g, nil
}

func fetch(ctx context.Context, u *url.URL) ([]byte, error) {
	req, err := http.NewRequestWithContext(ctx, http.MethodGet, u.String(), nil)
	if err != nil {
		return nil, err
	}
	req.Header.Set("User-Agent", "slantwise")
	client := &http.Client{CheckRedirect: checkRedirect}
	answer, err := client.Do(req)
	if err != nil {
		return nil, err
	}
	defer answer.Body.Close()
	if answer.StatusCode != http.StatusOK {
		return nil, fmt.Errorf("the server answered %q; only 200 brings element sets", answer.Status)
	}
	if answer.ContentLength > elements.MaxSize {
		return nil, tooMuch(fmt.Sprintf("%d bytes, ", answer.ContentLength))
	}
	text, err := io.ReadAll(io.LimitReader(answer.Body, elements.MaxSize+1))
	if err != nil {
		return nil, err
	}
	if len(text) > elements.MaxSize {
		return nil, tooMuch("")
	}
	return text, nil
}

func tooMuch(size string) error {
	return fmt.Errorf("the answer has %smore than the %d bytes that are read; ask the server for fewer objects", size, elements.MaxSize)
}

// checkRedirect follows a few redirections, none to a less safe scheme.
func checkRedirect(req *http.Request, via []*http.Request) error {
	switch {
	case len(via) > maxRedirects:
		return fmt.Errorf("the address points on more than %d times", maxRedirects)
	case req.URL.Scheme != "http" && req.URL.Scheme != "https":
		return fmt.Errorf("the address points on to %s, which is neither http nor https", req.URL.Redacted())
	case via[0].URL.Scheme == "https" && req.URL.Scheme != "https":
		return fmt.Errorf("the address points on from https to %s, which is not encrypted", req.URL.Redacted())
	}
	return nil
}
