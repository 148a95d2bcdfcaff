package models

import (
	"math"
	"math/cmplx"

	"phaselag/models/amplitude"
)

// A surface is the modulus at every combination of frequencies, temperatures and
// strain amplitudes. What belongs to the polymer does not depend on the strain, so
// its value P and Lᵀ∂P/∂p, the part of the covariance's root that it carries, are
// made once for each frequency and temperature. At each strain
//
//	Lᵀg = h·Lᵀ(∂P/∂p) + Σ_i L_iᵀ g_i,   i over the few parameters of the filler term,
//
// with h = 1, or 1 + F where the term scales. The rows of the common specimen factor
// and temperature get the filler's share. All half-widths are lengths of real
// combinations of these vectors, with no difference of squares.

// Surface returns the modulus at every combination, the strain running fastest, then
// the frequency, then the temperature: element (iT·len(frequencies)+if)·len(strains)+is.
// Frequencies in Hz, temperatures in K, strains in m/m, NaN for the isotherms' own.
// Without intervals the half-widths are NaN. It does not look at the domain: see
// [Compound.Inside]; Modulus.Domain is "".
func (c *Compound) Surface(frequencies, temperatures, strains []float64, intervals bool) []Modulus {
	s := newSurface(c, strains)
	out := make([]Modulus, 0, len(frequencies)*len(temperatures)*len(strains))
	for _, T := range temperatures {
		for _, f := range frequencies {
			s.place(f, T, intervals)
			for i := range strains {
				out = append(out, s.at(i, intervals))
			}
		}
	}
	return out
}

type surface struct {
	c, bare *Compound // bare: without the filler term
	terms   []amplitude.Terms
	rows    []int // of the parameters that the strain touches
	n       int

	f, T, reduced float64
	polymer       complex128
	g             []complex128
	root          []complex128 // Lᵀ∂P/∂p
	u             []complex128 // Lᵀg
}

func newSurface(c *Compound, strains []float64) *surface {
	bare := *c
	bare.derived.filler = nil
	n := len(c.derived.params)
	s := &surface{c: c, bare: &bare, n: n, g: make([]complex128, n), root: make([]complex128, n), u: make([]complex128, n)}
	if c.derived.filler == nil {
		s.terms = make([]amplitude.Terms, len(strains))
		return s
	}
	for _, gamma := range strains {
		s.terms = append(s.terms, c.derived.filler.law.Terms(c.strain(Condition{Strain: gamma})))
	}
	for i, p := range c.derived.params {
		switch p.kind {
		case pStorage, pLoss, pCritical, pExponent, pActivation, pExtraLoss, pExtraStrain, pStorageRatio, pLossRatio, pSpecimen, pTemperature:
			s.rows = append(s.rows, i)
		}
	}
	return s
}

// place makes what does not depend on the strain.
func (s *surface) place(f, T float64, intervals bool) {
	s.f, s.T = f, T
	s.reduced = f * s.c.shift(T)
	q := Condition{Frequency: f, Temperature: T, Strain: math.NaN()}
	if !intervals {
		s.polymer = s.bare.Value(q)
		return
	}
	s.polymer = s.bare.Gradient(q, s.g)
	clear(s.root)
	for i, gi := range s.g {
		if gi == 0 {
			continue
		}
		for j, l := range s.c.Uncertainty.Cholesky[i] {
			s.root[j] += complex(l*real(gi), l*imag(gi))
		}
	}
}

// at is the modulus at one strain.
func (s *surface) at(i int, intervals bool) Modulus {
	value := s.polymer
	h := complex(1, 0)
	var fil fillerGradient
	if f := s.c.derived.filler; f != nil {
		fil = f.gradientOf(&s.terms[i], s.f, s.T)
		if f.scaling {
			h = 1 + fil.term
			fil.times(s.polymer)
			value *= h
		} else {
			value += fil.value
		}
	}
	storage, loss, mag := real(value), imag(value), cmplx.Abs(value)
	eta := loss / storage
	m := Modulus{Storage: storage, Loss: loss, Magnitude: mag, LossFactor: eta, ReducedFrequency: s.reduced,
		StorageU95: math.NaN(), LossU95: math.NaN(), MagnitudeU95: math.NaN(), LossFactorU95: math.NaN()}
	if !intervals {
		return m
	}
	u := s.root
	if s.rows != nil {
		u = s.u
		for j, r := range s.root {
			u[j] = h * r
		}
		for _, row := range s.rows {
			g := s.share(row, &fil)
			if g == 0 {
				continue
			}
			for j, l := range s.c.Uncertainty.Cholesky[row] {
				u[j] += complex(l*real(g), l*imag(g))
			}
		}
	}
	var a, b, r, t float64
	pr, pi := storage/mag, loss/mag
	for _, v := range u {
		x, y := real(v), imag(v)
		a += x * x
		b += y * y
		z := pr*x + pi*y
		r += z * z
		z = y - eta*x
		t += z * z
	}
	q := s.c.Quantile()
	m.StorageU95, m.LossU95, m.MagnitudeU95, m.LossFactorU95 = q*math.Sqrt(a), q*math.Sqrt(b), q*math.Sqrt(r), q*math.Sqrt(t)/math.Abs(storage)
	return m
}

// share is what the filler term adds to the gradient by a parameter.
func (s *surface) share(row int, fil *fillerGradient) complex128 {
	c := s.c
	scaling := c.derived.filler.scaling
	switch c.derived.params[row].kind {
	case pStorage, pStorageRatio:
		return fil.byStorage
	case pLoss, pLossRatio:
		return fil.byLoss
	case pExtraLoss:
		return fil.byExtra
	case pExtraStrain:
		return fil.byLnExtra / complex(*c.Amplitude.ExtraStrain, 0)
	case pCritical:
		return fil.byLnCritical / complex(float64(c.Amplitude.Critical), 0)
	case pExponent:
		return fil.byExponent
	case pActivation:
		return fil.byActivation
	case pSpecimen:
		if scaling {
			return 0 // in h already
		}
		return fil.value
	case pTemperature:
		return -fil.byT
	}
	return 0
}
