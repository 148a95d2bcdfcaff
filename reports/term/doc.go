// Package term draws charts as text, for terminals: curves in Braille dots, points as
// signs, axes with units.
//
//	err := term.Plot(os.Stdout, term.Chart{
//		Width: 80,
//		X:     term.Axis{Label: "frequency f (Hz)", Log: true},
//		Y:     term.Axis{Label: "G′, G″ (MPa)", Log: true},
//		Series: []term.Series{{Name: "G′", X: f, Y: storage}, {Name: "G″", X: f, Y: loss}},
//	})
//
// # Conventions
//
//   - No line is wider than Chart.Width columns, and there is no colour and no control
//     sequence: curves differ by their dashes and by a letter at their right end, points by
//     their signs.
//   - A coordinate that is NaN, infinite, or not positive on a logarithmic axis is a gap.
//   - Equal charts give equal text.
//   - Labels are printed as they are; control characters become spaces, and what is too
//     long is cut with "…".
package term
