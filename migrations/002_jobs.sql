-- Long pieces of work that a client does not wait for. A job that runs when the program ends stands as
-- interrupted once it starts again; its request is kept, so that it can be repeated.
CREATE TABLE jobs (
  id          TEXT PRIMARY KEY, -- UUIDv7: sorts by creation
  kind        TEXT NOT NULL,
  state       TEXT NOT NULL CHECK (state IN ('running', 'done', 'failed', 'cancelled', 'interrupted')),
  request     TEXT NOT NULL,    -- JSON, its plan and every default filled in
  answer      TEXT,             -- JSON, once done
  problem     TEXT,             -- JSON, once failed
  created_at  TEXT NOT NULL,
  finished_at TEXT
) STRICT;
