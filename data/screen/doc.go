// Package screen looks for what the tables of a campaign alone make doubtful:
// before any spectrum is sought, without a model of the compound.
//
// [Check] returns findings and changes nothing. A finding is no error: a doubtful
// campaign can still be characterized, and whoever reads the result is told. The
// thresholds are chosen so that a good laboratory's noise (0.5 % in magnitude,
// 0.3° in phase, 0.3 K) raises nothing. They are this program's own rules where
// no source is named.
//
// A factor of 3 in modulus or of 2 in strain is as smooth as the truth: it is claimed
// only where a second source in the campaign contradicts. Of sound simulated campaigns
// one in a hundred at the most raises anything severe (see the test).
//
// The codes are stable:
//
//	contact-lost                  the modulus falls suddenly and does not come back
//	deformation-not-stated        shear or tension: what each would mean
//	direction-contradicted        the rows run the other way than stated
//	duplicate-rows                the same numbers twice
//	few-points                    fewer than six points in a run
//	few-points-a-decade           fewer than five points a decade
//	frame-not-corrected           the stiff end runs against a plateau that is no glass
//	frequency-unit-contradicted   the complex viscosity tells Hz from rad/s
//	heading-against-deformation   E' in shear or G' in tension
//	inertia-not-corrected         G' falls short by one coefficient times f² in all isotherms
//	isotherms-barely-overlap      neighbouring isotherms share next to nothing
//	isotherms-do-not-overlap      neighbouring isotherms share no modulus
//	moduli-copied                 a block of moduli stands under another condition, too
//	modulus-drifts                a modulus creeps while nothing changes
//	modulus-drifts-in-run         the modulus creeps with the order of the rows
//	modulus-too-high              beyond any polymer's glass
//	modulus-too-low               softer than any solid rubber
//	one-frequency-only            nothing is known of the frequency dependence
//	one-temperature-only          nothing is known of the temperature dependence
//	phase-uncertainty-not-stated  the loss factor's interval lacks its common part
//	repeat-outlying               one of several repeats, by Grubbs
//	repeats-disagree              two runs at one condition differ
//	repeats-scatter-unequally     repeated rows, by Cochran
//	self-heating                  the temperature rises with the dissipated power
//	self-heating-expected         it must rise, and the table shows none
//	softens-from-first-run        one piece is softer when a condition is repeated
//	softer-when-colder            a colder run is softer than a warmer one
//	stated-loss-factor-differs    the file's tan δ is not its G”/G'
//	steps-out-of-order            a few rows out of an order otherwise kept
//	storage-and-loss-swapped      the columns probably changed places
//	storage-modulus-falls         G' falls with frequency
//	strain-beyond-linear-range    isotherms at a strain that costs stiffness
//	strain-never-stated           no amplitude in the whole campaign
//	strain-not-constant           the amplitude varies through an isotherm
//	strain-too-high               a strain amplitude beyond 100 %
//	strain-too-low                a strain amplitude that no machine drives
//	temperature-drifts            the temperature moves through a run
//	temperature-off-nominal       measured and nominal temperature differ
//	tests-contradict-in-modulus   two tests differ by 3, 1000 or a million
//	tests-contradict-in-strain    two strain sweeps differ by 2 or √2 in strain
//	unit-changes-within-test      one isotherm is three or six decades off its neighbours
//	viscosity-differs             the file's complex viscosity is not its |G*|/ω
package screen
