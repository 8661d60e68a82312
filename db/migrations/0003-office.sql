-- What a foundry needs before it moves in: its own units, bands and closed days, people who come and go, a history of every change,
-- backups, and demo data that can be told apart and taken away.

ALTER TABLE foundry ADD COLUMN temp_unit TEXT NOT NULL DEFAULT 'degC' CHECK (temp_unit IN ('degC', 'degF'));
ALTER TABLE foundry ADD COLUMN mass_unit TEXT NOT NULL DEFAULT 'kg' CHECK (mass_unit IN ('kg', 'lb'));
ALTER TABLE foundry ADD COLUMN length_unit TEXT NOT NULL DEFAULT 'mm' CHECK (length_unit IN ('mm', 'inch'));
-- The room that the recipes were made for. Common practice, no source.
ALTER TABLE foundry ADD COLUMN band_low_temp_c REAL NOT NULL DEFAULT 20 CHECK (band_low_temp_c BETWEEN 0 AND 45);
ALTER TABLE foundry ADD COLUMN band_high_temp_c REAL NOT NULL DEFAULT 23 CHECK (band_high_temp_c BETWEEN 0 AND 45);
ALTER TABLE foundry ADD COLUMN band_low_rh_pct REAL NOT NULL DEFAULT 45 CHECK (band_low_rh_pct BETWEEN 0 AND 100);
ALTER TABLE foundry ADD COLUMN band_high_rh_pct REAL NOT NULL DEFAULT 58 CHECK (band_high_rh_pct BETWEEN 0 AND 100);
-- When the first run was ended by its owner; until then every page leads there.
ALTER TABLE foundry ADD COLUMN set_up_at INTEGER CHECK (set_up_at > 0);
UPDATE foundry SET set_up_at = created_at;

-- Null: as the foundry has them.
ALTER TABLE members ADD COLUMN temp_unit TEXT CHECK (temp_unit IN ('degC', 'degF'));
ALTER TABLE members ADD COLUMN mass_unit TEXT CHECK (mass_unit IN ('kg', 'lb'));
ALTER TABLE members ADD COLUMN length_unit TEXT CHECK (length_unit IN ('mm', 'inch'));
-- Set with a password that somebody else has made: it opens one page, where the member makes their own, and only until then.
ALTER TABLE members ADD COLUMN first_password_until INTEGER CHECK (first_password_until > 0);

-- Days on which nobody dips, both ends included.
CREATE TABLE closures (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  first_day TEXT NOT NULL CHECK (first_day GLOB '[0-9][0-9][0-9][0-9]-[0-9][0-9]-[0-9][0-9]'),
  last_day TEXT NOT NULL CHECK (last_day GLOB '[0-9][0-9][0-9][0-9]-[0-9][0-9]-[0-9][0-9]'),
  name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 60),
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  CHECK (first_day <= last_day)
) STRICT;
CREATE INDEX closures_last_day ON closures (last_day);

-- Demo data is what the demo's own people made. A row can lose the mark (somebody built on it), but never get it later.
ALTER TABLE members ADD COLUMN is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1));
ALTER TABLE sensors ADD COLUMN is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1));
ALTER TABLE places ADD COLUMN is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1));
ALTER TABLE baths ADD COLUMN is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1));
ALTER TABLE recipes ADD COLUMN is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1));
ALTER TABLE works ADD COLUMN is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1));
ALTER TABLE trees ADD COLUMN is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1));
UPDATE members SET is_demo = 1 WHERE (SELECT is_demo FROM foundry) = 1;
UPDATE sensors SET is_demo = 1 WHERE (SELECT is_demo FROM foundry) = 1;
UPDATE places SET is_demo = 1 WHERE (SELECT is_demo FROM foundry) = 1;
UPDATE baths SET is_demo = 1 WHERE (SELECT is_demo FROM foundry) = 1;
UPDATE recipes SET is_demo = 1 WHERE (SELECT is_demo FROM foundry) = 1;
UPDATE works SET is_demo = 1 WHERE (SELECT is_demo FROM foundry) = 1;
UPDATE trees SET is_demo = 1 WHERE (SELECT is_demo FROM foundry) = 1;
CREATE TRIGGER members_never_demo_later BEFORE UPDATE OF is_demo ON members WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;
CREATE TRIGGER sensors_never_demo_later BEFORE UPDATE OF is_demo ON sensors WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;
CREATE TRIGGER places_never_demo_later BEFORE UPDATE OF is_demo ON places WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;
CREATE TRIGGER baths_never_demo_later BEFORE UPDATE OF is_demo ON baths WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;
CREATE TRIGGER recipes_never_demo_later BEFORE UPDATE OF is_demo ON recipes WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;
CREATE TRIGGER works_never_demo_later BEFORE UPDATE OF is_demo ON works WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;
CREATE TRIGGER trees_never_demo_later BEFORE UPDATE OF is_demo ON trees WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;

-- From which device: the browser and system in words, as they were then.
ALTER TABLE tree_events ADD COLUMN device TEXT NOT NULL DEFAULT '' CHECK (length(device) <= 80);
CREATE INDEX tree_events_at ON tree_events (at);
CREATE INDEX tree_events_member ON tree_events (member_id, at);
CREATE INDEX tree_events_kind ON tree_events (kind, at);

-- What changed that is not a tree: settings, people, recipes, places, baths, sensors, works, backups.
CREATE TABLE foundry_events (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  kind TEXT NOT NULL CHECK (length(kind) BETWEEN 1 AND 40),
  subject_type TEXT NOT NULL CHECK (length(subject_type) BETWEEN 1 AND 40),
  subject_id TEXT NOT NULL DEFAULT '',
  -- Its name at that moment.
  subject_name TEXT NOT NULL DEFAULT '',
  -- Null: Kilnward itself.
  member_id TEXT REFERENCES members (id) ON DELETE RESTRICT,
  device TEXT NOT NULL DEFAULT '' CHECK (length(device) <= 80),
  at INTEGER NOT NULL CHECK (at > 0),
  -- text, and before and after where something was changed.
  detail TEXT NOT NULL CHECK (json_valid(detail)),
  is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1))
) STRICT;
CREATE INDEX foundry_events_at ON foundry_events (at);
CREATE INDEX foundry_events_member ON foundry_events (member_id, at);
CREATE INDEX foundry_events_kind ON foundry_events (kind, at);
CREATE INDEX foundry_events_subject ON foundry_events (subject_type, subject_id, at);
CREATE TRIGGER foundry_events_no_update BEFORE UPDATE ON foundry_events BEGIN SELECT RAISE(ABORT, 'history is only added to'); END;
CREATE TRIGGER foundry_events_no_delete BEFORE DELETE ON foundry_events WHEN OLD.is_demo = 0 BEGIN SELECT RAISE(ABORT, 'history is only added to'); END;

-- Demo trees and recipes may go, and with them what hangs on them; nothing else.
DROP TRIGGER tree_events_no_delete;
CREATE TRIGGER tree_events_no_delete BEFORE DELETE ON tree_events WHEN NOT EXISTS (SELECT 1 FROM trees WHERE id = OLD.tree_id AND is_demo = 1) BEGIN SELECT RAISE(ABORT, 'history is only added to'); END;
DROP TRIGGER coats_never_deleted;
CREATE TRIGGER coats_never_deleted BEFORE DELETE ON coats WHEN NOT EXISTS (SELECT 1 FROM trees WHERE id = OLD.tree_id AND is_demo = 1) BEGIN SELECT RAISE(ABORT, 'coats are withdrawn, never deleted'); END;
DROP TRIGGER recipe_coats_immutable_delete;
CREATE TRIGGER recipe_coats_immutable_delete BEFORE DELETE ON recipe_coats WHEN NOT EXISTS (SELECT 1 FROM recipe_versions v JOIN recipes r ON r.id = v.recipe_id WHERE v.id = OLD.recipe_version_id AND r.is_demo = 1) BEGIN SELECT RAISE(ABORT, 'a recipe version never changes'); END;

-- Why this version: what its maker wrote.
ALTER TABLE recipe_versions ADD COLUMN note TEXT NOT NULL DEFAULT '' CHECK (length(note) <= 300);
ALTER TABLE recipes ADD COLUMN retired_at INTEGER CHECK (retired_at > 0);
CREATE INDEX trees_recipe_version ON trees (recipe_version_id);

CREATE TABLE backups (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  file_name TEXT NOT NULL CHECK (length(file_name) BETWEEN 1 AND 120),
  kind TEXT NOT NULL CHECK (kind IN ('hourly', 'daily', 'monthly', 'by hand', 'before an upgrade')),
  started_at INTEGER NOT NULL CHECK (started_at > 0),
  finished_at INTEGER CHECK (finished_at > 0),
  outcome TEXT CHECK (outcome IN ('done', 'failed')),
  size_bytes INTEGER CHECK (size_bytes >= 0),
  sha256 TEXT CHECK (length(sha256) = 64),
  -- When a copy of it was last opened, checked and counted.
  proven_at INTEGER CHECK (proven_at > 0),
  -- When the file was taken away again to keep to the plan.
  removed_at INTEGER CHECK (removed_at > 0),
  error TEXT CHECK (length(error) <= 500)
) STRICT;
CREATE INDEX backups_started ON backups (started_at);
