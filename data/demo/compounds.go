package demo

// Temperatures of the invented compounds' constants: 23 °C.
const room = 296.15

// HM60 is the demonstration's compound: an invented filled natural rubber. Its
// WLF constants lie near those printed for natural rubber (Ferry, Viscoelastic
// Properties of Polymers, 3rd ed., ch. 11, moved to 23 °C: 6.01 and 149.8 K;
// value from memory) without being equal to them; the rest is chosen to give a
// storage modulus near 2 MPa and a loss factor near 0.1 at 10 Hz and 23 °C.
func HM60() Truth {
	t := Gum()
	t.Name = "HM-60"
	t.Filler = Filler{
		Storage: 0.9e6, Loss: 0.12e6, Strain: 0.011, Exponent: 0.57,
		Energy: 6000, Causal: 1, Frequency: 10,
	}
	return t
}

// RateIndependent is HM60 with a network whose friction knows no rate (κ = 0).
func RateIndependent() Truth {
	t := HM60()
	t.Name = "HM-60, rate-independent network"
	t.Filler.Causal = 0
	return t
}

// Gum is an invented natural rubber without filler: a broad process above its
// equilibrium modulus and the foot of the glass transition.
func Gum() Truth {
	return Truth{
		Name:        "gum",
		Reference:   room,
		Equilibrium: 0.93e6,
		Processes: []Process{
			{Strength: 0.55e6, Time: 0.017, Alpha: 0.34},
			{Strength: 640e6, Time: 1.3e-10, Alpha: 0.52},
		},
		Shift: WLF{C1: 6.12, C2: 151.3, Reference: room},
	}
}

// Narrow is an invented gum with a narrow transition inside the window: its
// isotherms overlap little where they are steep.
func Narrow() Truth {
	return Truth{
		Name:        "narrow transition",
		Reference:   room,
		Equilibrium: 1.1e6,
		Processes:   []Process{{Strength: 60e6, Time: 3.1e-6, Alpha: 0.66}},
		Shift:       WLF{C1: 9.4, C2: 118, Reference: room},
	}
}

// Liquid is an invented material that flows: no equilibrium modulus, and a
// phase angle that approaches 90° at low frequency and high temperature. It
// follows an Arrhenius law.
func Liquid() Truth {
	return Truth{
		Name:      "liquid",
		Reference: room,
		Processes: []Process{
			{Strength: 250e6, Time: 0.043, Alpha: 1, Beta: 0.24},
			{Strength: 4e6, Time: 0.26, Alpha: 1, Beta: 0.6},
		},
		Shift: Arrhenius{Energy: 105e3, Reference: room},
	}
}

// Complex is Gum with a third process whose temperature dependence is its own,
// so that no shift makes one curve of its isotherms.
func Complex() Truth {
	t := Gum()
	t.Name = "no superposition"
	t.Processes = append(t.Processes, Process{
		Strength: 0.5e6, Time: 0.02, Alpha: 0.7,
		Shift: Arrhenius{Energy: 25e3, Reference: room},
	})
	return t
}
