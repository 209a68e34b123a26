package main

import (
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

func suctionJSON(t *testing.T, args ...string) (*study.Suction, int) {
	t.Helper()
	code, out, stderr := brinehead(append([]string{"suction"}, append(args, "--format", "json")...)...)
	if stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	var answer study.Suction
	if err := json.Unmarshal([]byte(out), &answer); err != nil {
		t.Fatal(err)
	}
	return &answer, code
}

// The lines of every NPSH available add up to it, and the margin is that over the required.
func TestNPSHLinesAddUp(t *testing.T) {
	pumps := 0
	for _, job := range []string{seawater, freshwater} {
		answer, _ := suctionJSON(t, job)
		for _, c := range answer.Cases {
			for _, p := range c.Pumps {
				if !p.Flow.Known() {
					continue
				}
				pumps++
				sum := 0.0
				for _, l := range p.Lines {
					sum += float64(l.Head)
				}
				if !(math.Abs(sum-float64(p.Available)) < 1e-6) || !(math.Abs(float64(p.Available-p.Required-p.Margin)) < 1e-7) { // nine digits in JSON
					t.Errorf("%s, %s: lines %g m, available %g, margin %g", c.Condition, p.Pump, sum, float64(p.Available), float64(p.Margin))
				}
			}
		}
	}
	if pumps < 14 {
		t.Errorf("%d pumps", pumps)
	}
}

// The suction gauge at the pump's datum, by hand: p = (NPSHA - (patm - pv)/rho g) rho g less the velocity head, in 261 mm; and an alarm
// that keeps a fifth of the rise of the drop in hand, with the vacuum in mmHg.
func TestSuctionGaugeAndAlarm(t *testing.T) {
	const condition = "ballast, tropics, fouled strainer"
	answer, _ := suctionJSON(t, seawater, "--condition", condition, "--allowance", "20")
	checked, _ := checkJSON(t, seawater, "--condition", condition)
	p, w := answer.Cases[0].Pumps[0], checked.Conditions[0].Water
	density := float64(w.Density)
	v := float64(p.Flow) / 3600 / (math.Pi / 4 * 0.261 * 0.261)
	want := (float64(p.Available)*density*9.80665 - (101325 - float64(w.VapourPressure)) - density*v*v/2) / 1e5
	if got := float64(p.Gauge.Pressure); !(math.Abs(got-want) < 1e-5) || !(math.Abs(float64(p.Gauge.Vacuum)+got*1e5/133.322387415) < 1e-3) {
		t.Errorf("gauge %g bar, %g mmHg, by hand %g bar", got, float64(p.Gauge.Vacuum), want)
	}
	s := answer.Cases[0].Strainers[0]
	if want := float64(s.Clean.Drop) + 0.8*float64(s.Limit.Drop-s.Clean.Drop); !(math.Abs(float64(s.Alarm.Drop)-want) < 1e-6) {
		t.Errorf("alarm at %g bar, want %g", float64(s.Alarm.Drop), want)
	}
	higher := copyJob(t, seawater, [3]string{"pumps.csv", "design pressure [bar]", "design pressure [bar],suction gauge elevation [m]"}, [3]string{"pumps.csv", ",0.86,6\n", ",0.86,6,4.5\n"})
	up, _ := suctionJSON(t, higher, "--condition", condition)
	if got, want := float64(up.Cases[0].Pumps[0].Gauge.Pressure), float64(p.Gauge.Pressure)-2*density*9.80665e-5; !(math.Abs(got-want) < 1e-6) {
		t.Errorf("two metres higher the gauge shows %g bar, want %g", got, want)
	}
	idle, code := suctionJSON(t, copyJob(t, seawater, [3]string{"conditions.csv", "9.2,P1 P2,", "9.2,none,"}), "--condition", "loaded, tropics")
	if code != exitNotMet || len(idle.Cases[0].Pumps) != 0 {
		t.Errorf("no pump runs: exit code %d", code)
	}
}

// A strainer's limit put back into `check` as its blockage: the limit that governs is met to within 1e-6 m, and a little more blockage
// breaks it.
func TestStrainerLimitFedBack(t *testing.T) {
	answer, code := suctionJSON(t, seawater)
	if code != exitNotMet {
		t.Errorf("exit code %d", code)
	}
	governed := 0
	for _, c := range answer.Cases {
		for _, s := range c.Strainers {
			if s.Word != "" || s.Strainer != "STR1" {
				continue
			}
			limit, on, _ := strings.Cut(s.Governs, " of ")
			on, _, _ = strings.Cut(on, " [")
			for _, more := range []float64{0, 1e-4} {
				blockage := 100 * (float64(s.Limit.Blockage) + more)
				folder := copyJob(t, seawater)
				text, err := os.ReadFile(filepath.Join(folder, "conditions.csv"))
				if err != nil {
					t.Fatal(err)
				}
				lines := strings.Split(string(text), "\n")
				for i, line := range lines {
					if strings.HasPrefix(line, `"`+c.Condition+`",`) {
						tail := strings.Split(strings.TrimPrefix(line, `"`+c.Condition+`",`), ",")
						tail[7] = fmt.Sprintf("%.12g", blockage) // STR1 blockage [%]
						lines[i] = `"` + c.Condition + `",` + strings.Join(tail, ",")
					}
				}
				if err := os.WriteFile(filepath.Join(folder, "conditions.csv"), []byte(strings.Join(lines, "\n")), 0o644); err != nil {
					t.Fatal(err)
				}
				checked, _ := checkJSON(t, folder, "--condition", c.Condition)
				for _, f := range checked.Conditions[0].Findings {
					if f.Limit != limit || f.On != on {
						continue
					}
					governed++
					if more == 0 && !(math.Abs(float64(f.Value-f.LimitValue)) <= 1e-6*math.Max(1, float64(f.LimitValue))) {
						t.Errorf("%s: %s of %s at %.6f %%: %g, want %g", c.Condition, limit, on, blockage, float64(f.Value), float64(f.LimitValue))
					}
					if more > 0 && f.Verdict == study.Met {
						t.Errorf("%s: %s of %s at %.6f %% is still met", c.Condition, limit, on, blockage)
					}
				}
			}
		}
	}
	if governed != 12 {
		t.Errorf("%d limits put back", governed)
	}
}

// The least draught, the warmest water and the greatest flow put back give the rule's own margin.
func TestMarginLimitsFedBack(t *testing.T) {
	const condition = "ballast, tropics, fouled strainer"
	answer, _ := suctionJSON(t, seawater, "--condition", condition, "--pump", "P1")
	limits := map[string]study.MarginLimit{}
	for _, l := range answer.Cases[0].Pumps[0].Limits {
		limits[l.What] = l
	}
	for what, flag := range map[string]string{"least draught": "--draught", "warmest water": "--temperature"} {
		back, _ := suctionJSON(t, seawater, "--condition", condition, "--pump", "P1", flag, fmt.Sprintf("%.12g", float64(limits[what].Value)))
		p := back.Cases[0].Pumps[0]
		least := math.Inf(1) // over the rules: how far each is kept
		for _, f := range p.Rules {
			least = math.Min(least, float64(f.Value-f.LimitValue))
		}
		if !(math.Abs(least) < 1e-6) {
			t.Errorf("%s %g: %+v", what, float64(limits[what].Value), p.Rules)
		}
	}
	slow := copyJob(t, seawater, [3]string{"pumps.csv", "P1,SUCTION 1,DELIVERY 1,SWP-400,2.5,318,172,1480", fmt.Sprintf("P1,SUCTION 1,DELIVERY 1,SWP-400,2.5,318,172,%.9g", float64(limits["highest speed"].Value))})
	back, _ := suctionJSON(t, slow, "--condition", condition, "--pump", "P1")
	least := math.Inf(1)
	for _, f := range back.Cases[0].Pumps[0].Rules {
		least = math.Min(least, float64(f.Value-f.LimitValue))
	}
	if !(math.Abs(least) < 1e-5) {
		t.Errorf("highest speed: %+v", back.Cases[0].Pumps[0].Rules)
	}
	if l := limits["greatest flow"]; l.Word != "" || !(l.Value > answer.Cases[0].Pumps[0].Flow) {
		t.Errorf("%+v", l)
	}
	if l := limits["smallest suction bore"]; !(40 < l.Value && l.Value < 70) {
		t.Errorf("%+v", l)
	}
}

// More blockage never raises the margin, nor lowers the drop, with everything re-solved; the clean strainer keeps most.
func TestBlockageIsMonotone(t *testing.T) {
	const seed = 3
	rng := rand.New(rand.NewPCG(seed, 0))
	last := math.Inf(1)
	blocked := 0.0
	for range 6 {
		blocked += 12 * rng.Float64()
		folder := copyJob(t, seawater, [3]string{"conditions.csv", "P1 P2,shut,open,72,", fmt.Sprintf("P1 P2,shut,open,%.6f,", blocked)})
		answer, _ := suctionJSON(t, folder, "--condition", "ballast, tropics, fouled strainer", "--pump", "P2")
		if m := float64(answer.Cases[0].Pumps[0].Margin); !(m < last) {
			t.Errorf("seed %d: at %.2f %% the margin is %g m, before %g", seed, blocked, m, last)
		} else {
			last = m
		}
	}
}

// The cross of draughts, temperatures and pumps: every cell once, a chest that would be dry said and not judged.
func TestSuctionCross(t *testing.T) {
	answer, code := suctionJSON(t, seawater, "--condition", "ballast, tropics", "--draught", "0.5,4.8,9.2", "--temperature", "5,32", "--running", "P1 P2", "--running", "P1")
	if code != exitNotMet || len(answer.Cases) != 12 {
		t.Fatalf("exit code %d, %d cases", code, len(answer.Cases))
	}
	dry := 0
	for _, c := range answer.Cases {
		if strings.Contains(c.Reason, "a draught that covers the sea inlet LOW CHEST at 0.9 m: it draws air") {
			dry++
		} else if len(c.Pumps) != len(c.Running) {
			t.Errorf("%+v", c)
		}
	}
	if dry != 4 {
		t.Errorf("%d dry", dry)
	}
	if answer.Worst == nil || answer.Worst.Verdict != study.NotJudged {
		t.Errorf("%+v", answer.Worst)
	}
}

// Immersion by hand: a chest 3 m off the centre line and 20 m aft of the mark, heeled 10 deg, 1.5 m by the stern over 170 m.
func TestChestImmersion(t *testing.T) {
	folder := copyJob(t, seawater, [3]string{"points.csv", "elevation [m],straight", "elevation [m],off centre [m],aft of mark [m],straight"},
		[3]string{"points.csv", "LOW CHEST,sea,0.9,", "LOW CHEST,sea,0.9,3,20,"})
	text, err := os.ReadFile(filepath.Join(folder, "points.csv"))
	if err != nil {
		t.Fatal(err)
	}
	var lines []string
	for _, line := range strings.Split(string(text), "\n") { // the new columns are blank in every other row
		if cells := strings.SplitN(line, ",", 4); len(cells) == 4 && cells[0] != "LOW CHEST" && cells[0] != "point" && !strings.HasPrefix(line, "#") {
			line = strings.Join(cells[:3], ",") + ",,," + cells[3]
		}
		lines = append(lines, line)
	}
	if err := os.WriteFile(filepath.Join(folder, "points.csv"), []byte(strings.Join(lines, "\n")), 0o644); err != nil {
		t.Fatal(err)
	}
	answer, _ := suctionJSON(t, folder, "--condition", "ballast, tropics", "--heel", "-10", "--trim", "1.5", "--length", "170")
	chest := answer.Cases[0].Chests[0]
	if want := 4.8 - 0.9 - 3*math.Tan(10*math.Pi/180) + 20*1.5/170; !(math.Abs(float64(chest.Inclined)-want) < 1e-6) || chest.DrawsAir || chest.Doubt != "" {
		t.Errorf("%+v, want %g", chest, want)
	}
	// S = D (1 + 2.3 V/sqrt(g D)) with the bore and velocity of LOW SUCTION.
	checked, _ := checkJSON(t, folder, "--condition", "ballast, tropics")
	v, d := float64(runNamed(t, checked.Conditions[0], "LOW SUCTION").Velocity), 0.360
	if want := d * (1 + 2.3*v/math.Sqrt(9.80665*d)); !(math.Abs(float64(chest.Wanted)-want) < 1e-4) {
		t.Errorf("wanted %g, by hand %g", float64(chest.Wanted), want)
	}
	plain, _ := suctionJSON(t, seawater, "--condition", "ballast, tropics", "--heel", "10")
	if chest := plain.Cases[0].Chests[0]; chest.Inclined.Known() || chest.Doubt == "" {
		t.Errorf("%+v", chest)
	}
}

// What the sheet does not give is said in words, with exit code 1: no NPSH required, a curve that ends before the duty.
func TestSuctionNotJudged(t *testing.T) {
	tables := lift("", "")
	tables["pump_curves.csv"] = "curve,flow [m3/h],head [m],efficiency [%]\nC1,0,20,0\nC1,100,19,55\nC1,200,16,76\nC1,300,11,74\nC1,360,7,60\n"
	folder := writeJob(t, tables)
	answer, code := suctionJSON(t, folder)
	p := answer.Cases[0].Pumps[0]
	if code != exitNotMet || p.Verdict != study.NotJudged || p.Margin.Known() || !strings.Contains(p.Rules[0].Reason, "gives no NPSH required") {
		t.Errorf("exit code %d, %+v", code, p)
	}
	if s := answer.Cases[0].Strainers; len(s) != 1 || s[0].Word != string(study.NotJudged) || s[0].Limit.Drop.Known() {
		t.Errorf("%+v", s)
	}
	for _, l := range p.Limits {
		if l.Word != "never" || l.Value.Known() || l.Reason == "" {
			t.Errorf("%+v", l)
		}
	}
	_, out, _ := brinehead("suction", seawater, "--condition", "ballast, tropics, one pump")
	for _, says := range []string{"NOT JUDGED: 1 of 1 suctions", "P1    off curve        -      -       -      -          -  not judged", "blocked by less than some 65 %, it is not judged"} {
		if !strings.Contains(strings.Join(strings.Fields(out), " "), strings.Join(strings.Fields(says), " ")) {
			t.Errorf("no %q in\n%s", says, out)
		}
	}
}

// Before and after: the finer strainer's clean drop is greater, its permissible blockage less.
func TestSuctionBeforeAndAfter(t *testing.T) {
	answer, _ := suctionJSON(t, seawater, "--change", filepath.Join(changes, "fine-strainer"))
	if answer.Before == nil || len(answer.Before.Cases) != len(answer.Cases) {
		t.Fatal("no before")
	}
	for i, c := range answer.Cases {
		for k, s := range c.Strainers {
			before := answer.Before.Cases[i].Strainers[k]
			if s.Strainer == "STR1" && s.Clean.Drop.Known() && !(s.Clean.Drop > before.Clean.Drop && s.Limit.Blockage < before.Limit.Blockage) {
				t.Errorf("%s: before %+v, after %+v", c.Condition, before, s)
			}
		}
	}
	_, out, _ := brinehead("suction", seawater, "--change", filepath.Join(changes, "fine-strainer"))
	for _, says := range []string{"Before the change:\n  NOT MET: 1 of 11 suctions", "boils", "How dirty it might get before the change"} {
		if !strings.Contains(out, says) {
			t.Errorf("no %q", says)
		}
	}
	if widest(out) > 80 {
		t.Errorf("%d wide", widest(out))
	}
}

func TestSuctionRefusals(t *testing.T) {
	for want, args := range map[string][]string{
		`pump: found "P9", want one of P1, P2`:                         {"--pump", "P9"},
		`running: found "P7", want pumps of the job: P1, P2`:           {"--running", "P1 P7"},
		`draught: found "deep", want figures from 0 to 50`:             {"--draught", "4,deep"},
		`temperature: found "151", want figures from -5 to 150`:        {"--temperature", "151"},
		"trim: found 2 m without the length between the draught marks": {"--trim", "2"},
		"allowance: found 100 %, want more than 0, less than 100":      {"--allowance", "100"},
		"heel: found 60 deg, want between -45 and 45":                  {"--heel", "60"},
		`"balast", want a condition of the job`:                        {"--condition", "balast"},
	} {
		if code, out, stderr := brinehead(append([]string{"suction", seawater}, args...)...); code != exitInput || out != "" || !strings.Contains(stderr, want) {
			t.Errorf("%v: exit code %d, %q, %q", args, code, out, stderr)
		}
	}
}

func TestSuctionFiles(t *testing.T) {
	folder := t.TempDir()
	if code, _, stderr := brinehead("suction", seawater, "--condition", "ballast, tropics, fouled strainer", "--out", folder); code != exitMet || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	const stem = "1-ballast-tropics-fouled-strainer-p1-"
	for name, says := range map[string][]string{
		"suction.csv":         {"as it stands,\"ballast, tropics, fouled strainer\",4.8,32,P1 P2,,P1,"},
		"npsh-lines.csv":      {"basket strainer STR1", "NPSH available"},
		"strainers.csv":       {",limit,", ",alarm,", ",clean,", "NPSH margin of P2 [limits.csv, line 10]"},
		"margin-limits.csv":   {"least draught", "smallest suction bore"},
		stem + "npsh.svg":     {"available, present", "available, STR1 clean", "available, STR1 at its limit", "required and margin"},
		stem + "blockage.svg": {"alarm", "limit", "margin asked", "present"},
		stem + "profile.svg":  {"hydraulic grade", "absolute pressure", "vapour pressure", "pipe", "basket strainer STR1"},
		stem + "npsh.png":     nil, stem + "blockage.png": nil, stem + "profile.png": nil,
	} {
		content, err := os.ReadFile(filepath.Join(folder, name))
		if err != nil || len(content) == 0 {
			t.Errorf("%s: %v", name, err)
		}
		for _, s := range says {
			if !strings.Contains(string(content), s) {
				t.Errorf("%s does not hold %q", name, s)
			}
		}
	}
}
