// Brinehead shows whether a ship's cooling-water pumps do their duty: flow at every cooler, NPSH margin, motor load,
// velocities and pressures, from a job folder of tables. See the README.
package main

import "os"

func main() {
	os.Exit(run(streams{os.Stdout, os.Stderr}, os.Args[1:]))
}
