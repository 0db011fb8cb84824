package tui

import (
	"context"
	"fmt"
	"os"
	"os/signal"
	"syscall"

	tea "github.com/charmbracelet/bubbletea"

	_ "fluxtoll/internal/quietterm" // before the screen library asks the terminal
	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

// Options are what the live view starts with.
type Options struct {
	File   *scenarios.File // nil: the user chooses
	Open   func(name string) (*scenarios.File, error)
	Folder string // whose scenario files are offered
	Output canvas.Output
	In     *os.File // nil: the terminal itself
	Out    *os.File // a terminal
}

// Run shows the live view until the user leaves or a signal comes, which it
// returns. The terminal is left as it was found, whatever happens.
func Run(ctx context.Context, o Options) (os.Signal, error) {
	p := player.Start(ctx)
	defer p.Stop()
	m := newModel(o, p)
	caught, err := loop(m, o)
	if m.failed != nil {
		err = m.failed
	}
	if err != nil {
		err = fmt.Errorf("the live view broke, which is a fault of this program: %w", err)
	}
	return caught, err
}

// loop shows a model until it is left or a signal comes. Signals are ours: the
// library's own handling of them can hang.
func loop(m tea.Model, o Options) (os.Signal, error) {
	settings := []tea.ProgramOption{
		tea.WithAltScreen(), tea.WithoutSignalHandler(), tea.WithOutput(o.Out), tea.WithFPS(player.FramesPerSecond),
	}
	if o.In != nil {
		settings = append(settings, tea.WithInput(o.In))
	}
	program := tea.NewProgram(m, settings...)
	caught, stop := listen(program)
	defer stop()
	_, err := program.Run()
	select {
	case s := <-caught:
		return s, nil
	default:
		return nil, err
	}
}

// listen ends the program at INT, TERM and HUP.
func listen(program *tea.Program) (caught chan os.Signal, stop func()) {
	signals, over := make(chan os.Signal, 1), make(chan struct{})
	caught = make(chan os.Signal, 1)
	signal.Notify(signals, syscall.SIGINT, syscall.SIGTERM, syscall.SIGHUP)
	go func() {
		select {
		case s := <-signals:
			caught <- s
			program.Quit()
		case <-over:
		}
	}()
	return caught, func() {
		signal.Stop(signals)
		close(over)
	}
}
