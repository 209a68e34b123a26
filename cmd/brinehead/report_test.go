package main

import (
	"bytes"
	"image"
	"image/png"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// reports runs every command that writes a report, into a folder each.
func reports(t *testing.T, extra ...string) map[string]string {
	t.Helper()
	folders := map[string]string{}
	for name, args := range map[string][]string{
		"check": {"check", seawater}, "suction": {"suction", seawater, "--change", filepath.Join(changes, "fine-strainer")}, "trim": {"trim", seawater},
		"compare": {"compare", seawater, filepath.Join(changes, "pipe-renewal"), "--condition", "ballast, tropics"}, "pump": {"pump", freshwater},
	} {
		folders[name] = t.TempDir()
		if code, _, stderr := brinehead(append(append(args, "--out", folders[name], "--only", "report"), extra...)...); code > exitNotMet || stderr != "" {
			t.Fatalf("%s: exit code %d, %s", name, code, stderr)
		}
	}
	return folders
}

// Every report is there in both forms, says the date and purpose it was given, the hashes of its inputs, its methods and where to sign, asks for
// nothing outside and needs no script; made again it has the same bytes.
func TestReports(t *testing.T) {
	extra := []string{"--date", "1 December 2026", "--purpose", "Change of strainer <STR1> & basket"}
	once, again := reports(t, extra...), reports(t, extra...)
	hash := regexp.MustCompile(`[0-9a-f]{64}`)
	for name, folder := range once {
		page, err := os.ReadFile(filepath.Join(folder, "report.html"))
		if err != nil {
			t.Fatal(err)
		}
		text := string(page)
		for _, says := range []string{"1 December 2026", "Change of strainer &lt;STR1&gt; &amp; basket", "<h2 id=\"s1\">Purpose</h2>", "Inputs as they were read", "Methods", "What was not checked", "Cautions",
			"Prepared by", "Checked by", "Accepted by", "Colebrook", "<th class=\"w\" scope=\"col\">", "role=\"img\"", "<html lang=\"en\">"} {
			if !strings.Contains(text, says) {
				t.Errorf("%s: the page does not hold %q", name, says)
			}
		}
		if n := len(hash.FindAllString(text, -1)); n < 6 {
			t.Errorf("%s: %d hashes", name, n)
		}
		if bad := regexp.MustCompile(`(?i)<script|https?://(?:[^w]|w[^w])|url\(|<link|<img|@import|javascript:|\son[a-z]+=`).FindString(strings.ReplaceAll(text, "http://www.w3.org/", "")); bad != "" {
			t.Errorf("%s: the page holds %q", name, bad)
		}
		for _, file := range []string{"report.html", "report.pdf"} {
			a, err := os.ReadFile(filepath.Join(folder, file))
			if err != nil {
				t.Fatal(err)
			}
			b, err := os.ReadFile(filepath.Join(again[name], file))
			if err != nil || !bytes.Equal(a, b) {
				t.Errorf("%s: %s has other bytes the second time, %v", name, file, err)
			}
			if file == "report.pdf" && (!bytes.HasPrefix(a, []byte("%PDF-")) || len(a) < 20000) {
				t.Errorf("%s: %d bytes of PDF", name, len(a))
			}
		}
	}
}

// A hostile job cannot put a script, a link or a control character into a report, nor a formula into a table.
func TestHostileJob(t *testing.T) {
	const hostile = `<script>alert(1)</script>"><img src=x onerror=alert(1)>`
	tables := lift("", "")
	for name, text := range tables {
		tables[name] = strings.ReplaceAll(strings.ReplaceAll(text, "DISCHARGE", `"`+strings.ReplaceAll(hostile, `"`, `""`)+`"`), "STR1", "=HYPERLINK(1)")
	}
	tables["conditions.csv"] = strings.ReplaceAll(tables["conditions.csv"], "ballast", `"</title><b>http://example.org \u202e"`)
	folder, out := writeJob(t, tables), t.TempDir()
	if code, _, stderr := brinehead("check", folder, "--out", out, "--type", "svg"); code > exitNotMet {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	files, err := os.ReadDir(out)
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		content, err := os.ReadFile(filepath.Join(out, f.Name()))
		if err != nil {
			t.Fatal(err)
		}
		text := string(content)
		if ext := filepath.Ext(f.Name()); (ext == ".html" || ext == ".svg") && (strings.Contains(text, "<script") || strings.Contains(text, "<img") || strings.Contains(text, "<b>")) {
			t.Errorf("%s holds what the job put there", f.Name())
		}
		if filepath.Ext(f.Name()) == ".csv" && regexp.MustCompile(`(?m)(^|,)"?=HYPERLINK`).MatchString(text) {
			t.Errorf("%s holds a formula", f.Name())
		}
	}
	if len(files) < 8 {
		t.Errorf("%d files", len(files))
	}
}

// What --out writes may be chosen: types, size, and by name.
func TestChosenFiles(t *testing.T) {
	folder := t.TempDir()
	if code, _, stderr := brinehead("check", seawater, "--condition", "loaded, tropics", "--out", folder, "--type", "pdf,svg", "--size", "200x100", "--only", "npsh,duty"); code > exitNotMet || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	var names []string
	files, _ := os.ReadDir(folder)
	for _, f := range files {
		names = append(names, f.Name())
	}
	if got := strings.Join(names, " "); got != "duty.csv loaded-tropics-npsh.pdf loaded-tropics-npsh.svg" {
		t.Errorf("%s", got)
	}
	if svg, _ := os.ReadFile(filepath.Join(folder, "loaded-tropics-npsh.svg")); !strings.Contains(string(svg), `width="566.9`) { // 200 mm in points
		t.Errorf("%.200s", svg)
	}
	for want, args := range map[string][]string{
		`type: found "bmp", want one of svg, png, pdf`:   {"--type", "bmp"},
		`size: found "160", want width and height in mm`: {"--size", "160"},
		`size: found "10x5000", want width and height`:   {"--size", "10x5000"},
	} {
		if code, out, stderr := brinehead(append([]string{"check", seawater}, args...)...); code != exitInput || out != "" || !strings.Contains(stderr, want) {
			t.Errorf("%v: exit code %d, %q", args, code, stderr)
		}
	}
}

// Golden images: the plots that the README shows are those that the program draws, to the eye.
func TestGoldenImages(t *testing.T) {
	out := t.TempDir()
	for _, args := range [][]string{
		{"check", seawater, "--condition", "ballast, tropics, fouled strainer"}, {"suction", seawater, "--condition", "ballast, tropics, fouled strainer", "--pump", "P1"},
		{"trim", seawater}, {"pump", freshwater}, {"readings", seawater, "--change", filepath.Join(changes, "harbour-readings")}, {"compare", seawater, filepath.Join(changes, "pipe-renewal"), "--condition", "ballast, tropics"},
	} {
		if code, _, stderr := brinehead(append(args, "--out", out, "--type", "png")...); code > exitNotMet || stderr != "" {
			t.Fatalf("%v: exit code %d, %s", args, code, stderr)
		}
	}
	for shown, drawn := range map[string]string{
		"ballast-tropics-fouled-strainer-schematic.png": "ballast-tropics-fouled-strainer-schematic.png",
		"ballast-tropics-fouled-strainer-head.png":      "ballast-tropics-fouled-strainer-head.png",
		"ballast-tropics-fouled-strainer-npsh.png":      "ballast-tropics-fouled-strainer-npsh.png",
		"suction-npsh.png":                              "1-ballast-tropics-fouled-strainer-p1-npsh.png",
		"suction-blockage.png":                          "1-ballast-tropics-fouled-strainer-p1-blockage.png",
		"suction-profile.png":                           "1-ballast-tropics-fouled-strainer-p1-profile.png",
		"trim-curve.png":                                "trim-curve.png",
		"trim-energy.png":                               "trim-energy.png",
		"pump-curve.png":                                "p1-p2-curve.png",
		"readings-flows.png":                            "ballast-tropics-p1-flows.png",
		"pipe-renewal-ballast-tropics-losses.png":       "ballast-tropics-losses.png",
		"pipe-renewal-ballast-tropics-systems.png":      "ballast-tropics-systems.png",
	} {
		want, got := readPNG(t, filepath.Join(testdata, "..", "docs", shown)), readPNG(t, filepath.Join(out, drawn))
		if share := differing(want, got); share > 0.001 {
			t.Errorf("%s: %.2f %% of the picture is another: look at it, and copy it to docs if it is right", shown, 100*share)
		}
	}
}

func readPNG(t *testing.T, path string) image.Image {
	t.Helper()
	content, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	picture, err := png.Decode(bytes.NewReader(content))
	if err != nil {
		t.Fatalf("%s: %v", path, err)
	}
	return picture
}

// differing returns the share of points whose colour is plainly another; 1 where the sizes differ.
func differing(a, b image.Image) float64 {
	if a.Bounds() != b.Bounds() {
		return 1
	}
	const plainly = 0x4000 // a quarter of the range: rounding of edges is no change
	far := func(x, y uint32) bool { return x > y+plainly || y > x+plainly }
	count, all := 0, 0
	for y := a.Bounds().Min.Y; y < a.Bounds().Max.Y; y++ {
		for x := a.Bounds().Min.X; x < a.Bounds().Max.X; x++ {
			r, g, bl, _ := a.At(x, y).RGBA()
			s, h, c, _ := b.At(x, y).RGBA()
			if all++; far(r, s) || far(g, h) || far(bl, c) {
				count++
			}
		}
	}
	return float64(count) / float64(all)
}

// Colour goes to a terminal only, and never without the word.
func TestColour(t *testing.T) {
	var plain, coloured bytes.Buffer
	run(streams{out: &plain, err: &plain}, []string{"check", seawater})
	run(streams{out: &coloured, err: &coloured, colour: true}, []string{"check", seawater})
	if strings.Contains(plain.String(), "\x1b") || !strings.Contains(coloured.String(), "\x1b[1;31mNOT MET\x1b[0m") {
		t.Errorf("plain %.60q, coloured %.60q", plain.String(), coloured.String())
	}
	if stripped := regexp.MustCompile("\x1b\\[[0-9;]*m").ReplaceAllString(coloured.String(), ""); stripped != plain.String() {
		t.Error("the words are others with colour")
	}
	var asJSON bytes.Buffer
	run(streams{out: &asJSON, err: &asJSON, colour: true}, []string{"check", seawater, "--format", "json"})
	if strings.Contains(asJSON.String(), "\x1b") {
		t.Error("JSON is coloured")
	}
}

// The manual has a page for every command, and shell completion is there.
func TestManual(t *testing.T) {
	folder := t.TempDir()
	if code, out, stderr := brinehead("man", folder); code != exitMet || out != "" || stderr != "" {
		t.Fatalf("exit code %d, %s", code, stderr)
	}
	for _, c := range []string{"catalogue", "check", "compare", "pump", "suction", "trim", "water"} {
		if page, err := os.ReadFile(filepath.Join(folder, "brinehead-"+c+".1")); err != nil || !strings.Contains(string(page), ".SH EXAMPLE") {
			t.Errorf("%s: %v", c, err)
		}
	}
	for _, shell := range []string{"bash", "zsh", "fish", "powershell"} {
		if code, out, _ := brinehead("completion", shell); code != exitMet || !strings.Contains(out, "brinehead") {
			t.Errorf("%s: exit code %d", shell, code)
		}
	}
	if code, _, stderr := brinehead("man"); code != exitInput || !strings.Contains(stderr, "man needs the folder") {
		t.Errorf("exit code %d, %s", code, stderr)
	}
}
