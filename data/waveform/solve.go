package waveform

import (
	"math"
)

// Problem: the Gauss-Newton step for the common frequency of n channels, and the
// covariance of all parameters, from one triangular factor.
//
// With R = [Rb Rt zb; 0 Rd zd; 0 0 ρ] (base, time columns, channels) the amplitudes
// at the frequency given are B_c = Rb⁻¹ zb_c, and with g_c the coefficients of the
// derivative over the time columns the step κ = δω·L is the weighted mean
//
//	κ = Σ_cd W_cd (Rd g_c)·zd_d / Σ_cd W_cd (Rd g_c)·(Rd g_d),  W = Σ⁻¹,
//
// where Σ is the covariance of the channels' noise, estimated from the residuals.
// For one channel this is the update of the four-parameter sine fit of IEEE 1057:
// its column -A t sin ωt + B t cos ωt, with A and B of the present frequency.
// Stopping rule (in [iterate]): |κ| ≤ 1e-12 rad. Covariances are those of the
// weighted mean whatever W was, so a bounded W costs efficiency, not truth:
//
//	var κ = Σ_de Σ_de u_d·u_e / S²,  u_d = Σ_c W_cd Rd g_c
//	cov(B_c, B_d) = Σ_cd (RbᵀRb)⁻¹ + G_c G_dᵀ var κ,  G_c = Rb⁻¹ Rt g_c
//	cov(B_c, κ) = -G_c var κ.

// solution is what a factor says at the frequency of its frame.
type solution struct {
	layout layout
	frame  frame
	n      int         // rows
	free   bool        // the frequency was fitted
	b      [][]float64 // channel, base column
	g      [][]float64 // G_c
	unit   []float64   // (RbᵀRb)⁻¹, base×base
	rss    [2][2]float64
	sigma  [2][2]float64 // covariance of the noise
	w      [2][2]float64 // weights of the channels
	step   float64       // κ
	varK   float64       // of κ; 0 at a known frequency
	alone  [2]float64    // the step each channel alone would take
	uAlone [2]float64    // its standard uncertainty
	passes int
}

// dof returns the degrees of freedom of one channel.
func (s *solution) dof() float64 {
	d := float64(s.n - s.layout.base())
	if s.free {
		d -= 1 / float64(s.layout.channels)
	}
	return d
}

// solve reads a folded factor. The weights are those of held, if it is not nil. It returns nil if the base is not of full rank or
// nothing is left for the noise.
func solve(a *triangle, l layout, f frame, free bool, held *solution) *solution {
	p, q, nc := l.base(), l.extra(), l.channels
	s := &solution{layout: l, frame: f, n: a.count, free: free}
	if s.dof() < 1 {
		return nil
	}
	for j := range p {
		var norm float64
		for i := 0; i <= j; i++ {
			norm = math.Hypot(norm, a.at(i, j))
		}
		if d := math.Abs(a.at(j, j)); !(d > 1e-9*norm) || math.IsInf(norm, 0) {
			return nil
		}
	}
	back := func(z []float64) []float64 {
		x := make([]float64, p)
		for i := p - 1; i >= 0; i-- {
			v := z[i]
			for k := i + 1; k < p; k++ {
				v -= a.at(i, k) * x[k]
			}
			x[i] = v / a.at(i, i)
		}
		return x
	}
	col := func(j int) []float64 { return a.r[j*a.n : j*a.n+p] }
	for c := range nc {
		s.b = append(s.b, back(col(p+q+c)))
	}
	inv := make([][]float64, p)
	for j := range p {
		e := make([]float64, p)
		e[j] = 1
		inv[j] = back(e)
	}
	s.unit = make([]float64, p*p)
	for i := range p {
		for k := range p {
			for j := range p {
				s.unit[i*p+k] += inv[j][i] * inv[j][k]
			}
		}
	}
	for c := range nc {
		for d := range nc {
			for i := p; i < a.n; i++ {
				s.rss[c][d] += a.at(i, p+q+c) * a.at(i, p+q+d)
			}
			s.sigma[c][d] = s.rss[c][d] / s.dof()
		}
	}
	if l.times {
		s.w = weights(s.sigma, s.b, l)
		if held != nil {
			s.w = held.w
		}
		s.stepFrom(a, back)
	}
	return s
}

func (s *solution) stepFrom(a *triangle, back func([]float64) []float64) {
	l := s.layout
	p, q, nc := l.base(), l.extra(), l.channels
	r := make([][]float64, nc) // Rd g_c
	for c := range nc {
		g := make([]float64, q)
		for h := range l.harmonics {
			g[2*h] = float64(h+1) * s.b[c][2*h+1]
			g[2*h+1] = -float64(h+1) * s.b[c][2*h]
		}
		top, low := make([]float64, p), make([]float64, q)
		for j := range q {
			for i := range p {
				top[i] += a.at(i, p+j) * g[j]
			}
			for i := 0; i <= j; i++ {
				low[i] += a.at(p+i, p+j) * g[j]
			}
		}
		s.g = append(s.g, back(top))
		r[c] = low
	}
	w := s.w
	var S, num float64
	u := make([][]float64, nc)
	for d := range nc {
		u[d] = make([]float64, q)
		var own, mine float64
		for i := range q {
			for c := range nc {
				u[d][i] += w[c][d] * r[c][i]
			}
			z := a.at(p+i, p+q+d)
			S += u[d][i] * r[d][i]
			num += u[d][i] * z
			own += r[d][i] * r[d][i]
			mine += r[d][i] * z
		}
		s.alone[d] = mine / own
		s.uAlone[d] = math.Sqrt(s.sigma[d][d] / own)
	}
	if !(S > 0) {
		s.varK = math.Inf(1)
		return
	}
	s.step = num / S
	if s.free {
		for d := range nc {
			for e := range nc {
				for i := range q {
					s.varK += s.sigma[d][e] * u[d][i] * u[e][i]
				}
			}
		}
		s.varK /= S * S
	}
}

// weights inverts the covariance of the noise, with the correlation bounded to
// 0.95 and each variance to that of rounding, so that a record without noise has
// weights too.
func weights(sigma [2][2]float64, b [][]float64, l layout) [2][2]float64 {
	var v [2]float64
	for c := range l.channels {
		a := 1e-13 * math.Hypot(math.Hypot(b[c][0], b[c][1]), b[c][2*l.harmonics])
		v[c] = sigma[c][c] + a*a
		if !(v[c] > 0) {
			v[c] = math.SmallestNonzeroFloat32
		}
	}
	if l.channels == 1 {
		return [2][2]float64{{1 / v[0]}}
	}
	rho := sigma[0][1] / math.Sqrt(v[0]) / math.Sqrt(v[1])
	rho = math.Max(-0.95, math.Min(0.95, rho))
	k := 1 / (1 - rho*rho)
	x := -k * rho / math.Sqrt(v[0]) / math.Sqrt(v[1])
	return [2][2]float64{{k / v[0], x}, {x, k / v[1]}}
}

const (
	maxPasses = 40
	tinyStep  = 1e-12 // rad at the end of the record
	// Channels of two frequencies would take the weight from each other for ever.
	holdWeights = 8
)

// iterate makes Gauss-Newton steps from f.omega until the stopping rule holds.
// factor returns the folded factor at a frame. A step is bounded to one radian at
// the record's ends. It returns nil where the fit cannot be made or does not end.
func iterate(factor func(frame) *triangle, l layout, f frame, free bool) *solution {
	var held *solution
	for pass := 1; pass <= maxPasses; pass++ {
		s := solve(factor(f), l, f, free, held)
		if s == nil {
			return nil
		}
		s.passes = pass
		if pass == holdWeights {
			held = s
		}
		if !free {
			return s
		}
		if math.IsNaN(s.step) || math.IsInf(s.varK, 0) {
			return nil
		}
		// A frequency of 1e6 cycles a record cannot be had to 1e-12 rad.
		if tiny := tinyStep + 1e-15*f.omega*f.scale; math.Abs(s.step) <= tiny {
			return s
		}
		// Steps far below the uncertainty that no longer shrink are rounding.
		if pass > 12 && math.Abs(s.step) <= 1e-4*math.Sqrt(s.varK) {
			return s
		}
		f.omega += math.Max(-1, math.Min(1, s.step)) / f.scale
		if !(f.omega > 0) {
			return nil
		}
	}
	return nil
}
