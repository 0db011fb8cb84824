package tui

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
)

// errExists says that a file is there already.
var errExists = errors.New("exists")

// save writes a file so that it appears whole or not at all. Unless overwrite
// is set, one that is there already is left alone and errExists returned.
func save(name string, overwrite bool, write func(io.Writer) error) error {
	var b bytes.Buffer
	if err := write(&b); err != nil {
		return err
	}
	temporary, err := os.CreateTemp(filepath.Dir(name), ".fluxtoll-*")
	if err != nil {
		return err
	}
	defer os.Remove(temporary.Name())
	_, err = temporary.Write(b.Bytes())
	if err = errors.Join(err, temporary.Chmod(0o644), temporary.Close()); err != nil {
		return err
	}
	return place(temporary.Name(), name, overwrite)
}

// place gives the temporary file its name.
func place(temporary, name string, overwrite bool) error {
	if overwrite {
		return os.Rename(temporary, name)
	}
	err := os.Link(temporary, name)
	switch {
	case err == nil:
		return nil
	case errors.Is(err, fs.ErrExist):
		return errExists
	}
	// A file system without links: look first, then rename.
	if _, err := os.Lstat(name); err == nil {
		return errExists
	}
	return os.Rename(temporary, name)
}

// freeName is the first of base.ext, base-2.ext, ... that is not there.
func freeName(base, ext string) string {
	name := base + ext
	for i := 2; i < 1000; i++ {
		if _, err := os.Lstat(name); err != nil {
			return name
		}
		name = fmt.Sprintf("%s-%d%s", base, i, ext)
	}
	return name
}

// baseName is a scenario's name without folder and ending.
func baseName(name string) string {
	base := strings.TrimSuffix(filepath.Base(name), ".toml")
	if base == "" || strings.ContainsAny(base, " /") {
		return "scenario"
	}
	return base
}
