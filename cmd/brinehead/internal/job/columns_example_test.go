package job_test

import (
	"fmt"

	"brinehead/cmd/brinehead/internal/job"
)

// What the conditions of a job may hold, as the reader itself has it.
func ExampleContract() {
	for _, table := range job.Contract() {
		if table.File != "conditions.csv" {
			continue
		}
		for _, c := range table.Columns {
			unit := ""
			if len(c.Quantity.Units) > 0 {
				unit = " [" + c.Quantity.Units[0].Name + "]"
			}
			fmt.Printf("%s%s: required %t, words %q, range %q\n", c.Name, unit, c.Required, c.Words, c.Range)
		}
	}
	// Output:
	// condition: required true, words [], range ""
	// water: required true, words ["sea" "fresh"], range ""
	// temperature [degC]: required true, words [], range "at least -5, at most 150"
	// salinity [g/kg]: required false, words [], range "at least 0, at most 45"
	// draught [m]: required false, words [], range "at least 0, at most 50"
	// atmosphere [bar]: required false, words [], range "at least 0.5, at most 1.2"
	// running: required false, words [], range ""
	// hours: required false, words [], range "at least 0, at most 8784"
}
