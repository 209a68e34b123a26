package hydraulics

import "brinehead/sources"

// Mark says how well a figure of the catalogues is known.
type Mark = sources.Mark

// The marks of the catalogues of sizes, materials, velocities and fittings.
const (
	MarkRead       = sources.MarkRead
	MarkReadTwice  = sources.MarkReadTwice
	MarkFromMemory = sources.MarkFromMemory
	MarkComputed   = sources.MarkComputed
)

// millimetre in metres: the catalogues' unit of length.
const millimetre = 1e-3
