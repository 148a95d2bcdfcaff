package cli

import (
	"fmt"
	"math"

	"github.com/spf13/cobra"

	"phaselag/data/unit"
	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports"
	"phaselag/reports/table"
)

type responseOptions struct {
	file, mount            string
	frequency, temperature string
	force, base, amplitude string
	isolation              string
	extrapolate            bool
	static                 staticOptions
	format                 string
}

func (a *app) responseCmd() *cobra.Command {
	var o responseOptions
	cmd := &cobra.Command{
		Use:   "response COMPOUND --mount MOUNT --temperature LIST [--frequency LIST]",
		Short: "Natural frequency and transmissibility of a mass on mounts, with 95 % intervals",
		Long: `response puts the mass of a mount file on its mounts, whose complex stiffness
depends on frequency, temperature and amplitude. Without --frequency it gives the
natural frequencies, at which (2πf)²m = K'. With it, the transmissibility at each
frequency and temperature: for a force on the mass (--force), a moving base
(--base), or a held amplitude across the mounts (--amplitude, or the mount file's
excitation). With a force or a moving base the amplitude is found together with
the response; where the compound softens with strain there can be several
answers, and all are given. Softest and hardest are the ends of the production
tolerance of the mount file. Amplitudes are zero to peak.

Numbers are for the tested compound and an idealised part. Design of supports
that people depend on stays with a qualified engineer and the codes in force.`,
		Example: `  phaselag response compound.yaml --mount sifter.yaml --temperature -20,23,60C
  phaselag response compound.yaml --mount sifter.yaml --temperature -20:60:20C --frequency 15,25Hz --force 40N --isolation 80%`,
		Args: exactly("COMPOUND"),
		RunE: func(_ *cobra.Command, args []string) error {
			o.file = args[0]
			return a.response(o)
		},
	}
	cmd.Flags().StringVar(&o.mount, "mount", "", "mount file (required)")
	cmd.Flags().StringVar(&o.temperature, "temperature", "", "temperatures (required), for example -20:60:20C")
	cmd.Flags().StringVar(&o.frequency, "frequency", "", "disturbing frequencies, for example 4:30:2Hz")
	cmd.Flags().StringVar(&o.force, "force", "", "force amplitude on the mass")
	cmd.Flags().StringVar(&o.base, "base", "", "amplitude of the moving base")
	cmd.Flags().StringVar(&o.amplitude, "amplitude", "", "amplitude held across the mounts")
	cmd.Flags().StringVar(&o.isolation, "isolation", "", "isolation wished for, for example 80%: the natural frequency and stiffness it takes")
	cmd.Flags().BoolVar(&o.extrapolate, "extrapolate", false, "answer outside the domain, marked")
	o.static.flags(cmd)
	formatFlag(cmd, &o.format)
	return cmd
}

// drive is what shakes the mass: the one that was named, else the mount file's.
func (o responseOptions) drive(m *mount.Mount) (mount.Drive, error) {
	d := mount.Drive{Force: math.NaN(), Base: math.NaN(), Deflection: math.NaN()}
	named := 0
	for _, v := range []struct {
		flag, text string
		quantity   unit.Quantity
		to         *float64
	}{
		{"force", o.force, unit.Force, &d.Force}, {"base", o.base, unit.Length, &d.Base}, {"amplitude", o.amplitude, unit.Length, &d.Deflection},
	} {
		if v.text == "" {
			continue
		}
		named++
		x, err := unit.Parse(v.text, v.quantity)
		if err != nil {
			return d, hintedAt("--"+v.flag, err)
		}
		if !(x > 0) {
			return d, usagef("--%s must be greater than zero", v.flag)
		}
		*v.to = x
	}
	switch {
	case named > 1:
		return d, usagef("--force, --base and --amplitude exclude one another")
	case named == 0 && !math.IsNaN(m.Excitation.Force):
		d.Force = m.Excitation.Force
	case named == 0 && !math.IsNaN(m.Excitation.Displacement):
		d.Deflection = m.Excitation.Displacement
	case named == 0:
		return d, hinted("state excitation: in the mount file, or --force, --base or --amplitude", "nothing shakes the mass")
	}
	return d, nil
}

func (a *app) response(o responseOptions) error {
	if o.mount == "" {
		return usagef("--mount is missing")
	}
	if o.temperature == "" {
		return usagef("--temperature is missing")
	}
	q := reports.ResponseQuery{Isolation: math.NaN(), Extrapolate: o.extrapolate}
	var err error
	if q.Temperatures, err = list("temperature", o.temperature, unit.Temperature); err != nil {
		return err
	}
	if o.frequency != "" {
		if q.Frequencies, err = list("frequency", o.frequency, unit.Frequency); err != nil {
			return err
		}
	}
	if o.isolation != "" {
		if q.Isolation, err = unit.Parse(o.isolation, unit.Relative); err != nil {
			return hintedAt("--isolation", err)
		}
		if !(q.Isolation > 0 && q.Isolation < 1) || len(q.Frequencies) == 0 {
			return usagef("--isolation lies between 0 and 100 %% and needs --frequency")
		}
	}
	c, err := models.Open(o.file)
	if err != nil {
		return err
	}
	m, err := mount.Open(o.mount)
	if err != nil {
		return err
	}
	if q.Drive, err = o.drive(m); err != nil {
		return err
	}
	choice, err := o.static.choice(c)
	if err != nil {
		return err
	}
	m, notes, err := reports.UnderLoad(c, m, choice)
	if err != nil {
		return err
	}
	for _, n := range notes {
		a.note(n)
	}
	r, err := reports.Respond(c, m, q)
	if err != nil {
		return err
	}
	if len(q.Frequencies) == 0 {
		return a.answer(r.Natural, o.format)
	}
	if err := a.answer(r.Forced, o.format); err != nil {
		return err
	}
	if table.Format(o.format) == table.Terminal {
		r.Natural.Assumptions = nil
		fmt.Fprintln(a.out)
		if err := table.Write(a.out, table.Terminal, r.Natural); err != nil {
			return err
		}
		if r.Worst != "" {
			fmt.Fprintf(a.out, "\n%s\n", r.Worst)
		}
	}
	if r.Outside > 0 {
		return errNo
	}
	return nil
}
