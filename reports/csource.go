package reports

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"phaselag/models"
	"phaselag/models/thermal"
)

// CSource writes a C99 translation unit without dependencies beyond math.h that
// evaluates the compound:
//
//	int phaselag_modulus(double hertz, double kelvin, double strain,
//	                     double *storage, double *loss);
//
// in Pa, strain in m/m, single amplitude; a negative strain stands for the isotherms'
// own. It returns 0 inside the domain, 1 outside (the numbers are then an
// extrapolation) and 2 where the model has no value. It agrees with
// Compound.Value to 1e-12.
func CSource(c *models.Compound) ([]byte, error) {
	var b strings.Builder
	p := func(format string, a ...any) { fmt.Fprintf(&b, format+"\n", a...) }
	num := func(x float64) string {
		s := strconv.FormatFloat(x, 'g', -1, 64)
		if !strings.ContainsAny(s, ".e") {
			s += ".0"
		}
		return s
	}
	array := func(name string, v []float64) {
		p("static const double %s[%d] = {", name, len(v))
		for _, x := range v {
			p("    %s,", num(x))
		}
		p("};")
	}
	comment := func(s string) string {
		return strings.NewReplacer("*/", "* /", "/*", "/ *", "\n", " ", "\r", " ", "\\", "/", "??", "? ?").Replace(s)
	}
	p("/* Complex %s modulus of the compound %s, batch %s.", c.ModulusKind, comment(c.Compound.Name), comment(c.Compound.Batch))
	p(" * Written by %s; result SHA-256 %s.", comment(c.Provenance.Version), comment(c.Provenance.ResultSHA256))
	p(" * %s", comment(Caution))
	p(" * Strain amplitudes are single amplitudes (zero to peak). */")
	p("#include <math.h>")
	p("")
	p("int phaselag_modulus(double hertz, double kelvin, double strain, double *storage, double *loss);")
	p("")
	if n := len(c.Linear.Branches); n > 0 {
		var tau, g []float64
		for _, v := range c.Linear.Branches {
			tau, g = append(tau, v.Time), append(g, v.Modulus*1e6)
		}
		array("relaxation_time_s", tau)
		array("modulus_Pa", g)
	}
	reference := c.ReferenceTempC + zeroC
	knots := func(name string, f thermal.Factors) {
		slope := make([]float64, len(f.T))
		for i := range f.T {
			// At a knot the slope of the interpolation is that of the knot.
			slope[i] = f.Slope(f.T[i])
		}
		array(name+"_T", f.T)
		array(name+"_value", f.Log)
		array(name+"_slope", slope)
	}
	var vertical thermal.Factors
	for _, v := range c.Vertical.Factors {
		vertical.T, vertical.Log = append(vertical.T, v.TemperatureC+zeroC), append(vertical.Log, math.Log(float64(v.B)))
	}
	var shift thermal.Factors
	for _, v := range c.Shift.Factors {
		if !math.IsNaN(float64(v.LogShift)) {
			shift.T, shift.Log = append(shift.T, v.TemperatureC+zeroC), append(shift.Log, float64(v.LogShift))
		}
	}
	interpolated := c.Shift.Law == models.LawNone && len(shift.T) > 0
	if interpolated {
		knots("shift", shift)
	}
	if c.Vertical.Law == models.VerticalFactors {
		knots("vertical", vertical)
	}
	if interpolated || c.Vertical.Law == models.VerticalFactors {
		p(`
/* Monotone cubic interpolation; beyond the ends straight on. */
static double interpolate(double x, int n, const double *t, const double *y, const double *d)
{
    int i = 0;
    double h, u, v;
    if (n == 1)
        return y[0];
    if (x <= t[0])
        return y[0] + d[0] * (x - t[0]);
    if (x >= t[n - 1])
        return y[n - 1] + d[n - 1] * (x - t[n - 1]);
    while (i < n - 2 && x > t[i + 1])
        i++;
    h = t[i + 1] - t[i];
    u = (x - t[i]) / h;
    v = 1 - u;
    return (1 + 2 * u) * v * v * y[i] + h * u * v * v * d[i] + u * u * (3 - 2 * u) * y[i + 1] - h * u * u * v * d[i + 1];
}`)
	}
	p(`
int phaselag_modulus(double hertz, double kelvin, double strain, double *storage, double *loss)
{
    int outside = 0;
    double log_a = 0, a, w, re = %s, im = 0, b = 1;`, num(c.Linear.Equilibrium*1e6))
	own := float64(c.Domain.OwnStrain) / 100
	if math.IsNaN(own) {
		own = 0
	}
	if c.Domain.Strain == nil {
		p("    if (strain >= 0)\n        outside = 1;")
	}
	p("    if (strain < 0)\n        strain = %s;", num(own))
	p("    if (!(hertz > 0) || !(kelvin > 0) || !(strain >= 0))\n        return 2;")
	wlf := func(T string) string {
		return fmt.Sprintf("-%s * (%s - %s) / (%s + %s - %s)", num(float64(c.Shift.C1)), T, num(reference), num(float64(c.Shift.C2)), T, num(reference))
	}
	switch {
	case c.Shift.Law == models.LawWLF:
		p("    if (%s + kelvin - %s <= 0)\n        return 2;", num(float64(c.Shift.C2)), num(reference))
		p("    log_a = %s;", wlf("kelvin"))
	case c.Shift.Law == models.LawArrhenius:
		p("    log_a = %s * (1 / kelvin - 1 / %s);", num(float64(c.Shift.Activation)*1e3/(thermal.GasConstant*math.Ln10)), num(reference))
	case c.Shift.Law == models.LawCrossover:
		cross := *c.Shift.Crossover + zeroC
		q := float64(c.Shift.C2) + cross - reference
		A := cross * cross * float64(c.Shift.C1) * float64(c.Shift.C2) / (q * q)
		p("    if (kelvin >= %s)\n        log_a = %s;\n    else\n        log_a = %s + %s * (1 / kelvin - 1 / %s);", num(cross), wlf("kelvin"), wlf(num(cross)), num(A), num(cross))
	case interpolated:
		p("    log_a = interpolate(kelvin, %d, shift_T, shift_value, shift_slope);", len(shift.T))
	}
	switch c.Vertical.Law {
	case models.VerticalDensity:
		p("    b = kelvin / %s / (1 + %s * (kelvin - %s));", num(reference), num(float64(c.Vertical.Expansion)), num(reference))
	case models.VerticalFactors:
		p("    b = exp(interpolate(kelvin, %d, vertical_T, vertical_value, vertical_slope));", len(vertical.T))
	}
	p("    a = exp(%s * log_a);\n    w = %s * hertz * a;", num(math.Ln10), num(2*math.Pi))
	if n := len(c.Linear.Branches); n > 0 {
		p(`    for (int k = 0; k < %d; k++) {
        double x = w * relaxation_time_s[k];
        if (x > 1e150) {
            re += modulus_Pa[k];
            im += modulus_Pa[k] / x;
        } else {
            double d = 1 / (1 + x * x);
            re += modulus_Pa[k] * (x * x * d);
            im += modulus_Pa[k] * (x * d);
        }
    }`, n)
	}
	p("    re *= b;\n    im *= b;")
	if err := cFiller(c, p, num, reference); err != nil {
		return nil, err
	}
	p("    *storage = re;\n    *loss = im;")
	d := c.Domain
	p("    a *= hertz;")
	// The rules of the domain, with room for rounding.
	out := func(format string, args ...any) {
		p("    if ("+format+")\n        outside = 1;", args...)
	}
	out("kelvin < %s || kelvin > %s", num(d.Temperature[0]+zeroC-1e-6), num(d.Temperature[1]+zeroC+1e-6))
	out("a < %s || a > %s", num(d.ReducedFrequency[0]*(1-1e-9)), num(d.ReducedFrequency[1]*(1+1e-9)))
	if d.Strain != nil {
		out("strain < %s || strain > %s", num(d.Strain[0]/100*(1-1e-9)), num(d.Strain[1]/100*(1+1e-9)))
	}
	if m := d.AmplitudeMeasuredAt; m != nil {
		out("strain > %s && (kelvin < %s || kelvin > %s)", num(own*(1+1e-9)), num(m.Temperature[0]+zeroC-10-1e-6), num(m.Temperature[1]+zeroC+10+1e-6))
	}
	p("    return re > 0 && re < HUGE_VAL ? outside : 2;\n}")
	return []byte(b.String()), nil
}

// cFiller writes the filler term.
func cFiller(c *models.Compound, p func(string, ...any), num func(float64) string, reference float64) error {
	f := c.Amplitude
	if f.Law == models.AmplitudeNone {
		return nil
	}
	activation := float64(f.Activation)
	if math.IsNaN(activation) {
		activation = 0
	}
	storage, loss := float64(f.Storage)*1e6, float64(f.Loss)*1e6
	if f.Coupling == models.Scaling {
		storage, loss = *f.StorageRatio, *f.LossRatio
	}
	p("    {\n        double k1, k2, k3 = 0, part = 0, filler_re, filler_im;")
	p("        double phi = exp(%s * (1 / kelvin - 1 / %s));", num(activation*1e3/thermal.GasConstant), num(reference))
	critical := num(float64(f.Critical) / 100)
	if f.Law == models.AmplitudeMaierGoritz {
		p("        k1 = 1 / (1 + strain / %s);\n        k2 = 4 * k1 * (1 - k1);", critical)
	} else {
		p(`        if (strain > 0) {
            double q = exp(%s * log(strain / %s));
            k1 = 1 / (1 + q * q);
            k2 = 2 * q * k1;
        } else {
            k1 = 1;
            k2 = 0;
        }`, num(float64(f.Exponent)), critical)
	}
	extra := 0.0
	if f.Law == models.AmplitudeExtraLoss {
		extra = *f.ExtraLoss * 1e6
		p("        k3 = exp(-strain / %s);", num(*f.ExtraStrain/100))
	}
	if f.Frequency == models.Causal {
		p("        part = %s * log(hertz / %s);", num(2/math.Pi), num(float64(f.ReferenceFrequency)))
	}
	p("        filler_im = phi * (%s * k2 + %s * k3);\n        filler_re = phi * %s * k1 + filler_im * part;", num(loss), num(extra), num(storage))
	if f.Coupling == models.Scaling {
		p("        {\n            double r = re * (1 + filler_re) - im * filler_im;\n            im = re * filler_im + im * (1 + filler_re);\n            re = r;\n        }")
	} else {
		p("        re += filler_re;\n        im += filler_im;")
	}
	p("    }")
	return nil
}
