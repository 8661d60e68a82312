-- What finished coats say of a place: its air dries so much faster than its speed says. Former airs keep the one that they had.
ALTER TABLE places ADD COLUMN air_factor REAL NOT NULL DEFAULT 1 CHECK (air_factor BETWEEN 0.3 AND 3);
ALTER TABLE former_airs ADD COLUMN air_factor REAL NOT NULL DEFAULT 1 CHECK (air_factor BETWEEN 0.3 AND 3);

-- How much slower the tree's slowest spot was taken to dry, when the coat went on.
ALTER TABLE coats ADD COLUMN recess_factor REAL NOT NULL DEFAULT 1 CHECK (recess_factor BETWEEN 0.5 AND 10);
UPDATE coats SET recess_factor = (
  SELECT CASE t.recess_class WHEN 'deep recess' THEN 1.6 WHEN 'closed core' THEN 2.5 WHEN 'closed core, no duct' THEN 3 ELSE 1 END
    FROM trees t WHERE t.id = coats.tree_id
);

-- Every figure of the clock that a person changed because finished coats said so, and every going back. The newest row of a recess class
-- is its factor; recipes and places keep theirs themselves.
CREATE TABLE calibrations (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  scope TEXT NOT NULL CHECK (scope IN ('recipe coat', 'place', 'recess')),
  recipe_id TEXT REFERENCES recipes (id) ON DELETE RESTRICT,
  -- The version that it made.
  recipe_version_id TEXT REFERENCES recipe_versions (id) ON DELETE RESTRICT,
  coat_number INTEGER CHECK (coat_number BETWEEN 1 AND 40),
  place_id TEXT REFERENCES places (id) ON DELETE RESTRICT,
  recess_class TEXT CHECK (recess_class IN ('deep recess', 'closed core', 'closed core, no duct')),
  -- Reference hours of a recipe's coat; a factor of a place or a recess.
  figure_before REAL NOT NULL CHECK (figure_before > 0),
  figure_after REAL NOT NULL CHECK (figure_after > 0),
  -- Spread of ln(need) of a recipe's coat; of a factor, how far the factor itself may be off, ln scale.
  spread_before REAL CHECK (spread_before > 0),
  spread_after REAL CHECK (spread_after > 0),
  -- Null: starting values.
  coats_before INTEGER CHECK (coats_before >= 1),
  coats_after INTEGER CHECK (coats_after >= 1),
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE RESTRICT,
  at INTEGER NOT NULL CHECK (at > 0),
  goes_back_on TEXT UNIQUE REFERENCES calibrations (id) ON DELETE RESTRICT,
  CHECK ((scope = 'recipe coat') = (recipe_id IS NOT NULL AND recipe_version_id IS NOT NULL AND coat_number IS NOT NULL)),
  CHECK ((scope = 'place') = (place_id IS NOT NULL)),
  CHECK ((scope = 'recess') = (recess_class IS NOT NULL))
) STRICT;
CREATE INDEX calibrations_at ON calibrations (at);
CREATE INDEX calibrations_recess ON calibrations (recess_class) WHERE recess_class IS NOT NULL;
