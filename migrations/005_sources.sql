-- Forecast runs that were fetched from configured sources, and how that went.
CREATE TABLE fetches (
  id          TEXT PRIMARY KEY,  -- UUIDv7: sorts by start
  source      TEXT NOT NULL,     -- its name in the file of sources
  run_time    REAL NOT NULL,     -- seconds since 1970 UTC
  state       TEXT NOT NULL CHECK (state IN ('running', 'stored', 'failed', 'interrupted', 'dropped')),
  field_id    TEXT,              -- once stored; dropped: the field was removed for newer ones
  bytes       INTEGER NOT NULL,  -- on the disk
  complaint   TEXT,              -- why it failed
  started_at  TEXT NOT NULL,
  finished_at TEXT
) STRICT;

CREATE INDEX fetches_by_source ON fetches (source, id);
