-- The list of the trees that have left, newest first, a page at a time, however many there are.
CREATE INDEX trees_gone ON trees (coalesce(scrapped_at, released_at)) WHERE coalesce(scrapped_at, released_at) IS NOT NULL;
DROP INDEX trees_left;
DROP INDEX trees_scrapped;
