package study

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
)

// StrainerLimit says how dirty a strainer may get in a case.
type StrainerLimit struct {
	Strainer string        `json:"strainer"`
	Run      string        `json:"run"`
	Word     string        `json:"word"` // "" for a limit, "never" where it may not even be clean, "always" where no blockage breaks a limit
	Governs  string        `json:"governs"`
	Clean    StrainerState `json:"clean"`
	Present  StrainerState `json:"present"`
	Limit    StrainerState `json:"limit"`
	Alarm    StrainerState `json:"alarm"`
	Notes    []string      `json:"notes"`

	run, fitting int
	states       []StrainerState // over the blockage, for the plot
}

// StrainerState is a strainer at one blockage.
type StrainerState struct {
	Blockage Figure             `json:"blockage"` // share of the open area
	Drop     Figure             `json:"drop_bar"` // differential pressure
	Loss     Figure             `json:"loss_m"`
	Flow     Figure             `json:"flow_m3h"` // through it
	Pumps    []StrainerPumpLine `json:"pumps"`
}

// StrainerPumpLine is a pump on the strainer's line at that blockage.
type StrainerPumpLine struct {
	Pump   string       `json:"pump"`
	Flow   Figure       `json:"flow_m3h"`
	Margin Figure       `json:"npsh_margin_m"`
	Gauge  SuctionGauge `json:"suction_gauge"`
}

// blockedLimits are the limits that a strainer may break by blocking. A minimum velocity counts where limits.csv gives it: the default
// is one of slow harm, sediment and growth.
var blockedLimits = []string{"NPSH margin", "NPSH ratio", "minimum flow", "minimum velocity", "minimum pressure", "minimum absolute pressure"}

// strainers finds the strainers that water passes on its way to a running pump, and for each how dirty it may get.
func (c *SuctionCase) strainers(j *job.Job, s *Condition, o SuctionOptions, solve func(*job.Case) *Condition) (list []StrainerLimit) {
	for _, p := range c.Pumps {
		k := slices.IndexFunc(s.Pumps, func(q Pump) bool { return q.Pump == p.Pump })
		for _, run := range feeds(s, s.solved.Plant.Pumps[k].From) {
			for i, f := range s.solved.Network.Runs[run].Fittings {
				if !strings.Contains(strings.ToLower(f.Name), "strainer") || slices.ContainsFunc(list, func(l StrainerLimit) bool { return l.run == run && l.fitting == i }) {
					continue
				}
				name := f.Tag
				if name == "" {
					name = s.solved.Network.Runs[run].Name + " strainer"
				}
				l := StrainerLimit{Strainer: name, Run: s.solved.Network.Runs[run].Name, run: run, fitting: i}
				c.strainer(j, s, o, solve, &l)
				list = append(list, l)
			}
		}
	}
	return list
}

// strainer works out the limit of one strainer: how far it may block, everything re-solved as it does, until the first limit that it can
// break is broken or can no longer be judged.
func (c *SuctionCase) strainer(j *job.Job, s *Condition, o SuctionOptions, solve func(*job.Case) *Condition, l *StrainerLimit) {
	at := func(blockage float64) *Condition {
		built := s.built.Clone()
		built.Network.Runs[l.run].Fittings[l.fitting].Blockage = blockage
		return solve(built)
	}
	none := StrainerState{unknown, unknown, unknown, unknown, nil}
	l.Clean, l.Present, l.Limit, l.Alarm = none, none, none, none
	clean := at(0)
	l.Clean = l.state(j, clean, 0)
	present := s.solved.Network.Runs[l.run].Fittings[l.fitting].Blockage
	l.Present = l.state(j, s, present)
	var excused []Finding // broken with a clean strainer too, and by nothing that a clean one must keep: not its doing
	for f := c.firstBroken(clean, excused); f != nil; f = c.firstBroken(clean, excused) {
		if f.Verdict == NotJudged {
			break
		}
		if strings.HasPrefix(f.Limit, "NPSH") || f.Limit == "minimum flow" {
			l.Word, l.Governs = "never", f.Limit+" of "+f.On+", with the strainer clean: "+f.Reason
			return
		}
		excused = append(excused, *f)
		l.Notes = append(l.Notes, fmt.Sprintf("%s of %s is not met with a clean strainer: left out (%s)", f.Limit, f.On, f.Reason))
	}
	from, ok, broken := math.NaN(), math.NaN(), math.NaN()
	const steps, decades = 60, 3
	for k := 0; k <= steps; k++ {
		b := 1 - math.Pow(10, -decades*float64(k)/steps)
		state := at(b)
		l.states = append(l.states, l.state(j, state, b))
		f := c.firstBroken(state, excused)
		switch {
		case f == nil && math.IsNaN(ok):
			from, ok = b, b
		case f == nil:
			ok = b
		case !math.IsNaN(ok) || f.Verdict == NotMet:
			broken = b
		}
		if !math.IsNaN(broken) {
			break
		}
	}
	switch {
	case math.IsNaN(ok):
		f := c.firstBroken(clean, excused)
		l.Word, l.Governs = string(NotJudged), f.Limit+" of "+f.On+", with the strainer clean: "+f.Reason+"; and at no greater blockage are all limits met that it may break"
		return
	case math.IsNaN(broken):
		l.Word, l.Governs = "always", fmt.Sprintf("no limit is broken up to a blockage of %.1f %%", 100*ok)
	}
	if from > 0 {
		l.Notes = append(l.Notes, fmt.Sprintf("with a cleaner strainer, blocked by less than some %.0f %%, it is not judged: %s", 100*from, c.firstBroken(clean, excused).Reason))
	}
	if l.Word != "" {
		return
	}
	for broken-ok > 1e-14 {
		middle := (ok + broken) / 2
		if middle == ok || middle == broken {
			break
		}
		if c.firstBroken(at(middle), excused) == nil {
			ok = middle
		} else {
			broken = middle
		}
	}
	f := c.firstBroken(at(broken), excused)
	l.Governs = f.Limit + " of " + f.On
	if f.Verdict == NotJudged {
		l.Governs += " can no longer be judged: " + f.Reason
	} else {
		l.Governs += fmt.Sprintf(" [%s]", f.Origin())
	}
	l.Limit = l.state(j, at(ok), ok)
	for k := 1; k < steps; k++ { // closer by for the plot
		b := from + (ok-from)*float64(k)/steps
		l.states = append(l.states, l.state(j, at(b), b))
	}
	for k := 1; k <= steps && present > ok; k++ { // and on to where it stands
		b := ok + (present-ok)*float64(k)/steps
		l.states = append(l.states, l.state(j, at(b), b))
	}
	slices.SortFunc(l.states, func(a, b StrainerState) int { return cmp.Compare(a.Blockage, b.Blockage) })
	base := 0.0 // where the drop of a clean strainer is not known, the allowance is one of the whole drop
	if l.Clean.Drop.Known() {
		base = float64(l.Clean.Drop)
	}
	target := base + (1-o.Allowance)*(float64(l.Limit.Drop)-base)
	low, high := from, ok
	if target < float64(l.state(j, at(from), from).Drop) {
		l.Notes = append(l.Notes, fmt.Sprintf("the alarm's drop of %.3f bar lies where nothing is judged", target))
		low, high = math.NaN(), math.NaN()
	}
	for range 60 {
		if middle := (low + high) / 2; float64(l.state(j, at(middle), middle).Drop) < target {
			low = middle
		} else {
			high = middle
		}
	}
	if !math.IsNaN(low) {
		l.Alarm = l.state(j, at(low), low)
	}
	if present > ok {
		l.Notes = append(l.Notes, fmt.Sprintf("it is blocked by %.1f %% now, over the limit", 100*present))
	}
}

// firstBroken returns the first limit that a strainer may break and that is not met, or nil; those excused are passed over.
func (c *SuctionCase) firstBroken(s *Condition, excused []Finding) *Finding {
	for i, f := range s.Findings {
		if f.Verdict != Met && slices.Contains(blockedLimits, f.Limit) && (f.Limit != "minimum velocity" || f.Origin() != "default") &&
			!slices.ContainsFunc(excused, func(e Finding) bool { return e.Limit == f.Limit && e.On == f.On && e.Source == f.Source }) {
			return &s.Findings[i]
		}
	}
	return nil
}

// state reads a strainer and the pumps behind it off a solved condition.
func (l *StrainerLimit) state(j *job.Job, s *Condition, blockage float64) StrainerState {
	st := StrainerState{Figure(blockage), unknown, unknown, unknown, nil}
	if s.solved == nil || !s.Runs[l.run].Flow.Known() {
		return st
	}
	st.Flow = Figure(math.Abs(float64(s.Runs[l.run].Flow)))
	k := 0
	for r := range l.run {
		k += len(s.solved.Network.Runs[r].Fittings)
	}
	f := s.Fittings[k+l.fitting]
	st.Drop, st.Loss = Figure(math.Abs(float64(f.Drop))), Figure(math.Abs(float64(f.Loss)))
	for i, u := range s.solved.Plant.Pumps {
		if u.Running && slices.Contains(feeds(s, u.From), l.run) {
			st.Pumps = append(st.Pumps, StrainerPumpLine{u.Name, s.Pumps[i].Flow, s.Pumps[i].NPSHMargin, suctionGauge(j, s, i)})
		}
	}
	return st
}
