-- Uploaded forecasts. `summary` is the JSON that the API answers; the values stand in a file of their own
-- that is named after the id.
CREATE TABLE fields (
  id             TEXT PRIMARY KEY, -- UUIDv7: sorts by creation
  name           TEXT NOT NULL,
  reference_time REAL NOT NULL,    -- seconds since 1970 UTC
  created_at     TEXT NOT NULL,
  summary        TEXT NOT NULL
) STRICT;

-- The forecast that a plan names, and the one that a run was flown in.
ALTER TABLE flights ADD COLUMN field_id TEXT REFERENCES fields (id) ON DELETE RESTRICT;
ALTER TABLE runs ADD COLUMN field_id TEXT REFERENCES fields (id) ON DELETE RESTRICT;

CREATE INDEX flights_by_field ON flights (field_id) WHERE field_id IS NOT NULL;
CREATE INDEX runs_by_field ON runs (field_id) WHERE field_id IS NOT NULL;
