package main

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/pumps"
)

var changes = filepath.Join(testdata, "changes")

func sheetsJSON(t *testing.T, args ...string) study.PumpSheets {
	t.Helper()
	code, out, stderr := brinehead(append([]string{"pump"}, append(args, "--format", "json")...)...)
	if code != exitMet || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	var answer study.PumpSheets
	if err := json.Unmarshal([]byte(out), &answer); err != nil {
		t.Fatal(err)
	}
	return answer
}

// What the sheet of the sea-water demo tells, by hand where it can be worked by hand.
func TestPumpOfTheDemo(t *testing.T) {
	answer := sheetsJSON(t, seawater)
	if len(answer.Sheets) != 1 || answer.Sheets[0].Pumps != "P1, P2" {
		t.Fatalf("%+v", answer.Sheets)
	}
	s := answer.Sheets[0]
	n := s.Numbers
	if k := 2 * math.Pi * 1480 / 60 * math.Sqrt(float64(n.BestFlow)/3600) / math.Pow(9.80665*float64(n.BestHead), 0.75); !(math.Abs(k/float64(n.TypeNumber)-1) < 1e-6) {
		t.Errorf("type number %g, by hand %g", n.TypeNumber, k)
	}
	if !(math.Abs(float64(n.BestFlow)-400) < 10) || !(math.Abs(float64(n.BestEfficiency)-0.824) < 0.003) || !(math.Abs(float64(s.ShutOff)-30.2) < 0.1) {
		t.Errorf("%+v, shut-off %g m", n, s.ShutOff)
	}
	if len(s.Fits) != 3 || len(s.Strays) != 0 || len(s.Trims) != 4 || len(s.Regions) != 2 || !(math.Abs(float64(s.Regions[0].From/n.BestFlow)-0.7) < 1e-9) {
		t.Errorf("%+v", s)
	}
	for _, row := range s.Trims { // plain affinity promises most
		if row.Refused || !(row.Methods[0].Head > row.Methods[1].Head && row.Methods[0].Head > row.Methods[2].Head) {
			t.Errorf("%+v", row)
		}
	}
	for _, args := range [][]string{{freshwater}, {freshwater, "--change", filepath.Join(changes, "smaller-impeller"), "--units", "us"}} {
		if _, out, _ := brinehead(append([]string{"pump"}, args...)...); widest(out) > 80 {
			t.Errorf("%d wide\n%s", widest(out), out)
		}
	}
	code, out, _ := brinehead("pump", seawater)
	if code != exitMet || widest(out) > 80 || !strings.Contains(out, "type number K 0.872 (ISO 17769)") || !strings.Contains(out, "from memory, source still to be opened") {
		t.Errorf("exit code %d, %d wide\n%s", code, widest(out), out)
	}
}

// A point misread and a power in hp are named, in `pump` and in `check`, and nothing is changed in silence.
func TestOddSheets(t *testing.T) {
	folder := copyJob(t, seawater, [3]string{"pump_curves.csv", ",240,28.1,", ",240,21.8,"})
	s := sheetsJSON(t, folder).Sheets[0]
	if len(s.Strays) != 1 || s.Strays[0].Quantity != "head" || !(math.Abs(float64(s.Strays[0].Flow)-240) < 1e-6) || !(math.Abs(float64(s.Strays[0].Others)-28.1) < 0.3) {
		t.Errorf("%+v", s.Strays)
	}
	const says = "SWP-400: head 21.8 m at 240 m3/h does not belong to the curve of the other points"
	if _, out, _ := brinehead("check", folder); !strings.Contains(strings.Join(strings.Fields(out), " "), says) {
		t.Errorf("%s", out)
	}
	// Efficiency and power both given: the powers worked from the sheet, in hp under a header of kW.
	lines := []string{"curve,flow [m3/h],head [m],efficiency [%],power [kW],npshr [m]"}
	for _, p := range [][3]float64{{0, 20, 0}, {100, 19, 55}, {200, 16, 76}, {300, 11, 74}, {360, 7, 60}} {
		kW := 8.0
		if p[2] > 0 {
			kW = 1000 * 9.80665 * p[0] / 3600 * p[1] / (p[2] / 100) / 1e3
		}
		lines = append(lines, fmt.Sprintf("C1,%g,%g,%g,%.2f,2", p[0], p[1], p[2], kW/0.7457))
	}
	tables := lift("", "")
	tables["pump_curves.csv"] = strings.Join(lines, "\n") + "\n"
	folder = writeJob(t, tables)
	if b := sheetsJSON(t, folder).Sheets[0].Balance; b == nil || b.Slip != "the power is in hp, not in kW" || !(math.Abs(float64(b.Ratio)-1/0.7457) < 0.01) {
		t.Errorf("%+v", b)
	}
	if _, out, _ := brinehead("check", folder); !strings.Contains(strings.Join(strings.Fields(out), " "), "the power is in hp, not in kW") {
		t.Errorf("%s", out)
	}
}

func TestPumpRefusals(t *testing.T) {
	for want, args := range map[string][]string{
		`pump: found "P9", want one of P1, P2`:                             {seawater, "--pump", "P9"},
		`acceptance grade: found "7X", want one of 1U, 1E, 1B, 2B, 2U, 3B`: {seawater, "--grade", "7X"},
		"--condition may be given once":                                    {seawater, "--condition", "loaded, tropics", "--condition", "ballast, tropics"},
		`format: found "pdf"`:                                              {seawater, "--format", "pdf"},
		"pump needs the job folder":                                        {},
	} {
		if code, out, stderr := brinehead(append([]string{"pump"}, args...)...); code != exitInput || out != "" || !strings.Contains(stderr, want) {
			t.Errorf("%v: exit code %d, %q, %q", args, code, out, stderr)
		}
	}
}

func TestPumpFiles(t *testing.T) {
	folder := t.TempDir()
	if code, _, stderr := brinehead("pump", freshwater, "--out", folder, "--units", "us"); code != exitMet || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	for _, name := range []string{"pump.csv", "p1-p2-curve.svg", "p1-p2-curve.png", "p1-p2-power.svg", "p1-p2-power.png"} {
		if content, err := os.ReadFile(filepath.Join(folder, name)); err != nil || len(content) < 500 {
			t.Errorf("%s: %d bytes, %v", name, len(content), err)
		}
	}
	svg, _ := os.ReadFile(filepath.Join(folder, "p1-p2-curve.svg"))
	for _, says := range []string{"300 mm", "285 mm", "270 mm", "grade ISO 9906:2012 2B", "preferred", "allowable", "70 %", "[ft]"} {
		if !strings.Contains(string(svg), says) {
			t.Errorf("the family does not show %q", says)
		}
	}
}

// An impeller between two digitised ones: its duty lies between those of its neighbours, and the answer says how it was made.
func TestImpellerBetween(t *testing.T) {
	var flows []float64
	for _, d := range []string{"270", "278", "285"} {
		folder := copyJob(t, freshwater, [3]string{"pumps.csv", ",300,60,", "," + d + ",60,"})
		answer, _ := checkJSON(t, folder, "--condition", "sea passage, tropics")
		p := answer.Conditions[0].Pumps[0]
		flows = append(flows, float64(p.Flow))
		if between := strings.HasPrefix(p.CurveOrigin, "between 270 and 285 mm"); between != (d == "278") {
			t.Errorf("%s mm: %s", d, p.CurveOrigin)
		}
	}
	if !(flows[0] < flows[1] && flows[1] < flows[2]) {
		t.Errorf("flows %v", flows)
	}
	change, _ := checkJSON(t, freshwater, "--change", filepath.Join(changes, "smaller-impeller"), "--condition", "sea passage, tropics")
	if !(math.Abs(float64(change.Conditions[0].Pumps[0].Flow)-flows[1]) < 1e-9) {
		t.Errorf("the change folder gives %g m3/h, want %g", change.Conditions[0].Pumps[0].Flow, flows[1])
	}
}

// A trimmed impeller is worked by all methods; a limit that lies between them is not judged, one below them all is met, one
// above them all is not met.
func TestTrimmedImpeller(t *testing.T) {
	tables := map[float64]study.Verdict{}
	answer, _ := checkJSON(t, seawater, "--change", filepath.Join(changes, "trimmed-impeller"), "--condition", "loaded, tropics")
	trim := answer.Conditions[0].Pumps[0].Trim
	if len(trim) != 3 || !(trim[0].Flow > trim[2].Flow && trim[2].Flow > trim[1].Flow) || trim[1].Flow != answer.Conditions[0].Pumps[0].Flow {
		t.Fatalf("%+v", trim)
	}
	low, high := float64(trim[1].Flow), float64(trim[0].Flow)
	tables[low-5], tables[(low+high)/2], tables[high+5] = study.Met, study.NotJudged, study.NotMet
	for flow, want := range tables {
		folder := copyJob(t, seawater, [3]string{"pumps.csv", ",318,", ",302,"},
			[3]string{"limits.csv", "minimum flow,CLR1,330,m3/h,\"loaded, tropics\",cooler maker's figure for full load", fmt.Sprintf("minimum flow,P1,%.2f,m3/h,\"loaded, tropics\",", flow)})
		answer, code := checkJSON(t, folder, "--condition", "loaded, tropics")
		for _, f := range answer.Conditions[0].Findings {
			if f.Limit == "minimum flow" && f.On == "P1" && (f.Verdict != want || want == study.NotJudged && !strings.Contains(f.Reason, "the methods of trim do not agree: plain affinity: ")) {
				t.Errorf("at least %.1f m3/h: %+v", flow, f)
			}
		}
		if want != study.Met && code != exitNotMet {
			t.Errorf("exit code %d", code)
		}
	}
	if !strings.Contains(strings.Join(answer.SheetNotes, "\n"), "a cut of 5.03 % is beyond the 5 %") {
		t.Errorf("%q", answer.SheetNotes)
	}
	folder := copyJob(t, seawater, [3]string{"pumps.csv", ",318,", ",250,"})
	if code, _, stderr := brinehead("check", folder); code != exitInput || !strings.Contains(stderr, "leaves less than 80 % of the full diameter") {
		t.Errorf("exit code %d, %s", code, stderr)
	}
}

// Against a shut valve at the deepest draught: 30.16 m (the fit at no flow) and 9.2 m, less where the part lies, in the water of the
// condition; one bar less of design pressure than that is not met.
func TestShutOffPressure(t *testing.T) {
	folder := copyJob(t, seawater, [3]string{"runs.csv", "high point [m],note", "high point [m],design pressure [bar],note"},
		[3]string{"runs.csv", "copper-nickel,,\n", "copper-nickel,,3,\n"}, [3]string{"runs.csv", "copper-nickel,7.3,", "copper-nickel,7.3,10,"})
	answer, code := checkJSON(t, folder, "--condition", "ballast, tropics")
	if code != exitNotMet {
		t.Errorf("exit code %d", code)
	}
	head := float64(sheetsJSON(t, seawater).Sheets[0].ShutOff) + 9.2
	density := float64(answer.Conditions[0].Water.Density)
	want := map[string]struct {
		bar     float64
		verdict study.Verdict
	}{
		"LOW SUCTION":     {(9.2 - 0.9) * density * 9.80665e-5, study.Met}, // still water at the deepest draught
		"PUMP 1 DELIVERY": {(head - 2.9) * density * 9.80665e-5, study.NotMet},
		"OVERBOARD LINE":  {(head - 5.2) * density * 9.80665e-5, study.Met},
		"CLR1":            {(head - 3.4) * density * 9.80665e-5, study.Met},
		"P1":              {(head - 2.5) * density * 9.80665e-5, study.Met},
	}
	found := 0
	for _, f := range answer.Conditions[0].Findings {
		w, has := want[f.On]
		if f.Limit != "maximum shut-off pressure" || !has {
			continue
		}
		found++
		if f.Verdict != w.verdict || !(math.Abs(float64(f.Value)-w.bar) < 2e-3) {
			t.Errorf("%s: %g bar, %s; want %g, %s", f.On, float64(f.Value), f.Verdict, w.bar, w.verdict)
		}
	}
	if found != len(want) {
		t.Errorf("%d of %d found", found, len(want))
	}
	// A sheet that begins at 80 m3/h shows no shut-off head: not judged.
	folder = copyJob(t, seawater, [3]string{"pump_curves.csv", "SWP-400,318,1480,0,30.2,0,\n", ""})
	answer, _ = checkJSON(t, folder, "--condition", "ballast, tropics")
	for _, f := range answer.Conditions[0].Findings {
		if f.Limit == "maximum shut-off pressure" && (f.Verdict != study.NotJudged || !strings.Contains(f.Reason, "does not show its head at no flow")) {
			t.Errorf("%+v", f)
		}
	}
}

// In a closed loop the tank's joint relieves: the suction side stands at the tank's head, the delivery side at the shut-off head over it.
func TestShutOffInAClosedLoop(t *testing.T) {
	answer, _ := checkJSON(t, freshwater, "--condition", "sea passage, tropics")
	density := float64(answer.Conditions[0].Water.Density)
	s := sheetsJSON(t, freshwater).Sheets[0]
	for _, f := range answer.Conditions[0].Findings {
		if want := (15.8 + float64(s.ShutOff) - 2.6) * density * 9.80665e-5; f.Limit == "maximum shut-off pressure" && f.On == "P1" && !(math.Abs(float64(f.Value)-want) < 2e-3) {
			t.Errorf("%g bar, want %g", float64(f.Value), want)
		}
	}
}

// Frequency, poles and slip make the speed; a condition may set the frequency or, in its place, the speed.
func TestFrequencyAndSlip(t *testing.T) {
	base, _ := checkJSON(t, freshwater, "--condition", "sea passage, tropics")
	if n := float64(base.Conditions[0].Pumps[0].Speed); !(math.Abs(n-1800*(1-0.0139)) < 1e-9) {
		t.Errorf("speed %g rpm", n)
	}
	folder := copyJob(t, freshwater, [3]string{"pumps.csv", ",60,4,1.39,", ",50,4,,"})
	slow, _ := checkJSON(t, folder, "--condition", "sea passage, tropics")
	p := slow.Conditions[0].Pumps[0]
	if want := 1500 * (1 - pumps.Slip(45e3)); !(math.Abs(float64(p.Speed)/want-1) < 1e-8) {
		t.Errorf("speed %g rpm, want %g", float64(p.Speed), want)
	}
	// A closed loop has no static head: all flows go with the speed, to the little that friction departs from the square law.
	if got, want := float64(p.Flow/base.Conditions[0].Pumps[0].Flow), float64(p.Speed/base.Conditions[0].Pumps[0].Speed); !(math.Abs(got/want-1) < 0.02) {
		t.Errorf("flow goes with %g, speed with %g", got, want)
	}
	found := false
	for _, s := range slow.Supplied {
		found = found || s.On == "P1" && s.What == "speed" && strings.Contains(s.Source, "common practice")
	}
	if !found {
		t.Errorf("the slip is not told: %+v", slow.Supplied)
	}
}

// NPSH required at another speed is known within a span; a limit that holds with affinity alone is not judged.
func TestNPSHDoubtOfSpeed(t *testing.T) {
	answer, _ := checkJSON(t, freshwater, "--condition", "slow steaming")
	p := answer.Conditions[0].Pumps[0]
	if ratio := float64(p.NPSHRequiredHigh / p.NPSHRequired); !(math.Abs(ratio-math.Pow(float64(p.Speed)/1775, -0.7)) < 1e-6) {
		t.Errorf("high over affinity %g", ratio)
	}
	between := float64(p.NPSHAvailable) - (float64(p.NPSHRequired)+float64(p.NPSHRequiredHigh))/2
	folder := copyJob(t, freshwater)
	if err := os.WriteFile(filepath.Join(folder, "limits.csv"), fmt.Appendf(nil, "limit,on,value,unit\nNPSH margin,P1,%.4f,m\n", between), 0o644); err != nil {
		t.Fatal(err)
	}
	answer, _ = checkJSON(t, folder, "--condition", "slow steaming")
	for _, f := range answer.Conditions[0].Findings {
		if f.Limit == "NPSH margin" && (f.Verdict != study.NotJudged || !strings.Contains(f.Reason, "power 1.3 of the speed")) {
			t.Errorf("%+v", f)
		}
	}
}

// Motor current with its band, and the reserve of the motor.
func TestMotorOfTheDemo(t *testing.T) {
	answer, _ := checkJSON(t, seawater, "--condition", "loaded, tropics")
	p := answer.Conditions[0].Pumps[0]
	if want := float64(p.ShaftPower) * 1e3 / (math.Sqrt(3) * 440 * 0.86 * 0.939); !(math.Abs(float64(p.MotorCurrent)/want-1) < 1e-8) || p.CurrentBand != 0.08 {
		t.Errorf("current %g A, want %g, band %g", float64(p.MotorCurrent), want, float64(p.CurrentBand))
	}
	if !(math.Abs(float64(p.MotorLoad)*45/float64(p.ShaftPower)-1) < 1e-8) || !(p.GreatestPower > p.ShaftPower) || !p.GreatestAtEnd {
		t.Errorf("%+v", p)
	}
	// A motor of 34 kW carries the duty, but neither with the reserve nor along the curve.
	folder := copyJob(t, seawater, [3]string{"pumps.csv", ",45,", ",34,"})
	answer, _ = checkJSON(t, folder, "--condition", "loaded, tropics")
	for _, f := range answer.Conditions[0].Findings {
		want, has := map[string]study.Verdict{"maximum shaft power": study.Met, "least motor reserve": study.NotMet, "maximum shaft power along the curve": study.NotMet}[f.Limit]
		if has && f.Verdict != want {
			t.Errorf("%+v, want %s", f, want)
		}
	}
}

// Internal leakage takes flow from the system and keeps the power; without a best-efficiency point it is refused.
func TestInternalLeakage(t *testing.T) {
	sound, _ := checkJSON(t, seawater, "--condition", "loaded, tropics")
	folder := copyJob(t, seawater, [3]string{"pumps.csv", "motor [kW]", "motor [kW],internal leakage [%]"}, [3]string{"pumps.csv", ",45,", ",45,6,"})
	worn, _ := checkJSON(t, folder, "--condition", "loaded, tropics")
	a, b := sound.Conditions[0].Pumps[0], worn.Conditions[0].Pumps[0]
	if !(b.Flow < a.Flow-5) || !(b.Efficiency < a.Efficiency-0.02) || !(math.Abs(float64(b.ShaftPower/a.ShaftPower)-1) < 0.03) {
		t.Errorf("sound %+v, worn %+v", a, b)
	}
}
