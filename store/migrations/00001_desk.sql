-- +goose Up

-- The record of acts: append-only, a chain of hashes, each entry signed.
-- facts and commits are canonical text; see journal.go.
CREATE TABLE journal (
	seq       INTEGER PRIMARY KEY,
	at        INTEGER NOT NULL, -- milliseconds since 1970, UTC
	desk      TEXT    NOT NULL,
	person    INTEGER NOT NULL REFERENCES people (id) DEFERRABLE INITIALLY DEFERRED,
	act       TEXT    NOT NULL,
	facts     TEXT    NOT NULL,
	commits   TEXT    NOT NULL,
	before    BLOB    NOT NULL, -- the hash of the entry before
	hash      BLOB    NOT NULL,
	signature BLOB    NOT NULL
) STRICT;

-- Rows of the tables below are made by the entry they name; where an entry
-- makes one row, its number is the row's key.
CREATE TABLE branch (
	entry    INTEGER PRIMARY KEY REFERENCES journal (seq),
	name     TEXT    NOT NULL,
	desk     TEXT    NOT NULL,
	practice INTEGER NOT NULL
) STRICT;

CREATE TABLE people (
	id         INTEGER PRIMARY KEY,
	entry      INTEGER NOT NULL REFERENCES journal (seq),
	name       TEXT    NOT NULL UNIQUE,
	role       TEXT    NOT NULL,
	public_key BLOB    NOT NULL,
	locked     BLOB    NOT NULL -- the person's keys under their passphrase
) STRICT;

CREATE TABLE editions (
	entry       INTEGER PRIMARY KEY REFERENCES journal (seq),
	fingerprint BLOB NOT NULL UNIQUE,
	canonical   TEXT NOT NULL
) STRICT;

CREATE TABLE results (
	entry          INTEGER PRIMARY KEY REFERENCES journal (seq),
	edition        INTEGER NOT NULL REFERENCES editions (entry),
	band           TEXT    NOT NULL,
	recommendation TEXT    NOT NULL,
	kept           BLOB    NOT NULL -- sealed: answers and figures; see kept.go
) STRICT;

CREATE INDEX results_by_edition ON results (edition);

CREATE TABLE clearings (
	entry  INTEGER PRIMARY KEY REFERENCES journal (seq),
	result INTEGER NOT NULL UNIQUE REFERENCES results (entry)
) STRICT;

-- What the desk remembers for comfort, such as its language: no record.
CREATE TABLE settings (
	name  TEXT PRIMARY KEY,
	value TEXT NOT NULL
) STRICT, WITHOUT ROWID;

-- +goose StatementBegin
CREATE TRIGGER journal_stands BEFORE UPDATE ON journal BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER journal_stays BEFORE DELETE ON journal BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER branch_stands BEFORE UPDATE ON branch BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER branch_stays BEFORE DELETE ON branch BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER people_stand BEFORE UPDATE ON people BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER people_stay BEFORE DELETE ON people BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER editions_stand BEFORE UPDATE ON editions BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER editions_stay BEFORE DELETE ON editions BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER results_stand BEFORE UPDATE ON results BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER results_stay BEFORE DELETE ON results BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER clearings_stand BEFORE UPDATE ON clearings BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd
-- +goose StatementBegin
CREATE TRIGGER clearings_stay BEFORE DELETE ON clearings BEGIN SELECT RAISE(ABORT, 'append-only'); END;
-- +goose StatementEnd

-- "WHse"
PRAGMA application_id = 0x57487365;
PRAGMA user_version = 1;
