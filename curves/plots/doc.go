// Package plots draws pump and system curves, head and NPSH over flow; networks; and what a change makes of flows, losses and
// the hydraulic grade.
//
// One visual language serves all charts. What a line means is written on it; strokes and markers tell lines apart in
// black and white, colour only helps: thick for what the pump or its suction gives, thin for what the system or a rule
// asks, dotted for what lies beyond the digitised points, open rings for these, a filled mark for an operating point,
// hatching on the side of a limit that is forbidden, broken lines and open marks for what was before a change. The
// colours are safe for colour-blind readers (M. Okabe and K. Ito, Color Universal Design, 2008).
//
// Data are SI (m3/s, m); axes are in the units asked for. The same data give the same bytes.
package plots
