package hydraulics

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/lapack/lapack64"
)

// Solver finds the flows and heads of one network. It may be used again and again, each time starting from the
// flows found last; it must not be used by two goroutines at once.
//
// Method: the global gradient method of E. Todini and S. Pilati (A gradient algorithm for the analysis of pipe
// networks, in: Computer Applications in Water Supply, vol. 1, 1988), Newton's method on flows and heads together,
// each step one symmetric positive definite system in the heads. Its flows satisfy continuity after the first
// step, and among such flows the answer is the least of the content, the sum of the integrals of the losses
// (W. J. Cherry, 1951; M. Collins and others, 1978, both from memory); a step that would overshoot that least is
// shortened, so that the method converges from any start where every loss grows with flow.
//
// A non-return fitting and a running pump are first given a stiff resistance to reverse flow; those that then hold
// water back are shut, one by one, and the rest solved again without the artifice.
type Solver struct {
	network *Network
	links   []link // runs, then pumps

	row      []int  // row of the matrix of each point, -1 for a fixed one
	order    []int  // points in the order of their rows: first those of the band, then the twigs
	twigs    []twig // points that hang on one other alone, in the order in which they are taken off
	band     blas64.SymmetricBand
	triangle blas64.TriangularBand // its factor, in the same memory
	right    []float64             // by row
	groups   partition

	flow, next           []float64 // by link, m3/s: now, and after the step in hand
	loss, weight         []float64 // by link, at flow; weight is 1 over the slope of the loss
	nextLoss, nextWeight []float64 // by link, at next
	shut                 []bool    // by link: passes nothing in this solution
	head, draw           []float64 // by point
	held                 []bool    // by point: scratch of isolate
	tees                 *teeSolver
}

// link is a run or a pump, ready to be solved.
type link struct {
	from, to int
	friction frictionLaw
	fittings []lossLaw // at most one with exponent 2: those are added up
	drive    HeadSource
	lift     float64 // head that is taken whatever the flow, m: the weight of the run's own water
	oneWay   float64 // resistance to reverse flow, m per m3/s; 0 where water may pass both ways
	start    float64 // first guess of the flow, m3/s
}

// Stiff resistances to reverse flow, m per m3/s. A non-return fitting holds more than a pump, so that of the two in
// a line the fitting is the one that closes, and the pump stands at its shut-off head.
const (
	reversePump = 1e6
	reverseRun  = 1e9
)

// A run with no length and no fittings passes any flow at no loss; this resistance, 1e-6 m at 0.1 m3/s, decides how
// two such runs side by side share their flow.
const leastResistance = 1e-5

// NewSolver checks the network and prepares its solution.
func NewSolver(n *Network) (*Solver, error) {
	if err := n.Check(); err != nil {
		return nil, err
	}
	s := &Solver{network: n}
	for _, r := range n.Runs {
		s.links = append(s.links, newRunLink(r, n.Viscosity))
	}
	for _, p := range n.Pumps {
		s.links = append(s.links, newPumpLink(p, n.Viscosity))
	}
	links, points := len(s.links), len(n.Points)
	s.flow, s.next = make([]float64, links), make([]float64, links)
	s.loss, s.weight = make([]float64, links), make([]float64, links)
	s.nextLoss, s.nextWeight = make([]float64, links), make([]float64, links)
	s.shut = make([]bool, links)
	s.head, s.draw = make([]float64, points), make([]float64, points)
	s.held, s.row = make([]bool, points), make([]int, points)
	for i := range s.row {
		s.row[i] = -1
	}
	s.groups = newPartition(points)
	s.number()
	for i, l := range s.links {
		s.flow[i] = l.start
	}
	if len(n.Tees) > 0 {
		s.tees = newTeeSolver(s)
	}
	return s, nil
}

// newRunLink adds up a run's losses for water of the kinematic viscosity nu.
func newRunLink(r Run, nu float64) link {
	nu, ratio := r.viscosity(nu), r.densityRatio()
	l := link{from: r.From, to: r.To, friction: r.Pipe.law(nu), lift: r.Buoyancy(), start: r.Pipe.Area()} // at 1 m/s
	l.friction.scale *= ratio
	square := lossLaw{exponent: 2}
	for _, f := range r.Fittings {
		law := f.law(r.Pipe, nu)
		law.power *= ratio
		law.linear *= ratio
		if law.exponent != 2 {
			l.fittings = append(l.fittings, law)
			continue
		}
		square.power += law.power
		square.linear += law.linear
		square.soft = law.soft
	}
	if l.friction.scale == 0 && square.power == 0 && square.linear == 0 && l.fittings == nil {
		square.linear = leastResistance
	}
	if square.power != 0 || square.linear != 0 {
		l.fittings = append(l.fittings, square)
	}
	if r.NonReturn() {
		l.oneWay = reverseRun
	}
	return l
}

// leakPipe lends the leak of a non-return valve a bore, which its law needs at creeping flow only.
var leakPipe = Pipe{Bore: 0.1}

// newPumpLink makes the link of a pump; that of a leaking idle one runs backwards, from To to From.
func newPumpLink(p PumpLink, nu float64) link {
	if p.leaks() {
		leak := Fitting{Kv: p.LeakKv}.law(leakPipe, nu)
		return link{from: p.To, to: p.From, fittings: []lossLaw{leak}, oneWay: reverseRun, start: p.LeakKv / 3600}
	}
	start := p.Start
	if !(start > 0) {
		start = 0.05
	}
	return link{from: p.From, to: p.To, drive: p.Drive, oneWay: reversePump, start: start}
}

// twig is a point that hangs on one other point, its own twigs taken off: its equation is worked by hand, without a place in
// the band. A tree is nothing but twigs, whose cost goes with their number however they branch.
type twig struct {
	parent        int // row of the point it hangs on, -1 for none that is free
	diagonal, off float64
}

// number gives the points that are not fixed their rows and makes the matrix.
func (s *Solver) number() {
	neighbours := make([][]int, len(s.network.Points))
	join := func(a, b int) {
		for _, n := range neighbours[a] {
			if n == b {
				return
			}
		}
		neighbours[a] = append(neighbours[a], b)
	}
	for _, l := range s.links {
		if !s.network.Points[l.from].Fixed && !s.network.Points[l.to].Fixed {
			join(l.from, l.to)
			join(l.to, l.from)
		}
	}
	hanging, on := takeOffTwigs(neighbours)
	isTwig := make([]bool, len(neighbours))
	for _, point := range hanging {
		isTwig[point] = true
	}
	var core []int // free points that are no twigs
	local := make([]int, len(neighbours))
	for i, p := range s.network.Points {
		if !p.Fixed && !isTwig[i] {
			local[i] = len(core)
			core = append(core, i)
		}
	}
	inCore := make([][]int, len(core))
	for k, point := range core {
		for _, n := range neighbours[point] {
			if !isTwig[n] {
				inCore[k] = append(inCore[k], local[n])
			}
		}
	}
	for row, k := range bandOrder(inCore) {
		s.order = append(s.order, core[k])
		s.row[core[k]] = row
	}
	for _, point := range hanging {
		if !s.network.Points[point].Fixed {
			s.row[point] = len(s.order)
			s.order = append(s.order, point)
		}
	}
	for _, point := range hanging {
		if !s.network.Points[point].Fixed {
			t := twig{parent: -1}
			if on[point] >= 0 {
				t.parent = s.row[on[point]]
			}
			s.twigs = append(s.twigs, t)
		}
	}
	width := 0
	for k, near := range inCore {
		for _, n := range near {
			width = max(width, s.row[core[k]]-s.row[core[n]])
		}
	}
	size := len(core)
	s.band = blas64.SymmetricBand{Uplo: blas.Upper, N: size, K: width, Stride: width + 1, Data: make([]float64, size*(width+1))}
	s.right = make([]float64, len(s.order))
}

// Solution is the state of a network.
type Solution struct {
	Heads     []float64 // total head of each point, m; NaN where shut valves cut the point off from every fixed head
	RunFlows  []float64 // m3/s, positive from From to To
	TeeLosses []float64 // by run, m: what the tees at its ends take from a flow from From to To; below 0 where they give
	PumpFlows []float64 // m3/s; 0 for an idle pump and for one held shut by its non-return

	Rounds       int     // Newton steps taken
	MassResidual float64 // greatest imbalance of flow at a point, over the greatest flow
	HeadResidual float64 // greatest difference between a link's loss and the heads at its ends, m
	Worst        string  // the run or pump of HeadResidual
}

// NotConverged tells how far a solution came that did not settle.
type NotConverged struct {
	Rounds int
	Step   float64 // last change of the flow that moved most, m3/s
	Where  string  // the run or pump that moved most
}

// Error says how far it came.
func (e *NotConverged) Error() string {
	return fmt.Sprintf("no convergence in %d rounds: the flow in %s still moves by %.3g m3/h a round", e.Rounds, e.Where, e.Step*3600)
}

const (
	greatestRounds = 200
	stepTolerance  = 1e-10 // of the greatest flow
	headTolerance  = 1e-8  // m: the change of a link's loss in the last step; what is left over goes with its square
	roundingUnits  = 16    // of the last place of the heads, turned into flow: below that a step is noise
	heldBack       = 1e-9  // m: what a non-return must hold to count as shut
	noFlow         = 1e-15 // m3/s: a flow below this is none
)

// StartFrom takes the flows of a solution of a like network, with the same runs and pumps in the same order, as the first
// guess: a neighbouring condition is soon solved from it.
func (s *Solver) StartFrom(near *Solution) {
	if len(near.RunFlows) != len(s.network.Runs) || len(near.PumpFlows) != len(s.network.Pumps) {
		return
	}
	copy(s.flow, near.RunFlows)
	copy(s.flow[len(near.RunFlows):], near.PumpFlows)
}

// Solve finds the flows and heads. The solution is written into out, whose slices are used again where they are
// large enough. The error is a *CutOff or a *NotConverged.
func (s *Solver) Solve(out *Solution) error { return s.solve(out, -1, 0) }

// SolveForced does the same with the flow (m3/s) of one pump given: its curve is set aside, and the difference of
// the heads across it is what the system asks of it. The pump need not be running.
func (s *Solver) SolveForced(out *Solution, pump int, flow float64) error {
	return s.solve(out, pump, flow)
}

func (s *Solver) solve(out *Solution, forced int, forcedFlow float64) error {
	n := s.network
	for i, p := range n.Points {
		s.draw[i] = p.Draw
	}
	if forced >= 0 {
		s.draw[n.Pumps[forced].From] += forcedFlow
		s.draw[n.Pumps[forced].To] -= forcedFlow
	}
	var rounds int
	var err error
	if s.tees == nil {
		rounds, err = s.settle(forced)
	} else {
		rounds, err = s.settleTees(forced)
	}
	if err != nil {
		return err
	}
	s.report(out, forced, forcedFlow)
	out.Rounds = rounds
	return nil
}

// settle solves for flows and heads, and shuts the one-way links that hold water back. It returns the rounds it took.
func (s *Solver) settle(forced int) (rounds int, err error) {
	n := s.network
	for i, p := range n.Points {
		s.head[i] = p.Head
	}
	for i, r := range n.Runs {
		s.shut[i] = r.Shut
	}
	for i, p := range n.Pumps {
		s.shut[len(n.Runs)+i] = !p.Running && !p.leaks() || i == forced
	}
	for k := range s.links { // a flow of nothing has no slope to start from
		if math.Abs(s.flow[k]) < 1e-6*s.links[k].start {
			s.flow[k] = 0.1 * s.links[k].start
		}
	}
	for {
		if err := s.isolate(); err != nil {
			return rounds, err
		}
		if err := s.iterate(&rounds); err != nil {
			return rounds, err
		}
		k := s.mostHeldBack()
		if k < 0 {
			return rounds, nil
		}
		s.shut[k] = true
	}
}

// isolate finds the points that shut links cut off from every fixed head. Such points have no head and their links
// no flow; where water is driven or drawn among them there is no answer.
func (s *Solver) isolate() error {
	n := s.network
	s.groups.reset()
	for k, l := range s.links {
		if !s.shut[k] {
			s.groups.join(l.from, l.to)
		}
	}
	for i := range s.held {
		s.held[i] = false
	}
	for i, p := range n.Points {
		if p.Fixed {
			s.held[s.groups.root(i)] = true
		}
	}
	loose := func(point int) bool { return !s.held[s.groups.root(point)] }
	stuck := -1
	for i := range n.Points {
		if !loose(i) {
			if !n.Points[i].Fixed && math.IsNaN(s.head[i]) {
				s.head[i] = 0
			}
			continue
		}
		s.head[i] = math.NaN()
		if s.draw[i] != 0 {
			stuck = i
		}
	}
	for k, l := range s.links {
		if s.shut[k] {
			continue
		}
		if loose(l.from) {
			if l.drive != nil {
				stuck = l.from
			}
			s.shut[k] = true
		}
	}
	if stuck < 0 {
		return nil
	}
	cut := &CutOff{}
	group := s.groups.root(stuck)
	for i, p := range n.Points {
		if s.groups.root(i) == group {
			cut.Points = append(cut.Points, p.Name)
		}
	}
	return cut
}

// iterate takes Newton steps until the last one is within its tolerance, or lost in rounding: near it and no longer
// shrinking.
func (s *Solver) iterate(rounds *int) error {
	for k := range s.links {
		if s.shut[k] {
			s.flow[k] = 0
		}
	}
	const near, patience = 100, 3 // times the tolerance; rounds
	excess, worst, stalled := math.Inf(1), -1, 0
	s.linearise(s.flow, s.loss, s.weight)
	for first := true; *rounds < greatestRounds; first = false {
		*rounds++
		if err := s.step(); err != nil {
			return err
		}
		s.balance()
		last := excess
		excess, worst = s.stepSize()
		if excess < near && excess > last/2 {
			stalled++
		}
		if excess <= 1 || stalled >= patience {
			s.balance() // once more: the weights of a network span many decades
			s.balance()
			copy(s.flow, s.next)
			return nil
		}
		s.linearise(s.next, s.nextLoss, s.nextWeight)
		share := 1.0
		if !first { // before the first step the flows satisfy no continuity, and the content says nothing
			share = s.shorten()
		}
		if share == 1 { // exactly: continuity must not be lost to rounding
			s.flow, s.next = s.next, s.flow
			s.loss, s.nextLoss = s.nextLoss, s.loss
			s.weight, s.nextWeight = s.nextWeight, s.weight
			continue
		}
		for k := range s.flow {
			s.flow[k] += share * (s.next[k] - s.flow[k])
		}
		s.linearise(s.flow, s.loss, s.weight)
	}
	if err := s.step(); err != nil {
		return err
	}
	return &NotConverged{Rounds: *rounds, Step: math.Abs(s.next[worst] - s.flow[worst]), Where: s.name(worst)}
}

// linearise finds the losses and weights of the open links at their flows.
func (s *Solver) linearise(flow, loss, weight []float64) {
	for k := range s.links {
		if s.shut[k] {
			loss[k], weight[k] = 0, 0
			continue
		}
		h, slope := s.links[k].lossAt(flow[k])
		loss[k], weight[k] = h, 1/slope
	}
}

// raiseWeights lifts the weights that are lost in the rounding of the greatest. Only odd starts come there, and a
// greater weight changes the way to the answer, not the answer.
func (s *Solver) raiseWeights() {
	greatest := 0.0
	for _, w := range s.weight {
		greatest = math.Max(greatest, w)
	}
	for k, w := range s.weight {
		if w > 0 {
			s.weight[k] = math.Max(w, 1e-13*greatest)
		}
	}
}

// leastDriveSlope keeps Newton's matrix positive where a pump curve is flat or droops, m per m3/s. It changes the
// way to the answer, not the answer.
const leastDriveSlope = 1.0

// lossAt returns the head a link takes at a flow, negative for a pump, and its slope.
func (l *link) lossAt(flow float64) (loss, slope float64) {
	if l.drive != nil {
		loss, slope = l.drive.Head(math.Max(flow, 0))
		loss, slope = -loss, math.Max(-slope, leastDriveSlope)
	} else {
		loss, slope = l.friction.loss(flow)
		for _, f := range l.fittings {
			h, dh := f.loss(flow)
			loss += h
			slope += dh
		}
		loss += l.lift
	}
	if flow < 0 && l.oneWay > 0 {
		loss += l.oneWay * flow
		slope += l.oneWay
	}
	return loss, slope
}

// step solves for the heads of the linearised network and puts the flows that go with them into next.
func (s *Solver) step() error {
	if !s.factor() {
		s.raiseWeights()
		if !s.factor() {
			return fmt.Errorf("hydraulics: the matrix of the network is singular")
		}
	}
	s.substitute()
	for row, point := range s.order {
		if !math.IsNaN(s.head[point]) {
			s.head[point] = s.right[row]
		}
	}
	for k := range s.links {
		if w := s.weight[k]; w > 0 {
			l := &s.links[k]
			s.next[k] = s.flow[k] - w*(s.loss[k]-(s.head[l.from]-s.head[l.to]))
		} else {
			s.next[k] = 0
		}
	}
	return nil
}

// factor sets up the equations of the heads and factors their matrix; false where rounding has made it singular.
func (s *Solver) factor() bool {
	clear(s.band.Data)
	for k := range s.twigs {
		s.twigs[k].diagonal, s.twigs[k].off = 0, 0
	}
	for row, point := range s.order {
		s.right[row] = -s.draw[point]
		if math.IsNaN(s.head[point]) {
			*s.diagonal(row) = 1 // cut off: kept in the matrix as a row of its own
			s.right[row] = 0
		}
	}
	for k := range s.links {
		if w := s.weight[k]; w > 0 {
			from, to := s.links[k].from, s.links[k].to
			constant := s.flow[k] - w*s.loss[k] // next = constant + w (Hfrom - Hto)
			s.addToMatrix(from, to, -constant, w)
			s.addToMatrix(to, from, constant, w)
		}
	}
	for k := range s.twigs {
		t := &s.twigs[k]
		if !(t.diagonal > 0) {
			return false
		}
		if t.parent >= 0 {
			*s.diagonal(t.parent) -= t.off / t.diagonal * t.off
		}
	}
	if s.band.N == 0 {
		return true
	}
	var ok bool
	s.triangle, ok = lapack64.Pbtrf(s.band)
	return ok
}

// diagonal returns a row's element of the diagonal.
func (s *Solver) diagonal(row int) *float64 {
	if row < s.band.N {
		return &s.band.Data[row*s.band.Stride]
	}
	return &s.twigs[row-s.band.N].diagonal
}

// addToMatrix adds one end of a link of weight w to the equation of its point.
func (s *Solver) addToMatrix(point, other int, inflow, w float64) {
	row, column := s.row[point], s.row[other]
	if row < 0 {
		return
	}
	s.right[row] += inflow
	*s.diagonal(row) += w
	switch {
	case column < 0:
		s.right[row] += w * s.network.Points[other].Head
	case row >= s.band.N: // a twig: its one neighbour, or a twig of its own, which has the element
		if t := &s.twigs[row-s.band.N]; t.parent == column {
			t.off -= w
		}
	case column > row && column < s.band.N:
		s.band.Data[row*s.band.Stride+column-row] -= w
	}
}

// substitute solves for the right side in hand with the matrix factored last; the answer takes its place.
func (s *Solver) substitute() {
	for k, t := range s.twigs {
		if t.parent >= 0 {
			s.right[t.parent] -= t.off / t.diagonal * s.right[s.band.N+k]
		}
	}
	if s.band.N > 0 {
		lapack64.Pbtrs(s.triangle, blas64.General{Rows: s.band.N, Cols: 1, Stride: 1, Data: s.right[:s.band.N]})
	}
	for k := len(s.twigs) - 1; k >= 0; k-- {
		t, row := &s.twigs[k], s.band.N+k
		if t.parent >= 0 {
			s.right[row] -= t.off * s.right[t.parent]
		}
		s.right[row] /= t.diagonal
	}
}

// stepSize returns the greatest change of a flow in this step over its tolerance, and the link where it is.
func (s *Solver) stepSize() (excess float64, worst int) {
	greatestFlow, greatestHead := 0.0, 0.0
	for _, q := range s.next {
		greatestFlow = math.Max(greatestFlow, math.Abs(q))
	}
	for _, h := range s.head {
		if math.Abs(h) > greatestHead { // false for NaN
			greatestHead = math.Abs(h)
		}
	}
	const epsilon = 0x1p-52
	for k := range s.links {
		change := math.Abs(s.next[k] - s.flow[k])
		floor := roundingUnits * epsilon * greatestHead * s.weight[k]
		tolerance := math.Min(stepTolerance*greatestFlow, headTolerance*s.weight[k])
		if e := change / (tolerance + floor + noFlow); !(e <= excess) {
			excess, worst = e, k
		}
	}
	return excess, worst
}

// balance corrects heads and next flows for what rounding has put into the points' balance of flow: one round of
// iterative refinement with the matrix factored last.
func (s *Solver) balance() {
	right := s.right
	for row, point := range s.order {
		right[row] = -s.draw[point]
		if math.IsNaN(s.head[point]) {
			right[row] = 0
		}
	}
	for k := range s.links {
		l := &s.links[k]
		if row := s.row[l.from]; row >= 0 {
			right[row] -= s.next[k]
		}
		if row := s.row[l.to]; row >= 0 {
			right[row] += s.next[k]
		}
	}
	s.substitute()
	correction := func(point int) float64 {
		if row := s.row[point]; row >= 0 {
			return right[row]
		}
		return 0
	}
	for row, point := range s.order {
		s.head[point] += right[row]
	}
	for k := range s.links {
		l := &s.links[k]
		s.next[k] += s.weight[k] * (correction(l.from) - correction(l.to))
	}
}

// shorten returns the share of the step from flow to next to take: all of it, unless that climbs the content's far
// side; then one near its least along the step.
func (s *Solver) shorten() float64 {
	const enough = 0.5 // of the slope at the start
	start := s.contentSlope(s.loss)
	if !(start < 0) {
		return 1 // rounding: the step is as good as none
	}
	end := s.contentSlope(s.nextLoss)
	if end <= -enough*start {
		return 1
	}
	low, high, lowSlope, highSlope := 0.0, 1.0, start, end
	share := 1.0
	for range 40 {
		share = low - lowSlope*(high-low)/(highSlope-lowSlope)
		share = math.Min(math.Max(share, low+0.05*(high-low)), high-0.05*(high-low))
		slope := s.contentSlopeAt(share)
		if math.Abs(slope) <= -enough*start {
			return share
		}
		if slope < 0 {
			low, lowSlope = share, slope
		} else {
			high, highSlope = share, slope
		}
	}
	return share
}

// contentSlopeAt returns the derivative of the content along the step, at a share of it.
func (s *Solver) contentSlopeAt(share float64) float64 {
	for k := range s.links {
		if s.weight[k] != 0 {
			s.nextLoss[k], _ = s.links[k].lossAt(s.flow[k] + share*(s.next[k]-s.flow[k]))
		}
	}
	return s.contentSlope(s.nextLoss)
}

// contentSlope returns the derivative of the content along the step where the links have these losses.
func (s *Solver) contentSlope(losses []float64) float64 {
	points := s.network.Points
	sum := 0.0
	for k := range s.links {
		change := s.next[k] - s.flow[k]
		if s.weight[k] == 0 || change == 0 {
			continue
		}
		l := &s.links[k]
		loss := losses[k]
		if points[l.from].Fixed {
			loss -= points[l.from].Head
		}
		if points[l.to].Fixed {
			loss += points[l.to].Head
		}
		sum += change * loss
	}
	return sum
}

// mostHeldBack returns the open one-way link that holds back the most head, or -1. Of two in a line, which share what
// they hold, it is the one whose name sorts first: an answer must not depend on the order of rows. The point between
// them then stands at the other's head, though it might stand anywhere between.
func (s *Solver) mostHeldBack() int {
	greatestFlow := 0.0
	for _, q := range s.flow {
		greatestFlow = math.Max(greatestFlow, math.Abs(q))
	}
	most, worst := 0.0, -1
	for k, l := range s.links {
		holds := -l.oneWay * s.flow[k]
		if s.shut[k] || holds <= heldBack || -s.flow[k] <= 1e-14*greatestFlow {
			continue
		}
		if holds > most*(1+1e-3) || holds > most*(1-1e-3) && s.name(k) < s.name(worst) {
			most, worst = holds, k
		}
	}
	return worst
}

func (s *Solver) name(k int) string {
	switch runs := len(s.network.Runs); {
	case k < 0:
		return "no run"
	case k < runs:
		return s.network.Runs[k].Name
	default:
		return s.network.Pumps[k-runs].Name
	}
}

// report writes the solution into out and judges its residuals.
func (s *Solver) report(out *Solution, forced int, forcedFlow float64) {
	for k := range s.flow {
		if math.Abs(s.flow[k]) < noFlow || s.flow[k] < 0 && s.links[k].oneWay > 0 {
			s.flow[k] = 0 // what a one-way link still passes backwards is rounding: see mostHeldBack
		}
	}
	runs := len(s.network.Runs)
	out.Heads = append(out.Heads[:0], s.head...)
	out.RunFlows = append(out.RunFlows[:0], s.flow[:runs]...)
	out.PumpFlows = append(out.PumpFlows[:0], s.flow[runs:]...)
	for i, p := range s.network.Pumps {
		if p.leaks() {
			out.PumpFlows[i] = -out.PumpFlows[i]
		}
	}
	if forced >= 0 {
		out.PumpFlows[forced] = forcedFlow
	}
	out.TeeLosses = out.TeeLosses[:0]
	for k := range runs {
		loss := 0.0
		if s.tees != nil {
			loss = s.links[k].lift - s.tees.lift[k]
		}
		out.TeeLosses = append(out.TeeLosses, loss)
	}
	out.HeadResidual, out.MassResidual, out.Worst = 0, 0, ""
	greatestFlow := 0.0
	imbalance := s.right // by row
	for row, point := range s.order {
		imbalance[row] = s.draw[point]
		greatestFlow = math.Max(greatestFlow, math.Abs(s.draw[point]))
	}
	for k := range s.links {
		l := &s.links[k]
		greatestFlow = math.Max(greatestFlow, math.Abs(s.flow[k]))
		if !s.network.Points[l.from].Fixed {
			imbalance[s.row[l.from]] += s.flow[k]
		}
		if !s.network.Points[l.to].Fixed {
			imbalance[s.row[l.to]] -= s.flow[k]
		}
		if s.shut[k] {
			continue
		}
		loss, _ := l.lossAt(s.flow[k])
		gap := s.head[l.from] - s.head[l.to] - loss
		if l.oneWay > 0 && s.flow[k] == 0 {
			gap = math.Max(gap, 0) // at rest it holds back what it must
		}
		if math.Abs(gap) > out.HeadResidual {
			out.HeadResidual, out.Worst = math.Abs(gap), s.name(k)
		}
	}
	for _, r := range imbalance {
		if greatestFlow > 0 {
			out.MassResidual = math.Max(out.MassResidual, math.Abs(r)/greatestFlow)
		}
	}
}
