package report

import (
	"bytes"
	"fmt"
	"html"
	"strings"

	"brinehead/curves/plots"
)

// style is the look of the page: one column, tables that scroll by themselves on a narrow screen and repeat their heads on paper.
const style = `
:root{color-scheme:light}
*{box-sizing:border-box}
body{margin:0 auto;padding:1rem;max-width:62rem;font:16px/1.5 "Liberation Sans",Arial,Helvetica,sans-serif;color:#1e1e1e;background:#fff}
h1{font-size:1.6rem;line-height:1.2;margin:.2rem 0}
h2{font-size:1.2rem;margin:2rem 0 .5rem;border-bottom:1px solid #6e6e6e;padding-bottom:.2rem}
p{margin:.5rem 0;overflow-wrap:anywhere}
.statement{border-left:.4rem solid #1e1e1e;padding:.3rem 0 .3rem .8rem;margin:1rem 0}
.statement p:first-child{font-weight:bold;font-size:1.15rem}
nav ol{columns:2;column-gap:2rem;padding-left:1.4rem}
a{color:#00527f}
.scroll{overflow-x:auto;margin:.6rem 0}
.scroll:focus{outline:2px solid #00527f}
table{border-collapse:collapse;font-size:.86rem}
caption{text-align:left;font-weight:bold;padding:.2rem 0}
th,td{border:1px solid #b4b4b4;padding:.15rem .45rem;text-align:right;vertical-align:top}
th{background:#ececec;text-align:right}
th.w,td.w{text-align:left;overflow-wrap:anywhere}
figure{margin:1rem 0;break-inside:avoid}
figure svg{width:100%;height:auto;max-width:46rem;display:block}
figcaption{font-size:.9rem}
li{overflow-wrap:anywhere}
.sign td{height:3.2rem;width:33%;text-align:left}
@media (max-width:40rem){nav ol{columns:1}}
@media print{body{font-size:10pt;max-width:none;padding:0}details{display:none}thead{display:table-header-group}tr{break-inside:avoid}h2{break-after:avoid}.scroll{overflow:visible}table{font-size:8pt}a{color:inherit;text-decoration:none}@page{size:A4;margin:16mm}}
`

// html writes the document as one file that asks for nothing else and needs no script.
func (d *document) html() ([]byte, error) {
	var b bytes.Buffer
	e := html.EscapeString
	fmt.Fprintf(&b, "<!doctype html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n<title>%s</title>\n<style>%s</style>\n</head>\n<body>\n", e(plain(d.title+": "+d.subtitle)), style)
	fmt.Fprintf(&b, "<header>\n<h1>%s</h1>\n<p>%s%s. Made with Brinehead %s.</p>\n", e(plain(d.title)), e(plain(d.subtitle)), e(dated(d.date)), e(plain(d.version)))
	b.WriteString("<div class=\"statement\">\n")
	for _, p := range d.head {
		fmt.Fprintf(&b, "<p>%s</p>\n", e(plain(p)))
	}
	b.WriteString("</div>\n</header>\n<nav aria-label=\"Contents\">\n<ol>\n")
	for i, s := range d.sections {
		fmt.Fprintf(&b, "<li><a href=\"#s%d\">%s</a></li>\n", i+1, e(plain(s.title)))
	}
	b.WriteString("</ol>\n</nav>\n<main>\n")
	for i, s := range d.sections {
		fmt.Fprintf(&b, "<section aria-labelledby=\"s%d\">\n<h2 id=\"s%d\">%s</h2>\n", i+1, i+1, e(plain(s.title)))
		for _, block := range s.blocks {
			if err := block.html(&b); err != nil {
				return nil, err
			}
		}
		b.WriteString("</section>\n")
	}
	b.WriteString("</main>\n</body>\n</html>\n")
	return b.Bytes(), nil
}

// dated is the date as the user states it.
func dated(date string) string {
	if date == "" {
		return ""
	}
	return ", " + plain(date)
}

func (x block) html(b *bytes.Buffer) error {
	e := func(s string) string { return html.EscapeString(plain(s)) }
	switch {
	case x.table != nil:
		htmlTable(b, x.table.caption, x.table.grid)
	case x.plot != nil:
		var svg bytes.Buffer
		if err := x.plot.write(&svg, plots.SVG, plots.Size{}); err != nil {
			return err
		}
		_, drawing, _ := strings.Cut(svg.String(), "<svg")
		fmt.Fprintf(b, "<figure>\n<svg role=\"img\" aria-label=\"%s\"%s\n<figcaption>%s</figcaption>\n", e(x.plot.caption), drawing, e(x.plot.caption))
		if x.plot.data != nil && len(x.plot.data.rows) > 0 {
			b.WriteString("<details>\n<summary>The figures of this plot</summary>\n")
			htmlTable(b, x.plot.caption, *x.plot.data)
			b.WriteString("</details>\n")
		}
		b.WriteString("</figure>\n")
	case x.sign != nil:
		b.WriteString("<table class=\"sign\">\n<caption>To be signed</caption>\n<thead><tr>")
		for _, s := range x.sign {
			fmt.Fprintf(b, "<th class=\"w\" scope=\"col\">%s</th>", e(s))
		}
		b.WriteString("</tr></thead>\n<tbody>\n")
		for _, row := range signRows {
			b.WriteString("<tr>" + strings.Repeat("<td class=\"w\">"+row+":</td>", len(x.sign)) + "</tr>\n")
		}
		b.WriteString("</tbody>\n</table>\n")
	case x.items != nil:
		b.WriteString("<ul>\n")
		for _, i := range x.items {
			fmt.Fprintf(b, "<li>%s</li>\n", e(i))
		}
		b.WriteString("</ul>\n")
	default:
		fmt.Fprintf(b, "<p>%s</p>\n", e(x.text))
	}
	return nil
}

// signRows are the lines under each who signs.
var signRows = []string{"Name", "Signature", "Date"}

func htmlTable(b *bytes.Buffer, caption string, g grid) {
	e := func(s string) string { return html.EscapeString(plain(s)) }
	fmt.Fprintf(b, "<div class=\"scroll\" tabindex=\"0\" role=\"region\" aria-label=\"%s\">\n<table>\n<caption>%s</caption>\n<thead><tr>", e(caption), e(caption))
	class := func(i int) string {
		if i < g.left || g.wordy(i) {
			return " class=\"w\""
		}
		return ""
	}
	for i, h := range g.head {
		fmt.Fprintf(b, "<th%s scope=\"col\">%s</th>", class(i), e(h))
	}
	b.WriteString("</tr></thead>\n<tbody>\n")
	for _, row := range g.rows {
		b.WriteString("<tr>")
		for i, cell := range row {
			fmt.Fprintf(b, "<td%s>%s</td>", class(i), e(cell))
		}
		b.WriteString("</tr>\n")
	}
	b.WriteString("</tbody>\n</table>\n</div>\n")
}

// wordy says whether a column holds sentences, which read badly set to the right.
func (g grid) wordy(column int) bool {
	const sentence = 18
	for _, row := range g.rows {
		if column < len(row) && len(row[column]) > sentence {
			return true
		}
	}
	return false
}

// plain makes a user's text fit for a page: no control characters and no broken encoding.
func plain(s string) string {
	return strings.Map(func(r rune) rune {
		if r < ' ' || r >= 0x7f && r < 0xa0 || r == '\ufffd' || r >= 0x202a && r <= 0x202e || r >= 0x2066 && r <= 0x2069 {
			return ' '
		}
		return r
	}, strings.ToValidUTF8(s, " "))
}
