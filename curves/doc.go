// Package curves holds what happens where a circuit and its pumps meet: the operating point, the system curve as one
// pump sees it, and the NPSH that the suction makes available.
//
// All quantities are SI; heads and NPSH are metres of the water pumped.
package curves
