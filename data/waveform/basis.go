package waveform

import "math"

// The model of one channel, with u = (t-c)/L, τ = t-c:
//
//	y(t) = Σ_h [A_h cos hωτ + B_h sin hωτ] + P_0 + P_1 u + P_2 u²,  h = 1 … H.
//
// Its derivative with respect to ωL is Σ_h h u [B_h cos hωτ - A_h sin hωτ]: it lies
// in the span of the time columns u cos hωτ, u sin hωτ. A factor of the base columns,
// the time columns and the data together therefore holds all that a Gauss-Newton
// step for ω needs, without going back to the samples.
//
// The span of these columns is closed under a change of c and L. Under a change of
// ω it is closed to first order in δω·L; what is dropped is (hδωτ)²/2.

// layout orders the columns: cos and sin of each harmonic, the powers of u, then
// (if times) u cos and u sin of each harmonic, then one column per channel.
type layout struct {
	harmonics int
	trend     int // degree of the polynomial: 0, 1 or 2
	times     bool
	channels  int
}

func (l layout) base() int { return 2*l.harmonics + l.trend + 1 }

func (l layout) extra() int {
	if l.times {
		return 2 * l.harmonics
	}
	return 0
}

func (l layout) columns() int { return l.base() + l.extra() + l.channels }

// frame is where and how fast the columns turn.
type frame struct {
	omega, center, scale float64
}

// fill writes the columns at time t into row, without the channels.
func (l layout) fill(row []float64, f frame, t float64) {
	tau := t - f.center
	u := tau / f.scale
	s1, c1 := math.Sincos(f.omega * tau)
	c, s := c1, s1
	p := 2 * l.harmonics
	q := l.base()
	for h := range l.harmonics {
		row[2*h], row[2*h+1] = c, s
		if l.times {
			row[q+2*h], row[q+2*h+1] = u*c, u*s
		}
		c, s = c*c1-s*s1, s*c1+c*s1
	}
	row[p] = 1
	for k := 1; k <= l.trend; k++ {
		row[p+k] = row[p+k-1] * u
	}
}

// carry rewrites a row over the columns of frame from as the row over those of
// frame to, in place. The channels stay. It needs the time columns.
func (l layout) carry(row []float64, from, to frame) {
	s := from.center - to.center
	alpha, beta := from.scale/to.scale, s/to.scale
	delta := (to.omega - from.omega) * from.scale
	q := l.base()
	for h := range l.harmonics {
		k := float64(h + 1)
		S, C := math.Sincos(k * to.omega * s)
		qc, qs := row[q+2*h], row[q+2*h+1]
		rc := row[2*h] - k*delta*qs
		rs := row[2*h+1] + k*delta*qc
		rc, rs = C*rc-S*rs, S*rc+C*rs
		qc, qs = C*qc-S*qs, S*qc+C*qs
		row[2*h], row[2*h+1] = rc, rs
		row[q+2*h], row[q+2*h+1] = alpha*qc+beta*rc, alpha*qs+beta*rs
	}
	p := row[2*l.harmonics:]
	if l.trend == 2 {
		p[2] = beta*beta*p[0] + 2*alpha*beta*p[1] + alpha*alpha*p[2]
	}
	if l.trend >= 1 {
		p[1] = beta*p[0] + alpha*p[1]
	}
}
