package tui

import (
	"io"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

// Model is a thin reader: it keeps the newest frame and how to look at it,
// and hands keys to the player.
type Model struct {
	options Options
	player  *player.Player
	canvas  *canvas.Canvas
	w, h    int
	frame   *player.Frame
	number  int // of the newest scenario asked for
	file    *scenarios.File
	view    view
	mode    mode
	before  mode // helping, typing and confirming go back to it
	editor  *editor
	chooser *chooser
	prompt  *prompt
	scroll  int // of the help
	note    string
	failed  error // what ended the program
}

// newModel starts with the scenario of the options, or else with a choice.
func newModel(o Options, p *player.Player) *Model {
	m := &Model{options: o, player: p, canvas: &canvas.Canvas{}, view: newView(), w: 80, h: 24}
	p.View(scenarios.Window{Columns: 2 * m.w})
	if o.File != nil {
		m.load(o.File)
	} else {
		m.choose()
	}
	return m
}

// frameMsg is a frame that came from the player; nil when it has stopped.
type frameMsg struct{ frame *player.Frame }

// Init waits for the first frame.
func (m *Model) Init() tea.Cmd { return m.next }

// next waits for a frame.
func (m *Model) next() tea.Msg { return frameMsg{m.player.Next()} }

// Update is bubbletea's.
func (m *Model) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		m.w, m.h = msg.Width, msg.Height
		if m.frame == nil {
			m.player.View(scenarios.Window{Columns: 2 * m.w})
		}
		m.look(func() {})
	case frameMsg:
		return m, m.show(msg.frame)
	case tea.KeyMsg:
		return m, m.press(msg)
	}
	return m, nil
}

// press obeys a key: what the mode binds, or else, while typing, the text.
func (m *Model) press(k tea.KeyMsg) tea.Cmd {
	if m.mode != typing && m.mode != confirming {
		m.note = ""
	}
	for _, b := range keyMap(m.mode) {
		if key.Matches(k, b.Binding) {
			return b.act(m)
		}
	}
	if m.mode == typing && (k.Type == tea.KeyRunes || k.Type == tea.KeySpace) {
		m.prompt.add(k.Runes)
	}
	return nil
}

// show takes a frame, unless its scenario has been left behind.
func (m *Model) show(f *player.Frame) tea.Cmd {
	if f == nil {
		return nil
	}
	if f.Broken {
		m.failed = f.Err
		return tea.Quit
	}
	if f.Err != nil && f.Scenario == m.number {
		m.note = f.Err.Error()
	}
	if m.frame == nil || f.Scenario >= m.frame.Scenario {
		m.frame = f
		m.look(func() {})
	}
	return m.next
}

// look changes the view and tells the player.
func (m *Model) look(change func()) {
	if m.frame == nil || m.frame.Moment == nil {
		return
	}
	change()
	before := m.frame.Moment.Window
	m.view.update(m.frame.Outlook, m.frame.Moment, 2*m.w)
	if m.view.window != before {
		m.player.View(m.view.window)
	}
}

// outlook is that of the frame shown; look calls back only where there is one.
func (m *Model) outlook() *scenarios.Outlook { return m.frame.Outlook }

// load asks the player for a scenario.
func (m *Model) load(f *scenarios.File) {
	m.file = f
	m.number++
	m.player.Load(m.number, f)
}

// enter begins a mode that goes back to the present one.
func (m *Model) enter(in mode) {
	m.before, m.mode, m.scroll = m.mode, in, 0
}

// View is bubbletea's.
func (m *Model) View() string {
	m.draw(m.canvas)
	return m.canvas.String(m.options.Output)
}

// draw draws what the mode shows.
func (m *Model) draw(c *canvas.Canvas) {
	in := m.mode
	if in == typing || in == confirming {
		in = m.before
	}
	switch in {
	case helping:
		c.Reset(m.w, m.h)
		drawHelp(c.Box(0, 0, c.W, c.H), keyMap(m.before), m.scroll)
	case choosing:
		c.Reset(m.w, m.h)
		m.chooser.draw(c.Box(0, 0, c.W, c.H), hints(choosing), m.note)
	default:
		m.screen(hints(in)).draw(c, m.w, m.h)
	}
	if m.mode == typing || m.mode == confirming {
		m.prompt.draw(c.Box(0, c.H-1, c.W, 1))
	}
}

func (m *Model) screen(hints string) screen {
	return screen{
		frame: m.frame, want: m.view.want, scale: m.view.scale(), ghost: m.view.ghost,
		hints: hints, note: m.note, editor: m.editor,
	}
}

// text and svg write the frame without mode, note and colour.
func (m *Model) text(w io.Writer) error {
	m.screen("").draw(m.canvas, m.w, m.h)
	_, err := io.WriteString(w, m.canvas.String(canvas.Output{UTF8: m.options.Output.UTF8})+"\n")
	return err
}

func (m *Model) svg(w io.Writer) error {
	m.screen("").draw(m.canvas, m.w, m.h)
	return m.canvas.SVG(w)
}
