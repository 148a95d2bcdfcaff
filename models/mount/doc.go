// Package mount turns a compound's modulus into the complex stiffness of a
// rubber mount, and reads the file that describes one.
//
// A mount is a tree: elements (a pad, a bush, or a part whose stiffness was
// measured) joined in parallel, in series or as an inclined pair. Everything is
// SI: m, N, N/m, N·m/rad, Pa, kg, rad; amplitudes are single amplitudes (zero to peak);
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
//     thick pad and needs the sides or the diameter.
//   - A compression pad is a pad moved along its normal. It needs its section and
//     its factor, the k of E_c = E0(1+2kS²): factor: 0.6 (compression_coefficient
//     is the same key), or factor_from_hardness: 60 IRHD from a handbook table;
//     hardness_table names the table (Lindley, the only one that has k). The bulk
//     modulus, bulk_modulus: 1150 MPa or bulk_from_hardness: 60 IRHD, may be left
//     out. The same keys serve pads of an inclined pair.
//   - A compression strip is long: length and width, the short side. A compression
//     ring has outer_diameter, inner_diameter and thickness, its height.
//   - A bush has inner_diameter, outer_diameter, length and a direction: axial,
//     torsional, radial or conical; without its own, that of the mount. An axial bush
//     is the same with the direction said. Torsional and conical mounts have a
//     stiffness in N·m/rad, excitation: {angle: 0.5 deg} or {torque: 5 N·m}, and no
//     load ([Mount.Twisted]).
//   - A torsion disc is twisted about its normal: thickness, and a diameter, or
//     outer_diameter and inner_diameter.
//   - A measured element has the stiffness of a part at one condition; part says
//     whether the number is the magnitude (the default) or the storage part.
//     Without loss_factor or loss_angle its phase is the compound's there.
//   - arrangement is an element's name, {parallel: [...]}, {series: [...]} or
//     {inclined_pair: name, angle: 30 deg}, nested as wanted. The angle is that
//     between the pads' normal and the vertical.
//   - load has the mass, and static_force on all mounts together if it is not the
//     mass's weight. With static_modulus (shear), or static_modulus_from_hardness:
//     60 IRHD and a hardness_table (Lindley or Gent), the static compression of pressed
//     pads is solved for and their dynamic stiffness is the tangent there;
//     otherwise it is that of the unloaded pad ([Mount.Loaded] does the same later).
//   - count mounts carry the load side by side. A force of excitation acts on all
//     of them together.
//   - part_factor multiplies the stiffness: what parts were found to have beyond
//     the specimens. It is a number, or a number with its standard uncertainty.
//   - thermal_resistance, 2 K/W, is that of the rubber of one mount to its
//     surroundings, or stands in the elements; [Mount.Heated] uses it.
//   - tolerance is the production spread; nothing merges it with the
//     uncertainty of the tests.
package mount
