package reports

import (
	"bytes"
	"math"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting"
	"phaselag/reports/table"
)

func num(x unit.Number) table.Cell { return table.Number(float64(x)) }

func yesNo(b bool) table.Cell {
	if b {
		return table.Text("yes")
	}
	return table.Text("no")
}

// Points is points.csv: every measured row with what the fit made of it.
func Points(r *fitting.Result) table.Table {
	t := table.Table{Name: "points 1", Columns: []table.Column{
		{Key: "test"}, {Key: "file"}, {Key: "row"}, {Key: "specimen"},
		{Key: "frequency_Hz"}, {Key: "temperature_C"}, {Key: "temperature_offset_K"}, {Key: "strain_amplitude_percent"}, {Key: "time_s"},
		{Key: "storage_MPa"}, {Key: "loss_MPa"}, {Key: "reduced_frequency_Hz"}, {Key: "fitted_storage_MPa"}, {Key: "fitted_loss_MPa"},
		{Key: "residual_magnitude_percent"}, {Key: "residual_phase_deg"}, {Key: "weight"}, {Key: "used"}, {Key: "reason"},
		{Key: "inertia_percent"}, {Key: "compliance_percent"},
	}}
	for _, p := range r.Points {
		t.Rows = append(t.Rows, []table.Cell{
			table.Text(p.Test), table.Text(p.File), table.Number(float64(p.Row)), table.Text(p.Specimen),
			num(p.Frequency), num(p.TemperatureC), num(p.Offset), num(p.Strain), num(p.Time),
			num(p.Storage), num(p.Loss), num(p.ReducedFrequency), num(p.FittedStorage), num(p.FittedLoss),
			num(p.ResidualPercent), num(p.ResidualDeg), num(p.Weight), yesNo(p.Used), table.Text(p.Reason),
			num(p.MassShare), num(p.FrameShare),
		})
	}
	return t
}

// ShiftFactors is shift-factors.csv.
func ShiftFactors(r *fitting.Result) table.Table {
	t := table.Table{Name: "shift-factors 1", Columns: []table.Column{
		{Key: "temperature_C", Heading: "T", Unit: "°C"},
		{Key: "log10_aT", Heading: "log a_{T}", Digits: 4},
		{Key: "u_log10_aT", Heading: "u", Digits: 2},
		{Key: "overlap_log10_aT", Heading: "by overlap", Digits: 4},
		{Key: "law_log10_aT", Heading: "by the law", Digits: 4},
		{Key: "offset_K", Heading: "offset", Unit: "K", Digits: 2},
		{Key: "b_T", Heading: "b_{T}", Digits: 4},
	}}
	for _, s := range r.Shifts {
		t.Rows = append(t.Rows, []table.Cell{num(s.TemperatureC), num(s.Log), num(s.U), num(s.Overlap), num(s.Law), num(s.Offset), num(s.B)})
	}
	return t
}

// FindingsTable lists findings.
func FindingsTable(f []data.Finding) table.Table {
	t := table.Table{Name: "findings 1", Columns: []table.Column{
		{Key: "code"}, {Key: "severity"}, {Key: "test"}, {Key: "rows"}, {Key: "evidence"}, {Key: "cause"}, {Key: "remedy"},
	}}
	for _, v := range f {
		t.Rows = append(t.Rows, []table.Cell{
			table.Text(v.Code), table.Text(string(v.Severity)), table.Text(v.Test), table.Text(v.Rows),
			table.Text(v.Evidence), table.Text(v.Cause), table.Text(v.Remedy),
		})
	}
	return t
}

// FixedFrequency lists the measured temperature dependence at fixed frequency.
func FixedFrequency(r *fitting.Result) table.Table {
	s := r.Campaign.Symbol()
	t := table.Table{Name: "temperature-dependence 1", Columns: []table.Column{
		{Key: "frequency_Hz", Heading: "f", Unit: "Hz"}, {Key: "temperature_C", Heading: "T", Unit: "°C"},
		{Key: "strain_percent", Heading: "strain", Unit: "%", Digits: 2}, {Key: "points"},
		{Key: "storage_MPa", Heading: s + "′", Unit: "MPa"}, {Key: "loss_MPa", Heading: s + "″", Unit: "MPa"},
		{Key: "loss_factor", Heading: "tan δ", Digits: 3},
		{Key: "storage_U95_MPa", Heading: "± " + s + "′", Unit: "MPa", Digits: 2}, {Key: "loss_factor_U95", Heading: "± tan δ", Digits: 2},
	}}
	for _, v := range r.Fixed {
		t.Rows = append(t.Rows, []table.Cell{
			num(v.Frequency), num(v.TemperatureC), num(v.Strain), table.Number(float64(v.Points)),
			num(v.Storage), num(v.Loss), num(v.LossFactor), num(v.StorageU95), num(v.LossFactorU95),
		})
	}
	return t
}

// Parameters lists the constants of the compound.
func Parameters(r *fitting.Result) table.Table {
	t := table.Table{Name: "constants 1", Columns: []table.Column{
		{Key: "constant"}, {Key: "value", Interval: "U95"}, {Key: "U95"}, {Key: "u"}, {Key: "profile_low"}, {Key: "profile_high"}, {Key: "unit"}, {Key: "determined"},
	}}
	for _, p := range r.Parameters {
		t.Rows = append(t.Rows, []table.Cell{table.Text(p.Name), num(p.Value), num(p.U95), num(p.U), num(p.Low), num(p.High), table.Text(p.Unit), yesNo(p.Determined)})
	}
	return t
}

// Candidates lists the rival forms.
func Candidates(r *fitting.Result) table.Table {
	t := table.Table{Name: "candidates 1", Columns: []table.Column{
		{Key: "part"}, {Key: "form"}, {Key: "constants"}, {Key: "AICc"}, {Key: "difference"}, {Key: "chosen"}, {Key: "note"},
	}}
	add := func(part string, list []fitting.Candidate) {
		for _, c := range list {
			t.Rows = append(t.Rows, []table.Cell{table.Text(part), table.Text(c.Name), table.Number(float64(c.Constants)), num(c.AICc), num(c.Delta), yesNo(c.Chosen), table.Text(c.Note)})
		}
	}
	add("shift law", r.Laws)
	add("vertical shift", r.Vertical)
	add("amplitude law", r.Amplitude)
	return t
}

// Misfits lists the misfit of the common curve per isotherm.
func Misfits(r *fitting.Result) table.Table {
	t := table.Table{Name: "superposition-misfit 1", Columns: []table.Column{
		{Key: "temperature_C"}, {Key: "points"}, {Key: "phase_deg"}, {Key: "magnitude_percent"}, {Key: "beyond_noise_deg"}, {Key: "beyond_noise_percent"}, {Key: "p"},
	}}
	for _, v := range r.Isotherms {
		t.Rows = append(t.Rows, []table.Cell{num(v.TemperatureC), table.Number(float64(v.Points)), num(v.PhaseDeg), num(v.Percent), num(v.BeyondDeg), num(v.BeyondPercent), num(v.P)})
	}
	return t
}

// Runs lists temperature offsets.
func Runs(r *fitting.Result) table.Table {
	t := table.Table{Name: "runs 1", Columns: []table.Column{
		{Key: "test"}, {Key: "run"}, {Key: "temperature_C"}, {Key: "offset_K"}, {Key: "u_offset_K"}, {Key: "prior_u_K"},
	}}
	for _, v := range r.Runs {
		t.Rows = append(t.Rows, []table.Cell{table.Text(v.Test), table.Text(v.Run), num(v.TemperatureC), num(v.Offset), num(v.U), num(v.PriorU)})
	}
	return t
}

// csvFiles are the files under tables/.
func csvFiles(r *fitting.Result) ([]file, error) {
	var out []file
	add := func(name string, t table.Table) error {
		var b bytes.Buffer
		if err := table.Write(&b, table.CSV, t); err != nil {
			return err
		}
		out = append(out, file{"tables/" + name + ".csv", b.Bytes()})
		return nil
	}
	type named struct {
		name string
		t    table.Table
	}
	list := []named{{"points", Points(r)}, {"findings", FindingsTable(r.Findings)}}
	if len(r.Shifts) > 0 {
		list = append(list, named{"shift-factors", ShiftFactors(r)})
	}
	if len(r.Fixed) > 0 {
		list = append(list, named{"temperature-dependence", FixedFrequency(r)})
	}
	if r.Compound != nil {
		list = append(list, named{"constants", Parameters(r)}, named{"properties", Properties(r)}, named{"candidates", Candidates(r)}, named{"runs", Runs(r)})
	}
	if t, ok := transitions(r.Compound); ok {
		list = append(list, named{"glass-transition", t})
	}
	if len(r.Isotherms) > 0 {
		list = append(list, named{"superposition-misfit", Misfits(r)})
	}
	if len(r.Causality) > 0 {
		list = append(list, named{"causality", CausalityTable(r)})
	}
	if len(r.Compact) > 0 {
		list = append(list, named{"compact-models", CompactTable(r)})
	}
	if r.Few != nil && len(r.Few.Branches) > 0 {
		list = append(list, named{"few-branches", FewBranchesTable(r)})
	}
	if len(r.Bootstrap.Rows) > 0 {
		list = append(list, named{"bootstrap", BootstrapTable(r)})
	}
	for _, v := range list {
		if err := add(v.name, v.t); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// finite reports whether a number is there.
func finite(x unit.Number) bool { return !math.IsNaN(float64(x)) }
