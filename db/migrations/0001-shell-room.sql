-- Instants are INTEGER epoch milliseconds (UTC); days are TEXT 'YYYY-MM-DD'. Ids are UUIDs made by the application.
-- Frozen once released: later changes come as new files.

CREATE TABLE foundry (
  id INTEGER PRIMARY KEY CHECK (id = 1),
  name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  time_zone TEXT NOT NULL CHECK (length(time_zone) > 0),
  altitude_m REAL NOT NULL CHECK (altitude_m BETWEEN -430 AND 5000),
  is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1)),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

-- A weekday without a row is closed. 1 is Monday. Minutes after local midnight.
CREATE TABLE shift_hours (
  weekday INTEGER PRIMARY KEY CHECK (weekday BETWEEN 1 AND 7),
  opens_minute INTEGER NOT NULL CHECK (opens_minute BETWEEN 0 AND 1439),
  closes_minute INTEGER NOT NULL CHECK (closes_minute BETWEEN 1 AND 1440),
  CHECK (opens_minute < closes_minute)
) STRICT;

CREATE TABLE members (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  email TEXT NOT NULL UNIQUE COLLATE NOCASE CHECK (length(email) BETWEEN 3 AND 254),
  role TEXT NOT NULL CHECK (role IN ('operator', 'supervisor', 'crew', 'owner')),
  password_hash TEXT NOT NULL CHECK (password_hash LIKE 'scrypt$%'),
  disabled_at INTEGER CHECK (disabled_at > 0),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

CREATE TABLE sessions (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  user_agent TEXT NOT NULL DEFAULT '',
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  expires_at INTEGER NOT NULL CHECK (expires_at > created_at),
  ended_at INTEGER CHECK (ended_at > 0)
) STRICT;
CREATE INDEX sessions_member ON sessions (member_id, ended_at);

-- Growing waits at sign-in, kept here so that a restart forgives nobody.
CREATE TABLE sign_in_waits (
  subject TEXT PRIMARY KEY,
  failures INTEGER NOT NULL CHECK (failures >= 0),
  last_failed_at INTEGER NOT NULL,
  wait_until INTEGER NOT NULL
) STRICT;

-- INTEGER key: it is repeated in every reading.
CREATE TABLE sensors (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  name TEXT NOT NULL UNIQUE CHECK (length(name) BETWEEN 1 AND 60),
  -- 'wall hygrometer': nobody sends, a person reads.
  kind TEXT NOT NULL CHECK (kind IN ('logger', 'wall hygrometer')),
  retired_at INTEGER CHECK (retired_at > 0),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

CREATE TABLE sensor_tokens (
  id TEXT PRIMARY KEY CHECK (length(id) BETWEEN 8 AND 36),
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  secret_sha256 TEXT NOT NULL CHECK (length(secret_sha256) = 64),
  created_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  last_used_at INTEGER,
  revoked_at INTEGER CHECK (revoked_at > 0)
) STRICT;
CREATE INDEX sensor_tokens_sensor ON sensor_tokens (sensor_id);

CREATE TABLE readings (
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  measured_at INTEGER NOT NULL CHECK (measured_at > 0),
  air_temp_c REAL NOT NULL CHECK (air_temp_c BETWEEN -10 AND 60),
  rel_humidity_pct REAL NOT NULL CHECK (rel_humidity_pct BETWEEN 0 AND 105),
  -- B: reference hours of drying per hour in 1.0 m/s air, worked out once on arrival.
  room_factor REAL NOT NULL CHECK (room_factor >= 0),
  source TEXT NOT NULL CHECK (source IN ('sensor', 'typed')),
  entered_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  received_at INTEGER NOT NULL CHECK (received_at > 0),
  PRIMARY KEY (sensor_id, measured_at)
) STRICT, WITHOUT ROWID;

-- One row per sensor and whole UTC hour, rewritten only for the hours that a late reading touches.
CREATE TABLE dose_hours (
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  hour_start INTEGER NOT NULL CHECK (hour_start % 3600000 = 0),
  dose_likely REAL NOT NULL CHECK (dose_likely >= 0),
  dose_low REAL NOT NULL CHECK (dose_low >= 0),
  dose_high REAL NOT NULL CHECK (dose_high >= 0),
  covered_minutes REAL NOT NULL CHECK (covered_minutes BETWEEN 0 AND 60),
  gap_minutes REAL NOT NULL CHECK (gap_minutes BETWEEN 0 AND 60),
  has_typed INTEGER NOT NULL CHECK (has_typed IN (0, 1)),
  typed_count INTEGER NOT NULL CHECK (typed_count >= 0),
  -- Plain figures of the hour's own readings for the coat log and the charts; null in an hour without one.
  reading_count INTEGER NOT NULL CHECK (reading_count >= 0),
  mean_air_temp_c REAL,
  min_air_temp_c REAL,
  max_air_temp_c REAL,
  mean_rel_humidity_pct REAL,
  max_rel_humidity_pct REAL,
  PRIMARY KEY (sensor_id, hour_start)
) STRICT, WITHOUT ROWID;

CREATE TABLE places (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  name TEXT NOT NULL UNIQUE CHECK (length(name) BETWEEN 1 AND 40),
  air_speed_fans_on_mps REAL NOT NULL CHECK (air_speed_fans_on_mps BETWEEN 0 AND 20),
  air_speed_fans_off_mps REAL NOT NULL CHECK (air_speed_fans_off_mps BETWEEN 0 AND 20),
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  retired_at INTEGER CHECK (retired_at > 0),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

-- When the fans of a place run; outside these hours they are off.
CREATE TABLE fan_hours (
  place_id TEXT NOT NULL REFERENCES places (id) ON DELETE CASCADE,
  weekday INTEGER NOT NULL CHECK (weekday BETWEEN 1 AND 7),
  on_minute INTEGER NOT NULL CHECK (on_minute BETWEEN 0 AND 1439),
  off_minute INTEGER NOT NULL CHECK (off_minute BETWEEN 1 AND 1440),
  PRIMARY KEY (place_id, weekday, on_minute),
  CHECK (on_minute < off_minute)
) STRICT, WITHOUT ROWID;

CREATE TABLE baths (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  name TEXT NOT NULL UNIQUE CHECK (length(name) BETWEEN 1 AND 40),
  kind TEXT NOT NULL CHECK (kind IN ('face', 'backup')),
  retired_at INTEGER CHECK (retired_at > 0),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

CREATE TABLE bath_stirs (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  bath_id TEXT NOT NULL REFERENCES baths (id) ON DELETE RESTRICT,
  stirred_at INTEGER NOT NULL CHECK (stirred_at > 0),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT
) STRICT;
CREATE INDEX bath_stirs_newest ON bath_stirs (bath_id, stirred_at);

CREATE TABLE recipes (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  name TEXT NOT NULL UNIQUE CHECK (length(name) BETWEEN 1 AND 60),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

CREATE TABLE recipe_versions (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  recipe_id TEXT NOT NULL REFERENCES recipes (id) ON DELETE RESTRICT,
  version INTEGER NOT NULL CHECK (version >= 1),
  -- Null until somebody has checked the needs against finished coats.
  calibrated_at INTEGER CHECK (calibrated_at > 0),
  created_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  UNIQUE (recipe_id, version)
) STRICT;

CREATE TABLE recipe_coats (
  recipe_version_id TEXT NOT NULL REFERENCES recipe_versions (id) ON DELETE RESTRICT,
  number INTEGER NOT NULL CHECK (number BETWEEN 1 AND 40),
  kind TEXT NOT NULL CHECK (kind IN ('face', 'backup', 'core fill', 'seal')),
  bath_id TEXT NOT NULL REFERENCES baths (id) ON DELETE RESTRICT,
  stucco TEXT NOT NULL CHECK (stucco IN ('fine', 'medium', 'coarse', 'none')),
  need_reference_hours REAL NOT NULL CHECK (need_reference_hours BETWEEN 0.1 AND 200),
  moisture_target REAL NOT NULL CHECK (moisture_target BETWEEN 0.01 AND 0.5),
  guard TEXT NOT NULL CHECK (guard IN ('likely', 'safe')),
  drain_seconds INTEGER NOT NULL CHECK (drain_seconds BETWEEN 0 AND 600),
  longest_wait_hours REAL NOT NULL CHECK (longest_wait_hours BETWEEN 1 AND 720),
  is_prewet INTEGER NOT NULL CHECK (is_prewet IN (0, 1)),
  read_aloud TEXT NOT NULL CHECK (length(read_aloud) <= 120),
  PRIMARY KEY (recipe_version_id, number),
  CHECK ((kind = 'seal') = (stucco = 'none'))
) STRICT, WITHOUT ROWID;
CREATE TRIGGER recipe_coats_immutable_update BEFORE UPDATE ON recipe_coats BEGIN SELECT RAISE(ABORT, 'a recipe version never changes'); END;
CREATE TRIGGER recipe_coats_immutable_delete BEFORE DELETE ON recipe_coats BEGIN SELECT RAISE(ABORT, 'a recipe version never changes'); END;

CREATE TABLE works (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  title TEXT NOT NULL UNIQUE CHECK (length(title) BETWEEN 1 AND 80),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

CREATE TABLE sections (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  work_id TEXT NOT NULL REFERENCES works (id) ON DELETE RESTRICT,
  -- Empty where the work is cast in one.
  name TEXT NOT NULL CHECK (length(name) <= 60),
  UNIQUE (work_id, name)
) STRICT;

CREATE TABLE pieces (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  section_id TEXT NOT NULL REFERENCES sections (id) ON DELETE RESTRICT,
  edition_number INTEGER NOT NULL CHECK (edition_number BETWEEN 1 AND 9999),
  recast_of TEXT REFERENCES pieces (id) ON DELETE RESTRICT,
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;
CREATE UNIQUE INDEX pieces_first_cast ON pieces (section_id, edition_number) WHERE recast_of IS NULL;

CREATE TABLE trees (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  -- Letters, a dash, digits; the pattern is checked by the application, the shape here.
  tag TEXT NOT NULL UNIQUE CHECK (tag GLOB '[A-Z]*-[0-9]*' AND length(tag) BETWEEN 3 AND 9),
  recipe_version_id TEXT NOT NULL REFERENCES recipe_versions (id) ON DELETE RESTRICT,
  wax_mass_kg REAL NOT NULL CHECK (wax_mass_kg > 0 AND wax_mass_kg <= 500),
  cup_kind TEXT NOT NULL CHECK (cup_kind IN ('wax', 'paper', 'ceramic')),
  cup_volume_l REAL NOT NULL CHECK (cup_volume_l BETWEEN 0 AND 50),
  recess_class TEXT NOT NULL CHECK (recess_class IN ('none', 'deep recess', 'closed core', 'closed core, no duct')),
  spacing TEXT NOT NULL CHECK (spacing IN ('open', 'crowded')),
  hung_mass_kg REAL CHECK (hung_mass_kg > 0 AND hung_mass_kg <= 2000),
  pour_date TEXT CHECK (pour_date GLOB '[0-9][0-9][0-9][0-9]-[0-9][0-9]-[0-9][0-9]'),
  wax_surface TEXT CHECK (wax_surface IN ('washed', 'etched')),
  is_wax_at_room_temp INTEGER NOT NULL DEFAULT 0 CHECK (is_wax_at_room_temp IN (0, 1)),
  is_cup_firm INTEGER NOT NULL DEFAULT 0 CHECK (is_cup_firm IN (0, 1)),
  are_vents_and_core_pins_in INTEGER NOT NULL DEFAULT 0 CHECK (are_vents_and_core_pins_in IN (0, 1)),
  intake_passed_at INTEGER CHECK (intake_passed_at > 0),
  intake_passed_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  -- Beside the release's own record: what is on the floor is found by one small index, however many trees there have been.
  released_at INTEGER CHECK (released_at > 0),
  scrapped_at INTEGER CHECK (scrapped_at > 0),
  created_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  updated_at INTEGER NOT NULL CHECK (updated_at > 0),
  -- Intake is passed only as a whole.
  CHECK (intake_passed_at IS NULL OR (wax_surface IS NOT NULL AND is_wax_at_room_temp = 1 AND is_cup_firm = 1 AND are_vents_and_core_pins_in = 1))
) STRICT;

CREATE INDEX trees_on_floor ON trees (tag) WHERE released_at IS NULL AND scrapped_at IS NULL;
CREATE INDEX trees_left ON trees (released_at) WHERE released_at IS NOT NULL;

CREATE TABLE tree_pieces (
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  piece_id TEXT NOT NULL UNIQUE REFERENCES pieces (id) ON DELETE RESTRICT,
  PRIMARY KEY (tree_id, piece_id)
) STRICT, WITHOUT ROWID;

-- Where a tree hung and from when; the newest row is where it hangs now. A coat's dose is split at each row.
CREATE TABLE tree_places (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  place_id TEXT NOT NULL REFERENCES places (id) ON DELETE RESTRICT,
  since INTEGER NOT NULL CHECK (since > 0),
  member_id TEXT REFERENCES members (id) ON DELETE RESTRICT,
  -- Set when the dip that moved the tree was taken back.
  withdrawn_at INTEGER CHECK (withdrawn_at > 0)
) STRICT;
CREATE INDEX tree_places_tree ON tree_places (tree_id, since);

-- Every write of the tablet: the same id and body get the same answer, for ever.
CREATE TABLE operations (
  operation_id TEXT PRIMARY KEY CHECK (length(operation_id) = 36),
  kind TEXT NOT NULL,
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  body_hash TEXT NOT NULL CHECK (length(body_hash) = 64),
  status INTEGER NOT NULL CHECK (status BETWEEN 200 AND 299),
  response TEXT NOT NULL CHECK (json_valid(response)),
  created_at INTEGER NOT NULL CHECK (created_at > 0)
) STRICT;

CREATE TABLE coats (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  number INTEGER NOT NULL CHECK (number BETWEEN 1 AND 40),
  operation_id TEXT NOT NULL REFERENCES operations (operation_id) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED,
  kind TEXT NOT NULL CHECK (kind IN ('face', 'backup', 'core fill', 'seal')),
  bath_id TEXT NOT NULL REFERENCES baths (id) ON DELETE RESTRICT,
  stucco TEXT NOT NULL CHECK (stucco IN ('fine', 'medium', 'coarse', 'none')),
  way TEXT NOT NULL CHECK (way IN ('dip', 'two halves', 'poured', 'brushed')),
  drain_seconds INTEGER NOT NULL CHECK (drain_seconds BETWEEN 0 AND 600),
  dipped_at INTEGER NOT NULL CHECK (dipped_at > 0),
  rough_minutes INTEGER NOT NULL DEFAULT 0 CHECK (rough_minutes BETWEEN 0 AND 240),
  place_id TEXT NOT NULL REFERENCES places (id) ON DELETE RESTRICT,
  logged_by TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  logged_at INTEGER NOT NULL CHECK (logged_at > 0),
  -- JSON list of what differed from the recipe or was unusual, and why the person went on.
  deviations TEXT NOT NULL DEFAULT '[]' CHECK (json_valid(deviations)),
  reason TEXT CHECK (length(reason) BETWEEN 1 AND 300),
  -- As they were at the dip.
  air_temp_c REAL,
  rel_humidity_pct REAL,
  need_reference_hours REAL NOT NULL CHECK (need_reference_hours > 0),
  moisture_ratio_below REAL NOT NULL CHECK (moisture_ratio_below BETWEEN 0 AND 1),
  forecast_p10_at INTEGER,
  forecast_p50_at INTEGER,
  forecast_p90_at INTEGER,
  -- Closed when the next coat goes on or the tree is released; cleared again if that is taken back.
  covered_at INTEGER CHECK (covered_at > 0),
  mean_rel_humidity_pct REAL,
  worst_rel_humidity_pct REAL,
  moisture_ratio_at_redip REAL CHECK (moisture_ratio_at_redip BETWEEN 0 AND 1),
  withdrawn_at INTEGER CHECK (withdrawn_at > 0),
  withdrawn_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  withdrawn_reason TEXT
) STRICT;
CREATE UNIQUE INDEX coats_standing ON coats (tree_id, number) WHERE withdrawn_at IS NULL;
CREATE INDEX coats_operation ON coats (operation_id);
CREATE TRIGGER coats_never_deleted BEFORE DELETE ON coats BEGIN SELECT RAISE(ABORT, 'coats are withdrawn, never deleted'); END;

-- A person's word on the newest coat, with the clock's own forecast at that moment beside it.
CREATE TABLE coat_looks (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  coat_id TEXT NOT NULL REFERENCES coats (id) ON DELETE RESTRICT,
  verdict TEXT NOT NULL CHECK (verdict IN ('looks dry', 'not yet')),
  looked_at INTEGER NOT NULL CHECK (looked_at > 0),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  moisture_ratio REAL NOT NULL,
  forecast_p10_at INTEGER,
  forecast_p50_at INTEGER,
  forecast_p90_at INTEGER
) STRICT;
CREATE INDEX coat_looks_coat ON coat_looks (coat_id, looked_at);

CREATE TABLE holds (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  reason TEXT NOT NULL CHECK (length(reason) BETWEEN 1 AND 300),
  held_by TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  held_at INTEGER NOT NULL CHECK (held_at > 0),
  lifted_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  lifted_at INTEGER CHECK (lifted_at > 0),
  lift_reason TEXT CHECK (length(lift_reason) BETWEEN 1 AND 300),
  CHECK ((lifted_at IS NULL) = (lifted_by IS NULL) AND (lifted_at IS NULL) = (lift_reason IS NULL))
) STRICT;
CREATE UNIQUE INDEX holds_open ON holds (tree_id) WHERE lifted_at IS NULL;

CREATE TABLE look_overs (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  -- The coat that was outermost: a later coat, or taking this one back, asks for a new look-over.
  coat_id TEXT NOT NULL REFERENCES coats (id) ON DELETE RESTRICT,
  note TEXT NOT NULL DEFAULT '' CHECK (length(note) <= 300),
  -- A look at a wet shell is kept, but cracks come while it dries: only one at a dried-out shell counts.
  was_dried_out INTEGER NOT NULL CHECK (was_dried_out IN (0, 1)),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  looked_over_at INTEGER NOT NULL CHECK (looked_over_at > 0)
) STRICT;
CREATE INDEX look_overs_tree ON look_overs (tree_id, looked_over_at);

CREATE TABLE releases (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  released_by TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  released_at INTEGER NOT NULL CHECK (released_at > 0),
  -- How dryness was confirmed when the clock alone was not enough (damp room, typed readings).
  confirmed_by TEXT CHECK (confirmed_by IN ('touch', 'weight', 'temperature')),
  withdrawn_at INTEGER CHECK (withdrawn_at > 0),
  withdrawn_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  withdrawn_reason TEXT
) STRICT;
CREATE UNIQUE INDEX releases_standing ON releases (tree_id) WHERE withdrawn_at IS NULL;

CREATE TABLE tree_events (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  kind TEXT NOT NULL CHECK (length(kind) > 0),
  -- Null: Kilnward itself (a notice, a withdrawn call).
  member_id TEXT REFERENCES members (id) ON DELETE RESTRICT,
  at INTEGER NOT NULL CHECK (at > 0),
  detail TEXT NOT NULL CHECK (json_valid(detail))
) STRICT;
CREATE INDEX tree_events_tree ON tree_events (tree_id, at);
CREATE TRIGGER tree_events_no_update BEFORE UPDATE ON tree_events BEGIN SELECT RAISE(ABORT, 'history is only added to'); END;
CREATE TRIGGER tree_events_no_delete BEFORE DELETE ON tree_events BEGIN SELECT RAISE(ABORT, 'history is only added to'); END;

-- 'Tell me when dry': this member hears of this tree.
CREATE TABLE tree_watches (
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  PRIMARY KEY (tree_id, member_id)
) STRICT, WITHOUT ROWID;

CREATE TABLE notices (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  -- The lists of kinds and subjects live in lib/notices: a CHECK here could not grow without rebuilding the table.
  kind TEXT NOT NULL,
  subject_type TEXT NOT NULL,
  subject_id TEXT NOT NULL,
  episode INTEGER NOT NULL CHECK (episode >= 1),
  tree_id TEXT REFERENCES trees (id) ON DELETE RESTRICT,
  title TEXT NOT NULL,
  body TEXT NOT NULL,
  urgency TEXT NOT NULL CHECK (urgency IN ('normal', 'high')),
  ttl_seconds INTEGER NOT NULL CHECK (ttl_seconds BETWEEN 60 AND 86400),
  opened_at INTEGER NOT NULL CHECK (opened_at > 0),
  closed_at INTEGER CHECK (closed_at > 0),
  close_reason TEXT,
  UNIQUE (kind, subject_type, subject_id, episode)
) STRICT;
CREATE UNIQUE INDEX notices_open ON notices (kind, subject_type, subject_id) WHERE closed_at IS NULL;
CREATE INDEX notices_opened ON notices (opened_at);

CREATE TABLE push_subscriptions (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  endpoint TEXT NOT NULL UNIQUE CHECK (length(endpoint) <= 2048),
  p256dh TEXT NOT NULL,
  auth TEXT NOT NULL,
  -- The server key this device subscribed with; another one means it has to subscribe again.
  vapid_public_key TEXT NOT NULL,
  label TEXT NOT NULL DEFAULT '' CHECK (length(label) <= 200),
  scope TEXT NOT NULL CHECK (scope IN ('every tree', 'watched trees')),
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  last_ok_at INTEGER,
  failing_since INTEGER,
  last_error TEXT
) STRICT;
CREATE INDEX push_subscriptions_member ON push_subscriptions (member_id);

CREATE TABLE deliveries (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  notice_id TEXT NOT NULL REFERENCES notices (id) ON DELETE RESTRICT,
  -- Kept after the device is gone, so that the record of what was sent stays.
  subscription_id TEXT NOT NULL,
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  status TEXT NOT NULL CHECK (status IN ('waiting', 'sending', 'sent', 'gone', 'failed', 'expired')),
  attempts INTEGER NOT NULL DEFAULT 0 CHECK (attempts >= 0),
  next_attempt_at INTEGER NOT NULL,
  lease_until INTEGER,
  expires_at INTEGER NOT NULL,
  sent_at INTEGER,
  last_error TEXT,
  UNIQUE (notice_id, subscription_id)
) STRICT;
CREATE INDEX deliveries_due ON deliveries (next_attempt_at) WHERE status IN ('waiting', 'sending');

-- One pass of a job over one minute: `tick_at` makes a missed minute visible and a doubled one impossible.
CREATE TABLE job_runs (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  job TEXT NOT NULL,
  tick_at INTEGER NOT NULL CHECK (tick_at % 60000 = 0),
  started_at INTEGER NOT NULL,
  finished_at INTEGER,
  outcome TEXT CHECK (outcome IN ('done', 'failed')),
  detail TEXT NOT NULL DEFAULT '{}' CHECK (json_valid(detail)),
  UNIQUE (job, tick_at)
) STRICT;
CREATE INDEX job_runs_started ON job_runs (started_at);
