package reports

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"strconv"
	"strings"

	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports/table"
)

// Response answers for a mass on mounts.
type Response struct {
	Natural table.Table // natural frequencies, one or more a temperature
	Forced  table.Table // response at frequencies
	Outside int         // rows outside the domain
	Worst   string      // the worst transmissibility in words; "" if there is none
}

// ResponseQuery is what is asked.
type ResponseQuery struct {
	Frequencies  []float64 // Hz
	Temperatures []float64 // K
	Drive        mount.Drive
	Isolation    float64 // wished, 0 to 1; NaN: none
	Extrapolate  bool
}

// gentModulus is Young's modulus, Pa, at a hardness in IRHD or Shore A (Gent, Rubber
// Chem. Technol. 31 (1958) 896; from memory). Only ratios of it are used.
func gentModulus(s float64) float64 { return 0.0981e6 * (56 + 7.62336*s) / (0.137505 * (254 - 2.54*s)) }

// production is the factors of stiffness at both ends of the production spread, 1
// and 1 where it is not known, and what was assumed.
func production(c *models.Compound, m *mount.Mount) (soft, hard float64, note string) {
	h := m.Tolerance.Hardness
	if math.IsNaN(h) || h == 0 {
		return 1, 1, "no production tolerance is stated: the answers are those of the tested batch"
	}
	fields := strings.Fields(c.Compound.Hardness)
	if len(fields) == 0 {
		return 1, 1, "a production tolerance is stated, but no hardness of the compound: the answers are those of the tested batch"
	}
	s, err := strconv.ParseFloat(fields[0], 64)
	if err != nil || s-h < 25 || s+h > 90 {
		return 1, 1, "the hardness of the compound lies outside 25 to 90: the production tolerance is not used"
	}
	return gentModulus(s-h) / gentModulus(s), gentModulus(s+h) / gentModulus(s),
		fmt.Sprintf("softest and hardest parts: %g ± %g %s, stiffness by Gent's relation of hardness and modulus (from memory); production is never merged with the uncertainty of the tests", s, h, m.Tolerance.Scale)
}

// scaled is the mount with all stiffnesses multiplied.
func scaled(m *mount.Mount, factor float64) *mount.Mount {
	out := *m
	out.PartFactor *= factor
	return &out
}

func materialOf(c *models.Compound) mount.Material {
	return func(hertz, kelvin, strain float64) complex128 {
		return c.Value(models.Condition{Frequency: hertz, Temperature: kelvin, Strain: modelStrain(c, strain)})
	}
}

// Respond answers a query.
func Respond(c *models.Compound, m *mount.Mount, q ResponseQuery) (*Response, error) {
	soft, hard, note := production(c, m)
	out := &Response{}
	assumptions := append(append([]string{}, m.Assumptions...), partCaution, note)
	if !math.IsNaN(q.Drive.Deflection) {
		assumptions = append(assumptions, fmt.Sprintf("the amplitude across the mounts is held at %.4g mm; --force or --base let it follow from the drive", 1e3*q.Drive.Deflection))
	}
	var err error
	if out.Natural, err = naturalTable(c, m, q, soft, hard); err != nil {
		return nil, err
	}
	if len(q.Frequencies) == 0 {
		out.Natural.Assumptions = assumptions
		return out, nil
	}
	if err := out.forced(c, m, q, soft, hard); err != nil {
		return nil, err
	}
	out.Forced.Assumptions = assumptions
	return out, nil
}

// amplitudeOf is the amplitude across the mounts at which natural frequencies are given:
// what is held, or small.
func amplitudeOf(q ResponseQuery) float64 {
	if !math.IsNaN(q.Drive.Deflection) {
		return q.Drive.Deflection
	}
	return math.NaN()
}

func naturalTable(c *models.Compound, m *mount.Mount, q ResponseQuery, soft, hard float64) (table.Table, error) {
	t := table.Table{Name: "natural-frequency 1", Columns: []table.Column{
		{Key: "temperature_C", Heading: "T", Unit: "°C"}, {Key: "displacement_amplitude_mm", Heading: "x", Unit: "mm"},
		{Key: "strain_amplitude_percent", Heading: "strain", Unit: "%", Digits: 3},
		{Key: "natural_frequency_Hz", Heading: "f_n", Unit: "Hz", Interval: "natural_frequency_U95_Hz"}, {Key: "natural_frequency_U95_Hz", Heading: "± f_n", Unit: "Hz"},
		{Key: "natural_frequency_softest_Hz", Heading: "softest", Unit: "Hz", Digits: 3}, {Key: "natural_frequency_hardest_Hz", Heading: "hardest", Unit: "Hz", Digits: 3},
		{Key: "loss_factor", Heading: "η", Digits: 3}, {Key: "amplification", Heading: "amplification", Digits: 3}, {Key: "domain"},
	}}
	for _, T := range q.Temperatures {
		x := amplitudeOf(q)
		if math.IsNaN(x) {
			x = smallAmplitude(c, m)
		}
		lo, hi := c.Domain.ReducedFrequency[0], c.Domain.ReducedFrequency[1]
		if a := math.Pow(10, c.LogShift(T)); a > 0 && !math.IsInf(a, 0) {
			lo, hi = lo/a, hi/a
		}
		lo, hi = max(1e-3, lo), min(1e5, hi)
		fn, err := m.Natural(materialOf(c), lo, hi, T, x)
		if err != nil {
			return t, err
		}
		ends := [2]float64{math.NaN(), math.NaN()}
		for i, factor := range []float64{soft, hard} {
			if v, err := scaled(m, factor).Natural(materialOf(c), lo, hi, T, x); err == nil && len(v) > 0 {
				ends[i] = v[len(v)-1]
				if i == 0 {
					ends[i] = v[0]
				}
			}
		}
		head := []table.Cell{table.Number(celsius(T)), table.Number(1e3 * x)}
		if len(fn) == 0 {
			t.Rows = append(t.Rows, append(head, blank(7, "outside: the natural frequency lies outside the domain")...))
			continue
		}
		for _, f := range fn {
			s, err := mountAt(c, m, StiffnessQuery{Frequency: f, Temperature: T, Displacement: x})
			if err != nil {
				return t, err
			}
			domain := "inside"
			if o := s.inside(c); o != nil {
				if !q.Extrapolate {
					t.Rows = append(t.Rows, append(head, blank(7, "outside: "+o.Error())...))
					continue
				}
				domain = "extrapolated: " + strings.Join(o.Quantities, "|")
			}
			// F(f) = (2πf)²M − K'(f) = 0: df = dK'/(8π²fM − ∂K'/∂f).
			up, err1 := m.Displaced(materialOf(c), f*1.001, T, x)
			down, err2 := m.Displaced(materialOf(c), f/1.001, T, x)
			half := math.NaN()
			if err1 == nil && err2 == nil {
				slope := 8*math.Pi*math.Pi*f*m.Mass - (real(up.Stiffness)-real(down.Stiffness))/(f*1.001-f/1.001)
				half = s.half(c, func(v complex128) float64 { return real(v) / slope }, s.ownU*real(s.value)/slope)
			}
			k := s.value
			a := math.Pow(2*math.Pi*f, 2) * m.Mass
			t.Rows = append(t.Rows, append(head,
				table.Number(100*s.maxStrain()), table.Number(f), table.Number(half), table.Number(ends[0]), table.Number(ends[1]),
				table.Number(imag(k)/real(k)), table.Number(cmplx.Abs(k/(k-complex(a, 0)))), table.Text(domain)))
		}
	}
	return t, nil
}

// smallAmplitude is the amplitude across the mounts at which the strain is the
// isotherms' own, m; a micrometre where that was never stated.
func smallAmplitude(c *models.Compound, m *mount.Mount) float64 {
	own := float64(c.Domain.OwnStrain) / 100
	s, err := m.Displaced(func(_, _, _ float64) complex128 { return 1e6 }, 1, 293.15, 1e-6)
	if err != nil || math.IsNaN(own) {
		return 1e-6
	}
	largest := 0.0
	for _, l := range s.Leaves {
		largest = max(largest, l.Strain)
	}
	return 1e-6 * own / largest
}

// blank is n cells without a number and a text.
func blank(n int, text string) []table.Cell {
	var out []table.Cell
	for range n {
		out = append(out, table.Number(math.NaN()))
	}
	return append(out, table.Text(text))
}

func (out *Response) forced(c *models.Compound, m *mount.Mount, q ResponseQuery, soft, hard float64) error {
	t := table.Table{Name: "response 1", Columns: []table.Column{
		{Key: "frequency_Hz", Heading: "f", Unit: "Hz"}, {Key: "temperature_C", Heading: "T", Unit: "°C"},
		{Key: "displacement_amplitude_mm", Heading: "x", Unit: "mm", Digits: 3}, {Key: "strain_amplitude_percent", Heading: "strain", Unit: "%", Digits: 3},
		{Key: "storage_N_per_mm", Heading: "K'", Unit: "N/mm", Digits: 3}, {Key: "loss_factor", Heading: "η", Digits: 3},
		{Key: "transmissibility", Heading: "transm.", Interval: "transmissibility_U95"}, {Key: "transmissibility_U95", Heading: "± transm."},
		{Key: "transmissibility_softest", Heading: "softest", Digits: 3}, {Key: "transmissibility_hardest", Heading: "hardest", Digits: 3},
		{Key: "isolation_percent", Heading: "isolation", Unit: "%", Digits: 3}, {Key: "heat_W", Heading: "heat", Unit: "W", Digits: 2}, {Key: "domain"},
	}}
	wished := !math.IsNaN(q.Isolation)
	if wished {
		last := len(t.Columns) - 1
		t.Columns = append(t.Columns[:last:last],
			table.Column{Key: "required_natural_frequency_Hz", Heading: "f_n wished", Unit: "Hz", Digits: 3},
			table.Column{Key: "required_storage_N_per_mm", Heading: "K' wished", Unit: "N/mm", Digits: 3}, t.Columns[last])
	}
	worst := -1.0
	for _, T := range q.Temperatures {
		for _, f := range q.Frequencies {
			answers, err := m.Respond(materialOf(c), f, T, q.Drive)
			head := []table.Cell{table.Number(f), table.Number(celsius(T))}
			empty := 10
			if wished {
				empty += 2
			}
			if errors.Is(err, mount.ErrNoResponse) || errors.Is(err, mount.ErrNoBalance) {
				t.Rows = append(t.Rows, append(head, blank(empty, "no steady amplitude found")...))
				out.Outside++
				continue
			}
			if err != nil {
				return err
			}
			for _, r := range answers {
				s, err := mountAt(c, m, StiffnessQuery{Frequency: f, Temperature: T, Displacement: r.Displacement})
				if err != nil {
					return err
				}
				domain := "inside"
				if o := s.inside(c); o != nil {
					if !q.Extrapolate {
						t.Rows = append(t.Rows, append(head, blank(empty, "outside: "+o.Error())...))
						out.Outside++
						continue
					}
					domain = "extrapolated: " + strings.Join(o.Quantities, "|")
				}
				k, a := s.value, complex(math.Pow(2*math.Pi*f, 2)*m.Mass, 0)
				eta := imag(k) / real(k)
				// d ln|K/(K−a)| = Re[dK/K − dK/(K−a)], at the amplitude found.
				half := s.half(c, func(v complex128) float64 { return r.Transmissibility * real(v/k-v/(k-a)) }, r.Transmissibility*s.ownU*math.Abs(real(1-k/(k-a))))
				ends := [2]float64{math.NaN(), math.NaN()}
				for i, factor := range []float64{soft, hard} {
					if v, err := scaled(m, factor).Respond(materialOf(c), f, T, q.Drive); err == nil {
						for _, w := range v {
							if math.IsNaN(ends[i]) || w.Transmissibility > ends[i] {
								ends[i] = w.Transmissibility
							}
						}
					}
				}
				for i, v := range []float64{r.Transmissibility, ends[0], ends[1]} {
					if v > worst {
						worst = v
						out.Worst = fmt.Sprintf("worst case: transmissibility %.3g at %.4g Hz and %.4g °C%s", v, f, celsius(T), []string{"", ", softest parts", ", hardest parts"}[i])
					}
				}
				row := append(head[:2:2],
					table.Number(1e3*r.Displacement), table.Number(100*s.maxStrain()), table.Number(real(k)/1e3), table.Number(eta),
					table.Number(r.Transmissibility), table.Number(half), table.Number(ends[0]), table.Number(ends[1]),
					table.Number(100*(1-r.Transmissibility)), table.Number(r.Heat))
				if wished {
					need := mount.Required(q.Isolation, eta)
					w := 2 * math.Pi * f / need
					row = append(row, table.Number(f/need), table.Number(w*w*m.Mass/1e3))
				}
				t.Rows = append(t.Rows, append(row, table.Text(domain)))
			}
		}
	}
	out.Forced = t
	return nil
}
