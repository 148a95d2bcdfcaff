package models

import (
	"math"

	"phaselag/models/amplitude"
	"phaselag/models/linear"
	"phaselag/models/thermal"
)

// Gradient writes ∂G*/∂p for every row of Uncertainty.Parameters into g, in Pa
// per unit of the parameter as the file has it, and returns G* in Pa. The
// length of g is that of Parameters.
func (c *Compound) Gradient(q Condition, g []complex128) complex128 {
	d := &c.derived
	omega := 2 * math.Pi * q.Frequency
	x := omega * c.shift(q.Temperature)
	b, bSlope := d.verticalAt(q.Temperature)
	poly := d.spectrum.Modulus(x)
	polySlope := d.spectrum.Slope(x) // per ln x
	cb := complex(b, 0)

	var lawGrad []float64
	var slope float64
	if d.law != nil {
		slope = d.law.Slope(q.Temperature)
		n := 3
		if f, ok := d.law.(thermal.Factors); ok {
			n = len(f.T)
		}
		lawGrad = make([]float64, n)
		d.law.Gradient(q.Temperature, lawGrad)
	}
	var vertGrad []float64
	if d.vertical != nil {
		vertGrad = make([]float64, len(d.vertical.T))
		d.vertical.Gradient(q.Temperature, vertGrad)
	}
	var fil fillerGradient
	if d.filler != nil {
		fil = d.filler.gradient(q.Frequency, q.Temperature, c.strain(q))
		if d.filler.scaling {
			// The term multiplies: what belongs to the polymer gets the factor 1 + F,
			// what belongs to F the polymer term.
			fil.times(cb * poly)
			cb *= 1 + fil.term
		}
	}
	value := cb*poly + fil.value
	h := complex(1, 0)
	if d.filler != nil && d.filler.scaling {
		value = cb * poly
		h = 1 + fil.term
	}
	dT := cb*polySlope*complex(thermal.Ln10*slope, 0) + complex(bSlope, 0)*h*poly + fil.byT
	for i, p := range d.params {
		switch p.kind {
		case pEquilibrium:
			g[i] = cb * mega
		case pBranch:
			re, im := linear.Branch(x * d.spectrum.Times[p.index])
			g[i] = cb * complex(mega*re, mega*im)
		case pC1:
			g[i] = cb * polySlope * complex(thermal.Ln10*lawGrad[0], 0)
		case pC2:
			g[i] = cb * polySlope * complex(thermal.Ln10*lawGrad[1], 0)
		case pShiftActivation:
			g[i] = cb * polySlope * complex(1e3*thermal.Ln10*lawGrad[0], 0)
		case pFactor:
			g[i] = cb * polySlope * complex(thermal.Ln10*lawGrad[p.index], 0)
		case pVertical:
			// The file has b_T, the interpolation ln b_T.
			g[i] = cb * poly * complex(vertGrad[p.index]/float64(c.Vertical.Factors[p.index].B), 0)
		case pCrossover:
			g[i] = cb * polySlope * complex(thermal.Ln10*lawGrad[2], 0)
		case pStorage, pStorageRatio:
			g[i] = fil.byStorage
		case pLoss, pLossRatio:
			g[i] = fil.byLoss
		case pExtraLoss:
			g[i] = fil.byExtra
		case pExtraStrain:
			g[i] = fil.byLnExtra / complex(*c.Amplitude.ExtraStrain, 0)
		case pCritical:
			g[i] = fil.byLnCritical / complex(float64(c.Amplitude.Critical), 0)
		case pExponent:
			g[i] = fil.byExponent
		case pActivation:
			g[i] = fil.byActivation
		case pSpecimen:
			g[i] = value
		case pTemperature:
			g[i] = -dT
		case pPhase:
			g[i] = 0 // the moduli are those without the error of the phase
		}
	}
	return value
}

// fillerGradient is the filler term and its derivatives.
type fillerGradient struct {
	term                     complex128 // F, per unit of the polymer term where it scales
	value, byT               complex128
	byStorage, byLoss        complex128 // per MPa, or per ratio
	byExtra, byLnExtra       complex128 // per MPa; per ln γ_2
	byLnCritical, byExponent complex128
	byActivation             complex128 // per kJ/mol
}

// times multiplies everything but the term by the polymer term.
func (g *fillerGradient) times(p complex128) {
	for _, v := range []*complex128{&g.value, &g.byT, &g.byStorage, &g.byLoss, &g.byExtra, &g.byLnExtra, &g.byLnCritical, &g.byExponent, &g.byActivation} {
		*v *= p
	}
}

func (f *filler) gradient(freq, T, gamma float64) fillerGradient {
	t := f.law.Terms(gamma)
	return f.gradientOf(&t, freq, T)
}

// gradientOf is gradient where the law's terms at the strain are known.
func (f *filler) gradientOf(t *amplitude.Terms, freq, T float64) fillerGradient {
	phi := f.arrhenius.Factor(T)
	lossDir := complex(amplitude.FrequencyPart(f.kappa, freq, f.f0), 1)
	term := func(a, b, x float64) complex128 {
		return complex(phi*f.storage*a, 0) + complex(phi*(f.loss*b+f.extra*x), 0)*lossDir
	}
	unit := float64(mega)
	if f.scaling {
		unit = 1
	}
	v := term(t.K1, t.K2, t.K3)
	return fillerGradient{
		term: v, value: v,
		byT:          v * complex(-f.arrhenius.Activation/(thermal.GasConstant*T*T), 0),
		byStorage:    complex(unit*phi*t.K1, 0),
		byLoss:       complex(unit*phi*t.K2, 0) * lossDir,
		byExtra:      complex(mega*phi*t.K3, 0) * lossDir,
		byLnExtra:    complex(phi*f.extra*t.K3Extra, 0) * lossDir,
		byLnCritical: term(t.K1Critical, t.K2Critical, 0),
		byExponent:   term(t.K1Exponent, t.K2Exponent, 0),
		byActivation: v * complex(1e3/thermal.GasConstant*(1/T-1/f.arrhenius.Reference), 0),
	}
}
