// Package table writes a table for people (aligned text) or for programs (CSV,
// JSON).
//
// One [Table] serves all three. People get numbers rounded to what their
// interval supports; programs get every digit, under the columns' keys, which
// are a contract.
//
//   - A number that is NaN was not measured or not determined: "–" in text,
//     empty in CSV, null in JSON.
//   - Numbers for programs have the shortest digits that read back bit for bit.
//   - An infinite number is an error: no format has a place for it.
package table
