package waveform

import "math"

// Problem: the fit of a record of any length in a bounded memory.
//
// The frequency found in the first samples is only right to a fraction of a cycle
// over those samples; over the whole record its error may be many cycles. Therefore
// the samples are folded into a factor per block of whole cycles, each with its own
// time origin (the rotating reference), base and time columns both. When maxBlocks
// blocks are full, neighbours are carried to a common origin, which is exact, and
// merged, which is exact too; the blocks to come are twice as long, and turn at the
// frequency that all blocks together give by then. At the end the blocks are carried
// to one origin, with the phase between them advanced at the frequency sought, and
// Gauss-Newton runs on the blocks instead of the samples.
//
// What is lost: within a block the change of frequency δω enters to first order.
// With ε = δω·(half a block) the relative error of the amplitude is at most ε²/6.
// Since the frequency is found anew whenever blocks double, ε stays near
// √(24/N)(σ/a)/maxBlocks. ε is reported where it passes 0.01 ([FrequencyFixedEarly]).

const maxBlocks = 64 // even

type block struct {
	frame       frame
	first, last float64
	count       int
	r           []float64 // the factor, columns×columns by columns
}

type stream struct {
	layout  layout
	free    bool
	start   float64 // of the next block, s
	length  float64 // of a block, s
	omega   float64
	blocks  []block
	open    bool
	now     block
	tri     *triangle
	row     []float64
	carried *triangle // for merging and the common fit
	worst   float64   // ε at any merging
}

func newStream(l layout, omega, start, length float64, free bool) *stream {
	return &stream{
		layout: l, free: free, start: start, length: length, omega: omega,
		tri: newTriangle(l.columns()), row: make([]float64, l.columns()), carried: newTriangle(l.columns()),
	}
}

func (s *stream) add(t, force, displacement float64) {
	if s.open && t >= s.now.frame.center+s.now.frame.scale {
		s.close()
	}
	if !s.open {
		if skip := math.Floor((t - s.start) / s.length); skip > 0 {
			s.start += skip * s.length
		}
		s.now = block{frame: frame{omega: s.omega, center: s.start + s.length/2, scale: s.length / 2}, first: t}
		s.tri.reset()
		s.open = true
	}
	s.layout.fill(s.row, s.now.frame, t)
	n := len(s.row)
	s.row[n-2], s.row[n-1] = force, displacement
	s.tri.add(s.row)
	s.now.last = t
}

// close files the open block.
func (s *stream) close() {
	if !s.open {
		return
	}
	s.open = false
	s.tri.fold()
	s.now.count = s.tri.count
	s.now.r = append([]float64(nil), s.tri.r...)
	s.start = s.now.frame.center + s.now.frame.scale
	s.blocks = append(s.blocks, s.now)
	if len(s.blocks) == maxBlocks {
		s.halve()
	}
}

// halve merges neighbours.
func (s *stream) halve() {
	if s.free {
		if sol := s.solve(); sol != nil {
			s.worst = math.Max(s.worst, s.strain(sol))
			s.omega = sol.frame.omega
		}
	}
	for i := range maxBlocks / 2 {
		a, b := s.blocks[2*i], s.blocks[2*i+1]
		lo, hi := a.frame.center-a.frame.scale, b.frame.center+b.frame.scale
		to := frame{omega: s.omega, center: lo/2 + hi/2, scale: hi/2 - lo/2}
		s.carried.reset()
		s.carry(a, to)
		s.carry(b, to)
		s.carried.fold()
		copy(a.r, s.carried.r)
		s.blocks[i] = block{frame: to, first: a.first, last: b.last, count: a.count + b.count, r: a.r}
	}
	clear(s.blocks[maxBlocks/2:])
	s.blocks = s.blocks[:maxBlocks/2]
	s.length *= 2
}

// carry adds the rows of a block's factor, over the columns of frame to.
func (s *stream) carry(b block, to frame) {
	n := s.carried.n
	for i := range n {
		for j := range n {
			s.row[j] = 0
			if j >= i {
				s.row[j] = b.r[j*n+i]
			}
		}
		s.layout.carry(s.row, b.frame, to)
		s.carried.add(s.row)
	}
}

// solve fits all blocks together.
func (s *stream) solve() *solution {
	if len(s.blocks) == 0 {
		return nil
	}
	first, last := s.blocks[0].first, s.blocks[len(s.blocks)-1].last
	f := frame{omega: s.omega, center: first/2 + last/2, scale: last/2 - first/2}
	if !(f.scale > 0) {
		return nil
	}
	return iterate(func(f frame) *triangle {
		s.carried.reset()
		count := 0
		for _, b := range s.blocks {
			s.carry(b, f)
			count += b.count
		}
		s.carried.fold()
		s.carried.count = count
		return s.carried
	}, s.layout, f, s.free)
}

// strain is the largest ε of the blocks.
func (s *stream) strain(sol *solution) float64 {
	var e float64
	for _, b := range s.blocks {
		e = math.Max(e, math.Abs(sol.frame.omega-b.frame.omega)*b.frame.scale)
	}
	return e
}

// each solves every block on its own, at its own frequency.
func (s *stream) each(visit func(block, *solution)) {
	l := s.layout
	for _, b := range s.blocks {
		copy(s.carried.r, b.r)
		s.carried.rows, s.carried.count = 0, b.count
		if sol := solve(s.carried, l, b.frame, false, nil); sol != nil {
			visit(b, sol)
		}
	}
}
