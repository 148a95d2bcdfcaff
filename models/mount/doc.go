// Package mount turns a compound's modulus into the complex stiffness of a
// rubber mount, and reads the file that describes one.
//
// A mount is a tree: elements (a pad, a bush, or a part whose stiffness was
// measured) joined in parallel, in series or as an inclined pair. Everything is
// SI: m, N, N/m, Pa, kg, rad; amplitudes are single amplitudes (zero to peak);
// "not stated" is NaN. Stiffness is complex, K* = K' + iK”, with K”/K' the loss
// factor.
//
// # Mount files
//
// A mount file is YAML; every quantity has its unit:
//
//	mount: sifter foot
//	elements:
//	  pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}
//	  bush: {measured: {stiffness: 420 N/mm, part: magnitude, loss_factor: 0.12, frequency: 15 Hz,
//	         temperature: 23 °C, amplitude: 0.5 mm, static_load: 600 N, u: 3 %}, strain_per_displacement: 4 %/mm}
//	arrangement: {series: [pad, bush]}
//	count: 4
//	direction: vertical
//	load: {mass: 200 kg}
//	excitation: {displacement: 0.3 mm}
//	part_factor: {value: 1.05, u: 3 %}
//	tolerance: {hardness: 5 IRHD}
//
// Only elements is compulsory, and arrangement where there is more than one.
//
//   - A shear pad has a thickness and either an area, or a diameter, or a length
//     (along the shear) and a width. bending: true subtracts the bending of a
//     thick pad and needs the sides or the diameter. compression_coefficient (k
//     of 1+2kS²) and bulk_modulus are used where an inclined pair presses the pad.
//   - A compression pad is a pad moved along its normal. It needs its section and
//     a compression_coefficient.
//   - An axial bush has inner_diameter, outer_diameter and length.
//   - A measured element has the stiffness of a part at one condition; part says
//     whether the number is the magnitude (the default) or the storage part.
//     Without loss_factor or loss_angle its phase is the compound's there.
//   - arrangement is an element's name, {parallel: [...]}, {series: [...]} or
//     {inclined_pair: name, angle: 30 deg}, nested as wanted. The angle is that
//     between the pads' normal and the vertical.
//   - count mounts carry the load side by side. A force of excitation acts on all
//     of them together.
//   - part_factor multiplies the stiffness: what parts were found to have beyond
//     the specimens. It is a number, or a number with its standard uncertainty.
//   - tolerance is the production spread; nothing merges it with the
//     uncertainty of the tests.
package mount
