package main

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"brinehead/cmd/brinehead/internal/study"
)

// writeJob writes a job folder of the test's own.
func writeJob(t testing.TB, tables map[string]string) string {
	t.Helper()
	folder := t.TempDir()
	for name, text := range tables {
		if err := os.WriteFile(filepath.Join(folder, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return folder
}

// lift is a pump between a sea and an overboard, the discharge rising to a high point; more columns as the test needs.
func lift(high, siphon string) map[string]string {
	return map[string]string{
		"points.csv":      "point,kind,elevation [m],siphon\nSEA,sea,1,\nS,junction,2,\nD,junction,3,\nOUT,overboard,6," + siphon + "\n",
		"runs.csv":        "run,from,to,length [m],standard,size,material,high point [m]\nSUCTION,SEA,S,6,EN 10220 normal wall,DN200,galvanised steel,\nDISCHARGE,D,OUT,160,EN 10220 normal wall,DN200,galvanised steel," + high + "\n",
		"fittings.csv":    "run,fitting,tag,opening [%]\nSUCTION,basket strainer,STR1,\nDISCHARGE,gate valve,V1,\nDISCHARGE,elbow,,\nDISCHARGE,exit,,\n",
		"pumps.csv":       "pump,from,to,curve\nP1,S,D,C1\n",
		"pump_curves.csv": "curve,flow [m3/h],head [m],efficiency [%],npshr [m]\nC1,0,20,0,1.5\nC1,100,19,55,1.7\nC1,200,16,76,2.2\nC1,300,11,74,3.2\nC1,360,7,60,4.4\n",
		"conditions.csv":  "condition,water,temperature [degC],draught [m]\nballast,sea,20,5\n",
		"limits.csv":      "limit,on,value,unit\nNPSH margin,*,0.5,m\nleast share of best-efficiency flow,*,10,%\ngreatest share of best-efficiency flow,*,200,%\n",
	}
}

func only(t *testing.T, job string) study.Condition {
	t.Helper()
	answer, _ := checkJSON(t, job)
	if len(answer.Conditions) != 1 {
		t.Fatalf("%d conditions", len(answer.Conditions))
	}
	return answer.Conditions[0]
}

func runNamed(t *testing.T, c study.Condition, name string) study.Run {
	t.Helper()
	for _, r := range c.Runs {
		if r.Run == name {
			return r
		}
	}
	t.Fatalf("no run %s", name)
	return study.Run{}
}

// Names alone: sizes, materials and fittings come from the catalogue, each with its source, and a row's own figure goes
// before the catalogue's.
func TestNamesFromTheCatalogue(t *testing.T) {
	job := writeJob(t, lift("", ""))
	answer, _ := checkJSON(t, job)
	text := ""
	for _, s := range answer.Supplied {
		text += s.On + " " + s.What + " " + s.Figure + " [" + s.Source + "]\n"
	}
	for _, want := range []string{
		"SUCTION bore 206.5 mm [EN 10220 DN200 normal wall, 219.1 x 6.3 mm; ", // 219.1 - 2 x 6.3
		"SUCTION roughness 0.15 mm [galvanised steel, in service: ",
		"STR1 loss coefficient k 1.588", "V1 loss coefficient k 0.11", "DISCHARGE: elbow loss coefficient k 0.2", "DISCHARGE: exit loss coefficient k 1 ",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("no %q in\n%s", want, text)
		}
	}
	tables := lift("", "")
	tables["runs.csv"] = strings.ReplaceAll(tables["runs.csv"], "material,high", "roughness [mm],high")
	tables["runs.csv"] = strings.ReplaceAll(tables["runs.csv"], "galvanised steel", "1.5")
	if rough, smooth := runNamed(t, only(t, writeJob(t, tables)), "DISCHARGE"), runNamed(t, answer.Conditions[0], "DISCHARGE"); !(rough.FrictionFactor > 1.5*smooth.FrictionFactor) {
		t.Errorf("rough %+v, smooth %+v", rough, smooth)
	}
}

// An orifice plate goes either way: from its hole to its loss, and from the loss wanted to the hole to be made.
func TestOrificeBothWays(t *testing.T) {
	supplied := func(column, value string) string {
		tables := lift("", "")
		tables["fittings.csv"] = "run,fitting,tag," + column + "\nSUCTION,basket strainer,STR1,\nDISCHARGE,orifice plate,RO1," + value + "\n"
		answer, _ := checkJSON(t, writeJob(t, tables))
		for _, s := range answer.Supplied {
			if s.On == "RO1" {
				return s.Figure
			}
		}
		return ""
	}
	if k := supplied("hole [mm]", "120"); k != "k 13.73" {
		t.Errorf("hole of 120 mm: %q", k)
	}
	if hole := supplied("k", "13.73"); hole != "120.0 mm" {
		t.Errorf("k of 13.73: %q", hole)
	}
}

// A valve's opening follows its table, opening 0 shuts the run.
func TestOpening(t *testing.T) {
	flow := func(opening string) float64 {
		tables := lift("", "")
		tables["fittings.csv"] = strings.ReplaceAll(tables["fittings.csv"], "gate valve,V1,", "gate valve,V1,"+opening)
		return float64(runNamed(t, only(t, writeJob(t, tables)), "DISCHARGE").Flow)
	}
	wide, half, quarter, shut := flow("100"), flow("50"), flow("25"), flow("0")
	if !(wide > half && half > quarter && quarter > 50 && shut == 0) {
		t.Errorf("flows %g, %g, %g, %g m3/h", wide, half, quarter, shut)
	}
}

// A siphon is counted on while the pressure at its top stays above the rule; else, or where the table refuses it, the pump
// lifts to the high point. By hand: the head at the overboard is 6 m, so that at 8 m and v the pressure is
// 101325 - rho g (8 - 6 + v2/2g).
func TestSiphon(t *testing.T) {
	low := only(t, writeJob(t, lift("", "")))
	with := only(t, writeJob(t, lift("8", "")))
	r := runNamed(t, with, "DISCHARGE")
	rho, v := float64(with.Water.Density), float64(r.Velocity)
	want := (101325 - rho*9.80665*(8-6+v*v/(2*9.80665))) / 1e5
	if !(math.Abs(float64(r.LowestPressure)-want) < 1e-6) || r.Flow != runNamed(t, low, "DISCHARGE").Flow {
		t.Errorf("lowest pressure %g bar, by hand %g; flow %g", float64(r.LowestPressure), want, float64(r.Flow))
	}
	if margin := (want*1e5 - float64(with.Water.VapourPressure)) / (rho * 9.80665); !(math.Abs(float64(r.VapourMargin)-margin) < 1e-6) {
		t.Errorf("margin %g m, by hand %g m", float64(r.VapourMargin), margin)
	}
	if notes := strings.Join(with.Notes, "\n"); !strings.Contains(notes, "DISCHARGE rises to 8.0 m, 2.0 m over the head of OUT") || !strings.Contains(notes, "the credit is taken") {
		t.Errorf("%s", notes)
	}
	refused := only(t, writeJob(t, lift("8", "no")))
	if q := runNamed(t, refused, "DISCHARGE").Flow; !(q < r.Flow-5) {
		t.Errorf("without credit %g m3/h, with it %g", float64(q), float64(r.Flow))
	}
	broken := only(t, writeJob(t, lift("14", ""))) // 8 m of siphon would leave 0.2 bar
	refused = only(t, writeJob(t, lift("14", "no")))
	if a, b := runNamed(t, broken, "DISCHARGE").Flow, runNamed(t, refused, "DISCHARGE").Flow; a != b {
		t.Errorf("broken siphon %g m3/h, no credit %g", float64(a), float64(b))
	}
	if notes := strings.Join(broken.Notes, "\n"); !strings.Contains(notes, "no credit is taken") {
		t.Errorf("%s", notes)
	}
	tables := lift("8", "")
	tables["limits.csv"] += "minimum absolute pressure,DISCHARGE,0.9,bar\n"
	found := false
	for _, f := range only(t, writeJob(t, tables)).Findings {
		if f.Limit == "minimum absolute pressure" {
			found = true
			if f.Verdict != study.NotMet || f.On != "DISCHARGE" {
				t.Errorf("%+v", f)
			}
		}
	}
	if !found {
		t.Error("the limit was not judged")
	}
}

// A tee named in points.csv: the losses of its legs follow the flows, and along every leg the heads add up.
func TestTeeInAJob(t *testing.T) {
	answer, _ := checkJSON(t, seawater, "--condition", "loaded, North Sea winter")
	c := answer.Conditions[0]
	head := map[string]float64{}
	for _, p := range c.Points {
		head[p.Point] = float64(p.Head)
	}
	for _, way := range [][3]string{{"CROSS LINE", "HEADER 1", "HEADER 2"}, {"COOLER 1", "HEADER 1", "COOLERS OUT"}, {"COOLER 2", "HEADER 2", "COOLERS OUT"}, {"PUMP 1 DELIVERY", "DELIVERY 1", "HEADER 1"}} {
		r := runNamed(t, c, way[0])
		if got, want := head[way[1]]-head[way[2]], float64(r.PipeLoss+r.FittingLoss+r.TeeLoss); !(math.Abs(got-want) < 1e-6) {
			t.Errorf("%s: heads differ by %g m, losses %g m", way[0], got, want)
		}
	}
	if r := runNamed(t, c, "CROSS LINE"); !(r.TeeLoss > 0.1) { // the stream turns into the branch and out of it
		t.Errorf("%+v", r)
	}
}

// A non-return valve that holds in every condition what would run backwards stands the wrong way round.
func TestCheckValveTheWrongWay(t *testing.T) {
	tables := lift("", "")
	tables["runs.csv"] = strings.ReplaceAll(tables["runs.csv"], "DISCHARGE,D,OUT", "DISCHARGE,OUT,D")
	tables["fittings.csv"] = strings.ReplaceAll(tables["fittings.csv"], "gate valve", "swing check valve")
	code, out, stderr := brinehead("check", writeJob(t, tables))
	want := `runs.csv:3:1: run: found "DISCHARGE", want its non-return valve the other way round: in every condition water would run from D to OUT`
	if code != exitInput || out != "" || !strings.HasPrefix(stderr, want) {
		t.Errorf("exit code %d, %q, %q", code, out, stderr)
	}
	tables = lift("", "") // the right way round it says nothing
	tables["fittings.csv"] = strings.ReplaceAll(tables["fittings.csv"], "gate valve", "swing check valve")
	if code, _, stderr := brinehead("check", writeJob(t, tables)); code > exitNotMet {
		t.Errorf("exit code %d, %s", code, stderr)
	}
}

// Tees that are none, siphons and high points in the wrong place: each a clear line.
func TestLayoutRefusals(t *testing.T) {
	for want, spoil := range map[string][3]string{
		`found "SUCTION DISCHARGE", want two of the runs that meet in S, where just three do (1 here)`: {"points.csv", "siphon\nSEA,sea,1,\nS,junction,2,", "siphon,straight\nSEA,sea,1,,\nS,junction,2,,SUCTION DISCHARGE"},
		"points.csv:2:11: siphon: found a siphon at a sea point, want it at an overboard only":         {"points.csv", "SEA,sea,1,", "SEA,sea,1,no"},
		`high point [m]: found 4 m, want at least the elevations of the run's ends, 3 and 6 m`:         {"runs.csv", "steel,\n", "steel,4\n"},
	} {
		tables := lift("", "")
		if strings.Contains(spoil[2], "straight") {
			tables["points.csv"] = "point,kind,elevation [m],straight\nSEA,sea,1,\nS,junction,2,SUCTION DISCHARGE\nD,junction,3,\nOUT,overboard,6,\n"
		} else {
			tables[spoil[0]] = strings.ReplaceAll(tables[spoil[0]], spoil[1], spoil[2])
		}
		if code, _, stderr := brinehead("check", writeJob(t, tables)); code != exitInput || !strings.Contains(stderr, want) {
			t.Errorf("exit code %d, %s; want %q", code, stderr, want)
		}
	}
}

// The leak of an idle pump's non-return valve runs back and is told.
func TestLeakInAJob(t *testing.T) {
	folder := copyJob(t, seawater, [3]string{"pumps.csv", "motor [kW]", "motor [kW],leak [m3/h]"}, [3]string{"pumps.csv", ",45,", ",45,12,"})
	answer, _ := checkJSON(t, folder, "--condition", "loaded, North Sea winter")
	c := answer.Conditions[0]
	p := c.Pumps[1]
	if p.Running || !(p.Flow < -5) || p.Head.Known() {
		t.Errorf("%+v", p)
	}
	// 12 m3/h at 1 bar: by the heads at the pump's ends.
	head := map[string]float64{}
	for _, q := range c.Points {
		head[q.Point] = float64(q.Head)
	}
	if want := -12 * math.Sqrt((head["DELIVERY 2"]-head["SUCTION 2"])*1000*9.80665/1e5); !(math.Abs(float64(p.Flow)-want) < 1e-3) {
		t.Errorf("leak %g m3/h, by hand %g", float64(p.Flow), want)
	}
	if notes := strings.Join(c.Notes, "\n"); !strings.Contains(notes, "P2 stands idle, and ") {
		t.Errorf("%s", notes)
	}
	if _, out, _ := brinehead("check", folder, "--condition", "loaded, North Sea winter"); !strings.Contains(out, "leaks ") {
		t.Errorf("%s", out)
	}
}

// A curve that droops towards rest, against a static head: both meetings are told, the stable one is reported.
func TestDroopingCurveInAJob(t *testing.T) {
	tables := lift("", "")
	tables["pump_curves.csv"] = "curve,flow [m3/h],head [m],efficiency [%],npshr [m]\nC1,0,17,0,1.5\nC1,60,18.2,35,1.6\nC1,120,18.4,60,1.8\nC1,200,16.4,76,2.2\nC1,300,11,74,3.2\nC1,360,7,60,4.4\n"
	tables["points.csv"] = strings.ReplaceAll(tables["points.csv"], "overboard,6,", "overboard,22.4,")
	c := only(t, writeJob(t, tables))
	x := c.Pumps[0].Crossings
	if len(x) != 2 || x[0].Stable || !x[1].Stable || !(x[0].Flow < 60) || !(math.Abs(float64(x[1].Flow-c.Pumps[0].Flow)) < 1e-3) {
		t.Errorf("%+v at %+v", x, c.Pumps[0])
	}
	if notes := strings.Join(c.Notes, "\n"); !strings.Contains(notes, "the curve of P1 droops and meets the system elsewhere too: ") || !strings.Contains(notes, "(unstable)") {
		t.Errorf("%s", notes)
	}
}

// A three-way valve: one opening sets both ports, the flows divide and add up over the stroke, and the orifice sized for the
// bypass, put into the job, makes the flow on bypass that of the cooler.
func TestThreeWayValve(t *testing.T) {
	code, out, stderr := brinehead("check", freshwater, "--valve", "V30", "--condition", "sea passage, tropics", "--format", "json")
	var answer study.ValveTable
	if err := json.Unmarshal([]byte(out), &answer); err != nil || code != exitMet || stderr != "" {
		t.Fatalf("exit code %d, %v, %s", code, err, stderr)
	}
	c := answer.Conditions[0]
	if len(c.Rows) != 11 || c.Rows[0].A != 0 || c.Rows[10].B != 0 || c.Orifice == nil || answer.RunB != "BYPASS" {
		t.Fatalf("%+v", answer)
	}
	for k, r := range c.Rows {
		if !(math.Abs(float64(r.A+r.B-r.Total)) < 1e-5) || !(math.Abs(float64(r.Total-r.Pumps[0].Flow)) < 1e-5) {
			t.Errorf("%+v: flows do not add up", r)
		}
		if k > 0 && !(r.A > c.Rows[k-1].A && r.B < c.Rows[k-1].B) {
			t.Errorf("%+v after %+v", r, c.Rows[k-1])
		}
	}
	// With the valve at 100 % the check itself gives the same flow.
	check, _ := checkJSON(t, freshwater, "--condition", "sea passage, tropics")
	if a, b := float64(check.Conditions[0].Pumps[0].Flow), float64(c.Rows[10].Total); !(math.Abs(a-b) < 1e-6) {
		t.Errorf("check %g m3/h, valve table %g", a, b)
	}
	folder := copyJob(t, freshwater, [3]string{"fittings.csv", "BYPASS,throttling disc,,1,12,", fmt.Sprintf("BYPASS,throttling disc,,1,%.9f,", 12+float64(c.Orifice.K))})
	_, out, _ = brinehead("check", folder, "--valve", "V30", "--condition", "sea passage, tropics", "--format", "json")
	var matched study.ValveTable
	if err := json.Unmarshal([]byte(out), &matched); err != nil {
		t.Fatal(err)
	}
	if rows := matched.Conditions[0].Rows; !(math.Abs(float64(rows[0].Total-rows[10].Total)) < 1e-4) {
		t.Errorf("on bypass %g m3/h, through the cooler %g", float64(rows[0].Total), float64(rows[10].Total))
	}
	for _, format := range []string{"text", "csv"} {
		code, out, stderr := brinehead("check", freshwater, "--valve", "v30", "--format", format, "--units", "us")
		if code != exitMet || stderr != "" || widest(out) > 80 && format == "text" {
			t.Errorf("%s: exit code %d, %s\n%s", format, code, stderr, out)
		}
	}
	for want, args := range map[string][]string{
		`valve: found "V31", want the tag of a three-way valve`: {"check", freshwater, "--valve", "V31"},
		`valve: found "CLR", want the tag of a three-way valve`: {"check", freshwater, "--valve", "CLR"},
	} {
		if code, _, stderr := brinehead(args...); code != exitInput || !strings.Contains(stderr, want) {
			t.Errorf("exit code %d, %s", code, stderr)
		}
	}
	tables := map[string]string{
		"one port": "CENTRAL COOLER,three-way valve port A,V30,1,,620,,,,\n",
		"no kv":    "CENTRAL COOLER,three-way valve port A,V30,1,5,,,,,\nBYPASS,three-way valve port B,V30,1,,620,,,,\n",
	}
	for name, want := range map[string]string{"one port": "want the valve's other port", "no kv": "the kv [m3/h] of the port fully open"} {
		head := "run,fitting,tag,count,k,kv [m3/h],rated flow [m3/h],rated drop [bar],exponent,heat [kW]\nLO COOLER,elbow,LOC,,,,,,,\nAIR COOLER,elbow,CAC,,,,,,,\n"
		folder := copyJob(t, freshwater)
		if err := os.WriteFile(filepath.Join(folder, "fittings.csv"), []byte(head+tables[name]), 0o644); err != nil {
			t.Fatal(err)
		}
		if code, _, stderr := brinehead("check", folder); code != exitInput || !strings.Contains(stderr, want) {
			t.Errorf("%s: exit code %d, %s", name, code, stderr)
		}
	}
}

// One core or many, twice or once: the same bytes.
func TestSameBytesOnAnyCores(t *testing.T) {
	_, want, _ := brinehead("check", seawater, "--format", "json")
	for _, cores := range []int{1, 2, 7} {
		before := runtime.GOMAXPROCS(cores)
		_, got, _ := brinehead("check", seawater, "--format", "json")
		runtime.GOMAXPROCS(before)
		if got != want {
			t.Errorf("other bytes on %d cores", cores)
		}
	}
}

// What is odd of a whole condition is said: no pump running, a point near boiling, two tanks on one loop, valves that cut a
// point off.
func TestWarnings(t *testing.T) {
	notes := func(folder, condition string) string {
		answer, _ := checkJSON(t, folder, "--condition", condition)
		return strings.Join(answer.Conditions[0].Notes, "\n")
	}
	idle := copyJob(t, freshwater, [3]string{"conditions.csv", "36,P1,15.8,1250", "36,none,15.8,1250"})
	if got := notes(idle, "slow steaming"); !strings.Contains(got, "no pump runs in this condition") {
		t.Errorf("%s", got)
	}
	hot := copyJob(t, freshwater, [3]string{"conditions.csv", `"tank low",fresh,45,P1,15.3`, `"tank low",fresh,97,P1,2.5`}, [3]string{"points.csv", "HEADER TANK,tank,15.2", "HEADER TANK,tank,2.5"})
	if got := notes(hot, "tank low"); !strings.Contains(got, "SUCTION 1 is near boiling: ") {
		t.Errorf("%s", got)
	}
	two := copyJob(t, freshwater, [3]string{"points.csv", "RETURN,junction,5.0,,", "RETURN,tank,5.0,14,"})
	if got := notes(two, "both pumps"); !strings.Contains(got, "more than one tank holds the circuit") {
		t.Errorf("%s", got)
	}
	cut := copyJob(t, freshwater, [3]string{"conditions.csv", "V30 opening [%]", "V30 opening [%],LO COOLER state,ENGINE RETURN state"}, [3]string{"conditions.csv", ",100,", ",100,,,"}, [3]string{"conditions.csv", ",50,", ",50,,,"})
	if got := notes(cut, "tank low"); strings.Contains(got, "cut off") {
		t.Errorf("%s", got)
	}
	cut = copyJob(t, cut, [3]string{"conditions.csv", ",100,,,", ",100,shut,shut,"}, [3]string{"runs.csv", "AIR COOLER,AIR COOLER IN,RETURN", "AIR COOLER,AIR COOLER IN,COOLER IN"})
	if got := notes(cut, "tank low"); !strings.Contains(got, "RETURN is cut off by shut runs: its pressure is not known") {
		t.Errorf("%s", got)
	}
}

// Two fresh-water loops under one header tank, joined by a three-way mixing valve and a return: what the hot loop takes from
// the cold one it gives back, the tank passes nothing, and every pressure at rest is that of the column under the tank.
func TestLoopsJoinedByAMixingValve(t *testing.T) {
	tables := map[string]string{
		"points.csv": "point,kind,elevation [m],level [m]\nTANK,tank,14,14.5\nLT IN,junction,3,\nLT OUT,junction,3,\nLT P,junction,3,\nHT IN,junction,4,\nHT OUT,junction,4,\nMIX,junction,5,\nENGINE,junction,6,\n",
		"runs.csv": "run,from,to,length [m],bore [mm],roughness [mm],temperature [degC]\nTANK LINE,TANK,LT IN,12,50,0.1,\nLT COOLER,LT P,LT OUT,10,150,0.1,\nLT BACK,LT OUT,LT IN,20,150,0.1,\n" +
			"LT SUCTION,LT IN,LT OUT,30,80,0.1,\nHT ENGINE,HT OUT,ENGINE,10,125,0.1,80\nHT CIRCULATION,ENGINE,MIX,8,125,0.1,80\nLT TO HT,LT OUT,MIX,6,80,0.1,\nHT SUCTION,MIX,HT IN,3,125,0.1,75\nHT TO LT,ENGINE,LT IN,6,80,0.1,80\n",
		"fittings.csv":    "run,fitting,tag,kv [m3/h],k,opening [%]\nHT CIRCULATION,three-way valve port A,V40,180,,70\nLT TO HT,three-way valve port B,V40,180,,\nLT COOLER,cooler,,,12,\nHT ENGINE,engine,,,15,\n",
		"pumps.csv":       "pump,from,to,curve\nLT,LT IN,LT P,C\nHT,HT IN,HT OUT,C\n",
		"pump_curves.csv": "curve,flow [m3/h],head [m],efficiency [%],npshr [m]\nC,0,28,0,2\nC,60,26,60,2\nC,120,20,75,2.5\nC,160,13,68,3.4\nC,190,6,50,4.5\n",
		"conditions.csv":  "condition,water,temperature [degC],running\nrunning,fresh,40,\nat rest,fresh,40,none\n",
	}
	answer, _ := checkJSON(t, writeJob(t, tables))
	c := answer.Conditions[0]
	in, out := runNamed(t, c, "LT TO HT"), runNamed(t, c, "HT TO LT")
	if !(in.Flow > 5) || !(math.Abs(float64(in.Flow-out.Flow)) < 1e-6) {
		t.Errorf("to the hot loop %g m3/h, back %g", float64(in.Flow), float64(out.Flow))
	}
	if tank := runNamed(t, c, "TANK LINE"); !(math.Abs(float64(tank.Flow)) < 1e-9) {
		t.Errorf("the tank passes %g m3/h", float64(tank.Flow))
	}
	if p := c.Pumps[1]; !(math.Abs(float64(p.Flow-runNamed(t, c, "HT CIRCULATION").Flow-out.Flow)) < 1e-6) || !(p.NPSHMargin > 5) {
		t.Errorf("%+v", p)
	}
	// At rest, with the loops as cold as the rest: 14.5 m of water over each point.
	for old, new := range map[string]string{",80\n": ",\n", ",75\n": ",\n"} {
		tables["runs.csv"] = strings.ReplaceAll(tables["runs.csv"], old, new)
	}
	answer, _ = checkJSON(t, writeJob(t, tables))
	rest := answer.Conditions[1]
	for i, p := range rest.Points {
		z := []float64{14, 3, 3, 3, 4, 4, 5, 6}[i]
		if want := (14.5 - z) * float64(rest.Water.Density) * 9.80665 / 1e5; !(math.Abs(float64(p.GaugePressure)-want) < 1e-6) {
			t.Errorf("%s at rest: %g bar, by hand %g", p.Point, float64(p.GaugePressure), want)
		}
	}
}

// A limit on flow asks how much runs, not which way the run is written.
func TestFlowLimitWhicheverWay(t *testing.T) {
	tables := lift("", "")
	tables["runs.csv"] = strings.ReplaceAll(tables["runs.csv"], "SUCTION,SEA,S,", "SUCTION,S,SEA,")
	tables["limits.csv"] += "minimum flow,STR1,100,m3/h\nminimum flow,SUCTION,100,m3/h\n"
	judged := 0
	for _, f := range only(t, writeJob(t, tables)).Findings {
		if f.Limit == "minimum flow" {
			judged++
			if f.Verdict != study.Met || !(f.Value > 100) {
				t.Errorf("%+v", f)
			}
		}
	}
	if judged != 2 {
		t.Errorf("%d limits judged", judged)
	}
}

// A high sea chest above the waterline harms nothing while its run is shut.
func TestDryInletBehindAShutRun(t *testing.T) {
	folder := copyJob(t, seawater, [3]string{"conditions.csv", `"ballast, tropics",sea,32,35.165,4.8`, `"ballast, tropics",sea,32,35.165,3.0`})
	if code, _, stderr := brinehead("check", folder, "--condition", "ballast, tropics"); code > exitNotMet || stderr != "" {
		t.Errorf("exit code %d, %s", code, stderr)
	}
	folder = copyJob(t, folder, [3]string{"conditions.csv", `35.165,3.0,P1 P2,shut,open`, `35.165,3.0,P1 P2,open,shut`})
	if code, _, stderr := brinehead("check", folder); code != exitInput || !strings.Contains(stderr, "a draught that covers the sea inlet HIGH CHEST at 3.1 m: it draws air") {
		t.Errorf("exit code %d, %s", code, stderr)
	}
}
