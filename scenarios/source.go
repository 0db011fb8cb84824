package scenarios

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"unicode/utf8"
)

// mostBytes bounds the size of a scenario file and of a table.
const mostBytes = 16 << 20

// OpenFunc opens a table named in a scenario. The name is the one written
// there, relative to the scenario.
type OpenFunc func(name string) (io.ReadCloser, error)

// Beside opens tables relative to a directory.
func Beside(dir string) OpenFunc {
	return func(name string) (io.ReadCloser, error) {
		if !filepath.IsAbs(name) {
			name = filepath.Join(dir, name)
		}
		return openFile(name)
	}
}

// Within opens tables relative to a directory of a file system.
func Within(files fs.FS, dir string) OpenFunc {
	return func(name string) (io.ReadCloser, error) { return files.Open(path.Join(dir, name)) }
}

// openFile opens a file that may be read: no directory, and not too large.
func openFile(name string) (io.ReadCloser, error) {
	f, err := os.Open(name)
	if err != nil {
		return nil, err
	}
	info, err := f.Stat()
	switch {
	case err != nil:
	case info.IsDir():
		err = errors.New("is a directory")
	case info.Size() > mostBytes:
		err = tooLarge()
	default:
		return f, nil
	}
	f.Close()
	return nil, err
}

func tooLarge() error {
	return fmt.Errorf("is larger than %d MiB", mostBytes>>20)
}

// because states why a file could not be opened or read, without its name.
func because(err error) string {
	var bad *fs.PathError
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return "does not exist"
	case errors.Is(err, fs.ErrPermission):
		return "may not be read"
	case errors.As(err, &bad):
		return "cannot be read: " + bad.Err.Error()
	}
	return err.Error()
}

// readText reads at most mostBytes of UTF-8 text, less a byte order mark.
func readText(src io.Reader) ([]byte, error) {
	text, err := io.ReadAll(io.LimitReader(src, mostBytes+1))
	if err != nil {
		return nil, &fault{msg: because(err), accepted: "a text file is accepted"}
	}
	if len(text) > mostBytes {
		return nil, &fault{msg: tooLarge().Error(), accepted: fmt.Sprintf("a text file of up to %d MiB is accepted", mostBytes>>20)}
	}
	text = bytes.TrimPrefix(text, []byte("\ufeff"))
	if at := firstBinary(text); at >= 0 {
		return text[:at], &fault{at: place(at) + 1, msg: "is not UTF-8 text", accepted: "a text file in UTF-8 is accepted"}
	}
	return text, nil
}

// firstBinary returns the offset of the first byte that no text holds, or -1.
func firstBinary(text []byte) int {
	if at := bytes.IndexByte(text, 0); at >= 0 {
		return at
	}
	if utf8.Valid(text) {
		return -1
	}
	at := 0
	for {
		r, size := utf8.DecodeRune(text[at:])
		if r == utf8.RuneError && size == 1 {
			return at
		}
		at += size
	}
}
