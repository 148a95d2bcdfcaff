package causal

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
)

// zener is the fractional Zener material
// G* = G0 + (Ginf − G0)·(iωτ)^α/(1 + (iωτ)^α), written for these tests alone.
func zener(g0, ginf, tau, alpha, f float64) complex128 {
	x := cmplx.Pow(complex(0, 2*math.Pi*f*tau), complex(alpha, 0))
	return complex(g0, 0) + complex(ginf-g0, 0)*x/(1+x)
}

// steep is the truth of the reference table.
func steep(f float64) complex128 { return zener(1, 1000, 1e-6, 0.5, f) }

// rubber is an invented broad spectrum of two fractional processes, tan δ from
// 0.07 to 0.10 between 0.5 and 50 Hz.
func rubber(f float64) complex128 {
	return zener(0.6, 1.2, 0.02, 0.4, f) + zener(0.4, 600, 1e-9, 0.6, f)
}

// peak is an invented glass transition in the window, δ up to 55°.
func peak(f float64) complex128 { return zener(1, 1000, 1e-3, 0.65, f) }

func spread(low, high float64, n int) []float64 {
	f := make([]float64, n)
	for i := range f {
		f[i] = low * math.Pow(high/low, float64(i)/float64(n-1))
	}
	return f
}

func measure(f []float64, truth func(float64) complex128) []complex128 {
	g := make([]complex128, len(f))
	for i := range f {
		g[i] = truth(f[i])
	}
	return g
}

// noisy multiplies by magnitude and phase errors.
func noisy(g []complex128, sm, sd float64, seed uint64) []complex128 {
	r := rand.New(rand.NewPCG(seed, 1))
	out := make([]complex128, len(g))
	for i, z := range g {
		out[i] = z * cmplx.Exp(complex(sm*r.NormFloat64(), sd*r.NormFloat64()))
	}
	return out
}

const degree = math.Pi / 180

// spoil are the four mistakes, in the size of their parameter; inertia as a
// share of G' at the highest frequency.
func spoil(f []float64, g []complex128, kind Kind, size float64) []complex128 {
	n := len(f)
	out := make([]complex128, n)
	for i, z := range g {
		switch kind {
		case PhaseOffset:
			z *= cmplx.Exp(complex(0, size))
		case LossGain:
			z = complex(real(z), imag(z)*(1+size))
		case TimeDelay:
			z *= cmplx.Exp(complex(0, 2*math.Pi*f[i]*size))
		case Inertia:
			z -= complex(size*real(g[n-1])*math.Pow(f[i]/f[n-1], 2), 0)
		}
		out[i] = z
	}
	return out
}
