package superpose

import (
	"math"
	"math/cmplx"
)

// leverage is the diagonal of the hat matrix of the linearised problem, per data
// row of the engine: ‖R⁻ᵀJ_i‖² for row i. R is passed through in the order of its
// elimination, where a row meets its own run's columns and the shared ones.
func (z *arrow) leverage() []float64 {
	e, np := z.e, len(z.columns)
	h := make([]float64, 2*len(e.osc)+len(e.rel))
	place := make([]int, z.n) // of a parameter among the rows of R
	for c := range place {
		place[c] = -1
	}
	norm := make([]float64, z.n)
	for i, row := range z.front.Rows {
		place[row.Columns[0]] = i
		for k, c := range row.Columns {
			if c < z.n {
				norm[c] += row.Elements[k] * row.Elements[k]
			}
		}
	}
	v := make([]float64, z.n)
	one := func(at, i int, imaginary bool) {
		first := len(z.front.Rows)
		set := func(c int, x float64) {
			v[c] += x
			if place[c] >= 0 {
				first = min(first, place[c])
			}
		}
		for k, c := range z.columns {
			set(k, e.a[c*e.m+at])
		}
		for k := e.slope.start[i]; k < e.slope.start[i+1]; k++ {
			x := real(e.slope.value[k])
			if imaginary {
				x = imag(e.slope.value[k])
			}
			set(np+e.slope.column[k], x)
		}
		for _, row := range z.front.Rows[first:] {
			c := row.Columns[0]
			d := row.Elements[0]
			if v[c] == 0 || math.Abs(d) < noInformation*math.Sqrt(norm[c]) {
				continue
			}
			x := v[c] / d
			h[at] += x * x
			for k, c := range row.Columns[1:] {
				if c < z.n {
					v[c] -= x * row.Elements[k+1]
				}
			}
		}
		clear(v)
	}
	for i, r := range e.p.Rows {
		one(e.place[i], i, false)
		if !r.Relaxation {
			one(len(e.osc)+e.place[i], i, true)
		}
	}
	return h
}

// noInformation is the share of a column's norm below which what the earlier
// columns do not explain is rounding.
const noInformation = 1e-13

// linearise factors the Jacobian at the solution.
func (s *Solution) linearise(columns []int) *arrow {
	s.e.derivatives()
	return s.e.arrow(columns, true, false)
}

// GroupNoise is the estimated noise of a group with its degrees of freedom.
type GroupNoise struct {
	Sigma
	MagnitudeDOF, PhaseDOF float64
}

// sigmaFloor keeps exact data from an infinite weight; no instrument is better
// than 0.005 % and 0.003°.
const sigmaFloor = 5e-5

// minDOF is the least number of degrees of freedom from which a noise level is
// estimated; below it the level of before stays.
const minDOF = 1.5

// Noise estimates σ_m and σ_δ of every group from the residuals, each over its
// own degrees of freedom Σ(1−h_i), h the leverages.
func (s *Solution) Noise() []GroupNoise {
	e := s.e
	h := s.linearise(e.passiveColumns()).leverage()
	out := make([]GroupNoise, s.Problem.Groups)
	squares := make([]float64, s.Problem.Groups)
	n := len(e.osc)
	phases := make([][]phaseRow, s.Problem.Groups)
	for j, i := range e.osc {
		g, w := s.Problem.Rows[i].Group, s.Form.weight(i)
		r := s.Misfit(i)
		squares[g] += w * real(r) * real(r)
		out[g].MagnitudeDOF += w * (1 - h[j])
		out[g].PhaseDOF += w * (1 - h[n+j])
		phases[g] = append(phases[g], phaseRow{w * imag(r) * imag(r), w * (1 - h[n+j]), sineSquare(cmplx.Phase(e.model(i)))})
	}
	for j, i := range e.rel {
		g, w := s.Problem.Rows[i].Group, s.Form.weight(i)
		r := real(s.Misfit(i))
		squares[g] += w * r * r
		out[g].MagnitudeDOF += w * (1 - h[2*n+j])
	}
	for g := range out {
		out[g].Sigma = s.Form.Sigma[g]
		if out[g].MagnitudeDOF > minDOF {
			out[g].Magnitude = max(sigmaFloor, math.Sqrt(squares[g]/out[g].MagnitudeDOF))
		}
		if out[g].PhaseDOF > minDOF {
			v, share, mean := phaseVariance(phases[g], out[g].PhaseDOF)
			out[g].Phase, out[g].Share, out[g].Mean = max(sigmaFloor, math.Sqrt(v)), share, mean
		}
	}
	return out
}

// phaseRow is a row's squared misfit of the phase, its degrees of freedom 1−h
// and q = (½ sin 2δ)².
type phaseRow struct{ square, dof, q float64 }

// twoTerms is by how much −2 ln L must fall for the second term of the variance
// of the phase: 2 for its constant and 4 more.
const twoTerms = 6

// phaseVariance estimates the variance of the phase by maximum likelihood over
// its share of the term with q. For a share w, with u_i = 1 − w + w q_i/mean,
//
//	v = Σ r_i²/u_i / ν,  −2 ln L = ν ln v + Σ (1−h_i) ln u_i + const
func phaseVariance(rows []phaseRow, dof float64) (v, share, mean float64) {
	for _, r := range rows {
		mean += r.q / float64(len(rows))
	}
	at := func(w float64) (v, l float64) {
		for _, r := range rows {
			u := max(0.0025, 1-w+w*r.q/mean)
			v += r.square / u
			l += r.dof * math.Log(u)
		}
		v /= dof
		return v, l + dof*math.Log(v)
	}
	v, l0 := at(0)
	if !(mean > 0) || dof < 20 || !(v > sigmaFloor*sigmaFloor) {
		return v, 0, 0
	}
	best, least := 0.0, l0
	const steps = 50
	for i := 1; i <= steps; i++ {
		if _, l := at(float64(i) / steps); l < least {
			best, least = float64(i)/steps, l
		}
	}
	if l0-least < twoTerms {
		return v, 0, 0
	}
	v, _ = at(best)
	return v, best, mean
}

func (e *engine) passiveColumns() []int { return append([]int(nil), e.idx...) }

// Refine repeats the fit with estimated noise and the fitted moduli as
// denominators until no σ changes by more than one percent, at most rounds
// times, and returns the noise it ended with.
func (s *Solution) Refine(rounds int) (*Solution, []GroupNoise, error) {
	noise := s.Noise()
	for range rounds {
		e := s.e
		sigma := make([]Sigma, len(noise))
		moved := 0.0
		for g, v := range noise {
			sigma[g] = v.Sigma
			moved = max(moved, math.Abs(v.Share-e.f.Sigma[g].Share)/4)
			moved = max(moved, math.Abs(math.Log(v.Magnitude/e.f.Sigma[g].Magnitude)), math.Abs(math.Log(v.Phase/e.f.Sigma[g].Phase)))
		}
		for i := range e.denom {
			e.denom[i] = e.model(i)
		}
		form := *e.f
		form.Sigma = sigma
		e.f = &form
		e.setSigma(sigma)
		next, err := e.run(s.Theta)
		if err != nil {
			return nil, nil, err
		}
		s = next
		noise = s.Noise()
		if moved < 0.01 {
			break
		}
	}
	return s, noise, nil
}
