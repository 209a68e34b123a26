package main

import (
	"encoding/csv"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// Every list is there in text, CSV and JSON, its text no wider than a terminal but for addresses, its figures with a mark.
func TestCatalogueLists(t *testing.T) {
	for list, want := range map[string]struct {
		least int
		holds []string
	}{
		"sizes":     {300, []string{"EN 10220", "ASME B36.10M", "ASME B36.19M", "JIS G3454", "JIS G3452", "DIN 86019", "EEMUA 144", "GRE"}},
		"materials": {60, []string{"90/10 copper-nickel", "galvanised steel", "in service", "new", "badly corroded"}},
		"fittings":  {40, []string{"elbow 90", "butterfly valve", "basket strainer", "orifice plate", "plate cooler", "tee branch"}},
		"limits":    {12, []string{"NPSH margin", "minimum velocity"}},
	} {
		code, out, stderr := brinehead("catalogue", list, "--format", "csv")
		if code != exitMet || stderr != "" {
			t.Fatalf("%s: exit code %d, %s", list, code, stderr)
		}
		r := csv.NewReader(strings.NewReader(out))
		r.Comment = '#'
		rows, err := r.ReadAll()
		if err != nil || len(rows) < want.least+1 {
			t.Errorf("%s: %d rows, %v", list, len(rows), err)
		}
		for _, name := range want.holds {
			if !strings.Contains(out, name) {
				t.Errorf("%s holds no %s", list, name)
			}
		}
		if mark := rows[0][len(rows[0])-1]; list != "limits" {
			for _, row := range rows[1:] {
				if m := row[len(row)-1]; mark != "mark" || m != "R" && m != "2R" && m != "M" && m != "C" && m != "" {
					t.Errorf("%s: mark %q of %v", list, m, row)
				}
			}
		}
		_, text, _ := brinehead("catalogue", list)
		for _, line := range strings.Split(text, "\n") {
			if len([]rune(line)) > 80 && !strings.Contains(line, "http") {
				t.Errorf("%s: %q", list, line)
			}
		}
		_, out, _ = brinehead("catalogue", list, "--format", "json")
		var answer struct {
			List    string
			Columns []string
			Entries []map[string]string
			Notes   []string
		}
		if err := json.Unmarshal([]byte(out), &answer); err != nil || answer.List != list || len(answer.Entries) != len(rows)-1 {
			t.Errorf("%s: %v, %d entries", list, err, len(answer.Entries))
		}
	}
}

func TestCatalogueFind(t *testing.T) {
	code, out, _ := brinehead("catalogue", "sizes", "--find", "din 86019 DN200", "--format", "csv")
	if rows := strings.Count(out, "\nDIN 86019,DN200 "); code != exitMet || rows != 2 || strings.Contains(out, "EN 10220") {
		t.Errorf("exit code %d, %d rows\n%s", code, rows, out)
	}
	if !strings.Contains(out, "DIN 86019,DN200 standard wall,219.1,3,213.1,R") { // 219.1 - 2 x 3.0
		t.Errorf("%s", out)
	}
	folder := t.TempDir()
	if code, _, stderr := brinehead("catalogue", "limits", "--out", folder); code != exitMet || stderr != "" {
		t.Errorf("exit code %d, %s", code, stderr)
	}
	if content, err := os.ReadFile(filepath.Join(folder, "catalogue-limits.csv")); err != nil || !strings.Contains(string(content), "\nlimit,on,unit,figure,source,mark\n") || !strings.Contains(string(content), "\n\"acceptance grade 2B, flow\",test against the guaranteed figure,%,\"'-8, +8\",\"ISO 9906:2012, table 8\",M\n") {
		t.Errorf("%.60q, %v", content, err)
	}
	for want, args := range map[string][]string{
		`catalogue: found "sices", want one of sizes, materials, fittings, limits`: {"sices"},
		`catalogue sizes: nothing holds "DN 9999"`:                                 {"sizes", "--find", "DN 9999"},
		"catalogue needs one list, or none":                                        {"sizes", "fittings"},
		`format: found "pdf"`:                                                      {"sizes", "--format", "pdf"},
	} {
		if code, out, stderr := brinehead(append([]string{"catalogue"}, args...)...); code != exitInput || out != "" || !strings.Contains(stderr, want) {
			t.Errorf("%v: exit code %d, %q, %q", args, code, out, stderr)
		}
	}
}
