-- A pump station as its owner wrote it. The file is kept whole; what the program reads from it is worked out anew.
CREATE TABLE station (
  id         INTEGER PRIMARY KEY AUTOINCREMENT, -- an id never comes back to name something else
  name       TEXT    NOT NULL CHECK (name <> ''),
  file       TEXT    NOT NULL CHECK (json_valid(file)),
  demo       INTEGER NOT NULL DEFAULT 0 CHECK (demo IN (0, 1)),
  created_ms INTEGER NOT NULL,
  updated_ms INTEGER NOT NULL
) STRICT;
