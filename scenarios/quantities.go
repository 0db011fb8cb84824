package scenarios

import (
	"strconv"
	"strings"
)

// Quantities returns the path of every number the file states, in the order in
// which Encode writes them: tolerance, packet.energy, layer[0].thickness.
func (f *File) Quantities() []string {
	paths := []string{"tolerance"}
	for _, s := range f.inOrder() {
		for _, fd := range s.fields {
			if fd.q.Given {
				paths = append(paths, s.key(fd.key))
			}
		}
	}
	return paths
}

// inOrder lists all sections from left to right.
func (f *File) inOrder() []section {
	singles := f.singles()
	all := append([]section(nil), singles[:2]...) // particle, entry
	for i := range f.Layers {
		all = append(all, f.layer(i))
	}
	return append(all, singles[2:]...)
}

// Get returns the quantity at a path. One that the file does not state is an
// *InputError.
func (f *File) Get(path string) (Quantity, error) {
	if path == "tolerance" {
		return Quantity{Number: f.Tolerance, Given: true}, nil
	}
	s, fd, bad := f.lookUp(path)
	if bad == nil && !fd.q.Given {
		bad = &fault{at: *s.at, key: path, msg: "is not given", accepted: accepts(fd.kind, f.Natural, fd.rule)}
	}
	if bad != nil {
		return Quantity{}, bad.locate(f.Name, f.source)
	}
	return *fd.q, nil
}

// Set changes the quantity at a path, or states one that the file did not, and
// checks the text as Read would. The error is an *InputError; f is then as it
// was. Whether the whole makes sense is left to Compile.
func (f *File) Set(path, text string) error {
	if path == "tolerance" {
		return f.locate(f.setTolerance(text, 0))
	}
	s, fd, bad := f.lookUp(path)
	if bad != nil {
		return bad.locate(f.Name, f.source)
	}
	at := fd.q.at
	if at == 0 {
		at = *s.at
	}
	q, bad := fd.read(text, f.Natural, path, at)
	if bad != nil {
		return bad.locate(f.Name, f.source)
	}
	*fd.q = q
	return nil
}

// lookUp finds the field of a path, stated or not.
func (f *File) lookUp(path string) (section, field, *fault) {
	s, key, bad := f.sectionOf(path)
	if bad != nil {
		return section{}, field{}, bad
	}
	for _, fd := range s.fields {
		if fd.key == key {
			return s, fd, nil
		}
	}
	keys := fieldKeys(s.fields)
	return section{}, field{}, &fault{
		at: *s.at, key: excerptPath(path), msg: "is no quantity of " + s.path,
		accepted: suggestion(key, keys) + "accepted are " + strings.Join(keys, ", "),
	}
}

// sectionOf finds the section of a path, and the key in it.
func (f *File) sectionOf(path string) (section, string, *fault) {
	name, key, _ := strings.Cut(path, ".")
	if index, ok := strings.CutPrefix(name, "layer["); ok {
		i, err := strconv.Atoi(strings.TrimSuffix(index, "]"))
		if err == nil && i >= 0 && i < len(f.Layers) && name == layerPath(i) {
			return f.layer(i), key, nil
		}
		return section{}, "", &fault{key: excerptPath(path), msg: "is no layer of this file", accepted: f.layerRange()}
	}
	names := []string{"tolerance"}
	for _, s := range f.singles() {
		if s.path == name {
			return s, key, nil
		}
		names = append(names, s.path)
	}
	return section{}, "", &fault{
		key: excerptPath(path), msg: "is no quantity",
		accepted: suggestion(name, names) + "accepted are paths such as packet.energy or layer[0].thickness",
	}
}

// layerRange is the sentence about the layers of the file.
func (f *File) layerRange() string {
	switch n := len(f.Layers); n {
	case 0:
		return "it has no layers"
	case 1:
		return "its only layer is layer[0]"
	default:
		return "its layers are layer[0] to " + layerPath(n-1)
	}
}

// excerptPath shows a path in a message.
func excerptPath(path string) string {
	if path == "" || len(path) > 60 || path != printable(path) {
		return excerpt(path)
	}
	return path
}
