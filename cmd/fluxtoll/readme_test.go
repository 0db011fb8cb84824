package main

import (
	"bytes"
	"context"
	"flag"
	"fmt"
	"os"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"fluxtoll/scenarios"
)

var update = flag.Bool("update-readme", false, "write the worked example's output into README.md")

const readmePath = "../../README.md"

func readme(t *testing.T) string {
	t.Helper()
	text, err := os.ReadFile(readmePath)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

// TestReadmeDocumentsEverything looks for every command, flag, demo key and
// exit code in the README.
func TestReadmeDocumentsEverything(t *testing.T) {
	text, flags := readme(t), 0
	for _, cmd := range commands(newRoot()) {
		if cmd.HasParent() && !strings.Contains(text, "`fluxtoll "+cmd.Name()) {
			t.Errorf("the README lacks the command %q", cmd.CommandPath())
		}
		cmd.Flags().VisitAll(func(f *pflag.Flag) {
			flags++
			if !regexp.MustCompile("`[^`]*--" + f.Name + `\b`).MatchString(text) {
				t.Errorf("the README lacks the flag --%s of %q", f.Name, cmd.CommandPath())
			}
		})
	}
	if flags < 15 {
		t.Errorf("%d flags looked for, want at least 15", flags)
	}
	for _, code := range []int{exitDone, exitDisagree, exitBadRequest, exitNotReached, exitInterrupted} {
		if !strings.Contains(text, fmt.Sprintf("\n| %d | ", code)) {
			t.Errorf("the README lacks the exit code %d", code)
		}
	}
}

// commands lists a command and those below it, completion and help apart.
func commands(root *cobra.Command) []*cobra.Command {
	root.InitDefaultHelpFlag()
	root.InitDefaultVersionFlag()
	list := []*cobra.Command{root}
	for _, cmd := range root.Commands() {
		if cmd.Name() != "help" {
			list = append(list, commands(cmd)...)
		}
	}
	return list
}

// TestReadmeExample runs the worked example: the README shows what the
// program prints, but for the seconds and the rounding in the ledger.
func TestReadmeExample(t *testing.T) {
	block := regexp.MustCompile("(?s)```console\n\\$ fluxtoll (run [a-z-]+)\n(.*?)```\n")
	text := readme(t)
	at := block.FindStringSubmatchIndex(text)
	if at == nil {
		t.Fatal("the README has no worked example")
	}
	var out, log bytes.Buffer
	if code := run(t.Context(), strings.Fields(text[at[2]:at[3]]), nil, &out, &log); code != exitDone {
		t.Errorf("exit code %d: %s", code, log.String())
	}
	if *update {
		text = text[:at[4]] + out.String() + text[at[5]:]
		if err := os.WriteFile(readmePath, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	if got, want := settled(out.String()), settled(text[at[4]:at[5]]); got != want {
		t.Errorf("the README shows\n%s\nbut the program prints\n%s\n(go test ./cmd/fluxtoll -run Readme -update-readme writes it)", want, got)
	}
}

// settled masks what differs from run to run and machine to machine, and
// joins lines, which may break elsewhere.
func settled(out string) string {
	out = strings.Join(strings.Fields(out), " ")
	out = regexp.MustCompile(`\(\d+\.\d+ s\)`).ReplaceAllString(out, "(seconds)")
	out = regexp.MustCompile(`= 1, to \S+`).ReplaceAllString(out, "= 1, to rounding")
	return out
}

// TestReadmeScenario compares the file in the README with the demo.
func TestReadmeScenario(t *testing.T) {
	shown := regexp.MustCompile("(?s)```toml\n(.*?)```\n").FindStringSubmatch(readme(t))
	if shown == nil {
		t.Fatal("the README has no scenario")
	}
	for _, d := range scenarios.Demos() {
		if d.Name == "thin-barrier" {
			comment := regexp.MustCompile(`(?m)^#.*\n`)
			if want := comment.ReplaceAllString(d.Text, ""); shown[1] != want {
				t.Errorf("the README shows\n%s\nbut the demo is\n%s", shown[1], want)
			}
			return
		}
	}
	t.Error("there is no demo thin-barrier")
}

// TestReadmeNamesEveryShapeAndUnit reads the lists out of the messages that
// state them.
func TestReadmeNamesEveryShapeAndUnit(t *testing.T) {
	text, words := readme(t), 0
	for _, line := range []string{
		"[[layer]]\nshape = 3\n",
		"[[layer]]\nthickness = \"x\"\nheight = \"1 eV\"\n",
		"[packet]\nenergy = \"x\"\n",
		"[particle]\nmass = \"x\"\n",
		"[display]\ntime = \"x\"\n",
	} {
		_, err := scenarios.Read("x", strings.NewReader(line), nil)
		if err == nil {
			t.Fatalf("%q is accepted", line)
		}
		list := regexp.MustCompile(`(accepted are | accepted, in )(.*)$`).FindStringSubmatch(err.Error())
		if list == nil {
			t.Fatalf("no list in %q", err)
		}
		for _, word := range regexp.MustCompile(`[A-Za-z_][\w-]*`).FindAllString(list[2], -1) {
			if slices.Contains([]string{"or", "a", "name"}, word) {
				continue
			}
			words++
			if !regexp.MustCompile(`\b` + regexp.QuoteMeta(word) + `\b`).MatchString(text) {
				t.Errorf("the README lacks %q", word)
			}
		}
	}
	if words < 40 {
		t.Errorf("%d words looked for, want at least 40", words)
	}
}

// fromGo is the README's way from a file to a verdict; it must compile, and
// TestReadmeGo compares it with the README.
func fromGo(ctx context.Context) error {
	// begin
	file, err := scenarios.ReadFile("mine.toml")
	if err != nil {
		return err // names file, line, column and what is accepted
	}
	scenario, err := file.Compile()
	if err != nil {
		return err
	}
	trial, err := scenarios.Prepare(ctx, scenario, scenarios.Forced{})
	if err != nil {
		return err
	}
	result := trial.Finish(ctx, nil)
	for _, q := range result.Quantities {
		if q.Average != nil && q.Packet != nil {
			fmt.Println(q.Name, *q.Average, *q.Packet, *q.Budget, q.Agrees)
		}
	}
	fmt.Println(result.Verdict)
	// end
	return nil
}

func TestReadmeGo(t *testing.T) {
	self, err := os.ReadFile("readme_test.go")
	if err != nil {
		t.Fatal(err)
	}
	body := regexp.MustCompile(`(?s)\t// begin\n(.*?)\t// end\n`).FindSubmatch(self)
	shown := regexp.MustCompile("(?s)```go\n(.*?)```\n").FindStringSubmatch(readme(t))
	if body == nil || shown == nil {
		t.Fatal("the example or its copy is missing")
	}
	if want := regexp.MustCompile(`(?m)^\t`).ReplaceAllString(string(body[1]), ""); shown[1] != want {
		t.Errorf("the README shows\n%s\nbut the code that compiles is\n%s", shown[1], want)
	}
	t.Chdir(t.TempDir())
	demo, err := demoText("thin-barrier")
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile("mine.toml", []byte(demo), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := fromGo(t.Context()); err != nil {
		t.Error(err)
	}
}
