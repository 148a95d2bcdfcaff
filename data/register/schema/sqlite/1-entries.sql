-- Entries, their compound files and their values. Numbers are given by the
-- program: one more than the last, under the lock of the writing transaction.
CREATE TABLE register_entry (
	id            INTEGER PRIMARY KEY,
	batch         TEXT    NOT NULL,
	compound      TEXT    NOT NULL,
	tested        TEXT    NOT NULL,
	added         TEXT    NOT NULL,
	who           TEXT    NOT NULL,
	corrects      INTEGER NOT NULL, -- 0: nothing
	why           TEXT    NOT NULL,
	sha256        TEXT    NOT NULL, -- of the compound file
	size          INTEGER NOT NULL,
	inputs        TEXT    NOT NULL, -- JSON: [{"file":…,"sha256":…},…]
	value_count   INTEGER NOT NULL,
	values_sha256 TEXT    NOT NULL,
	row_sha256    TEXT    NOT NULL,
	CHECK (id > 0 AND corrects >= 0 AND corrects < id)
) STRICT;

CREATE INDEX register_entry_batch ON register_entry (batch);
CREATE UNIQUE INDEX register_entry_corrects ON register_entry (corrects) WHERE corrects <> 0;

CREATE TABLE register_file (
	entry INTEGER PRIMARY KEY REFERENCES register_entry (id),
	bytes BLOB NOT NULL
) STRICT;

CREATE TABLE register_value (
	entry     INTEGER NOT NULL REFERENCES register_entry (id),
	position  INTEGER NOT NULL,
	name      TEXT    NOT NULL,
	condition TEXT    NOT NULL,
	value     REAL,             -- NULL: not measured
	u95       REAL,             -- NULL: not stated
	unit      TEXT    NOT NULL,
	mark      INTEGER NOT NULL,
	PRIMARY KEY (entry, position)
) STRICT, WITHOUT ROWID;

-- Whole rows by name, so that a trend reads only what it shows.
CREATE INDEX register_value_name ON register_value (name, condition, entry, position, value, u95, unit, mark);
