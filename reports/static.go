package reports

import (
	"errors"
	"fmt"
	"math"

	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports/table"
)

// StaticChoice says where a static modulus may come from where the compound has no
// static test.
type StaticChoice struct {
	ModelTime float64 // s: the model's relaxation modulus at that time; 0: not asked for
	Hardness  float64 // degrees, looked up in Table; 0: none
	Table     mount.Table
}

// staticSources are the compound's tests, and what was chosen besides.
func staticSources(c *models.Compound, choice StaticChoice) mount.StaticSettings {
	s := mount.StaticSettings{FromModel: choice.ModelTime > 0, Hardness: choice.Hardness, Table: choice.Table}
	for _, v := range c.Static {
		s.Tests = append(s.Tests, mount.StaticTest{Modulus: v.Modulus * 1e6, U95: float64(v.U95) * 1e6, Source: v.Source})
	}
	T := c.ReferenceTempC + zeroC
	s.ModelSays = fmt.Sprintf("relaxation modulus at %g s, %.4g °C", choice.ModelTime, c.ReferenceTempC)
	s.Model = func() (float64, float64, error) {
		g, err := c.Relaxation(choice.ModelTime, T, math.NaN())
		return g, math.NaN(), err
	}
	return s
}

// UnderLoad puts a mount under its static load where that changes the stiffness: the
// tangent of pressed pads. What was done is said in notes; a mount file that has a
// static modulus of its own is under load already. A load that presses a pad by more
// than a fifth is an error.
func UnderLoad(c *models.Compound, m *mount.Mount, choice StaticChoice) (loaded *mount.Mount, notes []string, err error) {
	pressed := false
	for _, e := range m.Elements {
		pressed = pressed || e.Pad != nil && e.Pad.Pressed
	}
	if !pressed || math.IsNaN(loadOf(m)) || stretched(m.Arrangement) {
		return m, nil, nil
	}
	list, err := m.Static(staticSources(c, choice))
	if errors.Is(err, mount.ErrNoStatic) {
		return m, []string{"the compound has no static test: the stiffness of pressed pads is that of the unloaded pad; --static-model or --hardness-table names another source"}, nil
	}
	if err != nil {
		return m, []string{"the load's influence on pressed pads is left out: " + err.Error()}, nil
	}
	s := list[0]
	if s.Refused != nil {
		return nil, nil, s.Refused
	}
	if s.Rest == nil {
		return m, nil, nil
	}
	for _, l := range s.Rest.Leaves {
		if l.Compression > 0 {
			notes = append(notes, fmt.Sprintf("%s: pressed by %.3g %% under the load (modulus from the %s); its stiffness is the tangent there, %.3g times that of the unloaded pad", m.Elements[l.Element].Name, 100*l.Compression, s.Source, l.Factor))
		}
	}
	return s.Rest.Mount, notes, nil
}

func stretched(a mount.Arrangement) bool {
	if a.Stretch > 0 {
		return true
	}
	for _, b := range a.Members {
		if stretched(b) {
			return true
		}
	}
	return false
}

// StaticTable gives the static stiffness and deflection of a mount: from the compound's
// static and relaxation tests first, else from the model where that was asked for, else
// from a handbook table of hardness; each names its source. It has no rows where there
// is none of them.
func StaticTable(c *models.Compound, m *mount.Mount, choice StaticChoice) (table.Table, error) {
	u := unitsOf(m)
	t := table.Table{Name: "static-stiffness 1", Columns: []table.Column{
		{Key: "source"}, {Key: "temperature_C", Heading: "T", Unit: "°C"}, {Key: "time_s", Heading: "t", Unit: "s"}, {Key: "strain_percent", Heading: "strain", Unit: "%"},
		{Key: "stiffness_" + u.key, Heading: "K static", Unit: u.stiffness, Interval: "stiffness_U95_" + u.key}, {Key: "stiffness_U95_" + u.key, Heading: "± K static", Unit: u.stiffness},
		{Key: "deflection_mm", Heading: "deflection", Unit: "mm"}, {Key: "tangent_" + u.key, Heading: "under load", Unit: u.stiffness},
	}}
	list, err := m.Static(staticSources(c, choice))
	if errors.Is(err, mount.ErrNoStatic) {
		t.Assumptions = append(t.Assumptions, "no static stiffness: the compound has no static or relaxation test; --static-model or --hardness-table names another source")
		return t, nil
	}
	if err != nil {
		var out *models.OutsideError
		if errors.As(err, &out) {
			return table.Table{}, err
		}
		t.Assumptions = append(t.Assumptions, err.Error())
		return t, nil
	}
	nan := math.NaN()
	for i, s := range list {
		T, time, strain, source := nan, nan, nan, s.Source
		switch s.From {
		case mount.FromTest:
			v := c.Static[i]
			T, time, strain, source = float64(v.TemperatureC), float64(v.Time), float64(v.Strain), v.Source
		case mount.FromModel:
			T, time = c.ReferenceTempC, choice.ModelTime
			source = "model"
			t.Assumptions = append(t.Assumptions, "doubt: the static stiffness is "+s.Source+": time is where a model of vibrations is weakest")
		case mount.FromTable:
			source = fmt.Sprintf("table %s, %g", choice.Table, choice.Hardness)
			t.Assumptions = append(t.Assumptions, "doubt: the static stiffness is from a "+s.Source)
		}
		if s.Refused != nil {
			t.Assumptions = append(t.Assumptions, "no deflection: "+s.Refused.Error())
		}
		t.Rows = append(t.Rows, []table.Cell{
			table.Text(source), table.Number(T), table.Number(time), table.Number(strain),
			table.Number(s.Stiffness * u.scale), table.Number(s.U95 * u.scale), table.Number(1e3 * s.Deflection), table.Number(s.Tangent * u.scale),
		})
	}
	return t, nil
}

// HeatTable gives the temperatures at which a mount that is shaken loses as much heat
// as it makes, for a mount file with a thermal resistance; no rows without one.
func HeatTable(c *models.Compound, m *mount.Mount, queries []StiffnessQuery) (table.Table, error) {
	u := unitsOf(m)
	t := table.Table{Name: "self-heating 1", Columns: []table.Column{
		{Key: "frequency_Hz", Heading: "f", Unit: "Hz"}, {Key: "ambient_C", Heading: "ambient", Unit: "°C"}, {Key: u.amplitudeKey, Heading: u.amplitude, Unit: u.travel},
		{Key: "rise_K", Heading: "rise", Unit: "K", Digits: 3}, {Key: "heat_W", Heading: "heat", Unit: "W", Digits: 3}, {Key: "magnitude_" + u.key, Heading: "|K*| warm", Unit: u.stiffness, Digits: 3}, {Key: "state"},
	}}
	for _, q := range queries {
		d := mount.HeatDrive{Displacement: q.Displacement, Force: math.NaN()}
		if math.IsNaN(q.Displacement) {
			d = mount.HeatDrive{Displacement: m.Excitation.Displacement, Force: m.Excitation.Force}
		}
		head := []table.Cell{table.Number(q.Frequency), table.Number(celsius(q.Temperature))}
		warm, err := m.Heated(materialOf(c), q.Frequency, q.Temperature, c.Domain.Temperature[1]+zeroC, d)
		if errors.Is(err, mount.ErrNoResistance) {
			return t, nil
		}
		var runaway *mount.RunawayError
		if err != nil && !errors.As(err, &runaway) {
			return t, err
		}
		for _, w := range warm {
			state := "stable"
			if !w.Stable {
				state = "threshold of thermal runaway"
			}
			t.Rows = append(t.Rows, append(append([]table.Cell{}, head...), table.Number(u.perRad*w.Displacement), table.Number(w.Rise), table.Number(w.Power), table.Number(magnitudeOf(w.Stiffness)*u.scale), table.Text(state)))
		}
		if runaway != nil && len(warm) == 0 {
			nan := table.Number(math.NaN())
			t.Rows = append(t.Rows, append(head, nan, nan, nan, nan, table.Text("outside: thermal runaway up to the end of the domain")))
		}
	}
	t.Assumptions = append(t.Assumptions, "the rise follows from the stated thermal resistance and the heat of a steady motion; thermal resistances of mounts are rough")
	return t, nil
}

func magnitudeOf(k complex128) float64 { return math.Hypot(real(k), imag(k)) }
