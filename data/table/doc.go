// Package table reads text tables of test results: what stands in which column,
// in which unit, and where in the file.
//
// Accepted are columns separated by commas, semicolons, tabulators or blanks;
// decimal points or decimal commas; UTF-8, UTF-16 and Windows-1252; any line
// ends; lines before the row of headings; units in the headings ("G' / MPa",
// "G' (MPa)", "storage_modulus_MPa") or in a row of their own; several blocks
// in one file, parted by blank lines or by the same headings again. Headings
// are understood by the symbols and words of the trade, with typographic or
// plain primes.
//
// Nothing is guessed silently: a separator, a decimal sign, a heading or a unit
// that can be read in two ways is an error with a hint how to say what is
// meant, in the words of the campaign file (see [Settings]). The few harmless
// assumptions are listed in [Table.Assumptions].
//
// A cell without a number ("", "-", "n/a", "NaN") is "not measured", NaN.
package table
