package scenarios

import (
	"fmt"
	"slices"
	"strings"
)

// topKeys are the keys outside any table.
func topKeys() []string {
	return []string{"title", "tolerance", "units", "particle", "entry", "layer", "exit", "bias", "packet", "planes", "display"}
}

// checkKeys refuses what no section has, before anything else: a misspelt key
// would otherwise be reported as a missing one.
func (r *reader) checkKeys(root *node) error {
	if err := known("", root, topKeys()); err != nil {
		return err
	}
	for _, s := range r.file.singles() {
		if err := knownTable(root, s.path, append(fieldKeys(s.fields), extraWords(s.path)...)); err != nil {
			return err
		}
	}
	if err := knownTable(root, "display", displayKeys()); err != nil {
		return err
	}
	return checkLayers(root.find("layer"))
}

// extraWords lists the keys of a section that are no quantities.
func extraWords(path string) []string {
	if path == "packet" {
		return []string{"from"}
	}
	return nil
}

// checkLayers refuses what is no array of tables with layer keys.
func checkLayers(m *member) error {
	if m == nil {
		return nil
	}
	if m.value.kind != arrayNode {
		return &fault{at: m.at, key: "layer", msg: "is " + m.value.kind.String(), accepted: "write each layer as [[layer]], from left to right"}
	}
	if n := len(m.value.items); n > mostLayers {
		return &fault{at: m.value.items[mostLayers].at, key: "layer", msg: fmt.Sprintf("there are %d of them", n), accepted: fmt.Sprintf("up to %d layers are accepted; a [[layer]] of shape \"table\" may replace many", mostLayers)}
	}
	keys := layerKeys()
	for i, item := range m.value.items {
		if item.kind != tableNode {
			return &fault{at: item.at, key: layerPath(i), msg: "is " + item.kind.String(), accepted: "write each layer as [[layer]], from left to right"}
		}
		if err := known(layerPath(i), item, keys); err != nil {
			return err
		}
	}
	return nil
}

// knownTable checks the keys of one table of the document, if it is there.
func knownTable(root *node, name string, keys []string) error {
	m := root.find(name)
	if m == nil {
		return nil
	}
	if m.value.kind != tableNode {
		return &fault{at: m.at, key: name, msg: "is " + m.value.kind.String(), accepted: "write it as the table [" + name + "] with " + strings.Join(keys, ", ")}
	}
	return known(name, m.value, keys)
}

// known refuses keys that are not listed.
func known(path string, table *node, keys []string) error {
	for _, m := range table.keys {
		if !slices.Contains(keys, m.name) {
			return unknownKey(path, m, keys)
		}
	}
	return nil
}

func unknownKey(path string, m member, keys []string) error {
	return &fault{
		at: m.at, key: section{path: path}.key(excerptKey(m.name)), msg: "is no key known here",
		accepted: suggestion(m.name, keys) + "accepted are " + strings.Join(keys, ", "),
	}
}
