-- A comparison, with the station and tariff as they were when it was made: later edits do not change a stored result.
CREATE TABLE comparison (
  id           INTEGER PRIMARY KEY AUTOINCREMENT,
  station_id   INTEGER NOT NULL REFERENCES station (id) ON DELETE CASCADE,
  record_id    INTEGER NOT NULL REFERENCES record (id) ON DELETE CASCADE,
  tariff_id    INTEGER REFERENCES tariff (id) ON DELETE SET NULL,
  station_file TEXT    NOT NULL CHECK (json_valid(station_file)),
  tariff_file  TEXT    CHECK (tariff_file IS NULL OR json_valid(tariff_file)),
  choices      TEXT    NOT NULL CHECK (json_valid(choices)), -- the rules asked for and the pumps left out
  result       TEXT    NOT NULL CHECK (json_valid(result)),
  created_ms   INTEGER NOT NULL
) STRICT;

CREATE INDEX comparison_of_station ON comparison (station_id);
CREATE INDEX comparison_of_record ON comparison (record_id);
CREATE INDEX comparison_of_tariff ON comparison (tariff_id);
