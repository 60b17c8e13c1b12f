-- Dated facts. Rows are added, never changed: a correction is a new row that names the one it
-- replaces. Times are UTC text of one fixed form, so that comparing text compares moments.
CREATE TABLE entry (
    row INTEGER PRIMARY KEY,
    id TEXT NOT NULL UNIQUE,
    kind TEXT NOT NULL CHECK (kind <> ''),
    subject TEXT NOT NULL CHECK (subject <> ''),
    valid_from TEXT NOT NULL CHECK (
        valid_from GLOB '[12][0-9][0-9][0-9]-[01][0-9]-[0-3][0-9]T[0-2][0-9]:[0-5][0-9]:[0-5][0-9]Z'
    ),
    recorded_at TEXT NOT NULL CHECK (
        recorded_at GLOB '[12][0-9][0-9][0-9]-[01][0-9]-[0-3][0-9]T[0-2][0-9]:[0-5][0-9]:[0-5][0-9]Z'
    ),
    replaces TEXT UNIQUE REFERENCES entry (id),
    withdrawn INTEGER NOT NULL CHECK (withdrawn = 0 OR (withdrawn = 1 AND replaces IS NOT NULL)),
    who TEXT NOT NULL CHECK (who <> ''),
    why TEXT NOT NULL,
    fact TEXT NOT NULL CHECK (json_valid(fact))
) STRICT;

CREATE INDEX entry_as_of ON entry (kind, subject, valid_from, recorded_at);

CREATE TRIGGER entry_is_never_changed BEFORE UPDATE ON entry
BEGIN
    SELECT RAISE(ABORT, 'an entry is never changed: record a correction');
END;

CREATE TRIGGER entry_is_never_removed BEFORE DELETE ON entry
BEGIN
    SELECT RAISE(ABORT, 'an entry is never removed: withdraw it');
END;

CREATE TRIGGER correction_is_of_the_same_thing BEFORE INSERT ON entry
WHEN NEW.replaces IS NOT NULL
BEGIN
    SELECT RAISE(ABORT, 'a correction is of the same kind and subject, and not earlier recorded')
    WHERE NOT EXISTS (
        SELECT 1 FROM entry AS old
        WHERE old.id = NEW.replaces
          AND old.kind = NEW.kind
          AND old.subject = NEW.subject
          AND old.recorded_at <= NEW.recorded_at
    );
END;

-- What the store was first built from, so that an invented plant's store follows its files.
CREATE TABLE built_from (
    digest TEXT NOT NULL,
    entries INTEGER NOT NULL
) STRICT;
