package compact

import (
	"errors"
	"math"
	"math/cmplx"

	"phaselag/fitting/lsq"
	"phaselag/fitting/nnls"
	"phaselag/models/linear"
)

// The fewest relaxation times
//
// For n = 1, 2, … the equilibrium modulus and n branches, all free and positive,
// are fitted to the modulus M of a spectrum at 20 frequencies a decade of a window,
//
//	min Σ w_i [(Re ln M_i/M'_i)²/t_m² + (Im ln M_i/M'_i)²/t_δ²]
//
// with t the tolerances. Frequencies where the fit is worse than elsewhere then get
// more weight (w ← w·r, normalised; Lawson's iteration for the least greatest
// residual; Rice and Usow, Math. Comp. 22 (1968) 118; from memory). The first n
// whose residual lies within the tolerances everywhere is taken.

// Tolerance is how far few branches may lie from a spectrum.
type Tolerance struct {
	Magnitude float64 // relative; 0: 0.02
	Phase     float64 // rad; 0: 1°
}

const (
	perDecade   = 20
	mostBranch  = 40
	lawsonSteps = 12
)

// ErrFew says that the most branches that are tried do not keep the tolerance.
var ErrFew = errors.New("no 40 branches keep the tolerance")

// Few is the fewest branches that stay within the tolerance of a spectrum between
// two angular frequencies, rad/s.
func Few(s linear.Spectrum, lo, hi float64, tol Tolerance) (linear.Spectrum, Misfit, error) {
	return FewOf(s.Modulus, lo, hi, tol)
}

// FewOf is Few for any complex modulus, or stiffness, over the angular frequency in
// rad/s.
func FewOf(modulus func(omega float64) complex128, lo, hi float64, tol Tolerance) (linear.Spectrum, Misfit, error) {
	if !(lo > 0) || !(hi > lo) || math.IsInf(hi, 0) {
		return linear.Spectrum{}, Misfit{}, errors.New("the window must run from a positive to a larger frequency")
	}
	if tol.Magnitude <= 0 {
		tol.Magnitude = 0.02
	}
	if tol.Phase <= 0 {
		tol.Phase = math.Pi / 180
	}
	n := int(math.Ceil(math.Log10(hi/lo)*perDecade)) + 1
	points := make([]Point, n)
	for i := range points {
		w := lo * math.Pow(hi/lo, float64(i)/float64(n-1))
		points[i] = Point{Omega: w, G: modulus(w), Magnitude: tol.Magnitude, Phase: tol.Phase}
		if !(cmplx.Abs(points[i].G) > 0) {
			return linear.Spectrum{}, Misfit{}, errors.New("the spectrum has no modulus in the window")
		}
	}
	for k := 1; k <= mostBranch; k++ {
		if f, ok := fewWith(points, k, lo, hi); ok {
			m := misfit(points, f.Modulus)
			return f, m, nil
		}
	}
	return linear.Spectrum{}, Misfit{}, ErrFew
}

// fewWith fits k branches; ok when they keep the tolerance.
func fewWith(points []Point, k int, lo, hi float64) (linear.Spectrum, bool) {
	n := len(points)
	weight := make([]float64, n)
	for i := range weight {
		weight[i] = 1
	}
	x := startOf(points, k, lo, hi)
	spectrum := func(x []float64) linear.Spectrum {
		f := linear.Spectrum{Equilibrium: math.Exp(x[0])}
		for b := range k {
			f.Times, f.Moduli = append(f.Times, math.Exp(x[1+2*b])), append(f.Moduli, math.Exp(x[2+2*b]))
		}
		return f
	}
	problem := lsq.Problem{
		M: 2 * n, N: 1 + 2*k,
		Residual: func(r, x []float64) error {
			f := spectrum(x)
			for i, p := range points {
				d := cmplx.Log(p.G/f.Modulus(p.Omega)) * complex(weight[i], 0)
				r[i], r[n+i] = real(d)/p.Magnitude, imag(d)/p.Phase
			}
			return nil
		},
		Jacobian: func(j, x []float64) error {
			f := spectrum(x)
			for i, p := range points {
				v := f.Modulus(p.Omega)
				put := func(c int, d complex128) {
					d *= complex(-weight[i], 0) / v
					j[c*2*n+i], j[c*2*n+n+i] = real(d)/p.Magnitude, imag(d)/p.Phase
				}
				put(0, complex(f.Equilibrium, 0))
				for b := range k {
					a, l := linear.BranchSlope(p.Omega * f.Times[b])
					put(1+2*b, complex(f.Moduli[b]*a, f.Moduli[b]*l))
					a, l = linear.Branch(p.Omega * f.Times[b])
					put(2+2*b, complex(f.Moduli[b]*a, f.Moduli[b]*l))
				}
			}
			return nil
		},
	}
	for step := range lawsonSteps {
		res, err := lsq.Solve(problem, x, &lsq.Settings{MaxEvaluations: 60, FunctionTol: 1e-6})
		if err != nil {
			return linear.Spectrum{}, false
		}
		x = append([]float64(nil), res.X...)
		f := spectrum(x)
		worst, sum := 0.0, 0.0
		r := make([]float64, n)
		for i, p := range points {
			d := cmplx.Log(p.G / f.Modulus(p.Omega))
			r[i] = max(math.Abs(real(d))/p.Magnitude, math.Abs(imag(d))/p.Phase)
			worst = max(worst, r[i])
			weight[i] *= math.Sqrt(max(r[i], 1e-6))
			sum += weight[i]
		}
		if worst <= 1 {
			return sorted(f), true
		}
		// Far from the tolerance no weighting helps.
		if step == 0 && worst > 3 {
			return f, false
		}
		for i := range weight {
			weight[i] *= float64(n) / sum
		}
	}
	return linear.Spectrum{}, false
}

// startOf spreads the relaxation times evenly and takes the moduli from
// non-negative least squares.
func startOf(points []Point, k int, lo, hi float64) []float64 {
	n := len(points)
	a, b := make([]float64, 2*n*(k+1)), make([]float64, 2*n)
	x := make([]float64, 1+2*k)
	step := math.Log(hi/lo) / float64(k)
	for c := range k {
		x[1+2*c] = -math.Log(hi) + step*(float64(c)+0.5)
	}
	for i, p := range points {
		put := func(c int, g complex128) {
			g /= p.G
			a[c*2*n+i], a[c*2*n+n+i] = real(g)/p.Magnitude, imag(g)/p.Phase
		}
		b[i] = 1 / p.Magnitude
		put(0, 1)
		for c := range k {
			s, l := linear.Branch(p.Omega * math.Exp(x[1+2*c]))
			put(1+c, complex(s, l))
		}
	}
	g := make([]float64, k+1)
	new(nnls.Solver).Solve(a, 2*n, k+1, b, g, nil, nil)
	least := 1e-3 * cmplx.Abs(points[0].G)
	x[0] = math.Log(max(g[0], least))
	for c := range k {
		x[2+2*c] = math.Log(max(g[1+c], least))
	}
	return x
}

// sorted has the relaxation times rising.
func sorted(f linear.Spectrum) linear.Spectrum {
	for i := range f.Times {
		for j := i; j > 0 && f.Times[j] < f.Times[j-1]; j-- {
			f.Times[j], f.Times[j-1] = f.Times[j-1], f.Times[j]
			f.Moduli[j], f.Moduli[j-1] = f.Moduli[j-1], f.Moduli[j]
		}
	}
	return f
}
