//go:build e2e

package tui

import (
	"context"
	"fmt"
	"os"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"fluxtoll/internal/tmuxtest"
	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

// child names the variable that makes this test binary a live view which
// breaks at the key P: in an update, in a view, or in the player.
const child = "FLUXTOLL_TEST_BREAK"

func TestMain(m *testing.M) {
	if where := os.Getenv(child); where != "" {
		os.Exit(broken(where))
	}
	os.Exit(m.Run())
}

// breaking is a model that panics.
type breaking struct {
	*Model
	where string
	armed bool
}

func (b *breaking) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	if k, ok := msg.(tea.KeyMsg); ok && k.String() == "P" {
		switch b.where {
		case "update":
			panic("broken in a test")
		case "view":
			b.armed = true
		case "player":
			b.player.View(scenarios.Window{Columns: -1}) // no room for a slice
		}
	}
	_, cmd := b.Model.Update(msg)
	return b, cmd
}

func (b *breaking) View() string {
	if b.armed {
		panic("broken in a test")
	}
	return b.Model.View()
}

func broken(where string) int {
	f, err := openDemo("thin-barrier")
	if err != nil {
		return 9
	}
	o := Options{File: f, Open: openDemo, Out: os.Stdout, Output: canvas.Output{UTF8: true}}
	p := player.Start(context.Background())
	defer p.Stop()
	m := &breaking{Model: newModel(o, p), where: where}
	if _, err := loop(m, o); err != nil || m.failed != nil {
		fmt.Fprintf(os.Stderr, "%v %v\n", err, m.failed)
		return 2
	}
	return 0
}

// A panic, wherever, leaves the terminal as it was.
func TestAPanicRestoresTheTerminal(t *testing.T) {
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	for _, where := range []string{"update", "view", "player"} {
		t.Run(where, func(t *testing.T) {
			x := tmuxtest.Open(t, 150, 60, "LC_ALL=C.UTF-8", "TERM=screen")
			x.Type(child + "=" + where + " " + self + ` 2>/dev/null >/dev/tty; echo "exit=$?"; stty -a | tr ' ' '\n' | grep -E '^-?(icanon|echo);?$' | tr '\n' ' '`)
			x.Wait("free flight", "▸")
			x.Keys("P")
			screen := x.Wait("exit=2", "icanon")
			if x.Alternate() || !x.CursorShown() || strings.Contains(screen, "-icanon") || strings.Contains(screen, "-echo") {
				t.Errorf("alternate screen %t, cursor %t, screen\n%s", x.Alternate(), x.CursorShown(), screen)
			}
		})
	}
}
