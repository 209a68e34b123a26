package fluids

import "testing"

// IAPWS R15-11 (2011), table 4: conductivity in mW/(m K) without critical enhancement, nine digits. Recalled from
// memory; the second and the fourth also stand in the documentation of iapws 1.5.2.
func TestConductivityTable4(t *testing.T) {
	for _, c := range [][3]float64{
		{298.15, 0, 18.4341883}, {298.15, 998, 607.712868}, {298.15, 1200, 799.038144}, {873.15, 0, 79.1034659},
	} {
		got, err := Conductivity(c[0], c[1])
		if err != nil {
			t.Fatal(err)
		}
		near(t, "conductivity", got*1e3, c[2], 1e-8)
	}
}

// The check value of the IAPWS guideline on the thermal conductivity of seawater (2015), as the documentation of
// iapws 1.5.2 gives it: six digits.
func TestSeaConductivityExcess(t *testing.T) {
	got, err := SeaConductivityExcess(293.15, 0.1e6, 35)
	if err != nil {
		t.Fatal(err)
	}
	within(t, "excess", got, -0.00418604, 0.5e-8)
}

// testdata/reference/saline.csv from 10 degC: the guideline's one check value is at atmospheric pressure, where the
// coefficients of pressure are idle. The two programs sum alike, so they agree to rounding.
func TestSeaConductivityExcessAgainstReference(t *testing.T) {
	g := readGrid(t, "saline.csv")
	if n := g.count(t, "conductivity_W_m_K"); n != 27 {
		t.Errorf("%d figures, want 27", n)
	}
	for _, row := range g.rows {
		want, ok := g.at(t, row, "conductivity_W_m_K")
		if !ok {
			continue
		}
		got, err := SeaConductivityExcess(row[0], row[1], row[2])
		if err != nil {
			t.Fatal(err)
		}
		near(t, "excess", got, want, 1e-11)
	}
}
