package specimen

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// ½K x² of a shape must be the integral of ½Gγ² over its volume: the local
// strains that γ_eq averages are those that make the stiffness. The mean square
// is recovered by an independent sum over midpoints.
func TestEnergy(t *testing.T) {
	const n = 300
	square := func(f func(u, v float64) float64) float64 {
		sum := 0.0
		for i := range n {
			for j := range n {
				sum += f((float64(i)+0.5)/n, (float64(j)+0.5)/n)
			}
		}
		return sum / n / n
	}
	// A thick pad with bending.
	pad := Shear{Single, Rectangle{0.02, 0.03}, 0.012, true}
	k := real(pad.Stiffness(1))
	q := pad.Thickness * pad.Thickness / (36 * 0.02 * 0.02 / 12)
	energy := square(func(u, v float64) float64 {
		z, y := u*0.006, v*0.01
		normal := k * z * y / (3 * 0.03 * math.Pow(0.02, 3) / 12) // F z y/(EI) at x = 1, G = 1
		shear := 1 / 0.012 / (1 + q)
		return shear*shear + 3*normal*normal
	}) * 0.02 * 0.03 * 0.012
	near(t, "pad", energy, k, 1e-4)

	// A short beam on three points.
	b := Beam{ThreePoint, 0.03, 0.01, 0.006, 0.5, ParabolicShear}
	k = real(b.Stiffness(1))
	inertia := 0.01 * math.Pow(0.006, 3) / 12
	field := func(u, v float64) float64 {
		normal := k / 2 * u * 0.015 * v * 0.003 / (3 * inertia)
		shear := k / 2 * 1.5 / (0.01 * 0.006) * (1 - v*v)
		return math.Sqrt(3*normal*normal + shear*shear)
	}
	second := square(func(u, v float64) float64 { return field(u, v) * field(u, v) })
	near(t, "beam", second*0.03*0.01*0.006, k, 1e-4)
	mean := square(func(u, v float64) float64 { return field(u, v) * field(u, v) * math.Log(field(u, v)) })
	near(t, "beam strain", b.Strain(1), math.Exp(mean/second), 1e-4)
}

// Closed forms of the energy-weighted logarithmic mean.
func TestEquivalent(t *testing.T) {
	near(t, "uniform", equivalent(func(u, v float64) (float64, float64) { return 0.3, u }), 0.3, 1e-14)
	near(t, "disc", equivalent(func(u, v float64) (float64, float64) { return u, u }), math.Exp(-0.25), 1e-6)
	rapid.Check(t, func(t *rapid.T) {
		p := rapid.Float64Range(0, 3).Draw(t, "p")
		// γ = u^p: ln γ_eq = −p/(2p+1).
		got := equivalent(func(u, v float64) (float64, float64) { return math.Pow(u, p), 1 })
		if math.Abs(got-math.Exp(-p/(2*p+1))) > 1e-4 {
			t.Fatalf("%g: got %g", p, got)
		}
	})
}

// The strain of a twisted bar: a thin strip has the strain 2θy/L across its
// thickness b, so that γ_eq = e^(−1/3) of θb/L; a square lies near the circle of
// equal area; and the series is held against finite differences of ∇²φ = −2 on a
// grid, whose ∫|∇φ|² is J.
func TestBarStrain(t *testing.T) {
	strip := Bar{Length: 0.1, Width: 0.2, Thickness: 0.001}
	near(t, "strip", strip.Strain(0.1), math.Exp(-1.0/3)*0.1*0.001/0.1, 0.01)
	square := Bar{Length: 0.1, Width: 0.01, Thickness: 0.01}
	circle := Cylinder{Length: 0.1, Diameter: 0.01 * math.Sqrt(4/math.Pi)}
	near(t, "square", square.Strain(0.1), circle.Strain(0.1), 0.05)

	const n = 40 // cells over the whole section of 1.5 × 1
	const rows, columns, h = n, 3 * n / 2, 1.0 / n
	var phi [rows + 1][columns + 1]float64
	for range 600 { // over-relaxation of ∇²φ = −2
		for i := 1; i < rows; i++ {
			for j := 1; j < columns; j++ {
				phi[i][j] += 1.85 * ((phi[i-1][j]+phi[i+1][j]+phi[i][j-1]+phi[i][j+1]+2*h*h)/4 - phi[i][j])
			}
		}
	}
	mean, second := 0.0, 0.0
	for i := range rows {
		for j := range columns {
			dx := (phi[i][j+1] + phi[i+1][j+1] - phi[i][j] - phi[i+1][j]) / (2 * h)
			dy := (phi[i+1][j] + phi[i+1][j+1] - phi[i][j] - phi[i][j+1]) / (2 * h)
			square := dx*dx + dy*dy
			second += square
			if square > 0 {
				mean += square * math.Log(square) / 2
			}
		}
	}
	oblong := Bar{Length: 1, Width: 0.015, Thickness: 0.010}
	near(t, "grid J", second*h*h, 1.5*0.196, 0.005)
	near(t, "grid strain", oblong.Strain(1)/0.010, math.Exp(mean/second), 0.003)
}

// What the rule is for: the stiffness of a piece whose modulus depends on the
// local strain (Kraus: 1 + ratio/(1+r^2m), and a loss part with its hump) against
// the modulus at γ_eq. The apparent modulus of the piece is the energy-weighted
// mean of the local one. The worst cases over m, ratio and amplitude are held
// here, and that the mean of 1/γ (¾ of the radius) does worse.
func TestOneStrainForAll(t *testing.T) {
	x, w := gauss()
	type field func(u, v float64) (gamma, weight float64)
	worst := func(f field, at float64) (storage, loss float64) {
		for _, m := range []float64{0.4, 0.5, 0.6, 0.7} {
			for _, ratio := range []float64{0.3, 1} {
				kraus := func(g float64) (float64, float64) {
					r := math.Pow(g, m)
					return 1 + ratio/(1+r*r), 0.05 + 0.15*ratio*2*r/(1+r*r)
				}
				for e := -3.0; e <= 3; e += 0.25 {
					scale, s1, s2, sum := math.Pow(10, e), 0.0, 0.0, 0.0
					for i, u := range x {
						for j, v := range x {
							g, dv := f(u, v)
							g1, g2 := kraus(g * scale)
							energy := g * g * dv * w[i] * w[j]
							s1, s2, sum = s1+g1*energy, s2+g2*energy, sum+energy
						}
					}
					g1, g2 := kraus(at * scale)
					storage = math.Max(storage, math.Abs(g1*sum/s1-1))
					loss = math.Max(loss, math.Abs(g2*sum/s2-1))
				}
			}
		}
		return storage, loss
	}
	for _, c := range []struct {
		name          string
		f             field
		at, harmonic  float64
		storage, loss float64
	}{
		{"solid cylinder", func(u, v float64) (float64, float64) { return u, u }, math.Exp(-1.0 / 4), 3.0 / 4, 0.005, 0.011},
		{"slender beam", func(u, v float64) (float64, float64) { return u * v, 1 }, math.Exp(-2.0 / 3), 4.0 / 9, 0.015, 0.034},
	} {
		near(t, c.name, equivalent(c.f), c.at, 1e-5)
		s, l := worst(c.f, c.at)
		h1, h2 := worst(c.f, c.harmonic)
		t.Logf("%s: storage %.2f %%, loss %.2f %%; with the mean of 1/γ %.2f %%, %.2f %%", c.name, 100*s, 100*l, 100*h1, 100*h2)
		if s > c.storage || l > c.loss {
			t.Errorf("%s: storage off by %.4f, loss by %.4f", c.name, s, l)
		}
		if s > h1 || l > h2 {
			t.Errorf("%s: the mean of 1/γ is nearer", c.name)
		}
	}
	// ¾ of the radius, the trade's rule, is within 1.5 % of the integral's modulus.
	if s, _ := worst(func(u, v float64) (float64, float64) { return u, u }, 0.75); s > 0.015 {
		t.Errorf("three quarters of the radius: storage off by %.4f", s)
	}
}
