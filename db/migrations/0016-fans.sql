-- When the air speeds of a place were measured, with what and by whom; without a day they are an estimate.
ALTER TABLE places ADD COLUMN air_measured_on TEXT CHECK (air_measured_on GLOB '[0-9][0-9][0-9][0-9]-[0-1][0-9]-[0-3][0-9]');
ALTER TABLE places ADD COLUMN air_measured_with TEXT CHECK (air_measured_with IN ('hot-wire meter', 'vane meter'));
ALTER TABLE places ADD COLUMN air_measured_by TEXT CHECK (length(air_measured_by) BETWEEN 1 AND 80);

-- Share of the time 'on' in which the fans blow on the trees: 1 unless they swing or cycle.
ALTER TABLE places ADD COLUMN fan_duty REAL NOT NULL DEFAULT 1 CHECK (fan_duty BETWEEN 0 AND 1);
ALTER TABLE former_airs ADD COLUMN fan_duty REAL NOT NULL DEFAULT 1 CHECK (fan_duty BETWEEN 0 AND 1);

-- What a person said of a place's fans. It overrides the timetable until the timetable's own next switch; a later row ends an earlier one.
CREATE TABLE fan_switches (
  id INTEGER PRIMARY KEY,
  place_id TEXT NOT NULL REFERENCES places (id) ON DELETE RESTRICT,
  at INTEGER NOT NULL CHECK (at > 0),
  state TEXT NOT NULL CHECK (state IN ('on', 'off', 'timetable')),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  operation_id TEXT NOT NULL UNIQUE CHECK (length(operation_id) = 36)
) STRICT;
CREATE INDEX fan_switches_place ON fan_switches (place_id, at);
CREATE TRIGGER fan_switches_no_update BEFORE UPDATE ON fan_switches BEGIN SELECT RAISE(ABORT, 'a switch of the fans is only added'); END;
