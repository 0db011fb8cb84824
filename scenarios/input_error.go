package scenarios

import (
	"fmt"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// InputError says what is wrong with a scenario, where, and what is accepted
// instead. Line and Column count from 1, columns in characters (in bytes where
// File is a table); a Line of 0 means that no place is known. Its text is one line and holds nothing that a
// terminal would obey.
type InputError struct {
	File         string
	Line, Column int
	Key          string // path of the key at fault, such as layer[1].thickness
	Msg          string // what is wrong
	Accepted     string // what is accepted, or what to do next
}

// Error returns file:line:column: key: message; accepted.
func (e *InputError) Error() string {
	var b strings.Builder
	b.WriteString(e.File)
	if e.Line > 0 {
		fmt.Fprintf(&b, ":%d:%d", e.Line, e.Column)
	}
	for _, part := range []string{e.Key, e.Msg} {
		if part != "" {
			b.WriteString(": " + part)
		}
	}
	if e.Accepted != "" {
		b.WriteString("; " + e.Accepted)
	}
	return printable(b.String())
}

// place is a position in a scenario's text: one more than the byte offset,
// 0 where there is none.
type place int

// fault is an error that does not know its file yet.
type fault struct {
	at            place
	key           string
	msg, accepted string
}

func (e *fault) Error() string { return e.key + ": " + e.msg + "; " + e.accepted }

// locate makes the fault an InputError in a source of the given name.
func (e *fault) locate(name, source string) *InputError {
	out := &InputError{File: name, Key: e.key, Msg: e.msg, Accepted: e.accepted}
	if at := int(e.at) - 1; at >= 0 && at <= len(source) {
		before := source[:at]
		start := strings.LastIndexByte(before, '\n') + 1
		out.Line = strings.Count(before, "\n") + 1
		out.Column = utf8.RuneCountInString(before[start:]) + 1
	}
	return out
}

// excerpt quotes what was written, in ASCII and shortened.
func excerpt(s string) string {
	const most = 40
	if utf8.RuneCountInString(s) > most {
		s = string([]rune(s)[:most]) + "..."
	}
	return strconv.QuoteToASCII(s)
}

// printable replaces whatever does not print.
func printable(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsPrint(r) && r != utf8.RuneError {
			return r
		}
		return '?'
	}, s)
}

// line makes a text one line of at most 120 printable characters.
func line(s string) string {
	const most = 120
	s = strings.Map(func(r rune) rune {
		if unicode.IsPrint(r) && r != utf8.RuneError {
			return r
		}
		return ' '
	}, s)
	s = strings.Join(strings.Fields(s), " ")
	if utf8.RuneCountInString(s) > most {
		s = string([]rune(s)[:most-3]) + "..."
	}
	return s
}
