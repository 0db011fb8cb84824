package scenarios

import (
	"slices"
	"strings"
)

// layers reads [[layer]].
func (r *reader) layers(root *node) error {
	m := root.find("layer")
	if m == nil {
		return nil
	}
	r.file.Layers = make([]LayerSpec, len(m.value.items))
	for i, item := range m.value.items {
		l := &r.file.Layers[i]
		l.at, l.Shape = item.at, ShapeFlat
		if err := r.shape(i, item); err != nil {
			return err
		}
		if err := r.quantities(r.file.layer(i), item); err != nil {
			return err
		}
		if l.Shape == ShapeTable {
			if err := r.table(i, item); err != nil {
				return err
			}
		}
	}
	return nil
}

// shape reads the shape and refuses keys that it does not take.
func (r *reader) shape(i int, item *node) error {
	l := &r.file.Layers[i]
	if m := item.find("shape"); m != nil {
		word, err := choose(layerPath(i)+".shape", m, shapes())
		if err != nil {
			return err
		}
		l.Shape = ShapeName(word)
	}
	keys := l.keys()
	for _, m := range item.keys {
		if !slices.Contains(keys, m.name) {
			return &fault{at: m.at, key: section{path: layerPath(i)}.key(m.name), msg: "is no key of the shape " + string(l.Shape), accepted: l.takes()}
		}
	}
	return nil
}

// takes is the sentence about the keys of the layer's shape.
func (l *LayerSpec) takes() string {
	return "the shape " + string(l.Shape) + " takes " + strings.Join(l.keys(), ", ")
}
