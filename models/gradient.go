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
	value := cb * poly

	var lawGrad []float64
	var slope float64
	if d.law != nil {
		slope = d.law.Slope(q.Temperature)
		n := 2
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
	dT := cb*polySlope*complex(thermal.Ln10*slope, 0) + complex(bSlope, 0)*poly

	var fil fillerGradient
	if d.filler != nil {
		fil = d.filler.gradient(q.Frequency, q.Temperature, c.strain(q))
		value += fil.value
		dT += fil.byT
	}
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
		case pStorage:
			g[i] = fil.byStorage
		case pLoss:
			g[i] = fil.byLoss
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

type fillerGradient struct {
	value, byT               complex128
	byStorage, byLoss        complex128 // per MPa
	byLnCritical, byExponent complex128
	byActivation             complex128 // per kJ/mol
}

func (f *filler) gradient(freq, T, gamma float64) fillerGradient {
	k1, k2, k1c, k2c, k1m, k2m := f.kraus.Slopes(gamma)
	phi := f.arrhenius.Factor(T)
	lossDir := complex(amplitude.FrequencyPart(f.kappa, freq, f.f0), 1)
	term := func(a, b float64) complex128 {
		return complex(phi*f.storage*a, 0) + complex(phi*f.loss*b, 0)*lossDir
	}
	v := term(k1, k2)
	return fillerGradient{
		value:        v,
		byT:          v * complex(-f.arrhenius.Activation/(thermal.GasConstant*T*T), 0),
		byStorage:    complex(mega*phi*k1, 0),
		byLoss:       complex(mega*phi*k2, 0) * lossDir,
		byLnCritical: term(k1c, k2c),
		byExponent:   term(k1m, k2m),
		byActivation: v * complex(1e3/thermal.GasConstant*(1/T-1/f.arrhenius.Reference), 0),
	}
}
