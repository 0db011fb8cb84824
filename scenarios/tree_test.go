package scenarios

import (
	"strings"
	"testing"

	"github.com/pelletier/go-toml/v2"
)

// documents are TOML documents around what may and may not be given twice.
func documents() []string {
	return []string{
		"", "a = 1", "a = 1\na = 2", "[a]\n[a]", "[a.b]\n[a]", "[a]\n[a.b]", "[a.b]\n[a.b]",
		"[a]\nb.c = 1\n[a.b]", "[a]\nb.c = 1\n[a.b.d]", "[a.b]\nc = 1\n[a]\nb.d = 2", "[a.b.c]\n[a]\nb.d = 2",
		"a = {b = 1}\n[a]", "a = {b = 1}\n[a.c]", "a = {b = 1}\na.c = 2", "a.b = 1\na.c = 2", "a.b = 1\na.b.c = 2", "a.b = 1\n[a]",
		"[[a]]\n[[a]]", "[a]\n[[a]]", "[[a]]\n[a]", "a = []\n[[a]]", "a = [{}]\n[[a]]", "[[a]]\nb = 1\n[a.c]\n[[a]]\n[a.c]",
		"[[a.b]]\n[a]", "[[a.b]]\n[a]\nb = 1", "[[a]]\n[[a.b]]\n[[a.b]]\n[[a]]\n[[a.b]]", "[a]\n[a.b]\n[[a.b]]",
		"a = {b = 1, b = 2}", "a = {b.c = 1, b.d = 2}", "a = {b = {c = 1}, b.d = 2}", "a = [{b = 1}, {b = 1}]", "a = [[1], [2]]",
		"a = \"b\n\"", "a", "a =", "= 1", "[a", "[[a]", "a = 1 b = 2", "\"\" = 1", "a = 'x'\n\"a\" = 1", "[a]\nb = 1\n[c]\nb = 1",
		"a = \"\\u0041\"\nb = '''x\ny'''", "# only a comment", "\r\n", "a = 1\r\nb = 2\r\n", "a = \x00", "[a] # x\nb = 1 # y",
	}
}

// The tree refuses the same documents as the reference reader it borrows its
// parser from, which is checked against the TOML test suite.
func TestTreeAgainstReference(t *testing.T) {
	refused := 0
	for _, text := range documents() {
		_, err := parseTree([]byte(text))
		want := toml.Unmarshal([]byte(text), &map[string]any{})
		if (err == nil) != (want == nil) {
			t.Errorf("%q: got %v, reference %v", text, err, want)
		}
		if want != nil {
			refused++
		}
	}
	if refused < 15 {
		t.Errorf("only %d documents are refused: the check is hollow", refused)
	}
}

// FuzzTree looks for documents on which the two differ. What differs on
// purpose: the tree reads numbers and dates later, and bounds the keys of a
// table.
func FuzzTree(f *testing.F) {
	for _, text := range append(documents(), sound, bare) {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		root, err := parseTree([]byte(text))
		want := toml.Unmarshal([]byte(text), &map[string]any{})
		switch {
		case err != nil && want == nil && !strings.Contains(err.Error(), "one key too many"):
			t.Errorf("%q: refused: %v", text, err)
		case err == nil && want != nil && !hasNumber(root):
			t.Errorf("%q: accepted, reference %v", text, want)
		}
	})
}

// hasNumber reports whether a tree holds a number or a date.
func hasNumber(n *node) bool {
	if n.kind == numberNode || n.kind == otherNode {
		return true
	}
	for _, m := range n.keys {
		if hasNumber(m.value) {
			return true
		}
	}
	for _, item := range n.items {
		if hasNumber(item) {
			return true
		}
	}
	return false
}

// Columns count characters, not bytes.
func TestColumnsCountCharacters(t *testing.T) {
	text := "layer = [{shape = \"sech2\", width = \"1 \u00b5m\", height = \"2 K\", colour = 1}]\n"
	err := readAndCompile("one.toml", text)
	checkInputError(t, err, "one.toml", "1:60", "layer[0].colour", "no key", "accepted are")
}
