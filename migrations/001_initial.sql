-- Uploaded soundings. `summary` is the JSON that the API answers, `levels` the completed levels in SI.
CREATE TABLE profiles (
  id         TEXT PRIMARY KEY, -- UUIDv7: sorts by creation
  name       TEXT NOT NULL,
  valid_at   REAL,             -- seconds since 1970 UTC
  latitude   REAL,             -- radians
  longitude  REAL,
  created_at TEXT NOT NULL,
  summary    TEXT NOT NULL,
  levels     TEXT NOT NULL
) STRICT;

CREATE INDEX profiles_by_valid_at ON profiles (valid_at);

-- Planned flights. `plan` is the JSON of the request with its defaults filled in.
CREATE TABLE flights (
  id          TEXT PRIMARY KEY,
  title       TEXT NOT NULL,
  launch_time REAL NOT NULL,   -- seconds since 1970 UTC
  profile_id  TEXT REFERENCES profiles (id) ON DELETE RESTRICT, -- the air that the plan names
  created_at  TEXT NOT NULL,
  updated_at  TEXT NOT NULL,
  plan        TEXT NOT NULL,
  outcome     TEXT             -- what happened, JSON; null until somebody says
) STRICT;

CREATE INDEX flights_by_launch_time ON flights (launch_time);
CREATE INDEX flights_by_profile ON flights (profile_id) WHERE profile_id IS NOT NULL;

-- Every prediction ever answered, never changed. `answer` is its JSON, `track` its packed points.
CREATE TABLE runs (
  id         TEXT PRIMARY KEY,
  flight_id  TEXT NOT NULL REFERENCES flights (id) ON DELETE CASCADE,
  profile_id TEXT REFERENCES profiles (id) ON DELETE RESTRICT,
  answer     TEXT NOT NULL,
  track      BLOB NOT NULL
) STRICT;

CREATE INDEX runs_by_flight ON runs (flight_id, id);
CREATE INDEX runs_by_profile ON runs (profile_id) WHERE profile_id IS NOT NULL;

-- First answers to creating requests that carried an Idempotency-Key.
CREATE TABLE first_answers (
  key        TEXT PRIMARY KEY,
  digest     BLOB NOT NULL,    -- of method, path and body
  location   TEXT,
  answer     TEXT NOT NULL,
  created_at TEXT NOT NULL
) STRICT;
