package report

import (
	"bytes"
	"fmt"
	"math"
	"strings"
	"time"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"codeberg.org/go-pdf/fpdf"

	"brinehead/curves/plots"
)

const (
	pdfFamily = "sans"
	pdfMargin = 51.0 // points: 18 mm
	pdfLine   = 12.0
	pdfSize   = 9.5
)

// page is a PDF in the making: A4, real text, a running head and page numbers.
type pdfPage struct {
	*fpdf.Fpdf
	width, bottom float64 // of the text
}

// pdf writes the document as A4 pages. No clock is read: the same document gives the same bytes.
func (d *document) pdf() ([]byte, error) {
	f := fpdf.New("P", "pt", "A4", "")
	f.SetCatalogSort(true)
	epoch := time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC) // a date that says nothing: the report's own stands on its first page
	f.SetCreationDate(epoch)
	f.SetModificationDate(epoch)
	f.SetProducer("Brinehead "+plain(d.version), true)
	f.SetTitle(plain(d.title+": "+d.subtitle), true)
	f.SetLang("en")
	f.AddUTF8FontFromBytes(pdfFamily, "", liberationsansregular.TTF)
	f.AddUTF8FontFromBytes(pdfFamily, "B", liberationsansbold.TTF)
	f.SetMargins(pdfMargin, pdfMargin+14, pdfMargin)
	f.SetAutoPageBreak(false, pdfMargin)
	f.SetCellMargin(0)
	f.AliasNbPages("{all}")
	w, h := f.GetPageSize()
	p := pdfPage{f, w - 2*pdfMargin, h - pdfMargin - 14}
	f.SetHeaderFunc(func() {
		f.SetFont(pdfFamily, "", 8)
		f.SetTextColor(90, 90, 90)
		f.Text(pdfMargin, pdfMargin-6, p.fitted(pdfText(d.title+": "+d.subtitle+dated(d.date)), p.width))
	})
	f.SetFooterFunc(func() {
		f.SetFont(pdfFamily, "", 8)
		f.SetTextColor(90, 90, 90)
		f.SetXY(pdfMargin, h-pdfMargin+4)
		f.CellFormat(p.width, 10, fmt.Sprintf("page %d of {all}", f.PageNo()), "", 0, "R", false, 0, "")
	})
	f.AddPage()
	p.ink()
	f.SetFont(pdfFamily, "B", 17)
	p.paragraph(d.title, 21)
	f.SetFont(pdfFamily, "", pdfSize)
	p.paragraph(d.subtitle+dated(d.date)+". Made with Brinehead "+d.version+".", pdfLine)
	p.gap(8)
	for i, line := range d.head {
		f.SetFont(pdfFamily, map[bool]string{true: "B", false: ""}[i == 0], map[bool]float64{true: 12, false: pdfSize}[i == 0])
		p.paragraph(line, map[bool]float64{true: 15, false: pdfLine}[i == 0])
	}
	for _, s := range d.sections {
		p.heading(s.title)
		for _, b := range s.blocks {
			if err := p.block(b); err != nil {
				return nil, err
			}
		}
	}
	var out bytes.Buffer
	if err := f.Output(&out); err != nil {
		return nil, fmt.Errorf("report.pdf: %w", err)
	}
	return out.Bytes(), nil
}

// pdfText makes a text fit for the PDF's fonts, which end with the basic plane.
func pdfText(s string) string {
	return strings.Map(func(r rune) rune {
		if r > 0xffff {
			return '□'
		}
		return r
	}, plain(s))
}

func (p pdfPage) ink() { p.SetTextColor(30, 30, 30) }

// room begins a new page where less than a height is left.
func (p pdfPage) room(height float64) {
	if p.GetY()+height > p.bottom {
		size, _ := p.GetFontSize()
		p.AddPage()
		p.SetFont(pdfFamily, "", size)
		p.ink()
		p.SetXY(pdfMargin, pdfMargin+14)
	}
}

func (p pdfPage) gap(height float64) { p.SetXY(pdfMargin, p.GetY()+height) }

// wrapped breaks a text into lines no wider than a width, in the present font; a word too wide is broken too.
func (p pdfPage) wrapped(text string, width float64) (lines []string) {
	line := ""
	for _, word := range strings.Fields(pdfText(text)) {
		for p.GetStringWidth(word) > width {
			n := len([]rune(word)) - 1
			for n > 1 && p.GetStringWidth(string([]rune(word)[:n])) > width {
				n--
			}
			if line != "" {
				lines, line = append(lines, line), ""
			}
			lines = append(lines, string([]rune(word)[:n]))
			word = string([]rune(word)[n:])
		}
		switch {
		case line == "":
			line = word
		case p.GetStringWidth(line+" "+word) > width:
			lines, line = append(lines, line), word
		default:
			line += " " + word
		}
	}
	if line != "" || lines == nil {
		lines = append(lines, line)
	}
	return lines
}

// fitted cuts a text to a width.
func (p pdfPage) fitted(text string, width float64) string {
	for r := []rune(text); p.GetStringWidth(text) > width && len(r) > 1; text = string(r) + "…" {
		r = r[:len(r)-1]
	}
	return text
}

func (p pdfPage) paragraph(text string, line float64) {
	for _, l := range p.wrapped(text, p.width) {
		p.room(line)
		p.SetX(pdfMargin)
		p.CellFormat(p.width, line, l, "", 1, "L", false, 0, "")
	}
}

func (p pdfPage) heading(title string) {
	p.gap(14)
	p.room(70) // not alone at the foot of a page
	p.ink()
	p.SetFont(pdfFamily, "B", 12.5)
	p.Bookmark(pdfText(title), 0, -1)
	p.paragraph(title, 16)
	p.SetFont(pdfFamily, "", pdfSize)
	p.gap(3)
}

func (p pdfPage) block(b block) error {
	p.ink()
	p.SetFont(pdfFamily, "", pdfSize)
	switch {
	case b.table != nil:
		p.table(b.table.caption, b.table.grid)
	case b.plot != nil:
		return p.plot(b.plot)
	case b.sign != nil:
		p.signatures(b.sign)
	case b.items != nil:
		for _, item := range b.items {
			lines := p.wrapped(item, p.width-12)
			for i, l := range lines {
				p.room(pdfLine)
				if i == 0 {
					p.SetX(pdfMargin)
					p.CellFormat(12, pdfLine, "•", "", 0, "L", false, 0, "")
				}
				p.SetX(pdfMargin + 12)
				p.CellFormat(p.width-12, pdfLine, l, "", 1, "L", false, 0, "")
			}
			p.gap(1.5)
		}
	default:
		p.paragraph(b.text, pdfLine)
		p.gap(3)
	}
	return nil
}

// table draws a table whose head is repeated on every page it goes on to. Columns are as wide as they need; where that is more than the
// page, the widest give way.
func (p pdfPage) table(caption string, g grid) {
	const size, line, pad = 7.5, 9.5, 3.0
	p.gap(4)
	p.SetFont(pdfFamily, "B", 8.5)
	p.room(3*line + 24)
	p.paragraph(caption, 11)
	p.SetFont(pdfFamily, "", size)
	widths := p.columns(g, pad)
	row := func(cells []string, bold bool) {
		style := ""
		if bold {
			style = "B"
		}
		p.SetFont(pdfFamily, style, size)
		var lines [][]string
		height := line
		for i, cell := range cells {
			lines = append(lines, p.wrapped(cell, widths[i]-2*pad))
			height = math.Max(height, line*float64(len(lines[i]))+2)
		}
		x, y := pdfMargin, p.GetY()
		for i := range cells {
			if bold {
				p.SetFillColor(236, 236, 236)
				p.Rect(x, y, widths[i], height, "F")
			}
			p.SetDrawColor(180, 180, 180)
			p.SetLineWidth(0.4)
			p.SetDashPattern(nil, 0)
			p.Rect(x, y, widths[i], height, "D")
			align := "R"
			if i < g.left || g.wordy(i) {
				align = "L"
			}
			for k, l := range lines[i] {
				p.SetXY(x+pad, y+1+float64(k)*line)
				p.CellFormat(widths[i]-2*pad, line, l, "", 0, align, false, 0, "")
			}
			x += widths[i]
		}
		p.SetXY(pdfMargin, y+height)
	}
	tall := func(cells []string) float64 {
		height := line
		for i, cell := range cells {
			height = math.Max(height, line*float64(len(p.wrapped(cell, widths[i]-2*pad)))+2)
		}
		return height
	}
	row(g.head, true)
	for _, cells := range g.rows {
		p.SetFont(pdfFamily, "", size)
		if p.GetY()+tall(cells) > p.bottom {
			p.AddPage()
			p.ink()
			p.SetXY(pdfMargin, pdfMargin+14)
			row(g.head, true)
		}
		row(cells, false)
	}
	p.gap(6)
}

// columns finds the widths of a table's columns.
func (p pdfPage) columns(g grid, pad float64) []float64 {
	widths := make([]float64, len(g.head))
	size, _ := p.GetFontSize()
	for k, cells := range append([][]string{g.head}, g.rows...) {
		p.SetFont(pdfFamily, map[bool]string{true: "B", false: ""}[k == 0], size)
		for i, cell := range cells {
			widths[i] = math.Max(widths[i], p.GetStringWidth(pdfText(cell))+2*pad+1)
		}
	}
	sum := func() (s float64) {
		for _, w := range widths {
			s += w
		}
		return s
	}
	for sum() > p.width {
		widest := 0
		for i := range widths {
			if widths[i] > widths[widest] {
				widest = i
			}
		}
		second := 0.0
		for i := range widths {
			if i != widest {
				second = math.Max(second, widths[i])
			}
		}
		give := math.Min(sum()-p.width, math.Max(widths[widest]-second, 8))
		widths[widest] -= give
	}
	return widths
}

// plot draws a chart as wide as the text, or as high as a page bears.
func (p pdfPage) plot(chart *plot) error {
	size, err := plots.NaturalSize(chart.write)
	if err != nil {
		return err
	}
	const millimetre = 72 / 25.4
	width, height := size.Width*millimetre, size.Height*millimetre
	page := p.bottom - pdfMargin - 14
	scale := math.Min(p.width/width, (page/2-30)/height) // two to a page
	if size.Height > 1.2*size.Width {
		scale = math.Min(p.width/width, (page-30)/height)
	}
	p.gap(6)
	p.room(height*scale + 2*pdfLine)
	top := p.GetY() // drawing moves it
	canvas := newPDFCanvas(p.Fpdf, pdfMargin, top+height*scale, scale)
	if err := plots.Onto(canvas, size, chart.write); err != nil {
		return err
	}
	p.SetDashPattern(nil, 0)
	p.ink()
	p.SetXY(pdfMargin, top+height*scale+2)
	p.SetFont(pdfFamily, "", 8.5)
	p.paragraph(chart.caption, 11)
	p.gap(4)
	return nil
}

// signatures draws the lines to sign on.
func (p pdfPage) signatures(names []string) {
	const height = 34.0
	p.room(height*float64(len(signRows)) + 20)
	width := p.width / float64(len(names))
	p.SetDrawColor(110, 110, 110)
	p.SetLineWidth(0.5)
	y := p.GetY() + 4
	for i, name := range names {
		x := pdfMargin + float64(i)*width
		p.SetFont(pdfFamily, "B", pdfSize)
		p.Text(x+3, y+12, pdfText(name))
		p.SetFont(pdfFamily, "", pdfSize)
		for k, row := range signRows {
			base := y + 18 + height*float64(k+1)
			p.Text(x+3, base-3, row)
			p.Line(x+3, base, x+width-12, base)
		}
	}
	p.SetXY(pdfMargin, y+20+height*float64(len(signRows)))
}
