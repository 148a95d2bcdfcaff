package demo

import "math"

// Truth is an invented compound:
//
//	G*(f,T,γ) = b_T·[G_e + Σ G_p*(2πf·a_T)] + φ(T)·F*(γ,f)
//	F*        = ΔG'·K1(γ) + ΔG”·K2(γ)·[i + κ·(2/π)·ln(f/f0)]
//	φ         = exp[(E/R)(1/T − 1/T0)]
//	K1        = 1/(1+r^2m),  K2 = 2r^m/(1+r^2m),  r = γ/γ_c
//	b_T       = (T/T0)/(1+α_v(T−T0))    where Density is set, else 1
//
// that is, a polymer whose relaxation shifts with temperature beside a filler
// network that breaks with strain (Kraus 1984) and softens with temperature.
// κ = 1 makes the network's frequency-independent loss causal: a loss that
// does not depend on frequency comes with dG'/d ln f = (2/π)·G” (the transform
// of ln iω). The amplitudes are those of one harmonic; the strain dependence of
// a relaxation test is taken at its step.
type Truth struct {
	Name        string
	Reference   float64 // T0, K
	Equilibrium float64 // G_e, Pa
	Processes   []Process
	Shift       Shift // nil: a_T = 1
	Filler      Filler
	Density     bool    // the polymer's modulus follows temperature and density
	Expansion   float64 // α_v, 1/K; used where Density is set
}

// Filler is the network of a filled compound. The zero value is no filler.
type Filler struct {
	Storage   float64 // ΔG', Pa
	Loss      float64 // ΔG”, Pa: the height of the loss maximum over strain
	Strain    float64 // γ_c, m/m
	Exponent  float64 // m
	Energy    float64 // E, J/mol
	Causal    float64 // κ: 1 causal, 0 rate independent
	Frequency float64 // f0, Hz
}

// Modulus returns G* in Pa at a frequency in Hz, a temperature in K and a
// shear strain amplitude in m/m.
func (t Truth) Modulus(hertz, kelvin, strain float64) complex128 {
	omega := 2 * math.Pi * hertz
	g := complex(t.Equilibrium, 0)
	for _, p := range t.Processes {
		g += p.modulus(omega * t.shift(p, kelvin))
	}
	g *= complex(t.vertical(kelvin), 0)
	if t.Filler == (Filler{}) {
		return g
	}
	k1, k2 := t.Filler.kraus(strain)
	phi := t.filler(kelvin)
	storage := t.Filler.Storage*k1 + t.Filler.Causal*t.Filler.Loss*k2*2/math.Pi*math.Log(hertz/t.Filler.Frequency)
	return g + complex(phi*storage, phi*t.Filler.Loss*k2)
}

// Relaxation returns the modulus in Pa at a time in s after a step of shear
// strain in m/m, at a temperature in K. The network's part is the inverse
// transform of its modulus: ln(iω/ω0) becomes −[ln(ω0·t) + 0.5772…].
func (t Truth) Relaxation(seconds, kelvin, strain float64) float64 {
	g := t.Equilibrium
	for _, p := range t.Processes {
		g += p.relaxation(seconds / t.shift(p, kelvin))
	}
	g *= t.vertical(kelvin)
	if t.Filler == (Filler{}) {
		return g
	}
	k1, k2 := t.Filler.kraus(strain)
	phi := t.filler(kelvin)
	g += phi * t.Filler.Storage * k1
	if t.Filler.Causal != 0 {
		const euler = 0.57721566490153286061
		g -= phi * t.Filler.Causal * t.Filler.Loss * k2 * 2 / math.Pi * (math.Log(2*math.Pi*t.Filler.Frequency*seconds) + euler)
	}
	return g
}

// ShiftFactor returns the compound's a_T at a temperature in K.
func (t Truth) ShiftFactor(kelvin float64) float64 {
	return t.shift(Process{}, kelvin)
}

// shift returns the a_T of one process.
func (t Truth) shift(p Process, kelvin float64) float64 {
	law := p.Shift
	if law == nil {
		law = t.Shift
	}
	if law == nil {
		return 1
	}
	return math.Pow(10, law.Log10(kelvin))
}

// vertical returns b_T.
func (t Truth) vertical(kelvin float64) float64 {
	if !t.Density {
		return 1
	}
	return kelvin / t.Reference / (1 + t.Expansion*(kelvin-t.Reference))
}

// filler returns φ.
func (t Truth) filler(kelvin float64) float64 {
	return math.Exp(t.Filler.Energy / gas * (1/kelvin - 1/t.Reference))
}

// kraus returns K1 and K2.
func (f Filler) kraus(strain float64) (k1, k2 float64) {
	rm := math.Pow(strain/f.Strain, f.Exponent)
	return 1 / (1 + rm*rm), 2 * rm / (1 + rm*rm)
}
