// Package job reads a job folder: its tables with everything wrong in them told at once, and from them the plant of each
// condition.
//
// A table is a CSV file whose header row names a quantity and, in square brackets, its unit. Inside the program every
// number is SI but for temperatures (Celsius), speeds (rpm) and salinities (g/kg); units are turned here and nowhere else
// on the way in.
package job
