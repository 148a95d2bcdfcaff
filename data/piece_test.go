package data

import (
	"fmt"
	"math"
	"math/cmplx"
	"strings"
	"testing"
	"testing/fstest"
)

// stiffnessCampaign reads one table with a specimen and the rest of a test.
func stiffnessCampaign(t *testing.T, piece, more, text string) (*Campaign, error) {
	t.Helper()
	return OpenFS(fstest.MapFS{
		"campaign.yaml": {Data: []byte("campaign: stiffness\nspecimens: {pair: " + piece + "}\ntests:\n  - {name: a, kind: frequency sweep, file: a.csv, specimen: pair, temperature: 23 °C" + more + "}\n")},
		"a.csv":         {Data: []byte(text)},
	}, "campaign.yaml")
}

const pairOf25 = "{shape: double shear, diameter: 25 mm, thickness: 5 mm}"

// A double shear pair of 25 mm diameter and 5 mm layers has K* = 2G*A/h
// (ISO 4664-1; from memory).
func TestStiffnessTables(t *testing.T) {
	const area, h = math.Pi * 0.025 * 0.025 / 4, 0.005
	g := []complex128{1.5e6 + 0.15e6i, 1.7e6 + 0.2e6i}
	k := make([]complex128, 2)
	for i := range k {
		k[i] = g[i] * complex(2*area/h/1e3, 0) // N/mm
	}
	num := func(x float64) string { return fmt.Sprintf("%.12g", x) }
	tan := func(i int) float64 { return imag(k[i]) / real(k[i]) }
	for name, text := range map[string]string{
		"parts":             "f / Hz,K' / N/mm,K'' / N/mm\n1," + num(real(k[0])) + "," + num(imag(k[0])) + "\n10," + num(real(k[1])) + "," + num(imag(k[1])) + "\n",
		"storage and angle": "f / Hz,storage stiffness / N/mm,δ / °\n1," + num(real(k[0])) + "," + num(180/math.Pi*cmplx.Phase(k[0])) + "\n10," + num(real(k[1])) + "," + num(180/math.Pi*cmplx.Phase(k[1])) + "\n",
		"magnitude":         "f / Hz,|K*| / kN/m,tan δ\n1," + num(cmplx.Abs(k[0])) + "," + num(tan(0)) + "\n10," + num(cmplx.Abs(k[1])) + "," + num(tan(1)) + "\n",
		"force":             "f / Hz,force / N,displacement / mm,loss factor\n1," + num(0.02*cmplx.Abs(k[0])) + ",0.02," + num(tan(0)) + "\n10," + num(0.02*cmplx.Abs(k[1])) + ",0.02," + num(tan(1)) + "\n",
	} {
		c, err := stiffnessCampaign(t, pairOf25, "", text)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if c.Modulus != Shear || len(c.Tests[0].Runs) != 1 {
			t.Errorf("%s: %s, %d runs", name, c.Modulus, len(c.Tests[0].Runs))
		}
		for i, p := range c.Tests[0].Runs[0].Points {
			if d := cmplx.Abs(complex(p.Storage, p.Loss)/g[i] - 1); d > 1e-9 {
				t.Errorf("%s: G* is %g%+gi, should be %v", name, p.Storage, p.Loss, g[i])
			}
			if name == "force" && math.Abs(p.Strain-0.004) > 1e-12 {
				t.Errorf("strain %g of 0.02 mm on 5 mm", p.Strain)
			}
			if !math.IsNaN(p.MassShare) {
				t.Errorf("%s: a correction without a machine", name)
			}
		}
	}
}

// The machine comes off: K = 1e5 + 1e4 i N/m measured through a moving mass of
// 0.2 kg at 100 Hz reads 21043.165 + 10000 i, through a frame of 5e6 N/m 98058.062 +
// 9611.651 i (derived; computed independently in double precision). A modulus goes the
// same way.
func TestMachineComesOff(t *testing.T) {
	const area, h = math.Pi * 0.025 * 0.025 / 4, 0.005
	want := complex(1e5, 1e4) * complex(h/(2*area), 0)
	for _, v := range []struct {
		apparatus, k string
		code         string
	}{
		{"{moving_mass: 0.2 kg}", "21043.165,10000", "inertia-corrected"},
		{"{frame_stiffness: 5 kN/mm}", "98058.062,9611.651", "compliance-corrected"},
	} {
		c, err := stiffnessCampaign(t, pairOf25, ", apparatus: "+v.apparatus, "f / Hz,K' / N/m,K'' / N/m\n100,"+v.k+"\n100,"+v.k+"\n")
		if err != nil {
			t.Fatal(err)
		}
		p := c.Tests[0].Runs[0].Points[0]
		if d := cmplx.Abs(complex(p.Storage, p.Loss)/want - 1); d > 1e-7 {
			t.Errorf("%s: %g%+gi, should be %v", v.apparatus, p.Storage, p.Loss, want)
		}
		found := false
		for _, f := range c.Findings {
			found = found || f.Code == v.code
		}
		if !found {
			t.Errorf("%s: no finding %s in %+v", v.apparatus, v.code, c.Findings)
		}
		var a, b float64
		fmt.Sscanf(v.k, "%g,%g", &a, &b)
		scale := h / (2 * area) / 1e6
		m, err := stiffnessCampaign(t, pairOf25, ", apparatus: "+v.apparatus, fmt.Sprintf("f / Hz,G' / MPa,G'' / MPa\n100,%.12g,%.12g\n100,%.12g,%.12g\n", a*scale, b*scale, a*scale, b*scale))
		if err != nil {
			t.Fatal(err)
		}
		q := m.Tests[0].Runs[0].Points[0]
		if d := cmplx.Abs(complex(q.Storage, q.Loss)/want - 1); d > 1e-7 {
			t.Errorf("%s, modulus: %g%+gi, should be %v", v.apparatus, q.Storage, q.Loss, want)
		}
		done, err := stiffnessCampaign(t, pairOf25, ", apparatus: "+strings.TrimSuffix(v.apparatus, "}")+", corrected: [inertia, compliance]}", "f / Hz,K' / N/m,K'' / N/m\n100,"+v.k+"\n100,"+v.k+"\n")
		if err != nil {
			t.Fatal(err)
		}
		if r := done.Tests[0].Runs[0].Points[0]; math.Abs(r.Storage/(a*h/(2*area))-1) > 1e-9 {
			t.Errorf("corrected twice: %g", r.Storage)
		}
	}
}

// A bonded block in compression: 50 IRHD row of a handbook's table (E0 2.20 MPa,
// k 0.73, B 1030 MPa; value from memory), disc 50 × 10 mm, K' = 1407.534 N/mm
// (computed independently in double precision).
func TestBondedCompression(t *testing.T) {
	c, err := stiffnessCampaign(t, "{shape: bonded compression, diameter: 50 mm, thickness: 10 mm, compression_coefficient: 0.73, bulk_modulus: 1030 MPa}", "", "f / Hz,K' / N/mm,K'' / N/mm\n1,1407.534,0\n2,1407.534,0\n")
	if err != nil {
		t.Fatal(err)
	}
	if p := c.Tests[0].Runs[0].Points[0]; math.Abs(p.Storage/(2.2e6/3)-1) > 1e-5 {
		t.Errorf("G' %g, should be %g", p.Storage, 2.2e6/3)
	}
}

func TestStiffnessFaults(t *testing.T) {
	const text = "f / Hz,K' / N/mm,K'' / N/mm\n1,100,10\n2,100,10\n"
	for _, v := range []struct{ piece, more, text, want string }{
		{"{shape: double shear, diameter: 25 mm}", "", text, "thickness is not stated"},
		{"{shape: cube, diameter: 25 mm}", "", text, "no shape has the name"},
		{"{diameter: 25 mm}", "", text, "shape and dimensions are not described"},
		{pairOf25, ", apparatus: {corrected: [magic]}", text, "is no correction"},
		{"{diameter: 25 mm}", ", apparatus: {moving_mass: 0.1 kg}", "f / Hz,G' / MPa,G'' / MPa\n1,1,0.1\n2,1,0.1\n", "through which it is taken off"},
		{"{shape: parallel plates, diameter: 25 mm, thickness: 2 mm}", "", text, "turns"},
	} {
		_, err := stiffnessCampaign(t, v.piece, v.more, v.text)
		if err == nil || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%s%s: %v, should say %q", v.piece, v.more, err, v.want)
		}
	}
	if _, err := OpenFS(fstest.MapFS{"a.csv": {Data: []byte("f / Hz,T / °C,K' / N/mm,K'' / N/mm\n1,20,100,10\n2,20,100,10\n")}}, "a.csv"); err == nil || !strings.Contains(err.Error(), "shape") {
		t.Errorf("a bare table with stiffness: %v", err)
	}
}

// Uncertainties of the dimensions become that of the geometry factor: in double
// shear K = 2GA/h, so 1 % of the thickness and 0.2 mm of 25 mm in the diameter (which
// counts twice) make √(0.01² + (2·0.008)²) = 1.887 % (JCGM 100, 5.1).
func TestGeometryFromDimensions(t *testing.T) {
	const text = "f / Hz,T / °C,K' / N/mm,K'' / N/mm\n1,20,100,10\n2,20,100,10\n"
	of := func(more string) *Campaign {
		return mustOpen(t, "specimens: {pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm, uncertainty: {thickness: 1 %, diameter: 0.2 mm}}}\n"+more+"tests: [{kind: frequency sweep, file: a.csv}]\n", "a.csv", text)
	}
	if u := of("").Uncertainty.Geometry; math.Abs(u/math.Sqrt(1e-4+2.56e-4)-1) > 1e-12 {
		t.Errorf("%g", u)
	}
	c := of("uncertainty: {geometry: 0.5 %}\n")
	if u := c.Uncertainty.Geometry; u != 0.005 {
		t.Errorf("stated %g", u)
	}
	found := false
	for _, f := range c.Findings {
		found = found || f.Code == "geometry-uncertainty-small"
	}
	if !found {
		t.Errorf("no finding: %+v", c.Findings)
	}
	for _, v := range []struct{ u, want string }{{"{width: 1 %}", `has no "width"`}, {"{length: 1 mm}", "not stated"}, {"{thickness: 1 K}", "thickness"}} {
		_, err := OpenFS(memory("c.yaml", "specimens: {pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm, uncertainty: "+v.u+"}}\ntests: [{kind: frequency sweep, file: a.csv}]\n", "a.csv", text), "c.yaml")
		if err == nil || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%s: %v, should say %q", v.u, err, v.want)
		}
	}
}

// Torque over angle of a specimen between parallel plates: K* = πG*R⁴/2h (closed form).
func TestTorqueTable(t *testing.T) {
	c, err := stiffnessCampaign(t, "{shape: parallel plates, diameter: 25 mm, thickness: 2 mm}", "", "f / Hz,torque / N·mm,angle / deg,δ / °\n1,1,0.5,5\n2,1,0.5,5\n")
	if err != nil {
		t.Fatal(err)
	}
	k := 1e-3 / (0.5 * math.Pi / 180)
	want := k * 2 * 0.002 / (math.Pi * math.Pow(0.0125, 4))
	p := c.Tests[0].Runs[0].Points[0]
	if math.Abs(math.Hypot(p.Storage, p.Loss)/want-1) > 1e-12 || math.Abs(p.Loss/p.Storage-math.Tan(5*math.Pi/180)) > 1e-12 {
		t.Errorf("%g + %gi, should be %g in magnitude", p.Storage, p.Loss, want)
	}
	// The strain is e^(−1/4) of that at the rim, in the logarithmic mean.
	if rim := 0.5 * math.Pi / 180 * 0.0125 / 0.002; math.Abs(p.Strain/(rim*math.Exp(-0.25))-1) > 1e-9 {
		t.Errorf("strain %g, at the rim %g", p.Strain, rim)
	}
}

// Force and displacement beside moduli are a second source: double shear makes
// G = K h/2A of them (closed form). What agrees raises nothing; E for G, and peak to peak
// for single amplitudes, are named with both sources; what has no name is a doubt.
func TestSecondSource(t *testing.T) {
	const piece = "specimens: {pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm}}\n"
	area := math.Pi * 12.5 * 12.5 // mm²
	write := func(modulus, strain float64) string {
		b := "f / Hz,T / °C,strain / %,F / N,x / mm,G' / MPa,G'' / MPa\n"
		for i := range 6 {
			x := 0.05 + 0.01*float64(i)
			g := 1.2 + 0.01*float64(i)
			f := g * 2 * area / 5 * x
			b += fmt.Sprintf("%d,23,%.6g,%.6g,%.6g,%.6g,%.6g\n", i+1, 100*x/5*strain, f, x, g*modulus*math.Cos(0.1), g*modulus*math.Sin(0.1))
		}
		return b
	}
	for _, v := range []struct {
		modulus, strain float64
		want            string
		severity        Severity
	}{
		{1, 1, "", ""}, {1.05, 1.05, "", ""},
		{3, 1, "modulus-contradicted-by-force", Severe}, {1, 2, "strain-contradicted-by-displacement", Severe},
		{1.4, 1, "modulus-contradicted-by-force", Doubt}, {1, 0.5, "strain-contradicted-by-displacement", Severe},
	} {
		c := mustOpen(t, piece+"tests: [{name: a, kind: frequency sweep, file: a.csv, deformation: shear, specimen: pair}]\n", "a.csv", write(v.modulus, v.strain))
		got, severity := "", Severity("")
		for _, f := range c.Findings {
			if strings.Contains(f.Code, "contradicted") {
				got, severity = f.Code, f.Severity
			}
		}
		if got != v.want || severity != v.severity {
			t.Errorf("moduli × %g, strains × %g: %q %s, should be %q %s", v.modulus, v.strain, got, severity, v.want, v.severity)
		}
	}
}
