package main

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"brinehead/cmd/brinehead/internal/study"
)

// runs the program as the shell would.
func brinehead(args ...string) (code int, stdout, stderr string) {
	var out, err bytes.Buffer
	code = run(streams{out: &out, err: &err}, args)
	return code, out.String(), err.String()
}

const testdata = "../../testdata"

// checkJSON runs check with --format json and reads the answer.
func checkJSON(t *testing.T, job string, args ...string) (*study.Check, int) {
	t.Helper()
	code, out, stderr := brinehead(append([]string{"check", job, "--format", "json"}, args...)...)
	if code > 1 || stderr != "" {
		t.Fatalf("%s: exit code %d, %s", job, code, stderr)
	}
	var answer study.Check
	if err := json.Unmarshal([]byte(out), &answer); err != nil {
		t.Fatalf("%s: %v", job, err)
	}
	return &answer, code
}

// readCSV returns the rows of a test table below its header, notes left out.
func readCSV(t *testing.T, path string) [][]string {
	t.Helper()
	file, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:]
}

// Worked examples of pump and system from books, run as job folders through check itself. Sources and tolerances stand in
// expected.csv and in the jobs.
func TestPublishedExamples(t *testing.T) {
	folder := filepath.Join(testdata, "reference", "examples")
	rows := readCSV(t, filepath.Join(folder, "expected.csv"))
	answers := map[string]map[string]any{}
	books := map[string]bool{}
	for _, row := range rows {
		job, condition, list, name, key, source := row[0], row[1], row[2], row[3], row[4], row[7]
		want, err := strconv.ParseFloat(row[5], 64)
		if err != nil {
			t.Fatal(err)
		}
		tolerance, err := strconv.ParseFloat(row[6], 64)
		if err != nil || !(0 < tolerance && tolerance <= 0.01) {
			t.Fatalf("%v: tolerance %s, want at most 1 %%", row, row[6])
		}
		if answers[job] == nil {
			_, out, stderr := brinehead("check", filepath.Join(folder, job), "--format", "json")
			var answer map[string]any
			if err := json.Unmarshal([]byte(out), &answer); err != nil {
				t.Fatalf("%s: %v %s", job, err, stderr)
			}
			answers[job] = answer
			books[job] = true
		}
		got, found := figure(answers[job], condition, list, name, key)
		if !found {
			t.Errorf("%s, %s: no %s of %s %s", job, condition, key, list, name)
			continue
		}
		t.Logf("%s, %s: %s %s %.6g, %s", job, condition, name, key, got, source)
		if !(math.Abs(got-want) <= tolerance*math.Abs(want)) {
			t.Errorf("%s, %s: %s %s %.6g, want %.6g within %g (%s)", job, condition, name, key, got, want, tolerance, source)
		}
	}
	if len(rows) != 36 || len(books) != 11 {
		t.Errorf("%d figures of %d examples, want 36 of 11", len(rows), len(books))
	}
}

// figure finds a number in the JSON of check by the keys of the contract, not through the program's own types.
func figure(answer map[string]any, condition, list, name, key string) (value float64, found bool) {
	for _, c := range answer["conditions"].([]any) {
		c := c.(map[string]any)
		if c["condition"] != condition {
			continue
		}
		nameKey := list[:len(list)-1] // pumps: pump
		for _, e := range c[list].([]any) {
			e := e.(map[string]any)
			if e[nameKey] == name {
				value, found = e[key].(float64)
				return value, found
			}
		}
	}
	return 0, false
}

// Every folder of testdata/jobs is a whole job that check answers with exit code 0 or 1, in text, JSON and CSV, and in
// either system of units.
func TestDemoJobs(t *testing.T) {
	folders, err := os.ReadDir(filepath.Join(testdata, "jobs"))
	if err != nil {
		t.Fatal(err)
	}
	if len(folders) < 2 {
		t.Fatalf("%d demo jobs, want at least 2", len(folders))
	}
	for _, f := range folders {
		job := filepath.Join(testdata, "jobs", f.Name())
		for _, args := range [][]string{nil, {"--format", "json"}, {"--format", "csv"}, {"--units", "us"}} {
			code, out, stderr := brinehead(append([]string{"check", job}, args...)...)
			if code != 0 && code != 1 || stderr != "" || out == "" {
				t.Errorf("check %s %v: exit code %d, %q", f.Name(), args, code, stderr)
			}
		}
	}
}
