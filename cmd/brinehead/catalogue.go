package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

func newCatalogue(s streams) *cobra.Command {
	var find, format, out string
	lists := study.CatalogueLists()
	c := &cobra.Command{
		Use:   "catalogue [" + strings.Join(lists, "|") + "]",
		Short: "What the tables may name, with the source of each figure",
		Long: "Lists the pipe sizes, materials, fittings and limits that the tables may name, with where each figure comes from and how\n" +
			"well it is known. Without a list it says which there are.",
		Example: "  $ brinehead catalogue fittings --find butterfly\n" +
			"  $ brinehead catalogue sizes --find \"DIN 86019 DN200\"\n" +
			"  $ brinehead catalogue materials --format csv",
		ValidArgs: lists,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) > 1 {
				return fmt.Errorf("catalogue needs one list, or none: %s", strings.Join(lists, ", "))
			}
			return nil
		},
		RunE: func(_ *cobra.Command, args []string) error {
			if err := oneOf("format", format, formats); err != nil {
				return err
			}
			answer, err := study.CatalogueOf(strings.ToLower(strings.Join(args, "")), find)
			if err != nil {
				return err
			}
			list := shown{answer,
				func(w io.Writer) error { return report.WriteCatalogueText(w, answer) },
				func(w io.Writer) error { return report.WriteCatalogueCSV(w, answer) }}
			if err := writeCSV(out, "catalogue-"+answer.List+".csv", list); err != nil {
				return err
			}
			return s.show(format, list)
		},
	}
	c.Flags().StringVar(&find, "find", "", "only entries that hold these words")
	c.Flags().StringVar(&format, "format", "text", "what to print: "+strings.Join(formats, ", "))
	c.Flags().StringVar(&out, "out", "", "folder to write the list into as CSV")
	completeFrom(c, "format", formats)
	return c
}
