// Brinehead shows whether a ship's cooling-water pumps do their duty: flow at every cooler, NPSH margin, motor load,
// velocities and pressures, from a job folder of tables. See the README.
package main

import "os"

func main() {
	os.Exit(run(streams{out: os.Stdout, err: os.Stderr, colour: onTerminal(os.Stdout)}, os.Args[1:]))
}

// onTerminal says whether a file is a terminal that may be coloured: NO_COLOR and a dumb terminal say no.
func onTerminal(f *os.File) bool {
	info, err := f.Stat()
	return err == nil && info.Mode()&os.ModeCharDevice != 0 && os.Getenv("NO_COLOR") == "" && os.Getenv("TERM") != "dumb"
}
