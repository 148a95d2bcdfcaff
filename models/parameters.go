package models

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"phaselag/models/amplitude"
)

// paramKind says what a row of the covariance belongs to.
type paramKind int

const (
	pEquilibrium paramKind = iota
	pBranch
	pC1
	pC2
	pShiftActivation
	pFactor
	pVertical
	pStorage
	pLoss
	pCritical
	pExponent
	pActivation
	pSpecimen
	pTemperature
	pPhase
	pCrossover
	pExtraLoss
	pExtraStrain
	pStorageRatio
	pLossRatio
)

type parameter struct {
	kind  paramKind
	index int
}

// The names of the common errors among Uncertainty.Parameters.
const (
	ParamSpecimen    = "specimen_factor"
	ParamTemperature = "temperature_common_K"
	ParamPhase       = "phase_common_deg"
)

var plainParams = map[string]paramKind{
	"linear.equilibrium_modulus_MPa":    pEquilibrium,
	"shift.c1":                          pC1,
	"shift.c2_K":                        pC2,
	"shift.activation_kJ_per_mol":       pShiftActivation,
	"amplitude.storage_MPa":             pStorage,
	"amplitude.loss_MPa":                pLoss,
	"amplitude.critical_strain_percent": pCritical,
	"amplitude.exponent":                pExponent,
	"amplitude.activation_kJ_per_mol":   pActivation,
	ParamSpecimen:                       pSpecimen,
	ParamTemperature:                    pTemperature,
	ParamPhase:                          pPhase,

	"shift.crossover_C":                   pCrossover,
	"amplitude.extra_loss_MPa":            pExtraLoss,
	"amplitude.extra_loss_strain_percent": pExtraStrain,
	"amplitude.storage_ratio":             pStorageRatio,
	"amplitude.loss_ratio":                pLossRatio,
}

func (c *Compound) deriveParameters(d *derived, bad badFunc) error {
	u := c.Uncertainty
	if len(u.Cholesky) != len(u.Parameters) {
		return bad("uncertainty.cholesky", "%d rows for %d parameters", len(u.Cholesky), len(u.Parameters))
	}
	seen := map[string]bool{}
	for i, name := range u.Parameters {
		if len(u.Cholesky[i]) != i+1 {
			return bad(fmt.Sprintf("uncertainty.cholesky.%d", i), "has %d numbers, row %d of a lower triangle has %d", len(u.Cholesky[i]), i, i+1)
		}
		for _, v := range u.Cholesky[i] {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return bad(fmt.Sprintf("uncertainty.cholesky.%d", i), "has a number that is not finite")
			}
		}
		if seen[name] {
			return bad(fmt.Sprintf("uncertainty.parameters.%d", i), "%q stands twice", name)
		}
		seen[name] = true
		p, ok := c.parameter(name, d)
		if !ok {
			return bad(fmt.Sprintf("uncertainty.parameters.%d", i), "%q is no parameter of this compound", name)
		}
		d.params = append(d.params, p)
	}
	return nil
}

// parameter finds the parameter of a name; ok is false if c has none such.
func (c *Compound) parameter(name string, d *derived) (p parameter, ok bool) {
	if kind, plain := plainParams[name]; plain {
		switch kind {
		case pC1, pC2:
			return parameter{kind: kind}, d.wlf != nil || c.Shift.Law == LawCrossover
		case pCrossover:
			return parameter{kind: kind}, c.Shift.Law == LawCrossover
		case pShiftActivation:
			return parameter{kind: kind}, c.Shift.Law == LawArrhenius
		case pCritical, pActivation:
			return parameter{kind: kind}, d.filler != nil
		case pExponent:
			return parameter{kind: kind}, d.filler != nil && d.filler.law.Kind != amplitude.MaierGoritz
		case pStorage, pLoss:
			return parameter{kind: kind}, d.filler != nil && !d.filler.scaling
		case pStorageRatio, pLossRatio:
			return parameter{kind: kind}, d.filler != nil && d.filler.scaling
		case pExtraLoss, pExtraStrain:
			return parameter{kind: kind}, d.filler != nil && d.filler.law.Kind == amplitude.ExtraLoss
		}
		return parameter{kind: kind}, true
	}
	parts := strings.Split(name, ".")
	if len(parts) != 4 {
		return p, false
	}
	i, err := strconv.Atoi(parts[2])
	if err != nil || i < 0 {
		return p, false
	}
	switch parts[0] + "." + parts[1] + "." + parts[3] {
	case "linear.branches.modulus_MPa":
		return parameter{pBranch, i}, i < len(c.Linear.Branches)
	case "shift.factors.log10_aT":
		for k, j := range d.factorIdx {
			if j == i {
				return parameter{pFactor, k}, true
			}
		}
	case "vertical.factors.b_T":
		return parameter{pVertical, i}, d.vertical != nil && i < len(d.vertical.T)
	}
	return p, false
}
