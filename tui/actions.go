package tui

import (
	"errors"
	"io"

	tea "github.com/charmbracelet/bubbletea"
)

// edit begins to change quantities.
func (m *Model) edit() {
	if m.file == nil {
		return
	}
	if m.editor == nil {
		m.editor = newEditor(m.file)
	}
	m.mode = editing
}

// done ends it; what was changed stays.
func (m *Model) done() {
	m.editor, m.mode = nil, watching
}

// apply changes the scenario and lets the packet start again; a change that
// is refused is explained.
func (m *Model) apply(change func() error) {
	if err := change(); err != nil {
		m.note = err.Error()
		return
	}
	m.load(m.editor.file)
}

// choose lists the scenarios.
func (m *Model) choose() {
	m.chooser = newChooser(m.options.Folder)
	m.mode = choosing
}

// chosen opens the picked scenario.
func (m *Model) chosen() {
	f, err := m.options.Open(m.chooser.name())
	if err != nil {
		m.note = err.Error()
		return
	}
	m.view = newView()
	m.editor, m.mode = nil, watching
	m.load(f)
}

// back leaves the choice, and the program where nothing was chosen yet.
func (m *Model) back() tea.Cmd {
	if m.file == nil {
		return tea.Quit
	}
	m.mode = watching
	if m.editor != nil {
		m.mode = editing
	}
	return nil
}

// ask begins to type a line.
func (m *Model) ask(label, text string, then func(*Model, string)) {
	m.prompt = &prompt{label: label, text: []rune(text), then: then}
	m.enter(typing)
}

// answer takes what was typed.
func (m *Model) answer() {
	p := m.prompt
	m.mode, m.prompt = m.before, nil
	p.then(m, string(p.text))
}

func (m *Model) giveUp() { m.mode, m.prompt = m.before, nil }

// askValue asks for the picked quantity.
func (m *Model) askValue() {
	text, _ := m.editor.value(m.editor.path())
	m.ask(m.editor.path()+" =", text, func(m *Model, text string) {
		m.apply(func() error { return m.editor.set(text) })
	})
}

// askFile asks for a file's name and writes it.
func (m *Model) askFile(label, ext string, write func(io.Writer) error) {
	if m.file == nil {
		return
	}
	m.ask(label, freeName(baseName(m.file.Name), ext), func(m *Model, name string) { m.write(name, false, write) })
}

// write writes a file; one that is there already only after a yes.
func (m *Model) write(name string, overwrite bool, write func(io.Writer) error) {
	err := save(name, overwrite, write)
	switch {
	case errors.Is(err, errExists):
		m.prompt = &prompt{label: name + " exists. Overwrite it? y n", yesNo: true, then: func(m *Model, _ string) { m.write(name, true, write) }}
		m.enter(confirming)
	case err != nil:
		m.note = "not written: " + err.Error()
	default:
		m.note = "written to " + name
	}
}

// askScenario also says which tables the file will need.
func (m *Model) askScenario() {
	label := "Scenario to file"
	if m.file != nil {
		for _, l := range m.file.Layers {
			if l.Table != nil {
				label = "Scenario (its table " + l.Table.File + " must lie beside it) to file"
			}
		}
	}
	m.askFile(label, ".toml", m.encode)
}

func (m *Model) askText() { m.askFile("Frame as text to file", ".txt", m.text) }
func (m *Model) askSVG()  { m.askFile("Frame as SVG to file", ".svg", m.svg) }

// encode writes the scenario as it is now.
func (m *Model) encode(w io.Writer) error { return m.file.Encode(w) }
