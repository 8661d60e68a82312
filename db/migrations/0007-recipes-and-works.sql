-- A coat that is on keeps the figures under which it was dipped, beside its need: its tree may move to a newer version of the recipe.
ALTER TABLE coats ADD COLUMN moisture_target REAL NOT NULL DEFAULT 0.1 CHECK (moisture_target BETWEEN 0.01 AND 0.5);
ALTER TABLE coats ADD COLUMN guard TEXT NOT NULL DEFAULT 'safe' CHECK (guard IN ('likely', 'safe'));
ALTER TABLE coats ADD COLUMN longest_wait_hours REAL NOT NULL DEFAULT 72 CHECK (longest_wait_hours BETWEEN 1 AND 720);
-- Until now they were read from the tree's recipe; a coat beyond its list had the figures of the last one.
UPDATE coats SET (moisture_target, guard, longest_wait_hours) = (
  SELECT r.moisture_target, r.guard, r.longest_wait_hours
    FROM trees t JOIN recipe_coats r ON r.recipe_version_id = t.recipe_version_id
   WHERE t.id = coats.tree_id AND r.number <= coats.number ORDER BY r.number DESC LIMIT 1
) WHERE EXISTS (
  SELECT 1 FROM trees t JOIN recipe_coats r ON r.recipe_version_id = t.recipe_version_id WHERE t.id = coats.tree_id AND r.number <= coats.number
);

-- 'An edition of 8': null where nobody has said how many there will be.
ALTER TABLE works ADD COLUMN edition_size INTEGER CHECK (edition_size BETWEEN 1 AND 9999);
