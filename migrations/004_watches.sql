-- Flights that are flown again whenever newer air arrives that covers them.
CREATE TABLE watches (
  flight_id      TEXT PRIMARY KEY REFERENCES flights (id) ON DELETE CASCADE,
  tell_beyond    REAL NOT NULL, -- m that the landing moves before it is told
  within         REAL NOT NULL, -- m from the launch to where air was observed
  within_time    REAL NOT NULL, -- s from the release to when air is valid
  told_run_id    TEXT NOT NULL REFERENCES runs (id), -- whose landing was told last
  webhook_url    TEXT,
  webhook_secret TEXT,
  webhook_kinds  TEXT,          -- JSON list of the kinds of event to deliver
  created_at     TEXT NOT NULL,
  updated_at     TEXT NOT NULL
) STRICT;

-- Flights still to be tried in air that has arrived; written in the transaction that stores the air.
CREATE TABLE due_reruns (
  flight_id TEXT NOT NULL REFERENCES watches (flight_id) ON DELETE CASCADE,
  air       TEXT NOT NULL,      -- JSON as a plan names air
  PRIMARY KEY (flight_id, air)
) STRICT;

-- What happened to a flight's prediction, never changed. `answer` is the JSON that the API answers.
CREATE TABLE events (
  id        TEXT PRIMARY KEY,   -- UUIDv7, made in the transaction that stores it: sorts by commit
  flight_id TEXT NOT NULL REFERENCES flights (id) ON DELETE CASCADE,
  kind      TEXT NOT NULL,
  answer    TEXT NOT NULL
) STRICT;

CREATE INDEX events_by_flight ON events (flight_id, id);

-- Events owed to a webhook; a row goes when it is delivered or given up.
CREATE TABLE deliveries (
  event_id  TEXT PRIMARY KEY REFERENCES events (id) ON DELETE CASCADE,
  flight_id TEXT NOT NULL REFERENCES watches (flight_id) ON DELETE CASCADE,
  attempts  INTEGER NOT NULL,
  due_at    REAL NOT NULL,      -- seconds since 1970 UTC
  complaint TEXT                -- why the last attempt failed
) STRICT;

CREATE INDEX deliveries_by_due ON deliveries (due_at);
