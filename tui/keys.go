package tui

import (
	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"fluxtoll/tui/player"
)

// mode is who gets the keys.
type mode int

const (
	watching mode = iota
	editing
	choosing
	typing
	confirming
	helping
)

// binding is a key with what it does: the one source of dispatch and of help.
type binding struct {
	key.Binding
	section string
	act     func(*Model) tea.Cmd
	hint    string // how the last line of the screen names it, if it does
}

// bind makes a binding; shown is how the help writes the keys.
func bind(section, shown, does string, act func(*Model) tea.Cmd, keys ...string) binding {
	return binding{Binding: key.NewBinding(key.WithKeys(keys...), key.WithHelp(shown, does)), section: section, act: act}
}

// hinted names a binding in the last line of the screen.
func hinted(hint string, b binding) binding {
	b.hint = hint
	return b
}

// do makes an action that needs no command.
func do(f func(*Model)) func(*Model) tea.Cmd {
	return func(m *Model) tea.Cmd {
		f(m)
		return nil
	}
}

// keyMap lists the bindings of a mode in the order of the help.
func keyMap(in mode) []binding {
	switch in {
	case watching:
		return watchingKeys()
	case editing:
		return append(editingKeys(), without(watchingKeys(), editingKeys())...)
	case choosing:
		return choosingKeys()
	case typing:
		return typingKeys()
	case confirming:
		return confirmingKeys()
	}
	return helpingKeys()
}

// without leaves out bindings that share a key with one of taken.
func without(list, taken []binding) []binding {
	used := map[string]bool{}
	for _, b := range taken {
		for _, k := range b.Keys() {
			used[k] = true
		}
	}
	var out []binding
	for _, b := range list {
		var free []string
		for _, k := range b.Keys() {
			if !used[k] {
				free = append(free, k)
			}
		}
		if len(free) > 0 {
			b.SetKeys(free...)
			b.hint = ""
			out = append(out, b)
		}
	}
	return out
}

func watchingKeys() []binding {
	var all []binding
	for _, group := range [][]binding{timeKeys(), viewKeys(), panelKeys(), scenarioKeys(), leaveKeys()} {
		all = append(all, group...)
	}
	return all
}

func timeKeys() []binding {
	const s = "Time"
	nudge := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.player.Nudge(n) }) }
	step := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.player.Step(n) }) }
	stride := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.player.Stride(n) }) }
	goTo := func(p player.Place) func(*Model) tea.Cmd { return do(func(m *Model) { m.player.Go(p) }) }
	pace := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.player.Faster(n) }) }
	return []binding{
		hinted("space pause", bind(s, "space", "pause, go on", do(func(m *Model) { m.player.Pause() }), " ")),
		hinted("← → step", bind(s, "→", "a little forward", nudge(1), "right")),
		bind(s, "←", "a little back", nudge(-1), "left"),
		bind(s, ".", "the least bit forward", step(1), "."),
		bind(s, ",", "the least bit back", step(-1), ","),
		bind(s, "shift+→ >", "a step of the run forward", stride(1), "shift+right", ">"),
		bind(s, "shift+← <", "a step of the run back", stride(-1), "shift+left", "<"),
		bind(s, "home g", "to the start", goTo(player.AtStart), "home", "g"),
		bind(s, "c", "to the first contact", goTo(player.AtContact), "c"),
		bind(s, "end G", "to the end", goTo(player.AtEnd), "end", "G"),
		bind(s, "+ =", "faster", pace(1), "+", "="),
		bind(s, "-", "slower", pace(-1), "-"),
	}
}

func viewKeys() []binding {
	const s = "View"
	zoom := func(f float64) func(*Model) tea.Cmd {
		return do(func(m *Model) { m.look(func() { m.view.zoom(m.outlook(), f) }) })
	}
	pan := func(f float64) func(*Model) tea.Cmd {
		return do(func(m *Model) { m.look(func() { m.view.pan(m.outlook(), f) }) })
	}
	keep := func(f fit) func(*Model) tea.Cmd { return do(func(m *Model) { m.look(func() { m.view.fit = f }) }) }
	return []binding{
		bind(s, "l", "density linear or log", do(func(m *Model) { m.view.log = !m.view.log }), "l"),
		hinted("d free packet", bind(s, "d", "free packet as an outline", do(func(m *Model) { m.view.ghost = !m.view.ghost }), "d")),
		bind(s, "↑ i", "zoom in", zoom(0.75), "up", "i"),
		bind(s, "↓ o", "zoom out", zoom(1/0.75), "down", "o"),
		bind(s, "[", "pan to the left", pan(-0.125), "["),
		bind(s, "]", "pan to the right", pan(0.125), "]"),
		bind(s, "f", "follow the packet", do(func(m *Model) { m.look(func() { m.view.follow(m.outlook()) }) }), "f"),
		bind(s, "s", "fit to the structure", keep(fitStructure), "s"),
		bind(s, "w", "the whole way", keep(fitWhole), "w"),
	}
}

func panelKeys() []binding {
	const s = "Panels"
	toggle := func(p panel) func(*Model) tea.Cmd {
		return do(func(m *Model) { m.view.want[p] = !m.view.want[p] })
	}
	return []binding{
		bind(s, "1", "tally of probability", toggle(panelTally), "1"),
		bind(s, "2", "arrivals at the planes", toggle(panelArrivals), "2"),
		bind(s, "3", "spectrum of energies", toggle(panelSpectrum), "3"),
		bind(s, "4", "numbers", toggle(panelNumbers), "4"),
	}
}

func scenarioKeys() []binding {
	const s = "Scenario and files"
	return []binding{
		hinted("e change", bind(s, "e", "change a quantity", do((*Model).edit), "e")),
		bind(s, "n", "choose another scenario", do((*Model).choose), "n"),
		bind(s, "W", "write scenario to a file", do((*Model).askScenario), "W"),
		bind(s, "t", "write this frame as text", do((*Model).askText), "t"),
		bind(s, "v", "write this frame as SVG", do((*Model).askSVG), "v"),
	}
}

func leaveKeys() []binding {
	const s = "Keys"
	return []binding{
		hinted("? keys", bind(s, "?", "this list", do(func(m *Model) { m.enter(helping) }), "?")),
		hinted("q leave", bind(s, "q ctrl+c", "leave", leave, "q", "ctrl+c")),
		bind(s, "ctrl+z", "to the shell for a while", func(*Model) tea.Cmd { return tea.Suspend }, "ctrl+z"),
	}
}

func leave(*Model) tea.Cmd { return tea.Quit }

func editingKeys() []binding {
	const s = "Changing a quantity"
	pick := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.editor.move(n) }) }
	change := func(n int) func(*Model) tea.Cmd {
		return do(func(m *Model) { m.apply(func() error { return m.editor.change(n) }) })
	}
	size := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.editor.resize(n) }) }
	return []binding{
		hinted("↑ ↓ pick", bind(s, "↑", "pick the one before", pick(-1), "up")),
		bind(s, "↓", "pick the next", pick(1), "down"),
		hinted("← → change", bind(s, "←", "less", change(-1), "left")),
		bind(s, "→", "more", change(1), "right"),
		hinted("[ ] step", bind(s, "[", "step ten times larger", size(-1), "[")),
		bind(s, "]", "step ten times finer", size(1), "]"),
		hinted("enter type", bind(s, "enter", "type a value", do((*Model).askValue), "enter")),
		bind(s, "u", "back to the first value", do(func(m *Model) { m.apply(m.editor.reset) }), "u", "backspace"),
		hinted("W write", bind(s, "W", "write scenario to a file", do((*Model).askScenario), "W")),
		hinted("esc done", bind(s, "esc e", "done", do(func(m *Model) { m.done() }), "esc", "e")),
	}
}

func choosingKeys() []binding {
	const s = "Choosing"
	pick := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.chooser.move(n) }) }
	return []binding{
		hinted("↑ ↓ pick", bind(s, "↑ k", "pick the one before", pick(-1), "up", "k")),
		bind(s, "↓ j", "pick the next", pick(1), "down", "j"),
		hinted("enter watch", bind(s, "enter", "watch it", do((*Model).chosen), "enter")),
		hinted("esc back", bind(s, "esc", "back", (*Model).back, "esc")),
		hinted("q leave", bind(s, "q ctrl+c", "leave", leave, "q", "ctrl+c")),
	}
}

func typingKeys() []binding {
	const s = "Typing"
	return []binding{
		bind(s, "enter", "take it", do((*Model).answer), "enter"),
		bind(s, "backspace", "erase", do(func(m *Model) { m.prompt.erase() }), "backspace"),
		bind(s, "ctrl+u", "erase all", do(func(m *Model) { m.prompt.text = nil }), "ctrl+u"),
		bind(s, "esc", "give up", do((*Model).giveUp), "esc"),
		bind(s, "ctrl+c", "leave", leave, "ctrl+c"),
	}
}

func confirmingKeys() []binding {
	const s = "Yes or no"
	return []binding{
		bind(s, "y", "yes", do((*Model).answer), "y", "Y"),
		bind(s, "n", "no", do((*Model).giveUp), "n", "N", "esc"),
		bind(s, "ctrl+c", "leave", leave, "ctrl+c"),
	}
}

func helpingKeys() []binding {
	const s = "Help"
	scroll := func(n int) func(*Model) tea.Cmd { return do(func(m *Model) { m.scroll = max(0, m.scroll+n) }) }
	return []binding{
		bind(s, "↓", "further down", scroll(1), "down", " ", "j"),
		bind(s, "↑", "further up", scroll(-1), "up", "k"),
		bind(s, "esc", "close", do(func(m *Model) { m.mode = m.before }), "esc", "?", "q"),
		bind(s, "ctrl+c", "leave", leave, "ctrl+c"),
	}
}

// hints is the last line of the screen in a mode.
func hints(in mode) string {
	text := ""
	for _, b := range keyMap(in) {
		if b.hint == "" {
			continue
		}
		if text != "" {
			text += "   "
		}
		text += b.hint
	}
	return text
}
