package tui

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// Looks are paid for by nobody but watch: no other file of the program imports
// the screen or the library below it.
func TestOnlyWatchImportsTheScreen(t *testing.T) {
	seen, watch := 0, false
	err := filepath.WalkDir("..", func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || filepath.Ext(path) != ".go" {
			return err
		}
		path = filepath.ToSlash(path)
		if strings.HasPrefix(path, "../tui/") || strings.HasPrefix(path, "../internal/quietterm/") {
			return nil
		}
		seen++
		f, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		for _, s := range f.Imports {
			name, err := strconv.Unquote(s.Path.Value)
			if err != nil {
				return err
			}
			if !strings.HasPrefix(name, "fluxtoll/tui") && !strings.HasPrefix(name, "github.com/charmbracelet/") {
				continue
			}
			if path != "../cmd/fluxtoll/watch.go" {
				t.Errorf("%s imports %s", path, name)
			}
			watch = true
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if seen < 50 || !watch {
		t.Errorf("only %d files seen, watch among them: %t", seen, watch)
	}
}
