// Package pumps holds what drives the water: digitised pump curves, speed, wear, shaft power and NPSH required.
//
// All quantities are SI (m3/s, m, W) but for the speed, which is in revolutions a minute as every pump sheet has it.
// A sheet is taken as measured in cold fresh water of 1000 kg/m3: its heads hold in metres of any water; its powers
// are multiplied by the density over 1000 kg/m3 (ISO 9906:2012, from memory).
package pumps
