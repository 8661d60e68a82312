-- The page of a tree lists its holds, those that were lifted too: without it every hold there has ever been is read.
CREATE INDEX holds_tree ON holds (tree_id, held_at);
