package data

import (
	"fmt"
	"io/fs"
	"math"
	"path"
	"path/filepath"
	"strings"

	"phaselag/data/place"
)

// Open reads one campaign file (.yaml, .yml or .json), or any number of bare
// tables, and returns what was measured.
//
// Bare tables need headings that say enough. Each file is a test with a
// specimen of its own, in shear (in tension where its moduli are E); the kind
// of test follows from what varies; the strain is not known where no column has
// it. All of that is listed in Campaign.Assumptions.
//
// Errors are *place.Error, or a place.List of them where there are several, and
// the Campaign is then nil.
func Open(paths ...string) (*Campaign, error) {
	return open(&source{}, paths, filepath.Dir)
}

// OpenFS is Open for files of fsys, whose paths have slashes.
func OpenFS(fsys fs.FS, paths ...string) (*Campaign, error) {
	return open(&source{fsys: fsys}, paths, path.Dir)
}

func open(s *source, paths []string, dir func(string) string) (*Campaign, error) {
	if len(paths) == 0 {
		return nil, &place.Error{What: "no file was named", Hint: "name a campaign file, or tables of results"}
	}
	for _, p := range paths {
		if !isCampaign(p) {
			continue
		}
		if len(paths) > 1 {
			return nil, &place.Error{File: p, What: "a campaign file beside other files", Hint: "name the campaign file alone; it lists its tables itself"}
		}
		s.dir = dir(p)
		return openCampaign(s, p)
	}
	return openBare(s, paths)
}

func isCampaign(name string) bool {
	switch strings.ToLower(filepath.Ext(name)) {
	case ".yaml", ".yml", ".json":
		return true
	}
	return false
}

// newCampaign is a campaign in which nothing is stated.
func newCampaign() *Campaign {
	nan := math.NaN()
	return &Campaign{
		Compound:     Compound{Density: nan},
		Analysis:     Analysis{ReferenceTemperature: nan, ShiftLaw: "auto", VerticalShift: "auto", Expansion: nan, AmplitudeLaw: "auto", AmplitudeCoupling: "auto", FillerFrequency: "auto"},
		Uncertainty:  Uncertainty{nan, nan, nan, nan, nan, nan},
		Modulus:      Shear,
		PoissonRatio: nan,
	}
}

// assume lists an assumption once.
func (c *Campaign) assume(format string, args ...any) {
	text := fmt.Sprintf(format, args...)
	if !contains(c.Assumptions, text) {
		c.Assumptions = append(c.Assumptions, text)
	}
}

func openBare(s *source, paths []string) (*Campaign, error) {
	c := newCampaign()
	c.Name = stem(paths[0])
	c.Compound.Name = c.Name
	var plans []*plan
	names := map[string]bool{}
	for _, p := range paths {
		pl := newPlan()
		pl.Name = stem(p)
		for i := 2; names[pl.Name]; i++ {
			pl.Name = fmt.Sprintf("%s (%d)", stem(p), i)
		}
		names[pl.Name] = true
		pl.Specimen = pl.Name
		pl.bare = true
		pl.files = []tableFile{{written: path.Base(filepath.ToSlash(p)), resolved: p}}
		plans = append(plans, pl)
	}
	if len(plans) > 1 {
		c.assume("every file is taken as a specimen of its own")
	}
	return finish(s, c, plans, math.NaN(), nil)
}

// finish reads the tables of all tests, converts them to one modulus, and parts
// them into runs. Faults of all tests are gathered on top of those given.
func finish(s *source, c *Campaign, plans []*plan, poisson float64, faults place.List) (*Campaign, error) {
	for _, p := range plans {
		faults.Add(p.read(s, c))
	}
	if faults.Err() == nil {
		faults.Add(convert(c, plans, poisson))
	}
	if faults.Err() == nil {
		faults.Add(carryGeometry(c, s.list[0].File, plans))
	}
	if err := faults.Err(); err != nil {
		return nil, err
	}
	for _, p := range plans {
		p.Runs = split(c, p)
		c.Tests = append(c.Tests, p.Test)
	}
	c.Inputs = s.list
	return c, nil
}
