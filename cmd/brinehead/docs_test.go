package main

import (
	"os"
	"strings"
	"testing"

	"github.com/spf13/cobra"
)

// words splits a command line as a shell would where it holds nothing but words and double quotes.
func words(line string) []string {
	var list []string
	for i, part := range strings.Split(line, `"`) {
		if i%2 == 1 {
			list = append(list, part)
		} else {
			list = append(list, strings.Fields(part)...)
		}
	}
	return list
}

// runShown runs a command as a page shows it and returns what it prints; an exit code beyond 1 fails the test.
func runShown(t *testing.T, line string) string {
	t.Helper()
	args := words(strings.TrimPrefix(strings.TrimSpace(line), "$ "))
	if args[0] != "brinehead" {
		t.Fatalf("%q is no command of ours", line)
	}
	code, out, stderr := brinehead(args[1:]...)
	if code > exitNotMet {
		t.Errorf("%s: exit code %d, %s", line, code, stderr)
	}
	return out
}

// Every command the README shows runs, and prints the lines shown below it.
func TestReadmeCommands(t *testing.T) {
	t.Chdir("../..")
	text, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	commands := 0
	for i, block := range strings.Split(string(text), "```") {
		if i%2 == 0 || !strings.HasPrefix(block, "\n$ ") {
			continue
		}
		out := ""
		for _, line := range strings.Split(strings.Trim(block, "\n"), "\n") {
			if strings.HasPrefix(line, "$ ") {
				out = runShown(t, line)
				commands++
			} else if !strings.Contains(out, line+"\n") {
				t.Errorf("the README shows a line that is not printed: %q in\n%s", line, out)
			}
		}
	}
	if commands < 6 {
		t.Errorf("%d commands in the README", commands)
	}
}

// Every example of every command's help runs.
func TestHelpExamples(t *testing.T) {
	t.Chdir("../..")
	examples := 0
	var visit func(c *cobra.Command)
	visit = func(c *cobra.Command) {
		for _, line := range strings.Split(c.Example, "\n") {
			if strings.TrimSpace(line) != "" {
				runShown(t, line)
				examples++
			}
		}
		for _, sub := range c.Commands() {
			visit(sub)
		}
	}
	visit(newRoot(streams{}))
	if examples < 9 {
		t.Errorf("%d examples", examples)
	}
}

// The columns and limits that the README names are those the tables may hold.
func TestReadmeNamesEveryLimit(t *testing.T) {
	text, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	_, out, _ := brinehead("catalogue", "limits", "--format", "csv")
	folded, limits := strings.Join(strings.Fields(string(text)), " "), 0
	for _, row := range strings.Split(strings.TrimSpace(out), "\n") {
		name, _, _ := strings.Cut(row, ",")
		if strings.HasPrefix(row, "#") || name == "limit" || !strings.HasSuffix(row, ",") { // a note, the head, a rule with its mark
			continue
		}
		limits++
		if !strings.Contains(folded, name) {
			t.Errorf("the README does not name the limit %s", name)
		}
	}
	if limits != 18 {
		t.Errorf("%d limits", limits)
	}
}
