// Package hydraulics holds what the water of a cooling circuit meets on its way: pipe friction, fittings,
// strainers, coolers, and the network that joins them.
//
// All quantities are SI: metres, m3/s, pascals, kg/m3, m2/s. Losses and driving heads are metres of the water
// that flows; heads are total heads, H = z + p/(rho g) + v2/2g, with z above the keel and the gauge pressure p.
//
// How well the laws are known: the Colebrook-White law describes commercial pipe within about 5 % of friction
// where the roughness is known, and the roughness of a ship's pipe in service seldom is, within a factor of two;
// single fittings scatter by 20 to 50 % (Hydraulic Institute, Engineering Data Book). Results are exact answers
// to the question put, not to the state of the pipe.
package hydraulics
