// Package screen looks for what the tables of a campaign alone make doubtful:
// before any spectrum is sought, without a model of the compound.
//
// [Check] returns findings and changes nothing. A finding is no error: a doubtful
// campaign can still be characterized, and whoever reads the result is told. The
// thresholds are chosen so that a good laboratory's noise (0.5 % in magnitude,
// 0.3° in phase, 0.3 K) raises nothing. They are this program's own rules where
// no source is named.
//
// The codes are stable:
//
//	duplicate-rows                    the same numbers twice
//	few-points                        fewer than six points in a run
//	few-points-a-decade               fewer than five points a decade
//	isotherms-barely-overlap          neighbouring isotherms share next to nothing
//	isotherms-do-not-overlap          neighbouring isotherms share no modulus
//	modulus-drifts                    a modulus creeps while nothing changes
//	modulus-too-high                  beyond any polymer's glass
//	modulus-too-low                   softer than any solid rubber
//	one-frequency-only                nothing is known of the frequency dependence
//	one-temperature-only              nothing is known of the temperature dependence
//	phase-uncertainty-not-stated      the loss factor's interval lacks its common part
//	repeats-disagree                  two runs at one condition differ
//	softer-when-colder                a colder run is softer than a warmer one
//	storage-and-loss-swapped          the columns probably changed places
//	storage-modulus-falls             G' falls with frequency
//	stated-loss-factor-differs        the file's tan δ is not its G”/G'
//	strain-never-stated               no amplitude in the whole campaign
//	strain-not-constant               the amplitude varies through an isotherm
//	strain-too-high                   a strain amplitude beyond 100 %
//	temperature-drifts                the temperature moves through a run
//	temperature-off-nominal           measured and nominal temperature differ
package screen
