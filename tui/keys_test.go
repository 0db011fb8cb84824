package tui

import (
	"fmt"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

func openDemo(name string) (*scenarios.File, error) { return scenarios.OpenDemo(name) }

func allModes() []mode { return []mode{watching, editing, choosing, typing, confirming, helping} }

// Every binding has a key, an action and words, and no key means two things
// in one mode.
func TestEveryBindingIsHandledAndDocumented(t *testing.T) {
	for _, in := range allModes() {
		list := keyMap(in)
		if len(list) == 0 {
			t.Fatalf("mode %d has no keys", in)
		}
		taken := map[string]string{}
		for _, b := range list {
			if b.act == nil || b.section == "" || b.Help().Key == "" || b.Help().Desc == "" || len(b.Keys()) == 0 {
				t.Errorf("mode %d: %q (%q) is incomplete", in, b.Help().Key, b.Help().Desc)
			}
			for _, k := range b.Keys() {
				if other, ok := taken[k]; ok {
					t.Errorf("mode %d: %q means both %q and %q", in, k, other, b.Help().Desc)
				}
				taken[k] = b.Help().Desc
			}
		}
		if _, ok := taken["ctrl+c"]; !ok {
			t.Errorf("mode %d: ctrl+c does not leave", in)
		}
	}
}

// Every line of the help is a binding of the mode, and every binding has one,
// in full at 80x24 while watching.
func TestHelpListsEveryBinding(t *testing.T) {
	for in, size := range map[mode]Size{watching: {80, 24}, editing: {200, 60}} {
		var c canvas.Canvas
		c.Reset(size.Wide, size.High)
		drawHelp(c.Box(0, 0, c.W, c.H), keyMap(in), 0)
		text := c.String(canvas.Output{UTF8: true})
		for _, b := range keyMap(in) {
			if !strings.Contains(text, b.Help().Desc) {
				t.Errorf("mode %d: the help lacks %q", in, b.Help().Desc)
			}
		}
	}
}

// keyMsg is the message of a key of the key map.
func keyMsg(name string) tea.KeyMsg {
	for k := tea.KeyType(-100); k < 200; k++ {
		if m := (tea.KeyMsg{Type: k}); m.String() == name && k != tea.KeyRunes {
			return m
		}
	}
	return tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(name)}
}

// testModel is a model on a demo with its first frame.
func testModel(t *testing.T) *Model {
	t.Helper()
	f, err := openDemo("thin-barrier")
	if err != nil {
		t.Fatal(err)
	}
	p := player.Start(t.Context())
	t.Cleanup(p.Stop)
	m := newModel(Options{
		File: f, Open: openDemo, Folder: t.TempDir(), Output: canvas.Output{Depth: canvas.Colors256, UTF8: true},
	}, p)
	for m.frame == nil || m.frame.Moment == nil {
		m.Update(frameMsg{p.Next()})
	}
	return m
}

// Every key of every mode can be pressed, and the screen drawn afterwards.
func TestEveryKeyCanBePressed(t *testing.T) {
	t.Chdir(t.TempDir())
	pressed := 0
	for _, in := range allModes() {
		m := testModel(t)
		for _, b := range keyMap(in) {
			for _, k := range b.Keys() {
				m.mode = watching
				m.put(in)
				if got := keyMsg(k).String(); got != k {
					t.Fatalf("no message for the key %q, only %q", k, got)
				}
				m.Update(keyMsg(k))
				if m.View() == "" {
					t.Errorf("mode %d: nothing shown after %q", in, k)
				}
				pressed++
			}
		}
	}
	if pressed < 80 {
		t.Errorf("only %d keys pressed", pressed)
	}
}

// put brings the model into a mode by its own ways.
func (m *Model) put(in mode) {
	switch in {
	case editing:
		m.edit()
	case choosing:
		m.choose()
	case typing:
		m.ask("?", "text", func(*Model, string) {})
	case confirming:
		m.ask("?", "", func(*Model, string) {})
		m.mode = confirming
	case helping:
		m.enter(helping)
	case watching:
	}
}

// press sends keys by name.
func press(m *Model, keys ...string) {
	for _, k := range keys {
		m.Update(keyMsg(k))
	}
}

// Changing a quantity changes the prediction and starts the packet again.
func TestChangeAQuantity(t *testing.T) {
	m := testModel(t)
	before := m.frame.Outlook.Predicted
	press(m, " ", "e", "down", "down")
	if got := m.editor.path(); got != "layer[0].thickness" {
		t.Fatalf("picked %q", got)
	}
	press(m, "right", "right", "]", "left")
	if text, changed := m.editor.value("layer[0].thickness"); text != "3.19 nm" || !changed {
		t.Fatalf("value %q (changed: %t), want 3.19 nm", text, changed)
	}
	for m.frame.Scenario != m.number || m.frame.Loading {
		m.Update(frameMsg{m.player.Next()})
	}
	after := m.frame.Outlook.Predicted
	if !(after.Transmitted < before.Transmitted) {
		t.Errorf("a thicker barrier transmits %g, before %g", after.Transmitted, before.Transmitted)
	}
	if m.frame.Moment.Tick != 0 {
		t.Errorf("the packet is at tick %d, not at its start", m.frame.Moment.Tick)
	}
	press(m, "u")
	if text, changed := m.editor.value("layer[0].thickness"); text != "3 nm" || changed {
		t.Errorf("after u: %q (changed: %t)", text, changed)
	}
}

// A value that is refused is explained and changes nothing.
func TestARefusedValueIsExplained(t *testing.T) {
	m := testModel(t)
	press(m, "e", "down", "down", "enter")
	m.prompt.text = []rune("-4 nm")
	number := m.number
	press(m, "enter")
	if !strings.Contains(m.note, "negative") || m.number != number {
		t.Errorf("note %q, scenario %d, before %d", m.note, m.number, number)
	}
	press(m, "enter")
	m.prompt.text = []rune("5 nm")
	press(m, "enter")
	if text, _ := m.editor.value("layer[0].thickness"); text != "5 nm" {
		t.Errorf("value %q, want 5 nm", text)
	}
}

// An energy that cannot move is refused when the scenario is compiled.
func TestAScenarioThatCannotBeComputedIsExplained(t *testing.T) {
	m := testModel(t)
	press(m, "e", "down", "down", "down", "down", "down", "enter")
	if got := m.editor.path(); got != "packet.energy" {
		t.Fatalf("picked %q", got)
	}
	m.prompt.text = []rune("-1 meV")
	press(m, "enter")
	for m.frame.Loading || m.frame.Err == nil {
		m.Update(frameMsg{m.player.Next()})
	}
	if !strings.Contains(m.note, "packet.energy") {
		t.Errorf("note %q does not name packet.energy", m.note)
	}
}

// Decimals stay decimal: no 0.30000000000000004.
func TestStepsAreDecimal(t *testing.T) {
	f, err := openDemo("thin-barrier")
	if err != nil {
		t.Fatal(err)
	}
	e := newEditor(f)
	e.move(2)
	for i := range 12 {
		if err := e.change(1); err != nil {
			t.Fatal(err)
		}
		want := fmt.Sprintf("%g nm", float64(31+i)/10)
		if text, _ := e.value(e.path()); text != want {
			t.Errorf("step %d: %q, want %q", i, text, want)
		}
	}
}

// What the file does not state can be given all the same: a bias.
func TestABiasCanBeGiven(t *testing.T) {
	m := testModel(t)
	press(m, "e")
	for range 20 {
		press(m, "down")
	}
	if text, _ := m.editor.value(m.editor.path()); m.editor.path() != "bias.drop" || text != "0 meV" {
		t.Fatalf("the last quantity is %s = %s", m.editor.path(), text)
	}
	before := m.frame.Outlook.Predicted.Transmitted
	press(m, "right", "right")
	if text, changed := m.editor.value("bias.drop"); text != "20 meV" || !changed {
		t.Errorf("bias %s (changed: %t), want 20 meV", text, changed)
	}
	for m.frame.Scenario != m.number || m.frame.Loading {
		m.Update(frameMsg{m.player.Next()})
	}
	if after := m.frame.Outlook.Predicted.Transmitted; after == before {
		t.Errorf("the bias changes nothing: %g", after)
	}
}
