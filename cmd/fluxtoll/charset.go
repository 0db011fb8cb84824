package main

import (
	"io"
	"strings"
	"unicode/utf8"
)

// utf8Locale reports whether the locale shows UTF-8: the first of LC_ALL,
// LC_CTYPE and LANG that is set decides (POSIX, Base Definitions, 8.2).
func utf8Locale(getenv func(string) string) bool {
	for _, name := range []string{"LC_ALL", "LC_CTYPE", "LANG"} {
		if v := strings.ToLower(getenv(name)); v != "" {
			return strings.Contains(v, "utf-8") || strings.Contains(v, "utf8")
		}
	}
	return false
}

// asciiWriter writes a question mark for every character beyond ASCII. Each
// call must hold whole characters.
type asciiWriter struct{ io.Writer }

func (w asciiWriter) Write(p []byte) (int, error) {
	plain := strings.Map(func(r rune) rune {
		if r >= utf8.RuneSelf {
			return '?'
		}
		return r
	}, string(p))
	if _, err := io.WriteString(w.Writer, plain); err != nil {
		return 0, err
	}
	return len(p), nil
}
