package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
	"syscall"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"fluxtoll/scenarios"
	"fluxtoll/tui"
	"fluxtoll/tui/canvas"
)

// watchFlags are the flags of `watch`.
type watchFlags struct {
	frames int
	size   string
	color  string
}

// newWatch is the command `watch`.
func newWatch() *cobra.Command {
	var flags watchFlags
	cmd := &cobra.Command{
		Use:   "watch [FILE|DEMO|-]",
		Short: "Show the packet while it moves, in the terminal",
		Long: `watch shows the packet while it moves: the structure with |psi|^2 above it, where
the probability is, what arrives at the planes and when, the spectrum, and the
numbers of 'run' as they fill in. Time can be stopped, stepped and turned back,
and every quantity of the scenario changed; ? lists the keys. Without an
argument it lists the demos and the scenario files of this folder.

With --frames it needs no terminal and prints that many plain frames, evenly
spaced over the run, each ended by a line that holds a form feed.

NO_COLOR and --color never switch colours off; in a locale without UTF-8 nothing
beyond ASCII is shown.`,
		Example: `  fluxtoll watch collector-step
  fluxtoll watch twin-barrier --frames 5 --size 80x24`,
		Args:              atMostOne,
		ValidArgsFunction: completeScenario,
		RunE: func(cmd *cobra.Command, args []string) error {
			if _, err := colorDepth(flags.color, os.Getenv); err != nil {
				return err
			}
			frames := cmd.Flags().Changed("frames")
			if cmd.Flags().Changed("size") && !frames {
				return hinted(cmd, "--size is the size of plain frames: it needs --frames")
			}
			if frames {
				return printFrames(cmd, args, flags)
			}
			return watch(cmd, args, flags)
		},
	}
	cmd.Flags().IntVar(&flags.frames, "frames", 0, "print `N` plain frames instead, evenly spaced over the run")
	cmd.Flags().StringVar(&flags.size, "size", "80x24", "size of these frames, `WxH` in characters")
	cmd.Flags().StringVar(&flags.color, "color", "auto", "colours: `WHEN` is auto, always or never")
	return cmd
}

// atMostOne refuses more than one argument.
func atMostOne(cmd *cobra.Command, args []string) error {
	if len(args) <= 1 {
		return nil
	}
	return hinted(cmd, fmt.Sprintf("%d arguments given; at most one, a scenario file, a demo or -, is accepted", len(args)))
}

// printFrames prints plain frames.
func printFrames(cmd *cobra.Command, args []string, flags watchFlags) error {
	size, err := flags.plain()
	if err != nil {
		return err
	}
	if len(args) == 0 {
		return hinted(cmd, "--frames needs a scenario file or a demo")
	}
	file, err := openScenario(args[0], cmd.InOrStdin())
	if err != nil {
		return err
	}
	scenario, err := file.Compile()
	if err != nil {
		return err
	}
	trial, err := scenarios.Prepare(cmd.Context(), scenario, scenarios.Forced{})
	if err != nil {
		return err
	}
	return tui.Frames(cmd.Context(), cmd.OutOrStdout(), trial, flags.frames, size, utf8Locale(os.Getenv))
}

// mostFrames and mostCells bound what --frames and --size ask for.
const (
	mostFrames = 100_000
	mostCells  = 1000
)

// plain checks number and size of plain frames.
func (f watchFlags) plain() (size tui.Size, err error) {
	if f.frames < 1 || f.frames > mostFrames {
		return size, fmt.Errorf("--frames %d is out of range; 1 to %d is accepted", f.frames, mostFrames)
	}
	var rest string
	n, _ := fmt.Sscanf(f.size+" ", "%dx%d%s", &size.Wide, &size.High, &rest)
	if n != 2 || size.Wide < 1 || size.High < 1 || size.Wide > mostCells || size.High > mostCells {
		return size, fmt.Errorf("--size %q is no size; width and height of 1 to %d characters are accepted, such as 80x24", f.size, mostCells)
	}
	return size, nil
}

// watch shows the live view.
func watch(cmd *cobra.Command, args []string, flags watchFlags) error {
	depth, err := colorDepth(flags.color, os.Getenv)
	if err != nil {
		return err
	}
	if !term.IsTerminal(int(os.Stdout.Fd())) {
		return errors.New("watch needs a terminal, and standard output is none; --frames N prints plain frames instead, and 'fluxtoll run' the numbers")
	}
	o := tui.Options{
		Folder: ".", Out: os.Stdout, Output: canvas.Output{Depth: depth, UTF8: utf8Locale(os.Getenv)},
		Open: func(name string) (*scenarios.File, error) { return openScenario(name, strings.NewReader("")) },
	}
	if name := os.Getenv("TERM"); name == "" || name == "dumb" {
		return fmt.Errorf("watch needs a terminal that can place its characters, and TERM is %q; --frames N prints plain frames instead", name)
	}
	if len(args) > 0 {
		if o.File, err = openForWatch(args[0], cmd.InOrStdin()); err != nil {
			return err
		}
	}
	if term.IsTerminal(int(os.Stdin.Fd())) {
		o.In = os.Stdin
	}
	caught, err := tui.Run(cmd.Context(), o)
	if err != nil {
		return err
	}
	return exitWith(signalCode(caught))
}

// openForWatch opens a scenario and compiles it once, so that a mistake in it
// is told before the screen is taken.
func openForWatch(name string, stdin io.Reader) (*scenarios.File, error) {
	file, err := openScenario(name, stdin)
	if err != nil {
		return nil, err
	}
	_, err = file.Compile()
	return file, err
}

// signalCode is the exit code after a signal: 128 and its number.
func signalCode(s os.Signal) int {
	if n, ok := s.(syscall.Signal); ok {
		return 128 + int(n)
	}
	return exitDone
}

// colorDepth reads what the terminal can show from the environment alone: the
// terminal itself is not asked.
func colorDepth(when string, getenv func(string) string) (canvas.Depth, error) {
	name := getenv("TERM")
	switch {
	case when != "auto" && when != "always" && when != "never":
		return 0, fmt.Errorf("--color %q is not accepted; auto, always or never is", when)
	case when == "never", when == "auto" && (getenv("NO_COLOR") != "" || name == "dumb" || name == ""):
		return canvas.NoColor, nil
	case getenv("COLORTERM") == "truecolor" || getenv("COLORTERM") == "24bit":
		return canvas.TrueColor, nil
	case strings.Contains(name, "256color"):
		return canvas.Colors256, nil
	}
	return canvas.Colors16, nil
}
