package study

import (
	"math"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/fluids"
)

// ChestImmersion is how deep an open sea inlet lies, upright and inclined.
type ChestImmersion struct {
	Chest     string `json:"chest"`
	Elevation Figure `json:"elevation_m"`
	Upright   Figure `json:"immersion_m"`
	Inclined  Figure `json:"inclined_immersion_m"` // with the heel to the worse side and the trim
	Wanted    Figure `json:"wanted_m"`             // submergence without an air-drawing vortex
	DrawsAir  bool   `json:"draws_air"`
	Doubt     string `json:"doubt"` // what is not known of it
}

// chests works out the immersion of every open sea inlet. The wanted submergence is S = D (1 + 2.3 V/sqrt(g D)) over the inlet, D and V
// being bore and velocity of its run (G. E. Hecker, 1987, as in the Hydraulic Institute, Engineering Data Book): a pool's rule, for a chest an
// indication.
func chests(j *job.Job, s *Condition, o SuctionOptions) (list []ChestImmersion) {
	for i, p := range s.solved.Network.Points {
		if !s.built.SeaInlets[i] {
			continue
		}
		wanted, open := math.NaN(), false
		for k, r := range s.solved.Network.Runs {
			if r.Shut || r.From != i && r.To != i {
				continue
			}
			open = true
			if q := s.Runs[k].Velocity; q.Known() {
				bore := r.Pipe.ClearBore()
				wanted = bore * (1 + 2.3*math.Abs(float64(q))/math.Sqrt(fluids.Gravity*bore))
			}
		}
		if !open {
			continue
		}
		row := j.Tables.Points[i]
		upright := float64(s.Draught) - s.built.Elevations[i]
		c := ChestImmersion{Chest: p.Name, Elevation: Figure(s.built.Elevations[i]), Upright: Figure(upright), Wanted: Figure(wanted), Inclined: unknown}
		inclined := upright
		if o.Heel != 0 {
			if !row.OffCentre.Given {
				c.Doubt = "its distance off the centre line is not given: off centre [m] in points.csv"
			}
			inclined -= math.Abs(row.OffCentre.Value) * math.Tan(math.Abs(o.Heel)*math.Pi/180)
		}
		if o.Trim != 0 {
			if !row.AftOfMark.Given {
				c.Doubt = "its distance from the draught mark is not given: aft of mark [m] in points.csv"
			}
			inclined += row.AftOfMark.Value * o.Trim / o.Length
		}
		c.Inclined = Figure(inclined)
		c.DrawsAir = inclined <= 0
		list = append(list, c)
	}
	return list
}
