-- A tariff as its owner wrote it, kept whole like a station.
CREATE TABLE tariff (
  id         INTEGER PRIMARY KEY AUTOINCREMENT,
  name       TEXT    NOT NULL CHECK (name <> ''),
  file       TEXT    NOT NULL CHECK (json_valid(file)),
  demo       INTEGER NOT NULL DEFAULT 0 CHECK (demo IN (0, 1)),
  created_ms INTEGER NOT NULL,
  updated_ms INTEGER NOT NULL
) STRICT;

-- The tariff a station was last compared under, so that the page can offer it first.
ALTER TABLE station ADD COLUMN tariff_id INTEGER REFERENCES tariff (id) ON DELETE SET NULL;
