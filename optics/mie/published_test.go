package mie

import (
	"math"
	"testing"
)

// Wiscombe 1979, Mie scattering calculations (NCAR/TN-140), test tables: extinction,
// scattering, asymmetry. Values from memory, printed to six decimals or seven digits.
func TestSphere_Wiscombe1979(t *testing.T) {
	for _, c := range []struct {
		x           float64
		m           complex128
		ext, sca, g float64
	}{
		{10, 1.5, 2.881999, 2.881999, 0.742913},
		{100, 1.5, 2.094388, 2.094388, 0.818246},
		{1000, 1.5, 2.013945, 2.013945, 0.827882},
		{0.099, 0.75, 7.417859e-6, 7.417859e-6, 0.001448},
		{0.101, 0.75, 8.033538e-6, 8.033538e-6, 0.001507},
		{10, 0.75, 2.232265, 2.232265, 0.896473},
		{1000, 0.75, 1.997908, 1.997908, 0.844944},
		{1, 1.33 + 1e-5i, 0.093952, 0.093923, 0.184517},
		{100, 1.33 + 1e-5i, 2.101321, 2.096594, 0.868959},
		{10000, 1.33 + 1e-5i, 2.004089, 1.723857, 0.907840},
		{0.055, 1.5 + 1i, 0.101491, 1.131687e-5, 0.000491},
		{0.056, 1.5 + 1i, 0.1033467, 1.216311e-5, 0.000509},
		{1, 1.5 + 1i, 2.336321, 0.663454, 0.192136},
		{100, 1.5 + 1i, 2.097502, 1.283697, 0.850252},
		{10000, 1.5 + 1i, 2.004368, 1.236574, 0.846310},
		{1, 10 + 10i, 2.532993, 2.049405, -0.110664},
		{100, 10 + 10i, 2.071124, 1.836785, 0.556215},
		{10000, 10 + 10i, 2.005914, 1.795393, 0.548194},
	} {
		e, err := Sphere(c.x, c.m)
		if err != nil {
			t.Fatal(err)
		}
		for i, p := range [][2]float64{{e.Ext, c.ext}, {e.Sca, c.sca}, {e.G, c.g}} {
			tolerance := 1.1e-6
			if p[1] > 0 && p[1] < 1e-3 && i < 2 {
				tolerance = 1e-6 * p[1]
			}
			if math.Abs(p[0]-p[1]) > tolerance {
				t.Errorf("x = %g, m = %g: result %d is %.8g, printed %.7g", c.x, c.m, i, p[0], p[1])
			}
		}
	}
}

// Bohren & Huffman 1983, appendix A, sample output: radius 0.525 um, wavelength 0.6328 um, index 1.55.
func TestSphere_BohrenHuffman1983_appendixA(t *testing.T) {
	e, err := Sphere(2*math.Pi*0.525/0.6328, 1.55)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"Ext", e.Ext, 3.10543}, {"Sca", e.Sca, 3.10543}, {"Back", e.Back, 2.92534}, {"G", e.G, 0.63314}} {
		if math.Abs(c.got-c.want) > 6e-6 { // printed to five decimals
			t.Errorf("%s = %.6f, printed %.5f", c.name, c.got, c.want)
		}
	}
}

// Bohren & Huffman 1983, appendix B, sample output: core radius 0.171 um, coat radius
// 6.265 um, wavelength 3 um, indices 1.59+0.66i and 1.409+0.1747i. Values from memory.
func TestCoated_BohrenHuffman1983_appendixB(t *testing.T) {
	e, err := Coated(2*math.Pi*0.171/3, 2*math.Pi*6.265/3, 1.59+0.66i, 1.409+0.1747i)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"Ext", e.Ext, 2.32803}, {"Sca", e.Sca, 1.14341}, {"Back", e.Back, 0.0285099}} {
		if math.Abs(c.got-c.want) > 6e-6*c.want { // printed to six digits
			t.Errorf("%s = %.7g, printed %.6g", c.name, c.got, c.want)
		}
	}
}

// Bohren & Huffman 1983, appendix C, sample output: radius 0.525 um, wavelength 0.6328 um,
// index 1.55, lit across the axis. Values from memory.
func TestCylinder_BohrenHuffman1983_appendixC(t *testing.T) {
	e, err := Cylinder(2*math.Pi*0.525/0.6328, 1.55, math.Pi/2)
	if err != nil {
		t.Fatal(err)
	}
	tm, te := e.TM(), e.TE
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"TM Ext", tm.Ext, 2.09716}, {"TM Sca", tm.Sca, 2.09716}, {"TE Ext", te.Ext, 1.92782}, {"TE Sca", te.Sca, 1.92782}} {
		if math.Abs(c.got-c.want) > 6e-6 { // printed to six digits
			t.Errorf("%s = %.6f, printed %.5f", c.name, c.got, c.want)
		}
	}
}
