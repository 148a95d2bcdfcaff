// Package unit reads and writes quantities with units at the border of the
// program; inside, everything is SI.
//
// A quantity is written as a number, an optional blank and a unit: "23 °C",
// "0.2%", "1e5 rad/s". The number has a decimal point; the unit is compulsory
// (but a plain 0 will do where every unit's zero is the same). [Parse] reads
// one quantity, [ParseList] the lists of the command line, [Lookup] a unit
// alone, for the headings of tables.
//
// The SI forms are K (temperatures and their differences), Hz, Pa, m/m, N, m,
// m², kg/m³, kg, N/m, rad, 1/m, s, K/s, K/W, 1, 1/K, Pa·s and N·m. A hardness
// is the number on its scale. Frequencies are cycles: 1 rad/s is 1/(2π) Hz.
package unit
