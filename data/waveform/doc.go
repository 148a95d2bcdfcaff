// Package waveform turns force and displacement against time, or torque and
// angle, into the complex stiffness of a specimen.
//
// [Analyse] takes one record of one frequency and amplitude; an [Analyser] takes
// a long file sample by sample, in many segments, and holds a bounded number of
// samples whatever the length. Both find the common frequency of the two channels,
// the amplitude and phase of the fundamental and of the harmonics, the complex
// stiffness K* = F*/x*, the loss angle and the energy of the loop, each with its
// standard uncertainty, and say in [Doubt] what makes the record doubtful. The
// kernel stands open as [FitKnown] and [FitFree], the three- and the four-parameter
// sine fit of one channel.
//
// Conventions:
//
//   - SI: seconds, Hz, N and m (or N·m and rad); K* is in N/m (or N·m/rad), energy
//     in N·m per cycle. An angle in radians makes torque times angle an energy.
//   - y(t) = Re[y* exp(iω(t-t0))] = a cos(ω(t-t0)+φ), where t0 is the first sample
//     used; phases are in radians, in (-π, π]. K* = F*/x* has a positive imaginary
//     part when the force leads. δ = φ_F - φ_x, in (-π, π].
//   - A sample whose time, force or displacement is NaN or infinite is missing: it
//     is counted and left out. NaN in a result means "not measured".
//   - Uncertainties are standard uncertainties under white noise that is normal,
//     independent from sample to sample and may be correlated between the
//     channels. They hold the noise of the record only: neither the calibration of
//     the transducers nor the delay between the channels.
//
// The package reads no files: the caller gives numbers.
package waveform
