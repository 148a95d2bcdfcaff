package data

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data/place"
	"phaselag/data/specimen"
	"phaselag/data/table"
	"phaselag/data/unit"
)

// plan is a test on its way from the campaign file to its runs: what the file
// says of it, then the points of its tables.
type plan struct {
	Test
	bare     bool
	where    place.Error // of the test in the campaign file
	files    []tableFile
	settings table.Settings
	rows     []filter
	leaveOut []exclusion

	// Constants where a table has no column; NaN: not stated.
	temperature, frequency, strain float64
	amplitude                      string // "zero to peak", "peak to peak" or "rms"
	amplitudeStated                bool
	amplitudeRead                  bool // a heading said which
	nominalStrain                  bool

	machine specimen.Machine // what is to be taken off
	shape   specimen.Shape   // nil: not described, or not needed
	stiff   bool             // the tables have stiffness, not modulus
	moved   bool             // strains come from displacements

	signals *signalSettings // nil: the files are tables of results

	modulus string // of the points as read: "shear", "young", "" where no heading says it
	points  []raw
}

// tableFile is a file as written in the campaign file, and its path.
type tableFile struct{ written, resolved string }

// raw is a point on its way to a run.
type raw struct {
	Point
	block   int // of its file, counted through all files of the test
	segment string
	set     float64 // temperature as it was set, K; NaN: not stated
	second  second
}

func newPlan() *plan {
	nan := math.NaN()
	p := &plan{temperature: nan, frequency: nan, strain: nan, amplitude: "zero to peak"}
	p.Mounting = "1"
	p.Rate, p.RampTime, p.StaticStrain, p.StaticForce, p.Dwell = nan, nan, nan, nan, nan
	p.Conditioning = Conditioning{Strain: nan, Rest: nan}
	return p
}

// fault is an error of the test as a whole.
func (p *plan) fault(hint, format string, args ...any) error {
	e := p.where
	e.What, e.Hint = fmt.Sprintf(format, args...), hint
	return &e
}

// read fills points, or StaticValues, from the tables.
func (p *plan) read(s *source, c *Campaign) error {
	var faults place.List
	blocks := 0
	for _, f := range p.files {
		p.Files = append(p.Files, f.written)
		if p.signals != nil {
			if err := p.readSignals(s, c, f); err != nil {
				faults.Add(p.missingFile(err))
			}
			continue
		}
		content, err := s.read(f.resolved, f.written)
		if err != nil {
			faults.Add(p.missingFile(err))
			continue
		}
		tables, err := table.ReadAll(f.resolved, content, p.settings)
		faults.Add(err)
		for _, t := range tables {
			for _, a := range t.Assumptions {
				c.assume("%s: %s", f.written, a)
			}
			written := f.written
			if t.Sheet != "" {
				written += "[" + t.Sheet + "]"
			}
			if err := p.describeShape(c, t); err != nil {
				faults.Add(t.Placed(err))
				continue
			}
			n, err := p.readTable(c, t, written, blocks)
			faults.Add(t.Placed(err))
			blocks += n
		}
	}
	if len(faults) > 0 || p.Kind == Static {
		return faults.Err()
	}
	if p.signals != nil {
		p.concludeSignals(c)
	}
	p.reportCorrections(c)
	p.compareSources(c)
	if !p.amplitudeStated && !p.amplitudeRead && p.signals == nil {
		for _, pt := range p.points {
			if !math.IsNaN(pt.Strain) && p.Kind != Relaxation {
				c.assume("strain amplitudes are taken as single amplitudes (zero to peak) where nothing else is said")
				break
			}
		}
	}
	if p.nominalStrain {
		c.assume("%s: strain amplitudes are nominal, not measured", p.Name)
	}
	known := false
	for _, pt := range p.points {
		known = known || !math.IsNaN(pt.Strain)
	}
	if !known {
		c.assume("%s: the strain is not stated; it is taken as small and unknown", p.Name)
	}
	return nil
}

// missingFile adds where the campaign file names the file.
func (p *plan) missingFile(err error) error {
	if p.bare {
		return err
	}
	return &place.Error{File: p.where.File, Line: p.where.Line, Column: p.where.Column, Path: p.where.Path, Err: err, Hint: place.Hint(err)}
}

// describe lists the columns of a table that were understood, for a message.
func describe(t *table.Table) string {
	var parts []string
	for _, col := range t.Columns {
		if col.Concept != "" && len(parts) < 30 {
			parts = append(parts, fmt.Sprintf("%s (%s)", col.Concept, table.Quote(col.Heading)))
		}
	}
	if len(parts) == 0 {
		return "no column was understood"
	}
	return "understood: " + strings.Join(parts, ", ")
}

// snippet proposes how to choose columns in the campaign file.
func snippet(concepts ...table.Concept) string {
	var parts []string
	for _, c := range concepts {
		u := ""
		if q := c.Quantity(); q != "" {
			u = ", unit: " + unit.Preferred(q).Symbol
		}
		parts = append(parts, fmt.Sprintf("%s: {heading: …%s}", c, u))
	}
	return "columns: {" + strings.Join(parts, ", ") + "}"
}
