package main

import (
	"bytes"
	"fmt"
	"strings"
	"time"

	"github.com/spf13/cobra"
	"github.com/spf13/cobra/doc"

	"brinehead/cmd/brinehead/internal/report"
)

func newMan() *cobra.Command {
	return &cobra.Command{
		Use:   "man DIR",
		Short: "Writes the manual pages, a page a command",
		Args: func(c *cobra.Command, args []string) error {
			if len(args) != 1 {
				return fmt.Errorf("man needs the folder to write into, and nothing else: %s", c.UseLine())
			}
			return nil
		},
		RunE: func(c *cobra.Command, args []string) error {
			files, err := manual(c.Root())
			if err != nil {
				return err
			}
			return writeFiles(args[0], files)
		},
	}
}

// manual makes the pages with cobra's own generator. They bear no date of their own, so that the same program makes the same pages.
func manual(root *cobra.Command) (files []report.File, err error) {
	root.DisableAutoGenTag = true
	epoch := time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC)
	var visit func(c *cobra.Command) error
	visit = func(c *cobra.Command) error {
		if !c.IsAvailableCommand() && c != root {
			return nil
		}
		var b bytes.Buffer
		name := strings.ReplaceAll(c.CommandPath(), " ", "-")
		header := &doc.GenManHeader{Title: strings.ToUpper(name), Section: "1", Date: &epoch, Source: "Brinehead", Manual: "Brinehead"}
		if err := doc.GenMan(c, header, &b); err != nil {
			return fmt.Errorf("manual of %s: %w", c.CommandPath(), err)
		}
		files = append(files, report.File{Name: name + ".1", Content: b.Bytes()})
		for _, sub := range c.Commands() {
			if err := visit(sub); err != nil {
				return err
			}
		}
		return nil
	}
	return files, visit(root)
}
