package main

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// One state as JSON: IAPWS-95 and the release's own figures at 25 degC and one atmosphere, from testdata/reference.
func TestWaterJSON(t *testing.T) {
	code, out, stderr := brinehead("water", "--kind", "fresh", "--temperature", "25", "--format", "json")
	var answer struct {
		Kind    string
		States  []map[string]float64
		Sources []map[string]string
	}
	if err := json.Unmarshal([]byte(out), &answer); err != nil || code != exitMet || stderr != "" {
		t.Fatalf("exit code %d, %v, %s", code, err, stderr)
	}
	for key, c := range map[string]struct{ want, tolerance float64 }{
		"density_kg_m3":            {997.04764, 1e-6},   // IAPWS-95
		"dynamic_viscosity_Pa_s":   {8.900225e-4, 1e-6}, // R12-08
		"vapour_pressure_Pa":       {3169.747, 1e-6},    // IF97 eq. 30
		"heat_capacity_J_kg_K":     {4181.315, 3e-4},    // IAPWS-95; IF97 lies 0.02 % lower
		"kinematic_viscosity_m2_s": {8.926580e-7, 1e-6},
	} {
		if got := answer.States[0][key]; !(math.Abs(got/c.want-1) <= c.tolerance) {
			t.Errorf("%s: %g, want %g", key, got, c.want)
		}
	}
	if len(answer.Sources) != 5 || answer.Sources[0]["uncertainty"] == "" {
		t.Errorf("%v", answer.Sources)
	}
}

// A table over temperatures, in any unit: 50 degF is 10 degC, 32 degF is 0 degC.
func TestWaterTable(t *testing.T) {
	code, out, stderr := brinehead("water", "--kind", "sea", "--temperature", "32degF", "--to", "68degF", "--step", "18", "--salinity", "35.16504", "--format", "csv")
	if code != exitMet || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	r := csv.NewReader(strings.NewReader(out))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil || len(rows) != 4 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	for i, want := range []float64{1028.10720, 1026.95410, 1024.76600} { // R13-08 at 0, 10, 20 degC
		if got, err := strconv.ParseFloat(rows[i+1][4], 64); err != nil || !(math.Abs(got/want-1) <= 1e-5) {
			t.Errorf("row %d: density %s, want %g", i+1, rows[i+1][4], want)
		}
	}
	if _, text, _ := brinehead("water", "--kind", "sea", "--temperature", "-2", "--to", "80", "--step", "2"); !strings.Contains(text, "\nSources:\n") || widest(text) > 80 {
		t.Errorf("%d wide\n%s", widest(text), text)
	}
	folder := t.TempDir()
	if code, _, stderr := brinehead("water", "--out", folder); code != exitMet || stderr != "" {
		t.Errorf("exit code %d, %s", code, stderr)
	}
	if content, err := os.ReadFile(filepath.Join(folder, "water.csv")); err != nil || !strings.HasPrefix(string(content), "# density: IAPWS") {
		t.Errorf("%.40q, %v", content, err)
	}
}

func widest(text string) (most int) {
	for _, line := range strings.Split(text, "\n") {
		most = max(most, len([]rune(line)))
	}
	return most
}

// Practical salinity 35 is 35.16504 g/kg.
func TestPracticalSalinity(t *testing.T) {
	_, a, _ := brinehead("water", "--practical-salinity", "35", "--format", "csv")
	_, b, _ := brinehead("water", "--salinity", "35.16504", "--format", "csv")
	if a != b || a == "" {
		t.Errorf("%s\n%s", a, b)
	}
}

func TestWaterRefusals(t *testing.T) {
	for want, args := range map[string][]string{
		`kind: found "brine", want one of fresh, sea`:                             {"--kind", "brine"},
		"sea water: IAPWS R13-08 sea water: temperature 81 degC is outside -2 to": {"--temperature", "81"},
		"temperature 151 degC is outside 0 to 150 degC":                           {"--kind", "fresh", "--temperature", "151"},
		"is outside 101417.978 to":                                                {"--kind", "fresh", "--temperature", "100", "--pressure", "-0.5"},
		"salinity 50 g/kg is outside 0 to 45 g/kg":                                {"--salinity", "50"},
		"salinity: found one for fresh water":                                     {"--kind", "fresh", "--salinity", "5"},
		"found both --salinity and --practical-salinity":                          {"--salinity", "5", "--practical-salinity", "5"},
		`temperature: found "warm", want a number`:                                {"--temperature", "warm"},
		`temperature: found the unit "furlong", want one of degC, K, degF`:        {"--temperature", "3 furlong"},
		`step: found "0"`:        {"--temperature", "3", "--to", "10", "--step", "0"},
		`step: found "1e-9"`:     {"--temperature", "3", "--to", "10", "--step", "1e-9"},
		`format: found "pdf"`:    {"--format", "pdf"},
		"unknown command \"25\"": {"25"},
	} {
		code, out, stderr := brinehead(append([]string{"water"}, args...)...)
		if code != exitInput || out != "" || !strings.Contains(stderr, want) {
			t.Errorf("%v: exit code %d, %q, %q; want %q", args, code, out, stderr, want)
		}
	}
}

// A hot leg of a loop: its own temperature sets its viscosity and the weight of its column.
func TestRunTemperature(t *testing.T) {
	const leg = "ENGINE RETURN,RETURN,COOLER IN,18,255.4,0.1,"
	cold := copyJob(t, freshwater, [3]string{"points.csv", "RETURN,junction,5.0", "RETURN,junction,15.0"})
	hot := copyJob(t, cold, [3]string{"runs.csv", "roughness [mm],", "roughness [mm],temperature [degC],"},
		[3]string{"runs.csv", "0.1,\n", "0.1,,\n"}, [3]string{"runs.csv", "0.1,passes no flow", "0.1,,passes no flow"},
		[3]string{"runs.csv", "0.1,of the three-way valve", "0.1,,of the three-way valve"}, [3]string{"runs.csv", leg + ",", leg + "85,"})
	a, _ := checkJSON(t, cold, "--condition", "slow steaming")
	b, _ := checkJSON(t, hot, "--condition", "slow steaming")
	for i, r := range b.Conditions[0].Runs {
		if r.Run != "ENGINE RETURN" {
			continue
		}
		// Falling 15.0 - 4.6 m in water of 85 instead of 36 degC, densities 968.61 and 993.69 kg/m3 (IAPWS-95).
		if want := (968.61/993.69 - 1) * (4.6 - 15.0); !(math.Abs(float64(r.Buoyancy)-want) < 2e-4) {
			t.Errorf("buoyancy %g m, want %g m", float64(r.Buoyancy), want)
		}
		if !(r.Reynolds > 1.9*a.Conditions[0].Runs[i].Reynolds) || !(r.Flow < a.Conditions[0].Runs[i].Flow) {
			t.Errorf("hot %+v, cold %+v", r, a.Conditions[0].Runs[i])
		}
	}
}
