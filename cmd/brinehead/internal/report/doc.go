// Package report writes the answers of package study: as text for a terminal, as JSON and CSV for other programs, and
// as files with plots.
package report
