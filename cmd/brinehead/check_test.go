package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/cmd/brinehead/internal/study"
	"brinehead/hydraulics"
)

// copyJob copies a job of testdata into a folder of the test's own, with some of its tables changed: name, old, new.
func copyJob(t testing.TB, from string, changes ...[3]string) string {
	t.Helper()
	to := filepath.Join(t.TempDir(), filepath.Base(from))
	if err := os.CopyFS(to, os.DirFS(from)); err != nil {
		t.Fatal(err)
	}
	for _, c := range changes {
		path := filepath.Join(to, c[0])
		content, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if !strings.Contains(string(content), c[1]) {
			t.Fatalf("%s holds no %q", c[0], c[1])
		}
		if err := os.WriteFile(path, []byte(strings.ReplaceAll(string(content), c[1], c[2])), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return to
}

var (
	seawater   = filepath.Join(testdata, "jobs", "seawater")
	freshwater = filepath.Join(testdata, "jobs", "freshwater")
)

// The demo shows every verdict, and says the not met ones first.
func TestSeawaterDemo(t *testing.T) {
	answer, code := checkJSON(t, seawater)
	if code != exitNotMet || answer.Met() {
		t.Errorf("exit code %d, met %v; the demo holds a limit that is not met", code, answer.Met())
	}
	if len(answer.Conditions) < 6 {
		t.Errorf("%d conditions, want at least 6", len(answer.Conditions))
	}
	verdicts := map[study.Verdict]int{}
	for _, c := range answer.Conditions {
		if !c.Solution.Converged || float64(c.Solution.HeadResidual) > 1e-6 || float64(c.Solution.MassResidual) > 1e-9 {
			t.Errorf("%s: %+v", c.Condition, c.Solution)
		}
		for _, f := range c.Findings {
			verdicts[f.Verdict]++
			if f.Verdict == study.NotJudged && f.Value.Known() || f.Reason == "" || f.Source == "" {
				t.Errorf("%s: %+v", c.Condition, f)
			}
		}
	}
	for _, v := range []study.Verdict{study.Met, study.NotMet, study.NotJudged} {
		if verdicts[v] == 0 {
			t.Errorf("no limit %s", v)
		}
	}
	_, out, _ := brinehead("check", seawater)
	if !strings.HasPrefix(out, "NOT MET: ") || strings.Index(out, "\nNOT JUDGED\n") < strings.Index(out, "\nNOT MET\n") {
		t.Errorf("the verdict does not come first:\n%.200s", out)
	}
	for i, line := range strings.Split(out, "\n") {
		if len([]rune(line)) > 80 {
			t.Errorf("line %d is %d characters wide: %s", i+1, len([]rune(line)), line)
		}
	}
}

// Beyond the digitised curve no figure that rests on it is printed as a number, in any form.
func TestExtrapolatedIsNoNumber(t *testing.T) {
	const condition = "ballast, tropics, one pump"
	answer, _ := checkJSON(t, seawater, "--condition", condition)
	if len(answer.Conditions) != 1 {
		t.Fatalf("%d conditions", len(answer.Conditions))
	}
	c := answer.Conditions[0]
	if p := c.Pumps[0]; !p.Extrapolated || p.Flow.Known() || p.Head.Known() || p.NPSHAvailable.Known() || p.ShaftPower.Known() {
		t.Errorf("%+v", p)
	}
	for _, r := range c.Runs {
		if !r.Shut && r.Flow.Known() {
			t.Errorf("%+v", r)
		}
	}
	restless := []string{"minimum immersion", "maximum shaft power along the curve", "maximum shut-off pressure"} // do not rest on the flow
	for _, f := range c.Findings {
		if !slices.Contains(restless, f.Limit) && f.Verdict != study.NotJudged {
			t.Errorf("%+v", f)
		}
	}
	if len(c.Notes) == 0 || !strings.Contains(c.Notes[0], "P1 runs beyond the last digitised point of its curve, 560 m3/h") {
		t.Errorf("%q", c.Notes)
	}
	_, out, _ := brinehead("check", seawater, "--condition", condition)
	if !strings.Contains(out, "P1    off curve       -       -         -") {
		t.Errorf("%s", out)
	}
}

// The keys of DESIGN section 5 are all there.
func TestJSONKeys(t *testing.T) {
	_, out, _ := brinehead("check", freshwater, "--format", "json")
	for _, key := range strings.Fields(`job version conditions condition water kind temperature_degC salinity_g_kg density_kg_m3 dynamic_viscosity_Pa_s
		vapour_pressure_Pa heat_capacity_J_kg_K pumps pump running flow_m3h head_m efficiency shaft_power_kW npsh_available_m npsh_required_m
		npsh_margin_m best_efficiency_share extrapolated runs run velocity_m_s reynolds friction_factor pipe_loss_m fitting_loss_m fittings tag
		fitting loss_m points point gauge_pressure_bar findings limit on value limit_value unit verdict reason`) {
		if !strings.Contains(out, `"`+key+`": `) {
			t.Errorf("no key %s", key)
		}
	}
}

// Losses add up: along any path the heads fall by what the runs lose and rise by what the pumps give.
func TestLossesAddUp(t *testing.T) {
	answer, _ := checkJSON(t, freshwater)
	for _, c := range answer.Conditions {
		head := map[string]float64{}
		for _, p := range c.Points {
			head[p.Point] = float64(p.Head)
		}
		for _, way := range [][3]string{{"ENGINE SUPPLY", "SUPPLY", "LO COOLER IN"}, {"LO COOLER", "LO COOLER IN", "RETURN"}, {"CENTRAL COOLER", "COOLER IN", "SUCTION MAIN"}} {
			k := slices.IndexFunc(c.Runs, func(r study.Run) bool { return r.Run == way[0] })
			loss := float64(c.Runs[k].PipeLoss + c.Runs[k].FittingLoss)
			if d := head[way[1]] - head[way[2]] - loss; !(-1e-6 < d && d < 1e-6) {
				t.Errorf("%s: %s loses %g m, heads differ by %g m", c.Condition, way[0], loss, head[way[1]]-head[way[2]])
			}
			sum := 0.0
			for _, f := range c.Fittings {
				if f.Run == way[0] {
					sum += float64(f.Loss)
				}
			}
			if d := sum - float64(c.Runs[k].FittingLoss); !(-1e-6 < d && d < 1e-6) {
				t.Errorf("%s: fittings of %s add up to %g m, not %g m", c.Condition, way[0], sum, float64(c.Runs[k].FittingLoss))
			}
		}
	}
}

// Where every limit is met the exit code is 0; a job of one condition of the demo.
func TestEveryLimitMet(t *testing.T) {
	code, out, stderr := brinehead("check", seawater, "--condition", "Loaded,  TROPICS")
	if code != exitMet || !strings.HasPrefix(out, "EVERY LIMIT MET\n") || stderr != "" {
		t.Errorf("exit code %d\n%s%s", code, out, stderr)
	}
}

// A missing NPSH required, or a condition without a solution, is not a pass.
func TestUnknownIsNoPass(t *testing.T) {
	folder := copyJob(t, seawater, [3]string{"pump_curves.csv", "npshr [m]", "power [kW]"})
	code, out, stderr := brinehead("check", folder, "--condition", "loaded, tropics")
	if code != exitNotMet || !strings.Contains(out, "NOT JUDGED") || !strings.Contains(out, "the pump sheet gives no NPSH required: NPSH margin of P1, P2;") {
		t.Errorf("exit code %d\n%s%s", code, out, stderr)
	}
	folder = copyJob(t, seawater,
		[3]string{"conditions.csv", "HIGH SUCTION state", "PUMP 1 DELIVERY state"}, [3]string{"conditions.csv", "LOW SUCTION state", "PUMP 1 SUCTION state"},
		[3]string{"conditions.csv", "shut,open", "shut,shut"})
	code, out, stderr = brinehead("check", folder, "--condition", "loaded, tropics")
	if code != exitNotMet || !strings.Contains(strings.Join(strings.Fields(out), " "), "no path to any sea, overboard or tank point from SUCTION 1, DELIVERY 1") {
		t.Errorf("exit code %d\n%s%s", code, out, stderr)
	}
}

// Bad input and bad command lines: exit code 2, one clear message on stderr, nothing on stdout, nothing written.
func TestRefusals(t *testing.T) {
	bad := copyJob(t, seawater, [3]string{"runs.csv", "CROSSOVER,7.5,", "CROSSOVER,-7.5,"}, [3]string{"points.csv", "chests\n", "chests\nX,junction,O.5,,\n"})
	full := t.TempDir()
	file := filepath.Join(full, "file")
	if err := os.WriteFile(file, nil, 0o644); err != nil {
		t.Fatal(err)
	}
	for want, args := range map[string][]string{
		"check needs the job folder":                        {"check"},
		"and nothing else":                                  {"check", seawater, freshwater},
		"found no such folder, want a folder of tables":     {"check", filepath.Join(full, "nowhere")},
		"found a file, want a folder of tables":             {"check", file},
		`format: found "yaml", want one of text, json, csv`: {"check", seawater, "--format", "yaml"},
		`units: found "furlongs", want one of metric, us`:   {"check", seawater, "--units", "furlongs"},
		"unknown flag: --frmat":                             {"check", seawater, "--frmat", "json"},
		`unknown command "chekc"`:                           {"chekc"},
		`nearest is "ballast, tropics"`:                     {"check", seawater, "--condition", "balast, tropics"},
		`points.csv:6:12: elevation [m]: found "O.5", want a number, at least -100, at most 200` + "\n" +
			`runs.csv:3:33: length [m]: found "-7.5", want at least 0, at most 100000` + "\n": {"check", bad, "--out", filepath.Join(full, "out")},
		"change folder: found no table": {"check", seawater, "--change", full},
	} {
		code, out, stderr := brinehead(args...)
		if code != exitInput || out != "" || !strings.Contains(stderr, want) {
			t.Errorf("%v: exit code %d\nstdout %q\nstderr %q\nwant %q", args, code, out, stderr, want)
		}
	}
	if _, err := os.Stat(filepath.Join(full, "out")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("a refused job left a folder behind: %v", err)
	}
}

func TestExitCodes(t *testing.T) {
	stuck := &study.NoSolution{Condition: "ballast", Err: &hydraulics.NotConverged{Rounds: 200, Step: 1e-3, Where: "R1"}}
	for code, err := range map[int]error{
		exitMet: nil, exitNotMet: fmt.Errorf("check: %w", errNotMet), exitInput: job.Faults{{Found: "x", Want: "y"}}, exitNotConverged: stuck,
	} {
		if got := exitCode(err); got != code {
			t.Errorf("%v: exit code %d, want %d", err, got, code)
		}
	}
	if want := "condition ballast: no convergence in 200 rounds: the flow in R1 still moves by 3.6 m3/h a round"; stuck.Error() != want {
		t.Errorf("%q, want %q", stuck.Error(), want)
	}
	if got := exitCode(errors.New("disk full")); got != exitInput {
		t.Errorf("any other error: %d", got)
	}
}

// --out writes tables and plots, twice the same bytes, and leaves nothing else; it never writes among the tables it read.
func TestOutFolder(t *testing.T) {
	out := filepath.Join(t.TempDir(), "deep", "out")
	read := func() map[string]string {
		if code, _, stderr := brinehead("check", seawater, "--out", out); code != exitNotMet || stderr != "" {
			t.Fatalf("exit code %d, %s", code, stderr)
		}
		files := map[string]string{}
		entries, err := os.ReadDir(out)
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range entries {
			content, err := os.ReadFile(filepath.Join(out, e.Name()))
			if err != nil {
				t.Fatal(err)
			}
			files[e.Name()] = string(content)
		}
		return files
	}
	first, second := read(), read()
	if len(first) != 4+7*6+2 {
		t.Errorf("%d files, want 4 tables, 6 plots of each of 7 conditions, and the report twice", len(first))
	}
	for name, content := range first {
		if content == "" || content != second[name] {
			t.Errorf("%s: empty, or not the same bytes twice", name)
		}
	}
	for name, head := range map[string]string{
		"duty.csv":                       "condition,pump,running,flow [m3/h],",
		"losses.csv":                     "condition,run,tag,element,flow [m3/h],",
		"findings.csv":                   "condition,limit,on,value,limit value,unit,verdict,reason,source",
		"ballast-tropics-head.svg":       "<?xml",
		"ballast-tropics-schematic.svg":  "<?xml",
		"ballast-tropics-npsh.png":       "\x89PNG",
		"river-port-high-chest-head.png": "\x89PNG",
	} {
		if !strings.HasPrefix(first[name], head) {
			t.Errorf("%s begins with %.40q, want %q", name, first[name], head)
		}
	}
	folder := copyJob(t, seawater)
	code, stdout, stderr := brinehead("check", folder, "--out", folder)
	if code != exitInput || stdout != "" || !strings.Contains(stderr, "results are not written into a folder of tables") {
		t.Errorf("--out into the job: exit code %d, %s", code, stderr)
	}
}

// A file in the way of the out folder, or a folder that cannot be written: said in words, nothing half done.
func TestOutFolderInTheWay(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(file, []byte("mine"), 0o644); err != nil {
		t.Fatal(err)
	}
	if code, out, stderr := brinehead("check", seawater, "--out", file); code != exitInput || out != "" || !strings.Contains(stderr, "the folder cannot be made") {
		t.Errorf("exit code %d, %q, %q", code, out, stderr)
	}
	if content, err := os.ReadFile(file); err != nil || string(content) != "mine" {
		t.Errorf("the file was touched: %q, %v", content, err)
	}
	out := t.TempDir() // a folder that stands where a table must go
	if err := os.MkdirAll(filepath.Join(out, "losses.csv", "inside"), 0o777); err != nil {
		t.Fatal(err)
	}
	if code, stdout, stderr := brinehead("check", seawater, "--out", out); code != exitInput || stdout != "" || !strings.Contains(stderr, "cannot be written") {
		t.Errorf("exit code %d, %q, %q", code, stdout, stderr)
	}
	entries, err := os.ReadDir(out)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if strings.HasPrefix(e.Name(), ".") {
			t.Errorf("left behind: %s", e.Name())
		}
	}
}

// A change folder: a finer strainer takes flow and NPSH.
func TestChangeFolder(t *testing.T) {
	before, _ := checkJSON(t, seawater, "--condition", "ballast, tropics")
	after, _ := checkJSON(t, seawater, "--condition", "ballast, tropics", "--change", filepath.Join(testdata, "changes", "fine-strainer"))
	a, b := before.Conditions[0].Pumps[0], after.Conditions[0].Pumps[0]
	if !(b.Flow < a.Flow && b.NPSHAvailable < a.NPSHAvailable-0.5) {
		t.Errorf("before %+v, after %+v", a, b)
	}
}

// US customary units are the same figures turned: 1 ft is 0.3048 m, 1 gal 3.785411784 l.
func TestUSUnits(t *testing.T) {
	_, metric, _ := brinehead("check", freshwater, "--format", "csv")
	_, us, _ := brinehead("check", freshwater, "--format", "csv", "--units", "us")
	m, u := strings.Split(strings.Split(metric, "\n")[1], ","), strings.Split(strings.Split(us, "\n")[1], ",")
	var flow, gpm, head, feet float64
	for text, to := range map[string]*float64{m[len(m)-9]: &flow, u[len(u)-9]: &gpm, m[len(m)-8]: &head, u[len(u)-8]: &feet} {
		if _, err := fmt.Sscan(text, to); err != nil {
			t.Fatalf("%q: %v", text, err)
		}
	}
	if r := gpm * 3.785411784e-3 * 60 / flow; !(0.99999 < r && r < 1.00001) {
		t.Errorf("%g m3/h, %g gpm", flow, gpm)
	}
	if r := feet * 0.3048 / head; !(0.99999 < r && r < 1.00001) {
		t.Errorf("%g m, %g ft", head, feet)
	}
	if !strings.Contains(us, "flow [gpm (US)],head [ft]") {
		t.Errorf("%.200s", us)
	}
}

// What the whole command costs, without plots; starting the process is not in it.
func BenchmarkCheckJSON(b *testing.B) {
	for b.Loop() {
		if code, _, _ := brinehead("check", seawater, "--format", "json"); code != exitNotMet {
			b.Fatal(code)
		}
	}
}

// One condition of the demo, once read: its plant made of the tables, and its network solved from nothing.
func BenchmarkDemoCondition(b *testing.B) {
	j, err := job.Read("seawater", os.DirFS(seawater), nil)
	if err != nil {
		b.Fatal(err)
	}
	const condition = "ballast, tropics, fouled strainer"
	b.Run("build", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			if _, err := j.Build(condition); err != nil {
				b.Fatal(err)
			}
		}
	})
	cold := func(p *job.Case) func(b *testing.B) { // the solver made anew each time
		return func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := p.Solve(); err != nil {
					b.Fatal(err)
				}
			}
		}
	}
	warm := func(p, near *job.Case) func(b *testing.B) { // a solver at hand, started from a neighbouring condition
		return func(b *testing.B) {
			from, err := near.Solve()
			if err != nil {
				b.Fatal(err)
			}
			if _, err := p.Solve(); err != nil {
				b.Fatal(err)
			}
			solver, err := hydraulics.NewSolver(&p.Network)
			if err != nil {
				b.Fatal(err)
			}
			var out hydraulics.Solution
			b.ReportAllocs()
			for b.Loop() {
				solver.StartFrom(&from.Solution)
				if err := solver.Solve(&out); err != nil {
					b.Fatal(err)
				}
			}
		}
	}
	built := func(name string) *job.Case {
		p, err := j.Build(name)
		if err != nil {
			b.Fatal(err)
		}
		return p
	}
	b.Run("solve", cold(built(condition)))
	b.Run("warm", warm(built(condition), built("ballast, tropics")))
	plain := func(name string) *job.Case { // the same without its two tees
		p := built(name)
		p.Network.Tees = nil
		return p
	}
	b.Run("solve without tees", cold(plain(condition)))
	b.Run("warm without tees", warm(plain(condition), plain("ballast, tropics")))
}
