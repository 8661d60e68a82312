-- The Room page lists the coats that were dipped over this week.
CREATE INDEX coats_covered ON coats (covered_at) WHERE covered_at IS NOT NULL AND withdrawn_at IS NULL;
