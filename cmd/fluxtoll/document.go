package main

import (
	"encoding/json"
	"fmt"
	"io"
	"unicode/utf16"
	"unicode/utf8"
)

// writeJSON prints v as one indented document in ASCII, so that it is the same
// in every locale.
func writeJSON(w io.Writer, v any) error {
	text, err := json.MarshalIndent(v, "", "  ")
	if err != nil {
		return fmt.Errorf("the result cannot be written as JSON: %w", err)
	}
	_, err = w.Write(append(escaped(text), '\n'))
	return err
}

// escaped writes every character beyond ASCII as a JSON escape. Such
// characters stand in a JSON document only within strings.
func escaped(text []byte) []byte {
	var out []byte
	for _, r := range string(text) {
		switch {
		case r < utf8.RuneSelf:
			out = append(out, byte(r))
		case r > 0xffff:
			high, low := utf16.EncodeRune(r)
			out = fmt.Appendf(out, `\u%04x\u%04x`, high, low)
		default:
			out = fmt.Appendf(out, `\u%04x`, r)
		}
	}
	return out
}
