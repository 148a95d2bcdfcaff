package thermal

import "math"

// Crossover is WLF above a temperature T_c and Arrhenius below it. Near the glass
// transition WLF, which belongs to the equilibrium liquid and rubber, rises too
// fast: below T_c, where the structure no longer follows, the shift factor goes on
// with the apparent activation energy that WLF has at T_c,
//
//	log a_T = W(T)                                  T ≥ T_c
//	log a_T = W(T_c) + A (1/T − 1/T_c)              T < T_c
//	A = T_c² C1 C2/q²,   q = C2 + T_c − T_0
//
// so that value and slope are continuous (the form is common practice, no source;
// the apparent energy is that of WLF, Ferry, Viscoelastic Properties of Polymers,
// 3rd ed., ch. 11; from memory). T_c may not lie above T_0.
type Crossover struct {
	WLF
	Cross float64 // T_c, K
}

func (c Crossover) energy() (A, q float64) {
	q = c.C2 + c.Cross - c.Reference
	return c.Cross * c.Cross * c.C1 * c.C2 / (q * q), q
}

// LogShift is log10 a_T; +Inf where T_c is at or below the pole.
func (c Crossover) LogShift(T float64) float64 {
	if T >= c.Cross {
		return c.WLF.LogShift(T)
	}
	A, q := c.energy()
	if !(q > 0) {
		return math.Inf(1)
	}
	return c.WLF.LogShift(c.Cross) + A*(1/T-1/c.Cross)
}

// Slope is d log10 a_T/dT.
func (c Crossover) Slope(T float64) float64 {
	if T >= c.Cross {
		return c.WLF.Slope(T)
	}
	A, _ := c.energy()
	return -A / (T * T)
}

// Gradient writes the derivatives by C1, C2 and T_c. With x = 1/T − 1/T_c the
// terms of W(T_c) and of 1/T_c cancel in the last, which is x dA/dT_c.
func (c Crossover) Gradient(T float64, g []float64) {
	if T >= c.Cross {
		c.WLF.Gradient(T, g)
		g[2] = 0
		return
	}
	A, q := c.energy()
	x := 1/T - 1/c.Cross
	c.WLF.Gradient(c.Cross, g)
	g[0] += A / c.C1 * x
	g[1] += c.Cross * c.Cross * c.C1 * x * (q - 2*c.C2) / (q * q * q)
	g[2] = x * 2 * c.C1 * c.C2 * c.Cross * (q - c.Cross) / (q * q * q)
}
