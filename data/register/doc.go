// Package register keeps the laboratory's tested batches: who tested what and
// when, the compound file as it was written, the measured files that it came
// from, and the numbers that a trend is drawn from.
//
// A register is one SQLite file on a local disk, or a PostgreSQL database when
// several computers write to it; [Open] tells them apart by a URL postgres://….
// A file on a network drive is no place for SQLite; take PostgreSQL there.
//
//	r, err := register.Open("batches.register")
//	id, err := r.Add(ctx, &register.Entry{Batch: "B-17", Compound: "NR 55", …})
//	entries, damaged, err := r.List(ctx, register.Query{Compound: "NR 55"})
//
// # What is kept
//
// An [Entry] is written once. There is no change and no removal, neither here
// nor in the database, whose triggers refuse both. A correction is a new entry
// that names the one it corrects and says why; the old one stays and is listed
// as corrected. A batch therefore has one entry that counts: the one that no
// other corrects. Numbers of entries ascend from 1 without gaps.
//
// The package stores bytes and numbers and knows no models and no clock:
// [Entry.Added] comes from the caller. Values are float64, NaN where nothing was
// measured; an infinite value is refused.
//
// # What is checked
//
// Every entry has SHA-256 sums: of its compound file, of its values, and of its
// own row with both of these in it. [Register.Get] checks all of an entry before
// it returns it. [Register.List] checks every row, and files and values of up
// to [ThroughUpTo] listed entries (of any number with [Query.Thorough]).
// [Register.Values] checks every row and every number that it returns. What
// does not match is named as [Damage] and left out; the rest stays readable.
// The sums find accidents, not forgeries: who can write the file can write sums.
//
// # Writing at once, and being cut off
//
// Several processes may read and add at once. A writer waits up to ten seconds
// for another. An entry is written in one transaction, and once Add has returned
// it survives the end of the process and, as far as the disk keeps its promises,
// of the power. While a program has the file open, SQLite keeps two more files
// beside it (-wal and -shm) that belong to it: make a backup by Export, or copy
// all three together, or copy the one when nothing has it open.
//
// # Plain files
//
// [Register.Export] writes everything as plain files, a folder for each entry
// with entry.json and the compound file as it is; [Register.Import] restores the
// same entries bit for bit, and is also the way from one kind of database to
// the other and out of a damaged register into a new one.
package register
