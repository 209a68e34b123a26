package job

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"sort"
	"strings"
	"sync"

	"brinehead/curves"
	"brinehead/pumps"
)

// Trim says how a pump's impeller stands to the digitised ones where it is smaller than all of them, and so trimmed by a law;
// the zero value is none.
type Trim struct {
	From, Diameter, InletDiameter float64 // m; the inlet edge's is a stand-in where StandIn says so
	StandIn                       bool
	Cautions                      []pumps.TrimCaution
}

// ByLaw says whether the impeller is one that is trimmed by a law.
func (t Trim) ByLaw() bool { return t.From > 0 }

// betweenCurves keeps the curves of impellers between digitised ones, which cost more than the rest of a build. It may be
// used by several builds at a time.
type betweenCurves struct {
	sync.Mutex
	made map[betweenKey]*pumps.Curve
}

type betweenKey struct {
	small, large *pumps.Curve
	diameter     float64
}

func (k *betweenCurves) curve(small, large *pumps.Curve, diameter float64) (*pumps.Curve, error) {
	k.Lock()
	defer k.Unlock()
	key := betweenKey{small, large, diameter}
	if c := k.made[key]; c != nil {
		return c, nil
	}
	c, err := pumps.Between(small, large, diameter)
	if err == nil {
		if k.made == nil {
			k.made = map[betweenKey]*pumps.Curve{}
		}
		k.made[key] = c
	}
	return c, err
}

func (b *builder) pumps() {
	running := b.condition.RunningList
	for _, r := range b.job.Tables.Pumps {
		from, to := b.point[fold(r.From.Value)], b.point[fold(r.To.Value)]
		speed := b.speed(r)
		b.trims = append(b.trims, Trim{})
		p := curves.Pump{Name: r.Pump.Value, From: from, To: to,
			Datum:   r.Datum.Or(b.plant.Elevations[from]),
			Running: !b.condition.NoneRuns && (len(running) == 0 || slices.ContainsFunc(running, func(t Text) bool { return fold(t.Value) == fold(r.Pump.Value) })),
			Motor: pumps.Motor{Rating: r.Motor.Or(math.NaN()), Volts: r.Volts.Or(math.NaN()),
				Efficiency: r.MotorEfficiency.Or(math.NaN()), PowerFactor: r.PowerFactor.Or(math.NaN())},
			LeakKv: b.number(r.Pump, "leak", r.Leak).Or(0),
			Pump: pumps.Pump{Curve: b.curve(r, speed), Speed: speed.Or(0),
				Wear: b.number(r.Pump, "wear", r.Wear).Or(0), Leakage: b.number(r.Pump, "internal leakage", r.Leakage).Or(0)}}
		if !p.Running && p.LeakKv > 0 {
			b.letLeak(to)
		}
		if p.Leakage > 0 && p.Curve != nil && math.IsNaN(p.BestEfficiencyFlow()) {
			b.fault(r.Leakage.Place, fmt.Sprintf("%g %%", p.Leakage*100), "a curve whose sheet shows its best efficiency, of which the leakage is a share", "give efficiency or power in pump_curves.csv, past the best point, or wear [%] here")
		}
		b.design.Pumps = append(b.design.Pumps, r.Design.Or(math.NaN()))
		b.plant.Pumps = append(b.plant.Pumps, p)
	}
}

// speed returns a pump's speed: its own, or that of its motor at the condition's frequency, less the slip. What a condition sets
// goes before what the pump's row gives.
func (b *builder) speed(r PumpRow) Number {
	own, frequency := b.number(r.Pump, "speed", r.Speed), b.number(r.Pump, "frequency", r.Frequency)
	ownSet, frequencySet := own.Place != r.Speed.Place, frequency.Place != r.Frequency.Place
	switch {
	case ownSet && !frequencySet:
		return own
	case frequencySet && !ownSet:
		own = Number{}
	}
	switch {
	case !frequency.Given:
		if r.Poles.Given && !own.Given {
			b.fault(r.Poles.Place, fmt.Sprintf("%g", r.Poles.Value), "the frequency of the supply too", "fill in the column frequency [Hz], or speed [rpm] in place of both")
		}
		return own
	case own.Given:
		b.fault(frequency.Place, fmt.Sprintf("%g Hz", frequency.Value), "either a speed or a frequency, not both", "")
		return own
	case !r.Poles.Given:
		b.fault(frequency.Place, fmt.Sprintf("%g Hz", frequency.Value), "the number of poles too", "fill in the column poles")
		return own
	case int(r.Poles.Value)%2 != 0:
		b.fault(r.Poles.Place, fmt.Sprintf("%g", r.Poles.Value), "an even number of poles", "")
		return own
	}
	slip, source := r.Slip, "the table's slip"
	if !slip.Given && r.Motor.Given {
		slip.Value, slip.Given = pumps.Slip(r.Motor.Value), true
		source = "2 % at 11 kW to 1 % at 75 kW (common practice, from memory)"
	} else if !slip.Given {
		slip.Value, slip.Given = pumps.Slip(11e3), true
		source = "2 %, no motor rating given (common practice, from memory)"
	}
	synchronous := pumps.SynchronousSpeed(frequency.Value, int(r.Poles.Value))
	frequency.Value = synchronous * (1 - slip.Value)
	b.supply(r.Pump.Value, "speed", fmt.Sprintf("%.0f rpm", frequency.Value), fmt.Sprintf("%.0f rpm synchronous, slip %.1f %%: %s", synchronous, slip.Value*100, source))
	return frequency
}

// letLeak opens the non-return valves of the runs that begin at an idle pump's delivery: the leak given for the pump is
// theirs.
func (b *builder) letLeak(delivery int) {
	for k := range b.plant.Network.Runs {
		run := &b.plant.Network.Runs[k]
		if run.From != delivery {
			continue
		}
		for i := range run.Fittings {
			run.Fittings[i].NonReturn = false
		}
	}
}

// curve finds the curve of a pump: of its impeller, digitised, between two that are, or trimmed from the smallest; and of the
// speed nearest to its own.
func (b *builder) curve(r PumpRow, speed Number) *pumps.Curve {
	all := b.job.curves[fold(r.Curve.Value)]
	sheets := nearestSpeed(all, speed)
	impeller := b.number(r.Pump, "impeller", r.Impeller)
	if !impeller.Given {
		switch {
		case len(diameters(all)) > 1:
			b.fault(r.Curve.Place, r.Curve.Value, "an impeller diameter, since the curve has several: "+strings.Join(diameters(all), ", "), "fill in the column impeller [mm]")
			return nil
		case len(sheets) > 1:
			b.fault(r.Curve.Place, r.Curve.Value, "a speed, since the curve is digitised at several", "fill in the column speed [rpm]")
		}
		return sheets[0]
	}
	const same = 1e-6 // m
	if at := slices.DeleteFunc(slices.Clone(all), func(c *pumps.Curve) bool { return c.Impeller != 0 && math.Abs(c.Impeller-impeller.Value) > same }); len(at) > 0 {
		if at = nearestSpeed(at, speed); len(at) > 1 {
			b.fault(r.Curve.Place, r.Curve.Value, "a speed, since the curve is digitised at several", "fill in the column speed [rpm]")
		}
		return at[0]
	}
	sort.Slice(sheets, func(i, k int) bool { return sheets[i].Impeller < sheets[k].Impeller })
	found := millimetres(impeller.Value)
	if last := sheets[len(sheets)-1]; impeller.Value > last.Impeller {
		b.fault(impeller.Place, found, "no larger a diameter than the digitised ones of "+r.Curve.Value+": "+strings.Join(diameters(all), ", "), "an impeller cannot grow")
		return nil
	}
	for k := 1; k < len(sheets); k++ {
		small, large := sheets[k-1], sheets[k]
		if !(small.Impeller < impeller.Value && impeller.Value < large.Impeller) {
			continue
		}
		c, err := b.job.between.curve(small, large, impeller.Value)
		if err != nil {
			b.fault(impeller.Place, found, "a diameter that can be worked out between two digitised ones: "+err.Error(), "")
			return nil
		}
		b.supply(r.Pump.Value, "curve", found, "between the digitised diameters "+millimetres(small.Impeller)+" and "+millimetres(large.Impeller)+", along affinity parabolas (A. J. Stepanoff, from memory)")
		return c
	}
	return b.trimmed(r, sheets[0], sheets[len(sheets)-1].Impeller, impeller)
}

// trimmed cuts the smallest digitised impeller down to a diameter by the builder's method, or faults what no method answers
// for; greatest is the full diameter.
func (b *builder) trimmed(r PumpRow, from *pumps.Curve, greatest float64, impeller Number) *pumps.Curve {
	found := millimetres(impeller.Value)
	t := Trim{From: from.Impeller, Diameter: impeller.Value, InletDiameter: r.InletDiameter.Value}
	if !r.InletDiameter.Given {
		t.InletDiameter, t.StandIn = pumps.StandInInletShare*greatest, true
	}
	t.Cautions = pumps.TrimCautions(t.Diameter/t.From, t.Diameter/greatest, from.Numbers().TypeNumber)
	for _, c := range t.Cautions {
		if c.Refuses {
			b.fault(impeller.Place, found, fmt.Sprintf("an impeller whose trim from the digitised %s can be answered for: %s (%s)", millimetres(from.Impeller), c.Text, c.Source), "digitise the maker's curve of that diameter")
			return nil
		}
	}
	c, err := from.Trimmed(b.trim, t.Diameter, t.InletDiameter)
	if err != nil {
		b.fault(impeller.Place, found, "an impeller that can be trimmed from the digitised one: "+err.Error(), "")
		return nil
	}
	b.trims[len(b.trims)-1] = t
	inlet := "inlet edge " + millimetres(t.InletDiameter)
	if t.StandIn {
		inlet += ", a stand-in: half of the full diameter (common practice 0.4 to 0.6)"
	}
	b.supply(r.Pump.Value, "curve", found, fmt.Sprintf("trimmed from %s; %s; worked by %s, %s and %s", millimetres(from.Impeller), inlet, pumps.PlainAffinity, pumps.ISO9906, pumps.Stepanoff))
	return c
}

// CurveNames returns the names of the curves that the job's pumps have, each once.
func (j *Job) CurveNames() (names []string) {
	for _, r := range j.Tables.Pumps {
		if !slices.ContainsFunc(names, func(n string) bool { return fold(n) == fold(r.Curve.Value) }) {
			names = append(names, r.Curve.Value)
		}
	}
	return names
}

// Sheets returns the digitised curves of a name, one for each impeller and speed, in the order of their rows.
func (j *Job) Sheets(name string) []*pumps.Curve { return slices.Clone(j.curves[fold(name)]) }

// Family returns the digitised curves of a name at a speed, from the smallest diameter.
func (j *Job) Family(name string, speed float64) []*pumps.Curve {
	family := slices.DeleteFunc(j.Sheets(name), func(c *pumps.Curve) bool { return c.Speed != speed })
	slices.SortFunc(family, func(a, c *pumps.Curve) int { return cmp.Compare(a.Impeller, c.Impeller) })
	return family
}

// nearestSpeed returns the sheets of the speed nearest to a pump's own; all of them where it gives none.
func nearestSpeed(sheets []*pumps.Curve, speed Number) []*pumps.Curve {
	if !speed.Given {
		return slices.Clone(sheets)
	}
	nearest := slices.MinFunc(sheets, func(a, c *pumps.Curve) int {
		return cmp.Compare(math.Abs(a.Speed-speed.Value), math.Abs(c.Speed-speed.Value))
	}).Speed
	return slices.DeleteFunc(slices.Clone(sheets), func(c *pumps.Curve) bool { return c.Speed != nearest })
}

// diameters lists the digitised diameters in words.
func diameters(sheets []*pumps.Curve) (text []string) {
	for _, c := range sheets {
		if d := millimetres(c.Impeller); !slices.Contains(text, d) {
			text = append(text, d)
		}
	}
	return text
}

// millimetres writes a length to the micrometre, without the dust of its conversion.
func millimetres(m float64) string { return fmt.Sprintf("%g mm", math.Round(m*1e6)/1e3) }
