// Package doubt finds what is wrong with isotherms from how they superpose: two
// whose temperatures were exchanged, one whose frequency is in another unit, one
// that lies off the law that all others follow.
//
// It works on shift factors that are free of any law, each with its standard
// uncertainty, which a joint fit gives even where temperature or frequency of an
// isotherm are wrong, since its curve still fits the others.
package doubt
