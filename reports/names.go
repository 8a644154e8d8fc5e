package reports

import (
	"strconv"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"
)

// slugLimit keeps file names well under the 255 bytes that file systems allow.
const slugLimit = 48

// slug returns s in lower-case ASCII letters, digits and single hyphens: accents
// are dropped, all else becomes a hyphen. It is "unnamed" where nothing is left.
func slug(s string) string {
	var b strings.Builder
	hyphen := false
	for _, r := range norm.NFKD.String(s) {
		r = unicode.ToLower(r)
		switch {
		case r >= 'a' && r <= 'z', r >= '0' && r <= '9':
			if hyphen && b.Len() > 0 {
				b.WriteByte('-')
			}
			hyphen = false
			b.WriteRune(r)
		case unicode.Is(unicode.Mn, r): // an accent that was taken off its letter
		default:
			hyphen = true
		}
		if b.Len() >= slugLimit {
			break
		}
	}
	if b.Len() == 0 {
		return "unnamed"
	}
	return b.String()
}

// pageNames returns the file name of each pass, without an ending: spacecraft,
// station, link, AOS. Names that come out the same are told apart by a number, in
// the order of the keys.
func pageNames(keys []Key) []string {
	names := make([]string, len(keys))
	taken := make(map[string]int, len(keys))
	for i, k := range keys {
		parts := []string{slug(k.Spacecraft), slug(k.Station)}
		if k.Link != "" {
			parts = append(parts, slug(k.Link))
		}
		parts = append(parts, k.AOS.UTC().Format("20060102t150405z"))
		name := strings.Join(parts, "-")
		for again := name; ; again = name + "-" + strconv.Itoa(taken[name]) {
			if _, is := taken[again]; !is {
				taken[again] = 1
				names[i] = again
				break
			}
			taken[name]++
		}
	}
	return names
}
