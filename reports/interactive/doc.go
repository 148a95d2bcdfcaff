// Package interactive makes the part of a datasheet's page that works by script: it
// answers a typed condition and draws curves to be read off. It takes a compound
// alone; everything else of the page stays as it is without a script.
//
// [New] is the front door. The scripts under assets evaluate the compound as package
// models does, with its domain, its intervals and its words, and round as package
// reports/table does; the tests hold the two against each other. They need no library
// and fetch nothing.
package interactive
