package main

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"brinehead/cmd/brinehead/internal/study"
)

var (
	fineStrainer = filepath.Join(testdata, "changes", "fine-strainer")
	pipeRenewal  = filepath.Join(testdata, "changes", "pipe-renewal")
)

// compareJSON runs compare with --format json and reads the answer.
func compareJSON(t *testing.T, job, change string, args ...string) (*study.Comparison, int) {
	t.Helper()
	code, out, stderr := brinehead(append([]string{"compare", job, change, "--format", "json"}, args...)...)
	if code > 1 || stderr != "" {
		t.Fatalf("%s: exit code %d, %s", job, code, stderr)
	}
	var answer study.Comparison
	if err := json.Unmarshal([]byte(out), &answer); err != nil {
		t.Fatalf("%s: %v", job, err)
	}
	return &answer, code
}

// compared finds a condition of a comparison.
func compared(t *testing.T, a *study.Comparison, name string) study.ConditionComparison {
	t.Helper()
	for _, c := range a.Conditions {
		if c.Condition == name {
			return c
		}
	}
	t.Fatalf("no condition %s", name)
	return study.ConditionComparison{}
}

// The wording of the demo, line by line: it guards against change, the figures are those of check.
func TestCompareWording(t *testing.T) {
	code, out, stderr := brinehead("compare", seawater, fineStrainer)
	if code != exitNotMet || stderr != "" {
		t.Errorf("exit code %d, %q", code, stderr)
	}
	if !strings.HasPrefix(out, "NOT MET AFTER THE CHANGE: 9 of 266 limits; 27 more NOT JUDGED\n"+
		"Before it: 3 not met, 27 not judged, of 266. Lost: 6, gained: 0, met neither\n  before nor after: 30.\n"+
		"seawater with fine-strainer: 7 conditions compared.\n") {
		t.Errorf("the verdict does not come first:\n%.400s", out)
	}
	for _, want := range []string{
		"  loaded, North Sea winter: greatest share of best-efficiency flow of P1: not\n    met before either, 121.2 %; now 121 %, want at most 120\n",
		"  ballast, tropics, fouled strainer: minimum flow of CLR1: met before, 368.3\n    m3/h; now 319 m3/h, want at least 330\n",
		"  ballast, tropics, one pump: not judged before either: P1 runs beyond its\n    digitised curve in this condition, and every flow rests on it: minimum flow\n",
		"\nWHAT THE CHANGE REWRITES\n  fittings: STR1: rated drop: 0.055 bar -> 0.14 bar\n",
		"  least NPSH margin: -2.43 m before, -7.69 m after, of P1 in \"ballast, tropics,\n    one pump, fouled strainer\"\n",
		"  Not all of these are known before in \"ballast, tropics, one pump\", after in\n    \"ballast, tropics, one pump\": it may be worse there.\n",
		"ballast, tropics, fouled strainer\n  pump   m3/h  after      %  head m  after    kW  after  margin m  after\n  P1    368.2  319.2  -13.3   24.87  26.33  31.1   29.6      2.05  -3.00\n",
		"river port, high chest\n  no figure and no verdict is another\n",
		"  pump flow        P1          m3/h  381   486     -\n",
		"    Not known: with low resistance and low pump head: P1 runs beyond the last\n",
		"  The low of SUCTION 1 lies below the vapour pressure: the water boils there\n",
		"    P1, P2: head 0.95 to 1.05 times [grade 2B: ISO 9906:2012, table 8; from\n",
	} {
		if !strings.Contains(out, want) {
			t.Errorf("no\n%s\nin\n%s", want, out)
		}
	}
	for _, change := range []string{fineStrainer, pipeRenewal} {
		for _, args := range [][]string{nil, {"--condition", "ballast, tropics"}, {"--units", "us"}} {
			_, out, _ := brinehead(append([]string{"compare", seawater, change}, args...)...)
			for i, line := range strings.Split(out, "\n") {
				if len([]rune(line)) > 80 {
					t.Errorf("%s %v, line %d is %d characters wide: %s", change, args, i+1, len([]rune(line)), line)
				}
			}
		}
	}
}

// Every figure of a comparison is the one that check gives for the job and for the job with the change, every difference their
// difference, and unknown where either is.
func TestCompareIsTwoChecks(t *testing.T) {
	a, _ := compareJSON(t, seawater, pipeRenewal)
	before, _ := checkJSON(t, seawater)
	after, _ := checkJSON(t, seawater, "--change", pipeRenewal)
	figures, unknowns := 0, 0
	same := func(what string, p study.Pair, b, a study.Figure) {
		t.Helper()
		figures++
		equal := func(x, y study.Figure) bool {
			return x.Known() == y.Known() && (!x.Known() || math.Abs(float64(x-y)) <= 1e-8*math.Max(1, math.Abs(float64(y))))
		}
		if !equal(p.Before, b) || !equal(p.After, a) {
			t.Errorf("%s: %+v, check gives %g and %g", what, p, float64(b), float64(a))
		}
		if !b.Known() || !a.Known() {
			unknowns++
			if p.Difference.Known() {
				t.Errorf("%s: a difference of figures that are not known: %+v", what, p)
			}
		} else if rounding := 1e-8 * (math.Abs(float64(b)) + math.Abs(float64(a)) + 1); !(math.Abs(float64(p.Difference-(p.After-p.Before))) <= rounding) { // nine digits
			t.Errorf("%s: %+v", what, p)
		}
	}
	for i, c := range a.Conditions {
		b, a := before.Conditions[i], after.Conditions[i]
		for k, p := range c.Pumps {
			same(p.Pump, p.Flow, b.Pumps[k].Flow, a.Pumps[k].Flow)
			same(p.Pump, p.ShaftPower, b.Pumps[k].ShaftPower, a.Pumps[k].ShaftPower)
			same(p.Pump, p.NPSHMargin, b.Pumps[k].NPSHMargin, a.Pumps[k].NPSHMargin)
		}
		for k, r := range c.Runs {
			same(r.Run, r.Flow, b.Runs[k].Flow, a.Runs[k].Flow)
			same(r.Run, r.Velocity, b.Runs[k].Velocity, a.Runs[k].Velocity)
			same(r.Run, r.PipeLoss, b.Runs[k].PipeLoss, a.Runs[k].PipeLoss)
		}
		for k, p := range c.Points {
			same(p.Point, p.GaugePressure, b.Points[k].GaugePressure, a.Points[k].GaugePressure)
		}
	}
	if len(a.Conditions) != 7 || figures < 300 || unknowns < 20 {
		t.Errorf("%d conditions, %d figures, %d of them not known on a side", len(a.Conditions), figures, unknowns)
	}
}

// A change that rewrites a table just as it was makes no difference, and the answer says so; the exit code is that of the job.
func TestCompareWithoutChange(t *testing.T) {
	for _, job := range []string{seawater, freshwater} {
		same := t.TempDir()
		content, err := os.ReadFile(filepath.Join(job, "runs.csv"))
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(same, "runs.csv"), content, 0o644); err != nil {
			t.Fatal(err)
		}
		code, out, _ := brinehead("compare", job, same)
		alone, _, _ := brinehead("check", job)
		if code != alone || !strings.Contains(strings.Join(strings.Fields(out), " "), "No difference: the change rewrites nothing, and no figure and no verdict is another.") {
			t.Errorf("%s: exit code %d, that of check %d:\n%.400s", job, code, alone, out)
		}
		a, _ := compareJSON(t, job, same)
		if len(a.Inputs) != 0 || a.Verdicts.Gained+a.Verdicts.Lost != 0 || a.Verdicts.Before != a.Verdicts.After {
			t.Errorf("%s: %+v, %+v", job, a.Inputs, a.Verdicts)
		}
		for _, c := range a.Conditions {
			for _, p := range c.Paths {
				if p.Reason == "" && math.Abs(float64(p.Head.Difference)) > 1e-9 {
					t.Errorf("%s, %s: %+v", c.Condition, p.Pump, p.Head)
				}
			}
		}
	}
}

// addsUp checks that a way's losses and its static head are the pump's head, before, after, and in the difference, and that the
// two parts of an element's difference are the whole. It returns the worst gap (m) and how many ways there were.
func addsUp(t *testing.T, c study.ConditionComparison) (worst float64, ways int) {
	t.Helper()
	for _, p := range c.Paths {
		if p.Reason != "" {
			continue
		}
		ways++
		sum := p.Static
		for _, e := range p.Elements {
			sum.Before, sum.After, sum.Difference = sum.Before+e.Loss.Before, sum.After+e.Loss.After, sum.Difference+e.Loss.Difference
			if e.ByElement.Known() {
				worst = math.Max(worst, math.Abs(float64(e.ByElement+e.ByFlow-e.Loss.Difference)))
			} else if e.On.Before == "yes" && e.Element != "tee" && e.Element != "weight of its own water" && e.Element != "pump" {
				t.Errorf("%s: %s of %s is not told apart", c.Condition, e.Element, e.Run)
			}
		}
		for _, gap := range []study.Figure{sum.Before - p.Head.Before, sum.After - p.Head.After, sum.Difference - p.Head.Difference} {
			worst = math.Max(worst, math.Abs(float64(gap)))
		}
	}
	return worst, ways
}

// The losses along a pump's way and its static head add up to the pump's head to 1e-9 of it, in the demos and in jobs with
// random lengths and materials. JSON gives nine digits, so that the sums are taken from the answer itself.
func TestCompareAddsUp(t *testing.T) {
	total, greatest := 0, 0.0
	check := func(job, change string) {
		t.Helper()
		for _, c := range compareInside(t, job, change).Conditions {
			worst, ways := addsUp(t, c)
			total += ways
			greatest = math.Max(greatest, worst)
			if !(worst <= 1e-9*30) { // heads of 30 m
				t.Errorf("%s with %s, %s: the parts miss the whole by %g m", job, change, c.Condition, worst)
			}
		}
	}
	check(seawater, fineStrainer)
	check(seawater, pipeRenewal)
	check(freshwater, copyTable(t, freshwater, "runs.csv", nil))
	check(copyJob(t, seawater, [3]string{"runs.csv", "OVERBOARD LINE,COOLERS OUT,OVERBOARD,", "OVERBOARD LINE,OVERBOARD,COOLERS OUT,"}), pipeRenewal) // written against its flow
	const seed = 20261201
	t.Logf("seed %d", seed)
	random := rand.New(rand.NewPCG(seed, 1))
	for range 12 {
		for _, job := range []string{seawater, freshwater} {
			check(job, copyTable(t, job, "runs.csv", func(column, cell string) string {
				if strings.HasPrefix(column, "length") {
					return fmt.Sprintf("%.3f", 1+30*random.Float64())
				}
				if column == "material" && random.IntN(2) == 0 {
					return []string{"GRP", "commercial steel", "cast iron, badly corroded", "galvanised steel"}[random.IntN(4)]
				}
				return cell
			}))
		}
	}
	t.Logf("%d ways, the worst off by %.2g m", total, greatest)
	if total < 120 {
		t.Errorf("%d ways added up, want at least 120", total)
	}
}

// copyTable copies one table of a job into a change folder, each cell of a named column passed through a function.
func copyTable(t *testing.T, job, table string, change func(column, cell string) string) string {
	t.Helper()
	file, err := os.Open(filepath.Join(job, table))
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
	for _, row := range rows[1:] {
		for i := range row {
			if change != nil {
				row[i] = change(rows[0][i], row[i])
			}
		}
	}
	folder := t.TempDir()
	out, err := os.Create(filepath.Join(folder, table))
	if err != nil {
		t.Fatal(err)
	}
	defer out.Close()
	if err := csv.NewWriter(out).WriteAll(rows); err != nil {
		t.Fatal(err)
	}
	return folder
}

// compareInside is the answer itself, with every digit.
func compareInside(t *testing.T, folder, change string) *study.Comparison {
	t.Helper()
	o := common{}
	before, err := o.readJob(folder)
	if err != nil {
		t.Fatal(err)
	}
	o.change = change
	after, err := o.readJob(folder)
	if err != nil {
		t.Fatal(err)
	}
	a, err := study.Compared(before, after, "change", study.CompareOptions{Test: after.Conditions()[:1]})
	if err != nil {
		t.Fatal(err)
	}
	return a
}

// Pumps that no longer do the same have plots of their own, each with what they did together before.
func TestCompareFilesOfUnlikePumps(t *testing.T) {
	worn := writeJob(t, map[string]string{"pumps.csv": "pump,from,to,curve,datum [m],impeller [mm],speed [rpm],motor [kW],wear [%]\nP1,SUCTION 1,DELIVERY 1,SWP-400,2.5,318,1480,45,8\nP2,SUCTION 2,DELIVERY 2,SWP-400,2.5,318,1480,45,0\n"})
	folder := filepath.Join(t.TempDir(), "out")
	if code, _, stderr := brinehead("compare", seawater, worn, "--condition", "ballast, tropics", "--out", folder); code > exitNotMet || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	for _, name := range []string{"systems-p1", "systems-p2", "losses-p1", "losses-p2", "grade-p1", "grade-p2"} {
		svg, err := os.ReadFile(filepath.Join(folder, "ballast-tropics-"+name+".svg"))
		if err != nil || !strings.Contains(string(svg), "before") {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// What stands on one side only is named and never taken for 0: a run, a pump, a fitting, a condition, a limit.
func TestCompareOneSided(t *testing.T) {
	tables := lift("", "")
	job := writeJob(t, tables)
	change := writeJob(t, map[string]string{
		"points.csv":     tables["points.csv"] + "M,junction,4,\n",
		"runs.csv":       "run,from,to,length [m],standard,size,material\nSUCTION,SEA,S,6,EN 10220 normal wall,DN200,galvanised steel\nRISER,D,M,100,EN 10220 normal wall,DN200,galvanised steel\nDISCHARGE,M,OUT,60,EN 10220 normal wall,DN200,galvanised steel\n",
		"fittings.csv":   "run,fitting,tag,opening [%]\nSUCTION,basket strainer,STR1,\nRISER,gate valve,V1,\nDISCHARGE,elbow,,\nDISCHARGE,elbow,,\nDISCHARGE,exit,,\n",
		"conditions.csv": "condition,water,temperature [degC],draught [m]\nballast,sea,20,5\nloaded,sea,20,8\n",
		"limits.csv":     tables["limits.csv"] + "maximum velocity,*,9,m/s\nminimum flow,P1,5000,m3/h\n",
	})
	a, code := compareJSON(t, job, change)
	if code != exitNotMet || len(a.OnlyAfter) != 1 || a.OnlyAfter[0] != "loaded" || len(a.OnlyBefore) != 0 {
		t.Errorf("exit code %d, only after %q, only before %q", code, a.OnlyAfter, a.OnlyBefore)
	}
	c := compared(t, a, "ballast")
	for _, r := range c.Runs {
		if r.Run == "RISER" && (r.State != (study.Sides{Before: "not there", After: "open"}) || r.Flow.Before.Known() || !r.Flow.After.Known() || r.Flow.Difference.Known()) {
			t.Errorf("%+v", r)
		}
	}
	elbows := 0
	for _, f := range c.Fittings {
		if f.Fitting == "elbow" {
			elbows++
			if known := f.Loss.Difference.Known(); known != (elbows == 1) {
				t.Errorf("%+v", f)
			}
		}
	}
	outcomes := map[study.Outcome]int{}
	for _, l := range c.Limits {
		outcomes[l.Outcome]++
	}
	if elbows != 2 || outcomes[study.NewLimit] < 2 {
		t.Errorf("%d elbows, %v", elbows, outcomes)
	}
	if worst, ways := addsUp(t, compareInside(t, job, change).Conditions[0]); ways != 1 || !(worst <= 3e-8) {
		t.Errorf("%d ways, off by %g m", ways, worst)
	}
	_, out, _ := brinehead("compare", job, change)
	for _, want := range []string{
		"Only after the change, and not compared: \"loaded\".\n",
		"  ballast: minimum flow of P1: not there before; now ",
		"  loaded: minimum flow of P1: not there before; now ",
		"  runs: RISER: added: run RISER, from D, to M, length 100 m,",
		"  fittings: V1: run: DISCHARGE -> RISER\n",
		"  fittings: DISCHARGE: elbow (no. 2): added: run DISCHARGE, fitting elbow\n",
	} {
		if !strings.Contains(out, want) {
			t.Errorf("no\n%s\nin\n%s", want, out)
		}
	}
	// The other way round the same stands before only.
	before := writeJob(t, tables)
	for _, name := range []string{"points.csv", "runs.csv", "fittings.csv", "conditions.csv", "limits.csv"} {
		text, err := os.ReadFile(filepath.Join(change, name))
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(before, name), text, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	_, out, _ = brinehead("compare", before, job)
	for _, want := range []string{"Only before the change, and not compared: \"loaded\".\n", "  ballast: not met before, and no longer applies: minimum flow of P1\n", "  runs: RISER: removed: run RISER,"} {
		if !strings.Contains(out, want) {
			t.Errorf("no\n%s\nin\n%s", want, out)
		}
	}
}

// The bands of the harbour test hold what the plant shows with its inputs as given, grow with a looser grade, and with every
// tolerance at one side are what check gives for a job whose tables say just that.
func TestHarbourBand(t *testing.T) {
	reading := func(a *study.Comparison, condition, quantity, on string) study.TestReading {
		t.Helper()
		for _, b := range a.Test.Conditions {
			for _, r := range b.Readings {
				if b.Condition == condition && r.Quantity == quantity && r.On == on {
					return r
				}
			}
		}
		t.Fatalf("no %s of %s in %s", quantity, on, condition)
		return study.TestReading{}
	}
	tight, _ := compareJSON(t, seawater, pipeRenewal, "--grade", "1B")
	loose, _ := compareJSON(t, seawater, pipeRenewal, "--grade", "3b")
	if len(tight.Test.Conditions) != 7 || float64(tight.Test.Grade.Below) != 0.03 || float64(loose.Test.Grade.Above) != 0.07 {
		t.Errorf("%d conditions, %+v, %+v", len(tight.Test.Conditions), tight.Test.Grade, loose.Test.Grade)
	}
	readings := 0
	for i, b := range tight.Test.Conditions {
		for k, r := range b.Readings {
			readings++
			if r.Low.Known() && r.High.Known() && !(r.Low <= r.Best && r.Best <= r.High) {
				t.Errorf("%s: %+v", b.Condition, r)
			}
			if !r.Low.Known() || !r.High.Known() {
				if r.Reason == "" {
					t.Errorf("%s: a bound is not known, and no reason: %+v", b.Condition, r)
				}
			}
			if wide := loose.Test.Conditions[i].Readings[k]; r.Low < wide.Low || r.High > wide.High {
				t.Errorf("%s: grade 1B %+v, grade 3B %+v", b.Condition, r, wide)
			}
		}
	}
	if readings < 100 {
		t.Errorf("%d readings", readings)
	}
	if len(tight.Test.Tolerances) < 20 {
		t.Errorf("%d tolerances", len(tight.Test.Tolerances))
	}
	for _, x := range tight.Test.Tolerances {
		if x.Source == "" || !(x.Low <= x.Best && x.Best <= x.High) {
			t.Errorf("%+v", x)
		}
	}
	one, _ := compareJSON(t, seawater, pipeRenewal, "--test", "ballast,  TROPICS")
	if len(one.Test.Conditions) != 1 || one.Test.Conditions[0].Condition != "ballast, tropics" {
		t.Errorf("%+v", one.Test.Conditions)
	}

	// By tables of its own: roughness doubled, given losses 15 % up, catalogue losses by their scatter (gate valve and elbow
	// have no more than their figures), pump head 5 % down.
	tables := lift("", "")
	tables["runs.csv"] = "run,from,to,length [m],bore [mm],roughness [mm]\nSUCTION,SEA,S,6,200,0.1\nDISCHARGE,D,OUT,160,200,0.1\n"
	tables["fittings.csv"] = "run,fitting,tag,k\nSUCTION,my strainer,STR1,2\nDISCHARGE,my valve,V1,8\nDISCHARGE,exit,,\n"
	job := writeJob(t, tables)
	a, _ := compareJSON(t, job, writeJob(t, map[string]string{"fittings.csv": tables["fittings.csv"]}))
	tables["runs.csv"] = strings.ReplaceAll(tables["runs.csv"], "200,0.1", "200,0.2")
	tables["fittings.csv"] = "run,fitting,tag,k\nSUCTION,my strainer,STR1,2.3\nDISCHARGE,my valve,V1,9.2\nDISCHARGE,end,,1.06\n"
	tables["pump_curves.csv"] = "curve,flow [m3/h],head [m],efficiency [%],npshr [m]\nC1,0,19,0,1.5\nC1,100,18.05,55,1.7\nC1,200,15.2,76,2.2\nC1,300,10.45,74,3.2\nC1,360,6.65,60,4.4\n"
	low := only(t, writeJob(t, tables)).Pumps[0].Flow
	if got := reading(a, "ballast", "pump flow", "P1").Low; !(math.Abs(float64(got-low)) <= 1e-6*float64(low)) {
		t.Errorf("least flow %g m3/h, by tables of its own %g", float64(got), float64(low))
	}
}

// Whatever is wrong with job, change or flags is exit code 2, and nothing is printed on stdout.
func TestCompareRefuses(t *testing.T) {
	empty := t.TempDir()
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{seawater}, "compare needs the job folder and the change folder, and nothing else: brinehead compare JOB CHANGE"},
		{[]string{seawater, fineStrainer, pipeRenewal}, "compare needs the job folder and the change folder"},
		{[]string{seawater, filepath.Join(testdata, "changes", "none")}, "found no such folder"},
		{[]string{seawater, empty}, "change folder: found no table, want at least one table that the change rewrites"},
		{[]string{empty, fineStrainer}, "job folder: found no table"},
		{[]string{seawater, fineStrainer, "--condition", "ballast tropics"}, `found "ballast tropics", want a condition of the job`},
		{[]string{seawater, fineStrainer, "--test", "dry dock"}, `found "dry dock", want a condition of the job`},
		{[]string{seawater, fineStrainer, "--condition", "ballast, tropics", "--test", "loaded, tropics"}, `test: found "loaded, tropics", want a condition that is compared`},
		{[]string{seawater, fineStrainer, "--grade", "4B"}, `acceptance grade: found "4B", want one of 1U, 1E, 1B, 2B, 2U, 3B`},
		{[]string{seawater, fineStrainer, "--change", pipeRenewal}, "unknown flag: --change"},
		{[]string{seawater, fineStrainer, "--format", "xml"}, `format: found "xml"`},
		{[]string{seawater, fineStrainer, "--condition", "loaded, tropics", "--out", fineStrainer}, "results are not written into a folder of tables"},
	} {
		code, out, stderr := brinehead(append([]string{"compare"}, c.args...)...)
		if code != exitInput || out != "" || !strings.Contains(stderr, c.want) {
			t.Errorf("compare %v: exit code %d, stdout %q, stderr %q, want %q", c.args, code, out, stderr, c.want)
		}
	}
}

// Exit code 0 where every limit is met after the change, be it so before or not.
func TestCompareMet(t *testing.T) {
	code, out, stderr := brinehead("compare", seawater, pipeRenewal, "--condition", "loaded, North Sea winter")
	if code != exitMet || stderr != "" || !strings.HasPrefix(out, "EVERY LIMIT MET AFTER THE CHANGE\nBefore it: 1 not met, 0 not judged, of ") {
		t.Errorf("exit code %d, %q:\n%.300s", code, stderr, out)
	}
}

// --out writes the tables and plots, every row of the tables as wide as its head.
func TestCompareFiles(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "out")
	code, _, stderr := brinehead("compare", seawater, pipeRenewal, "--condition", "ballast, tropics", "--out", folder)
	if code > exitNotMet || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	least := map[string]int{"changes.csv": 5, "differences.csv": 60, "verdicts.csv": 31, "ways.csv": 40, "harbour.csv": 15, "tolerances.csv": 20}
	for name, rows := range least {
		file, err := os.Open(filepath.Join(folder, name))
		if err != nil {
			t.Error(err)
			continue
		}
		list, err := csv.NewReader(file).ReadAll()
		file.Close()
		if err != nil || len(list) < rows {
			t.Errorf("%s: %d rows, %v", name, len(list), err)
		}
	}
	for _, name := range []string{"systems", "flows", "losses", "grade"} {
		for _, ending := range []string{"svg", "png"} {
			if info, err := os.Stat(filepath.Join(folder, "ballast-tropics-"+name+"."+ending)); err != nil || info.Size() < 1000 {
				t.Errorf("%s.%s: %v", name, ending, err)
			}
		}
	}
}

// A condition that has no solution after the change has no figures there, in words and as null, and every limit not judged.
func TestCompareWithoutSolution(t *testing.T) {
	shut := copyTable(t, seawater, "conditions.csv", func(column, cell string) string {
		if column == "LOW SUCTION state" || column == "HIGH SUCTION state" {
			return "shut"
		}
		return cell
	})
	runs, err := os.ReadFile(filepath.Join(seawater, "runs.csv"))
	if err != nil {
		t.Fatal(err)
	}
	text := strings.Replace(string(runs), "material,high point [m]", "material,state,high point [m]", 1)
	text = strings.ReplaceAll(text, "copper-nickel,", "copper-nickel,,")
	text = strings.Replace(text, "DN350,90/10 copper-nickel,,7.3,", "DN350,90/10 copper-nickel,shut,7.3,", 1)
	if err := os.WriteFile(filepath.Join(shut, "runs.csv"), []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	out := filepath.Join(t.TempDir(), "out")
	a, code := compareJSON(t, seawater, shut, "--condition", "ballast, tropics", "--out", out)
	c := compared(t, a, "ballast, tropics")
	if code != exitNotMet || !strings.HasPrefix(c.Unknown.After, "no solution: ") || c.Unknown.Before != "" {
		t.Errorf("exit code %d, %+v", code, c.Unknown)
	}
	for _, p := range c.Pumps {
		if p.State != (study.Sides{Before: "running", After: "no solution"}) || !p.Flow.Before.Known() || p.Flow.After.Known() || p.Flow.Difference.Known() {
			t.Errorf("%+v", p)
		}
	}
	for _, p := range c.Paths {
		if p.Reason != "before: running, after: no solution" || len(p.Elements) != 0 {
			t.Errorf("%+v", p)
		}
	}
	for _, l := range c.Limits {
		if l.Limit != "minimum immersion" && l.After == study.Met {
			t.Errorf("%+v", l)
		}
	}
	for _, b := range a.Test.Conditions {
		if len(b.Readings) != 0 {
			t.Errorf("%+v", b.Readings)
		}
	}
	_, text, _ = brinehead("compare", seawater, shut, "--condition", "ballast, tropics")
	for _, want := range []string{"  P1    410.7  no solution  -   23.37      -  32.4      -      6.98      -\n", "  Not known after the change: no solution: ", "    nothing to read: no solution\n"} {
		if !strings.Contains(text, want) {
			t.Errorf("no\n%s\nin\n%s", want, text)
		}
	}
}
