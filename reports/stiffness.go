package reports

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"slices"

	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports/table"
)

// StiffnessQuery is one condition of a mount.
type StiffnessQuery struct {
	Frequency    float64 // Hz
	Temperature  float64 // K
	Displacement float64 // m, of a mount that rotates rad, single amplitude; NaN: the mount file's excitation
}

// OwnStrainNote says at which amplitude answers are given when none was asked
// for.
func OwnStrainNote(c *models.Compound) string {
	own := float64(c.Domain.OwnStrain)
	if math.IsNaN(own) {
		return "the strain amplitude of the measurements was not stated; answers hold for that amplitude, whatever it was"
	}
	return fmt.Sprintf("strain amplitude: the isotherms' own, %.3g %% (zero to peak)", own)
}

// StiffnessTable answers for a mount at every condition. The stiffness and its
// interval come from the compound's joint covariance: with the sensitivities
// of package mount, dK = Σ S dG + S0 dG0 + S0' conj(dG0) over the leaves for
// every parameter of the compound. The part factor's and a measured element's
// own uncertainty are added for the stiffness and cancel in the ratio to the
// reference condition.
func StiffnessTable(c *models.Compound, m *mount.Mount, queries []StiffnessQuery, reference StiffnessQuery, extrapolate bool) (t table.Table, outside int, err error) {
	u := unitsOf(m)
	t = table.Table{Name: "stiffness 1", Columns: []table.Column{
		{Key: "frequency_Hz", Heading: "f", Unit: "Hz"}, {Key: "temperature_C", Heading: "T", Unit: "°C"},
		{Key: u.amplitudeKey, Heading: u.amplitude, Unit: u.travel}, {Key: "direction"}, {Key: "static_load_N", Heading: "load", Unit: "N"},
		{Key: "strain_amplitude_percent", Heading: "strain", Unit: "%", Digits: 3},
		{Key: "storage_" + u.key, Heading: "K'", Unit: u.stiffness, Interval: "storage_U95_" + u.key}, {Key: "loss_" + u.key, Heading: "K''", Unit: u.stiffness, Interval: "loss_U95_" + u.key},
		{Key: "magnitude_" + u.key, Heading: "|K*|", Unit: u.stiffness, Interval: "magnitude_U95_" + u.key}, {Key: "loss_factor", Heading: "η", Interval: "loss_factor_U95"},
		{Key: "storage_U95_" + u.key, Heading: "± K'", Unit: u.stiffness}, {Key: "loss_U95_" + u.key, Heading: "± K''", Unit: u.stiffness},
		{Key: "magnitude_U95_" + u.key, Heading: "± |K*|", Unit: u.stiffness}, {Key: "loss_factor_U95", Heading: "± η"},
		{Key: "ratio_to_reference", Heading: "ratio", Interval: "ratio_U95"}, {Key: "ratio_U95", Heading: "± ratio"},
		{Key: "domain"},
	}}
	t.Assumptions = append(t.Assumptions, m.Assumptions...)
	t.Assumptions = append(t.Assumptions, partCaution)
	soft, hard, spread := production(c, m)
	t.Assumptions = append(t.Assumptions, spread)
	if soft < hard {
		t.Columns = append(t.Columns,
			table.Column{Key: "magnitude_softest_" + u.key, Heading: "softest", Unit: u.stiffness, Digits: 3}, table.Column{Key: "magnitude_hardest_" + u.key, Heading: "hardest", Unit: u.stiffness, Digits: 3})
	}
	t.Assumptions = append(t.Assumptions, unstatedParts(c, m)...)
	ref, err := mountAt(c, m, reference)
	if err != nil {
		return table.Table{}, 0, fmt.Errorf("reference condition: %w", err)
	}
	if out := ref.inside(c); out != nil && !extrapolate {
		t.Assumptions = append(t.Assumptions, "the reference condition lies outside the domain, so that no ratio is given: "+out.Error())
		ref.value = cmplx.NaN()
	}
	for _, q := range queries {
		s, err := mountAt(c, m, q)
		if err != nil {
			return table.Table{}, 0, err
		}
		row := []table.Cell{
			table.Number(q.Frequency), table.Number(celsius(q.Temperature)), table.Number(u.perRad * s.state.Displacement),
			table.Text(m.Direction), table.Number(loadOf(m)), table.Number(100 * s.maxStrain()),
		}
		domain := "inside"
		if out := s.inside(c); out != nil {
			if !extrapolate {
				outside++
				for range 10 {
					row = append(row, table.Number(math.NaN()))
				}
				row = append(row, table.Text(out.Error()))
				for len(row) < len(t.Columns) {
					row = append(row, table.Number(math.NaN()))
				}
				t.Rows = append(t.Rows, row)
				continue
			}
			domain = "extrapolated: " + out.Quantities[0]
			for _, more := range out.Quantities[1:] {
				domain += "|" + more
			}
		}
		k := s.value
		if !(real(k) > 0) || cmplx.IsInf(k) {
			return table.Table{}, 0, fmt.Errorf("the model has no stiffness at %.4g Hz, %.4g °C", q.Frequency, celsius(q.Temperature))
		}
		eta := imag(k) / real(k)
		mag := cmplx.Abs(k)
		half := func(f func(complex128) float64, rel float64) float64 {
			return s.half(c, f, rel)
		}
		own := s.ownU
		per := func(x float64) table.Cell { return table.Number(x * u.scale) }
		row = append(row, per(real(k)), per(imag(k)), per(mag), table.Number(eta),
			per(half(func(v complex128) float64 { return real(v) }, own*real(k))),
			per(half(func(v complex128) float64 { return imag(v) }, own*imag(k))),
			per(half(func(v complex128) float64 { return (real(k)*real(v) + imag(k)*imag(v)) / mag }, own*mag)),
			table.Number(half(func(v complex128) float64 { return (imag(v) - eta*real(v)) / real(k) }, 0)))
		ratio, ratioU := s.ratio(c, ref)
		row = append(row, table.Number(ratio), table.Number(ratioU), table.Text(domain))
		for _, factor := range []float64{soft, hard} {
			if soft == hard {
				break
			}
			end, err := mountAt(c, scaled(m, factor), q)
			if err != nil {
				return table.Table{}, 0, err
			}
			row = append(row, per(cmplx.Abs(end.value)))
		}
		t.Rows = append(t.Rows, row)
	}
	return t, outside, nil
}

// unstatedParts says what a designer would expect the numbers to hold and they do not.
func unstatedParts(c *models.Compound, m *mount.Mount) []string {
	var out []string
	if math.IsNaN(loadOf(m)) && !m.Rotates() {
		out = append(out, "no static load is stated: what it does to the stiffness is left out")
	}
	if !slices.Contains(c.Uncertainty.Parameters, models.ParamPhase) {
		out = append(out, "the common uncertainty of the phase was not stated with the measurements: the intervals of loss and loss factor are those of repeatability")
	}
	return out
}

// partUnits is how the numbers of a mount are shown: those of one that rotates are an
// angle and N·m/rad.
type partUnits struct {
	amplitude, amplitudeKey, travel string
	stiffness, key                  string
	perRad, scale                   float64 // from SI
}

func unitsOf(m *mount.Mount) partUnits {
	if m.Rotates() {
		return partUnits{"angle", "angle_amplitude_deg", "°", "N·m/rad", "Nm_per_rad", 180 / math.Pi, 1}
	}
	return partUnits{"x", "displacement_amplitude_mm", "mm", "N/mm", "N_per_mm", 1e3, 1e-3}
}

// loadOf is the static load on all mounts together in N, NaN if not stated.
func loadOf(m *mount.Mount) float64 {
	if m.StaticForce > 0 {
		return m.StaticForce
	}
	return m.Mass * standardGravity
}

// partCaution goes with every stiffness.
const partCaution = "stiffness of the tested compound in an idealised part; production spread is not in the intervals; supports that people depend on belong to a qualified engineer and the codes in force"

// standardGravity is g_n, m/s² (CGPM 1901).
const standardGravity = 9.80665

// mountState is a mount at one condition with its derivative by every
// parameter of the compound.
type mountState struct {
	query StiffnessQuery
	state mount.State
	value complex128   // N/m
	grad  []complex128 // per parameter
	ownU  float64      // relative standard uncertainty of part factor and measured elements
	extra []models.Condition
}

func mountAt(c *models.Compound, m *mount.Mount, q StiffnessQuery) (*mountState, error) {
	material := func(hertz, kelvin, strain float64) complex128 {
		return c.Value(models.Condition{Frequency: hertz, Temperature: kelvin, Strain: modelStrain(c, strain)})
	}
	var s mount.State
	var err error
	moved, forced := m.Displaced, m.Forced
	if m.Rotates() {
		moved, forced = m.Twisted, m.Torqued
	}
	switch {
	case !math.IsNaN(q.Displacement):
		s, err = moved(material, q.Frequency, q.Temperature, q.Displacement)
	case !math.IsNaN(m.Excitation.Displacement):
		s, err = moved(material, q.Frequency, q.Temperature, m.Excitation.Displacement)
	case !math.IsNaN(m.Excitation.Force):
		s, err = forced(material, q.Frequency, q.Temperature, m.Excitation.Force)
	default:
		return nil, errors.New("no amplitude: state `excitation:` in the mount file, or --amplitude")
	}
	if err != nil {
		return nil, err
	}
	out := &mountState{query: q, state: s, value: s.Stiffness}
	n := len(c.Uncertainty.Parameters)
	out.grad = make([]complex128, n)
	g := make([]complex128, n)
	var own complex128
	for _, l := range s.Leaves {
		cond := models.Condition{Frequency: q.Frequency, Temperature: q.Temperature, Strain: modelStrain(c, l.Strain)}
		c.Gradient(cond, g)
		for i, v := range g {
			out.grad[i] += l.Sensitivity * v
		}
		e := m.Elements[l.Element]
		out.extra = append(out.extra, cond)
		if e.Measured == nil {
			continue
		}
		cond = models.Condition{Frequency: e.Measured.Frequency, Temperature: e.Measured.Temperature, Strain: modelStrain(c, l.ReferenceStrain)}
		out.extra = append(out.extra, cond)
		c.Gradient(cond, g)
		for i, v := range g {
			out.grad[i] += l.ReferenceSensitivity*v + l.ReferenceConjugate*cmplx.Conj(v)
		}
		if u := e.Measured.U; !math.IsNaN(u) {
			own += l.Share * complex(u, 0)
		}
	}
	out.ownU = cmplx.Abs(own)
	if !math.IsNaN(m.PartFactorU) {
		out.ownU = math.Hypot(out.ownU, m.PartFactorU)
	}
	return out, nil
}

// modelStrain is the strain for the compound: NaN, the isotherms' own, where
// the compound knows no amplitude dependence at all.
func modelStrain(c *models.Compound, strain float64) float64 {
	if c.Domain.Strain == nil {
		return math.NaN()
	}
	return strain
}

// maxStrain is the largest strain amplitude of any element.
func (s *mountState) maxStrain() float64 {
	var v float64
	for _, l := range s.state.Leaves {
		v = max(v, l.Strain)
	}
	return v
}

// inside finds the first condition of any element that lies outside.
func (s *mountState) inside(c *models.Compound) *models.OutsideError {
	for _, q := range s.extra {
		if math.IsNaN(q.Temperature) {
			continue
		}
		var out *models.OutsideError
		if err := c.Inside(q); errors.As(err, &out) {
			return out
		}
	}
	return nil
}

// half is the half-width of a real function of the stiffness; own is the
// standard deviation that comes from outside the compound.
func (s *mountState) half(c *models.Compound, f func(complex128) float64, own float64) float64 {
	g := make([]float64, len(s.grad))
	for i, v := range s.grad {
		g[i] = f(v)
	}
	return c.Quantile() * math.Hypot(c.Deviation(g), own)
}

// ratio is |K*| over that at the reference condition with its half-width, from
// what both have in common.
func (s *mountState) ratio(c *models.Compound, ref *mountState) (ratio, half float64) {
	if cmplx.IsNaN(ref.value) {
		return math.NaN(), math.NaN()
	}
	g := make([]float64, len(s.grad))
	for i := range g {
		g[i] = real(s.grad[i]/s.value - ref.grad[i]/ref.value)
	}
	ratio = cmplx.Abs(s.value) / cmplx.Abs(ref.value)
	return ratio, ratio * c.Quantile() * c.Deviation(g)
}
