-- A reading keeps what the device said where an offset corrects it: the air_temp_c and rel_humidity_pct beside it are what counts.
ALTER TABLE readings ADD COLUMN raw_air_temp_c REAL CHECK (raw_air_temp_c BETWEEN -10 AND 60);
ALTER TABLE readings ADD COLUMN raw_rel_humidity_pct REAL CHECK (raw_rel_humidity_pct BETWEEN 0 AND 105);
-- Of a barometer beside the sensor.
ALTER TABLE readings ADD COLUMN pressure_pa REAL CHECK (pressure_pa BETWEEN 50000 AND 110000);
-- That of the foundry's altitude on arrival, so that an offset entered later changes nothing but the air; null for rows from before.
ALTER TABLE readings ADD COLUMN altitude_pressure_pa REAL CHECK (altitude_pressure_pa BETWEEN 50000 AND 110000);

-- What a sensor sent that cannot be the air of a room, or that the air around it denies: kept and shown, and counted by nothing.
-- Apart from the readings, so that no query of the clock can forget to leave it out.
CREATE TABLE set_aside_readings (
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  measured_at INTEGER NOT NULL CHECK (measured_at > 0),
  -- 'jump' and 'flat' follow from the readings around it and may go back among them.
  reason TEXT NOT NULL CHECK (reason IN ('out of range', 'jump', 'flat')),
  -- As the device said it.
  air_temp_c REAL NOT NULL,
  rel_humidity_pct REAL NOT NULL,
  pressure_pa REAL,
  altitude_pressure_pa REAL,
  source TEXT NOT NULL CHECK (source IN ('sensor', 'typed')),
  entered_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  received_at INTEGER NOT NULL CHECK (received_at > 0),
  PRIMARY KEY (sensor_id, measured_at, reason)
) STRICT, WITHOUT ROWID;

-- What is added to the readings of a sensor from an instant on, until the next one.
CREATE TABLE sensor_offsets (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  since INTEGER NOT NULL CHECK (since > 0),
  air_temp_offset_k REAL NOT NULL CHECK (air_temp_offset_k BETWEEN -10 AND 10),
  rel_humidity_offset_pct REAL NOT NULL CHECK (rel_humidity_offset_pct BETWEEN -30 AND 30),
  note TEXT NOT NULL CHECK (length(note) <= 200),
  entered_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  entered_at INTEGER NOT NULL CHECK (entered_at > 0),
  UNIQUE (sensor_id, since)
) STRICT;

-- The devices that have hung under one name: which one, and from when on.
CREATE TABLE sensor_devices (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  since INTEGER NOT NULL CHECK (since > 0),
  serial TEXT NOT NULL CHECK (length(serial) <= 60),
  note TEXT NOT NULL CHECK (length(note) <= 200),
  noted_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  noted_at INTEGER NOT NULL CHECK (noted_at > 0),
  UNIQUE (sensor_id, since)
) STRICT;

-- Readings from this instant on are still to be brought to the offsets; null once they are.
ALTER TABLE sensors ADD COLUMN correct_from INTEGER CHECK (correct_from > 0);
ALTER TABLE sensors ADD COLUMN battery_pct REAL CHECK (battery_pct BETWEEN 0 AND 100);
ALTER TABLE sensors ADD COLUMN battery_at INTEGER CHECK (battery_at > 0);
-- How far its clock is ahead of the server's; null where it goes right, or nobody knows.
ALTER TABLE sensors ADD COLUMN clock_offset_seconds INTEGER;
