-- How the air at a place was until it was changed: what dried there until then keeps it. Only a correction reaches back.
CREATE TABLE former_airs (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  place_id TEXT NOT NULL REFERENCES places (id) ON DELETE CASCADE,
  until INTEGER NOT NULL CHECK (until > 0),
  air_speed_fans_on_mps REAL NOT NULL CHECK (air_speed_fans_on_mps BETWEEN 0 AND 20),
  air_speed_fans_off_mps REAL NOT NULL CHECK (air_speed_fans_off_mps BETWEEN 0 AND 20),
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  -- Its fan timetable: rows as in fan_hours.
  fan_hours TEXT NOT NULL CHECK (json_valid(fan_hours))
) STRICT;
CREATE INDEX former_airs_place ON former_airs (place_id, until);
