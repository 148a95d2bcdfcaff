-- Entries, their compound files and their values. Numbers are given by the
-- program: one more than the last, under the lock of the writing transaction.
CREATE TABLE register_entry (
	id            bigint PRIMARY KEY,
	batch         text   NOT NULL,
	compound      text   NOT NULL,
	tested        text   NOT NULL,
	added         text   NOT NULL,
	who           text   NOT NULL,
	corrects      bigint NOT NULL, -- 0: nothing
	why           text   NOT NULL,
	sha256        text   NOT NULL, -- of the compound file
	size          bigint NOT NULL,
	inputs        text   NOT NULL, -- JSON: [{"file":…,"sha256":…},…]
	value_count   bigint NOT NULL,
	values_sha256 text   NOT NULL,
	row_sha256    text   NOT NULL,
	CHECK (id > 0 AND corrects >= 0 AND corrects < id)
);

CREATE INDEX register_entry_batch ON register_entry (batch);
CREATE UNIQUE INDEX register_entry_corrects ON register_entry (corrects) WHERE corrects <> 0;

CREATE TABLE register_file (
	entry bigint PRIMARY KEY REFERENCES register_entry (id),
	bytes bytea NOT NULL
);

CREATE TABLE register_value (
	entry     bigint NOT NULL REFERENCES register_entry (id),
	position  bigint NOT NULL,
	name      text   NOT NULL,
	condition text   NOT NULL,
	value     double precision, -- NULL: not measured
	u95       double precision, -- NULL: not stated
	unit      text   NOT NULL,
	mark      bigint NOT NULL,
	PRIMARY KEY (entry, position)
);

-- Whole rows by name, so that a trend reads only what it shows.
CREATE INDEX register_value_name ON register_value (name, condition, entry) INCLUDE (position, value, u95, unit, mark);
