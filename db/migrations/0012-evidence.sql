-- What people weigh, feel and see on a coat. Each row moves the tree's own factor; a wrong one is withdrawn, never deleted.
CREATE TABLE evidence (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  tree_id TEXT NOT NULL REFERENCES trees (id) ON DELETE RESTRICT,
  -- The newest coat at that moment; null for a weighing of bare wax.
  coat_id TEXT REFERENCES coats (id) ON DELETE RESTRICT,
  kind TEXT NOT NULL CHECK (kind IN ('weighing', 'touch', 'colour', 'surface temperature')),
  -- Null for a weighing: the scale knows no spot.
  spot TEXT CHECK (spot IN ('outside', 'recess', 'core')),
  verdict TEXT CHECK (verdict IN ('dry', 'not yet')),
  moment TEXT CHECK (moment IN ('before dip', 'after stucco', 'now')),
  mass_kg REAL CHECK (mass_kg > 0 AND mass_kg <= 2000),
  surface_temp_c REAL CHECK (surface_temp_c BETWEEN -10 AND 80),
  -- The air beside it, by the place's sensor or typed.
  air_temp_c REAL CHECK (air_temp_c BETWEEN -10 AND 60),
  rel_humidity_pct REAL CHECK (rel_humidity_pct BETWEEN 0 AND 105),
  taken_at INTEGER NOT NULL CHECK (taken_at > 0),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  logged_at INTEGER NOT NULL CHECK (logged_at > 0),
  -- The clock's own word at that moment, without this row.
  moisture_ratio REAL CHECK (moisture_ratio BETWEEN 0 AND 1),
  forecast_p10_at INTEGER,
  forecast_p50_at INTEGER,
  forecast_p90_at INTEGER,
  -- Drying dose of the coat when it was taken; written when the coat is covered, until then it follows the readings.
  dose_reference_hours REAL CHECK (dose_reference_hours >= 0),
  withdrawn_at INTEGER CHECK (withdrawn_at > 0),
  withdrawn_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  withdrawn_reason TEXT CHECK (length(withdrawn_reason) BETWEEN 1 AND 300),
  CHECK ((kind = 'weighing') = (mass_kg IS NOT NULL AND moment IS NOT NULL AND spot IS NULL)),
  CHECK ((kind IN ('touch', 'colour')) = (verdict IS NOT NULL)),
  CHECK ((kind = 'surface temperature') = (surface_temp_c IS NOT NULL)),
  CHECK (kind = 'weighing' OR coat_id IS NOT NULL)
) STRICT;
CREATE INDEX evidence_coat ON evidence (coat_id, taken_at);
CREATE INDEX evidence_tree ON evidence (tree_id, taken_at);
CREATE TRIGGER evidence_never_deleted BEFORE DELETE ON evidence WHEN NOT EXISTS (SELECT 1 FROM trees WHERE id = OLD.tree_id AND is_demo = 1) BEGIN SELECT RAISE(ABORT, 'evidence is withdrawn, never deleted'); END;

-- Until now a person could only say how the newest coat looked; that is the touch of its outside.
INSERT INTO evidence (id, tree_id, coat_id, kind, spot, verdict, taken_at, member_id, logged_at, moisture_ratio, forecast_p10_at, forecast_p50_at, forecast_p90_at)
SELECT l.id, c.tree_id, l.coat_id, 'touch', 'outside', CASE l.verdict WHEN 'looks dry' THEN 'dry' ELSE 'not yet' END, l.looked_at, l.member_id, l.looked_at,
       min(1, max(0, l.moisture_ratio)), l.forecast_p10_at, l.forecast_p50_at, l.forecast_p90_at
  FROM coat_looks l JOIN coats c ON c.id = l.coat_id;
DROP TABLE coat_looks;

-- A coat's need rests on starting values until somebody accepts what finished coats say of it: then with the spread they leave, and their number.
ALTER TABLE recipe_coats ADD COLUMN need_spread REAL NOT NULL DEFAULT 0.25 CHECK (need_spread BETWEEN 0.05 AND 1);
ALTER TABLE recipe_coats ADD COLUMN calibrated_by_coats INTEGER CHECK (calibrated_by_coats >= 1);
ALTER TABLE coats ADD COLUMN need_spread REAL NOT NULL DEFAULT 0.25 CHECK (need_spread BETWEEN 0.05 AND 1);
ALTER TABLE coats ADD COLUMN is_calibrated INTEGER NOT NULL DEFAULT 0 CHECK (is_calibrated IN (0, 1));
-- The recipe's own hours behind the need, before spacing, recess and carried water.
ALTER TABLE coats ADD COLUMN recipe_reference_hours REAL CHECK (recipe_reference_hours > 0);
UPDATE coats SET is_calibrated = 1 WHERE EXISTS (
  SELECT 1 FROM trees t JOIN recipe_versions v ON v.id = t.recipe_version_id WHERE t.id = coats.tree_id AND v.calibrated_at IS NOT NULL
);
UPDATE coats SET recipe_reference_hours = (
  SELECT r.need_reference_hours FROM trees t JOIN recipe_coats r ON r.recipe_version_id = t.recipe_version_id
   WHERE t.id = coats.tree_id AND r.number = coats.number
);

-- What a finished coat says of the clock, written when it is covered: ln(true need / need) and its spread from its own evidence alone,
-- the moment at which it was dry by that, and the share of its dose that rests on gaps.
ALTER TABLE coats ADD COLUMN outcome_theta REAL CHECK (outcome_theta BETWEEN -3 AND 3);
ALTER TABLE coats ADD COLUMN outcome_sd REAL CHECK (outcome_sd > 0);
ALTER TABLE coats ADD COLUMN outcome_dry_at INTEGER CHECK (outcome_dry_at > 0);
ALTER TABLE coats ADD COLUMN outcome_gap_share REAL CHECK (outcome_gap_share BETWEEN 0 AND 1);
-- Readings that came after it was covered have changed its dose: it is kept as it was told, and not learned from.
ALTER TABLE coats ADD COLUMN air_changed_at INTEGER CHECK (air_changed_at > 0);
CREATE INDEX coats_outcome ON coats (covered_at) WHERE outcome_theta IS NOT NULL AND withdrawn_at IS NULL;
