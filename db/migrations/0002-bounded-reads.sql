-- The worker asks each minute which notices closed in the last ten: without it, every notice there has ever been is read.
CREATE INDEX notices_closed ON notices (closed_at) WHERE closed_at IS NOT NULL;
-- The list of trees asks for those that were released or scrapped lately: one half without an index reads them all.
CREATE INDEX trees_scrapped ON trees (scrapped_at) WHERE scrapped_at IS NOT NULL;
