// Package demo invents compounds and measures them.
//
// A [Truth] is a compound whose modulus is known exactly in frequency and in
// time; a [Plan] says which tests a laboratory made on it and how wrong its
// instruments were; [Campaign] writes the files that such a laboratory would
// have handed over. They feed the simulation tests, so that the truth is never
// the code under test: the package has formulas of its own and imports nothing
// of the project. Everything in it is invented; no file describes a product or
// a measurement.
//
// Units are SI (Pa, Hz, s, K) except where a field of a Plan names another
// unit, because a plan is written as a laboratory writes it. Strains of a Truth
// are shear strains in m/m, single amplitude (zero to peak). Temperature
// factors follow f_R = f·a_T: colder than the reference means a_T > 1.
//
// The files in this folder (campaign.yaml, the tables and sifter.yaml) are the
// output of Campaign(HM60(), HM60Plan(), HM60Seed) and of [SifterMount]. To
// write them anew:
//
//	go test ./data/demo -run TestCommittedFiles -update
package demo

//go:generate go test . -run TestCommittedFiles -update
