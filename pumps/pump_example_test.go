package pumps_test

import (
	"fmt"
	"math"

	"brinehead/pumps"
)

const (
	gpm   = 3.785411784e-3 / 60 // US gallon a minute, m3/s
	foot  = 0.3048
	horse = 745.6998715822702 // W
)

// sheet makes a pump sheet of flow and head alone, in any units.
func sheet(speed, flowUnit, headUnit float64, flowAndHead ...[2]float64) *pumps.Curve {
	var points []pumps.SheetPoint
	for _, p := range flowAndHead {
		points = append(points, pumps.SheetPoint{Flow: p[0] * flowUnit, Head: p[1] * headUnit,
			Efficiency: math.NaN(), Power: math.NaN(), NPSHRequired: math.NaN()})
	}
	c, err := pumps.NewCurve(0, speed, points)
	if err != nil {
		fmt.Println(err)
	}
	return c
}

// Hydraulic Institute, Engineering Data Book, affinity example: a pump at 1740 rpm, slowed by 10 %, with 213, 206 and
// 198 ft at 0, 200 and 400 gal/min. The book: 173, 167 and 160 ft at 0, 180 and 360 gal/min.
func ExamplePump_Head() {
	c := sheet(1740, gpm, foot, [2]float64{0, 213}, [2]float64{200, 206}, [2]float64{400, 198})
	p := pumps.Pump{Curve: c, Speed: 0.9 * 1740}
	for _, q := range []float64{0, 180, 360} {
		h, _ := p.Head(q * gpm)
		fmt.Printf("%.0f gal/min  %.0f ft\n", q, h/foot)
	}
	// Output:
	// 0 gal/min  173 ft
	// 180 gal/min  167 ft
	// 360 gal/min  160 ft
}

// R. W. Fox and A. T. McDonald, Introduction to Fluid Mechanics, example 10.7: 300 gal/min at 21.9 ft and 25 ft at
// shut-off, run at 1750 instead of 1170 rpm. The book: 449 gal/min, 49.0 ft, shut-off 55.9 ft.
func ExamplePump_Head_faster() {
	c := sheet(1170, gpm, foot, [2]float64{0, 25}, [2]float64{300, 21.9}, [2]float64{450, 18}) // the third point is ours
	p := pumps.Pump{Curve: c, Speed: 1750}
	_, high := p.Range()
	q := 300 * 1750 / 1170.0
	h, _ := p.Head(q * gpm)
	shut, _ := p.Head(0)
	fmt.Printf("%.0f gal/min  %.1f ft, shut-off %.1f ft, known to %.0f gal/min\n", q, h/foot, shut/foot, high/gpm)
	// Output: 449 gal/min  49.0 ft, shut-off 55.9 ft, known to 673 gal/min
}

// Y. A. Cengel and J. M. Cimbala, Fluid Mechanics, example 14-2: water of 998 kg/m3, 0.0233 m3/s at 7.3 m and 70 %, or
// at 21.9 m and 76.5 %. The book: 2.38 kW and 6.53 kW. The power law of Crane TP-410, example 7-33, rides along: from
// 3500 to 1700 rpm 400 gal/min at 126 ft and 17.5 hp become 194.3 gal/min, 29.7 ft and 2.0 hp.
func ExamplePump_At() {
	for _, book := range [][2]float64{{7.3, 0.70}, {21.9, 0.765}} {
		var points []pumps.SheetPoint
		for i, q := range []float64{0.01, 0.0233, 0.04} { // the outer points are ours
			points = append(points, pumps.SheetPoint{Flow: q, Head: book[0] + 1 - float64(i), Efficiency: book[1], Power: math.NaN(), NPSHRequired: math.NaN()})
		}
		c, err := pumps.NewCurve(0, 0, points)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%.2f kW\n", pumps.Pump{Curve: c}.At(0.0233, 998).ShaftPower/1e3)
	}

	var points []pumps.SheetPoint
	for i, q := range []float64{200, 400, 600} { // the outer points are ours
		points = append(points, pumps.SheetPoint{Flow: q * gpm, Head: (150 - 24*float64(i)) * foot, Efficiency: math.NaN(),
			Power: (15 + 2.5*float64(i)) * horse, NPSHRequired: math.NaN()})
	}
	c, err := pumps.NewCurve(0, 3500, points)
	if err != nil {
		fmt.Println(err)
		return
	}
	slow := pumps.Pump{Curve: c, Speed: 1700}.At(400*gpm*1700/3500, 1000)
	fmt.Printf("%.1f gal/min  %.1f ft  %.1f hp\n", slow.Flow/gpm, slow.Head/foot, slow.ShaftPower/horse)
	// Output:
	// 2.38 kW
	// 6.53 kW
	// 194.3 gal/min  29.7 ft  2.0 hp
}

// S. Sarkar, Fuel and Fluid Machinery worked example 10.4 (as transcribed): 12 m and 6 kW at 1450 rpm. At 1650 rpm the book has 15.54 m
// and 8.84 kW.
func ExamplePump_At_faster() {
	var points []pumps.SheetPoint
	for i, q := range []float64{0.02, 0.04, 0.06} { // the flows and the outer points are ours
		points = append(points, pumps.SheetPoint{Flow: q, Head: 14 - 2*float64(i), Efficiency: math.NaN(), Power: (5 + float64(i)) * 1e3, NPSHRequired: math.NaN()})
	}
	c, err := pumps.NewCurve(0, 1450, points)
	if err != nil {
		fmt.Println(err)
		return
	}
	d := pumps.Pump{Curve: c, Speed: 1650}.At(0.04*1650/1450, 1000)
	fmt.Printf("%.2f m, %.2f kW\n", d.Head, d.ShaftPower/1e3)
	// Output: 15.54 m, 8.84 kW
}
