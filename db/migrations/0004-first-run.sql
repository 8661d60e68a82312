-- The step of the first run that its owner has not ended yet; the list lives in lib/foundry, because a CHECK here could not grow.
ALTER TABLE foundry ADD COLUMN first_run_step TEXT NOT NULL DEFAULT 'foundry' CHECK (length(first_run_step) BETWEEN 1 AND 40);
