-- One imported log. pumps lists the names its pump channels speak of; reading_block.pump counts into it from 1.
CREATE TABLE record (
  id         INTEGER PRIMARY KEY AUTOINCREMENT,
  station_id INTEGER NOT NULL REFERENCES station (id) ON DELETE CASCADE,
  name       TEXT    NOT NULL CHECK (name <> ''),
  file_name  TEXT    NOT NULL,
  sha256     TEXT    NOT NULL CHECK (length(sha256) = 64),
  report     TEXT    NOT NULL CHECK (json_valid(report)),
  pumps      TEXT    NOT NULL CHECK (json_valid(pumps)),
  intervals  INTEGER NOT NULL CHECK (intervals > 0),
  from_ms    INTEGER NOT NULL,
  to_ms      INTEGER NOT NULL CHECK (to_ms > from_ms),
  created_ms INTEGER NOT NULL
) STRICT;

CREATE INDEX record_of_station ON record (station_id);

-- Up to 4096 intervals of one channel, as little-endian 8-byte floats; a gap is NaN. pump 0 is the station itself.
-- from_ms and to_ms say which time the block covers, so that a week is read without the rest of the year.
CREATE TABLE reading_block (
  record_id INTEGER NOT NULL REFERENCES record (id) ON DELETE CASCADE,
  channel   TEXT    NOT NULL CHECK (channel IN
              ('start_ms', 'seconds', 'flow_m3s', 'level_m', 'static_head_m', 'power_w', 'pumps_on', 'on', 'speed')),
  pump      INTEGER NOT NULL CHECK (pump >= 0),
  from_ms   INTEGER NOT NULL,
  to_ms     INTEGER NOT NULL CHECK (to_ms > from_ms),
  intervals INTEGER NOT NULL CHECK (intervals BETWEEN 1 AND 4096),
  samples   BLOB    NOT NULL CHECK (length(samples) = 8 * intervals),
  PRIMARY KEY (record_id, channel, pump, from_ms)
) STRICT;
